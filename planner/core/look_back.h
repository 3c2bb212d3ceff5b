// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "db/records.h"
#include "planner/core/window.h"

namespace soak {

/// What was found: the true temperature was this much above what was read (reads 9 low: +9), and every load since the
/// last good check may have had it.
struct FurnaceFinding {
    QString furnace;
    double true_minus_read_K = 0;  ///< found now
    double known_K = 0;            ///< true minus read that the plans had taken into account
    QDate since, until;            ///< last good check, and the day of the finding; both count
};

/// One issued sheet that was run in that time.
struct AffectedLoad {
    QString sheet, heats, cycle, issued_by;
    QDate date;
    std::optional<double> floor_margin_K,
        ceiling_margin_K;       ///< that the load really had; nothing: no limit on that side
    double margin_K = 0;        ///< the smaller one
    bool ceiling_side = false;  ///< the ceiling is the smaller one
    bool lost = false;          ///< below 0: beyond a limit
    QString sentence;
};

/// Loads by the margin that each really had, those that were lost first, of them the ceiling side first: too hot cannot
/// be taken back. Fault::data names a sheet whose content cannot be read; none is passed over in silence.
Result<std::vector<AffectedLoad>> lookBack(const std::vector<Sheet>& sheets, const FurnaceFinding& finding);

}  // namespace soak
