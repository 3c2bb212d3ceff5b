// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/grade_rule.h"
#include "planner/core/window.h"

namespace soak {

/// Compares a heat with every row of its grade in the library and says which rows it satisfies. The row that decides is
/// chosen by product form (castings, bars and forgings, flat products) and the certificate's own words. A heat that
/// fails gets the nearest grades of the library and, where one slip of the pen would explain it, that suggestion.
/// Nothing is ever repaired. Verdict "not checked" when the grade is unknown or an element that decides is missing.
GradeCheck checkGrade(const Heat& heat, const std::vector<Grade>& library);

/// The rows of the library whose exact names (never the near ones) hold this grade name, in the library's order.
std::vector<const Grade*> rowsOfGrade(const QString& name, const std::vector<Grade>& library);
/// The element that the analysis gives as the rest, or that is more than half of it; empty when it says neither.
std::string baseMetal(const Analysis& analysis);
/// The row that decides for this heat, or nullptr when the library does not know the grade.
const Grade* mainRow(const Heat& heat, const std::vector<Grade>& library);

}  // namespace soak
