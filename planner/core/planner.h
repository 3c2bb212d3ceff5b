// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <functional>
#include <map>
#include <memory>

#include "planner/core/alloy_report.h"
#include "planner/core/families.h"
#include "planner/core/window.h"

namespace soak {

/// What stays the same from heat to heat. Values only: share it between threads.
struct Shelf {
    std::map<QString, std::shared_ptr<const DataSet>> data_sets;  ///< by name: "ferrous"
    std::vector<Grade> grades;
    std::vector<PublishedTreatment> published;
    FamilyBook book;
    ShopRules rules;
    std::vector<Quench> quenches;   ///< of the shop; the first that cycle and furnace share is used
    std::vector<Furnace> furnaces;  ///< of the shop: where else an answer that is not inside would fit
};
/// The planner's own tables and the assessed data that its families need; grades and rules are the caller's.
Result<Shelf> makeShelf(std::vector<Grade> grades, std::vector<PublishedTreatment> published, ShopRules rules);

/// One question: this heat, by this cycle, in this furnace.
struct Job {
    Heat heat;
    Cycle cycle;
    Furnace furnace;                   ///< without an id: no furnace named, the band is the setpoint itself
    std::optional<double> setpoint_C;  ///< the cycle's own when empty
    QString family;                    ///< the grade's own when empty
    bool keep_sweep = true;            ///< whether the answer carries the sweep (the rail needs it, a triage does not)
};

/// Sweeps kept by chemistry and phases, one per worker thread. The last few are enough: heats come one after another.
class ReportCache {
public:
    Result<AlloyReport*> of(const std::shared_ptr<const DataSet>& data, const Chemistry& chemistry,
                            const PhaseChoice& choice, double from_C, double to_C);

private:
    std::map<std::string, std::unique_ptr<AlloyReport>> reports_;
};

/// Limits, window, band, verdict, grade check. "Not computed" is a verdict of the answer, with its reason; an Error is
/// a question that makes no sense (setpoint outside the furnace's range).
Result<WindowAnswer> judge(const Job& job, const Shelf& shelf, ReportCache& cache);

/// The same answer at another setpoint (dragging): limits stay, band, margins and verdict follow. No equilibrium is
/// computed.
Result<WindowAnswer> atSetpoint(WindowAnswer answer, const Furnace& furnace, const ShopRules& rules, double setpoint_C);

/// The family that the answer will use: the job's own, else the grade's; empty when neither is known.
QString familyOf(const Job& job, const Shelf& shelf);

/// What a cycle without limits of its own is judged by: those of the family for this kind of treatment.
std::vector<CycleLimit> limitsFor(const Cycle& cycle, const Family& family);

}  // namespace soak
