// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "base/result.h"
#include "db/people.h"
#include "db/records.h"

namespace soak {

class Store;

/// How often the furnace's record was changed: what a change must name, so that nobody overwrites what he has not seen.
Result<int> furnaceVersion(const Store& store, const QString& id);

/// Changes a stored furnace's record (survey, tests, offset, sensor ...) when it still has the version that the change
/// was made from; both records go to the journal, with the reason. Fault::input when another station was faster (the
/// message shows both sides, nothing is stored), for a record that cannot be (below), and without a reason. Returns the
/// new version.
Result<int> changeFurnace(Store& store, const Furnace& furnace, int made_from, const Act& act);

/// What is wrong with a furnace's record as a record: range, step, survey temperatures out of order or a coldest point
/// hotter than the hottest, dates that run backwards, a survey wider than the class it claims. Empty: nothing.
/// Classes after AMS 2750: 1 to 6 are 3, 6, 8, 10, 14 and 28 K either way.
QStringList furnaceFindings(const Furnace& furnace);

/// What differs between two records, field by field: "offset_K 1.7 -> 9".
QStringList furnaceDifferences(const Furnace& from, const Furnace& to);

}  // namespace soak
