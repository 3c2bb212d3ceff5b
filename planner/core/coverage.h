// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/families.h"

namespace soak {

/// Why this chemistry cannot be judged with this data set, in words: an alloy of another metal, an element that the set
/// lacks in more than a trace, a content beyond what the set is meant for. Empty when it can. "Less than" values count
/// at their bound for elements in the set, and not at all for those that it lacks.
QString whyNotCovered(const Analysis& analysis, const DataSetFacts& set, const SetUse& use);

/// What of this chemistry (wt%, the balance element not listed) the data set answers by extrapolation, in words:
/// contents beyond what it is meant for, and pairs of elements without an assessed binary in amounts that matter (the
/// product of both contents is 4 or more, such as 2 % and 2 %). Empty when nothing is extrapolated.
QStringList extrapolations(const std::map<std::string, double>& wt, const DataSetFacts& set, const SetUse& use);

}  // namespace soak
