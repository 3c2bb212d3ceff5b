// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "db/store.h"
#include "planner/core/planner.h"
#include "planner/core/sheet_content.h"

namespace soak {

/// All that a sheet is made from, as values.
struct SheetRequest {
    WindowAnswer answer;
    Job job;
    ShopRules rules;
    std::vector<Quench> quenches;  ///< of the shop
    std::vector<Caution> cautions;
    QString specification;  ///< the grade's standard and edition, or empty
};

/// The contents of a draft: values rounded the safe way, causes and cautions chosen. No number, no revision.
SheetContent makeSheet(const SheetRequest& request);

/// Why this answer may not become an issued sheet: overdue tests, a verdict that does not fit, a grade that fails.
/// Empty when nothing stands in the way.
QStringList obstaclesToIssue(const WindowAnswer& answer);

// The same with the store at hand. issueSheet() stores the sheet and gives it number, revision and code; Fault::input
// names the obstacles.
Result<SheetContent> draftSheet(const Store& store, const WindowAnswer& answer, const Job& job, const ShopRules& rules);
Result<SheetContent> issueSheet(Store& store, const WindowAnswer& answer, const Job& job, const ShopRules& rules,
                                const QString& released_by);

}  // namespace soak
