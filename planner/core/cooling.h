// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/limits.h"
#include "planner/core/window.h"

namespace soak {

/// All that the way to the quench depends on.
struct CoolingQuestion {
    const std::vector<Limit>* floors = nullptr;  ///< of the answer: what must dissolve is what may come back
    const std::vector<CycleLimit>* cycle_limits = nullptr;
    const LimitContext* context = nullptr;
    double coldest_metal_C = 0;
    std::optional<double> section_mm;
    QString product_form;
    const std::vector<Quench>* quenches = nullptr;  ///< those that the cycle and the furnace share, the first one used
};

/// Budget from door to quench, needed cooling and ranges to cross. The budget is the time in which the outside of the
/// governing section, in still air from the coldest metal, falls to the highest temperature at which what was dissolved
/// may come back; no time is allowed below it. Says less, never wrong, where something is not known.
CoolingAnswer coolingOf(const CoolingQuestion& question);

}  // namespace soak
