// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <algorithm>

#include "base/units.h"
#include "planner/core/limits.h"

namespace soak::shop {

/// A sweep drawn by hand: where each label is there, from and to in degC. States every 10 K, amounts shared equally.
struct Present {
    std::string label;
    double from_C, to_C;
};
inline Sweep sweepOf(const std::vector<Present>& phases, double low_C = 600, double high_C = 1500) {
    Sweep sweep;
    for (double T = low_C; T <= high_C; T += 10) {
        State state;
        state.temperature_K = kelvin(T);
        for (const Present& phase : phases)
            if (T > phase.from_C && T < phase.to_C) state.phases.push_back({phase.label, phase.label, 1, 1, 1, {}, {}});
        for (PhaseAmount& phase : state.phases)
            phase.mole_fraction = phase.mass_fraction = phase.volume_fraction = 1.0 / double(state.phases.size());
        sweep.states.push_back(state);
    }
    for (const Present& phase : phases) {
        if (phase.from_C > low_C)
            sweep.events.push_back(
                {EventKind::appears, phase.label, phase.label, kelvin(phase.from_C), {{"C", 100}, {"Cr", -5}}});
        if (phase.to_C < high_C)
            sweep.events.push_back(
                {EventKind::vanishes, phase.label, phase.label, kelvin(phase.to_C), {{"C", 100}, {"Cr", -5}}});
    }
    std::sort(sweep.events.begin(), sweep.events.end(),
              [](const Event& a, const Event& b) { return a.temperature_K < b.temperature_K; });
    return sweep;
}

}  // namespace soak::shop
