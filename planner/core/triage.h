// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <atomic>

#include "db/certificate.h"
#include "planner/core/planner.h"

namespace soak {

/// One row of the answer: one heat, one cycle, the best (or the named) furnace.
struct TriageRow {
    QString heat, grade, cycle, furnace;
    Verdict verdict = Verdict::notComputed;
    std::optional<double> margin_K;
    double setpoint_C = 0;
    std::optional<double> suggested_setpoint_C;
    QString reason, grade_verdict;
    QStringList findings;
    int item = 0;                        ///< index into the delivery
    std::optional<WindowAnswer> answer;  ///< the whole answer, without its sweep
};

struct TriageQuestion {
    std::vector<DeliveryItem> delivery;  ///< heats and held rows, as the certificate reader gives them
    std::vector<Cycle> cycles;
    std::vector<Furnace> furnaces;
    QString furnace;  ///< only this one, or empty
    int threads = 0;  ///< 0: as many as the machine has
};

/// Every item is answered, worst margin first (not computed and no window before all others). The result does not
/// depend on the number of threads. `progress(done, total)` is called from worker threads; a set `cancelled` stops
/// after the heats at hand and the rest answer "not computed: cancelled".
std::vector<TriageRow> triage(const TriageQuestion& question, const Shelf& shelf,
                              const std::function<void(int, int)>& progress = {},
                              const std::atomic<bool>* cancelled = nullptr);

/// True when any row is outside, has no window or is not computed: the exit status of the command.
bool needsDecision(const std::vector<TriageRow>& rows);

}  // namespace soak
