// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QStringList>
#include <algorithm>

#include "planner/core/evidence.h"

namespace soak {

/// What the data are meant to reach on one group of published rows, and what they reach; a row of
/// tests/published/targets.csv beside the firm rows that it speaks of.
struct EvidenceTarget {
    QString id, what, unit;
    double deviation = 0, worst = 0;  ///< aimed at: standard deviation, and largest difference of one row
    EvidenceGroup reached;            ///< over firm rows
    double own_scatter = 0;           ///< mean of the half widths that the rows state: no target is finer than its rows
    int unsure = 0, unsure_hits = 0;  ///< unsure rows of the group, and those within twice their scatter
    QStringList missed;  ///< ids of rows beyond the worst, or beyond their own scatter where that is larger

    bool isLittle() const { return reached.isLittle(); }
    bool isMet() const {
        return reached.count > 0 && missed.isEmpty() && reached.deviation <= std::max(deviation, own_scatter);
    }
};

/// All targets over these rows; computed rows only count. Fault::data or Fault::store names the file.
Result<std::vector<EvidenceTarget>> evidenceTargets(const std::vector<EvidenceRow>& rows);

}  // namespace soak
