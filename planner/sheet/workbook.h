// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <vector>

#include "planner/core/sheet_content.h"
#include "planner/core/triage.h"
#include "planner/sheet/render.h"

namespace soak {

// Workbooks for spreadsheet programs (Office Open XML, ISO/IEC 29500). Formulas are live, and each carries the value
// that the planner computed. A file appears whole or not at all. Fault::store names the file that cannot be written.

/// A delivery: one row per heat and cycle with filters and conditional formats, every limit on a sheet of its own, and
/// charts. Setpoints may be changed: coldest and hottest metal, margins, verdicts and charts follow, with each
/// furnace's band as wide as it was computed.
Result<Done> writeTriageWorkbook(const std::vector<TriageRow>& rows, const ShopRules& rules, const QString& path);

/// The process sheet with the wording of `options`: setpoint, metal, limits and margins, and the crew's boxes as cells
/// in which clock times can be typed. A draft says so and has no number.
Result<Done> writeSheetWorkbook(const SheetContent& content, const SheetOptions& options, const QString& path);

}  // namespace soak
