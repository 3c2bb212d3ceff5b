// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <memory>

#include "arguments.h"
#include "chemistry_list.h"
#include "thermo/alloy.h"

namespace soak::cli {

/// The data set named by --set (a folder under thermo/data or a path), else the one whose balance element was written;
/// with none written, the set whose balance is Fe. Fault::input when there is no such set, listing what there is.
Result<std::shared_ptr<const DataSet>> chooseDataSet(const Arguments& arguments, const QString& balance);

/// --with and --without.
PhaseChoice phaseChoice(const Arguments& arguments);

/// A temperature typed for a calculation, °C. Fault::range for one that no furnace reaches: another unit by its size.
Result<double> temperatureIn(const Arguments& arguments, const QString& name);

}  // namespace soak::cli
