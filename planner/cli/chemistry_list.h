// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

#include "db/records.h"
#include "thermo/alloy.h"

namespace soak::cli {

/// A chemistry typed on the command line: "C=0.05,Cr=18,Ni=10,Fe=bal".
struct TypedChemistry {
    Analysis analysis;  ///< without the balance element
    QString balance;    ///< "Fe", or empty when none is written
};

/// Commas or semicolons between entries; a decimal comma only between semicolons. Fault::input for an entry without
/// "=", a symbol that is no element, an element twice, ppm or % (values are wt%), a negative amount, a sum over 100 %.
Result<TypedChemistry> readChemistry(const QString& text);

/// wt% for the engine; the balance element is Fe when none is written. Fault::input for a "less than" value.
Result<Chemistry> plainChemistry(const TypedChemistry& typed, const QString& default_balance);

}  // namespace soak::cli
