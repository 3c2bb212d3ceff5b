// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <vector>

#include "planner/core/kinetics.h"

namespace soak {

/// What surrounds a piece. The surface takes h (T_around - T) + emissivity sigma (T_around^4 - T^4), W/m2.
struct Surroundings {
    double temperature_C = 20;
    double convection_W_per_m2K = 10;
    double emissivity = 0.8;
};

/// One piece, warmed or cooled from all around: a long round bar, or a wide plate from both faces. Temperatures along
/// the radius (or half thickness) by conduction with properties that follow the temperature; thin pieces come out as
/// one lump by themselves. Backward Euler on 16 shells, unconditionally stable; second-order in the shell width.
/// Checked against the exact series for a plate (H.S. Carslaw, J.C. Jaeger, Conduction of Heat in Solids, 2nd ed.,
/// 1959).
class Conduction {
public:
    /// `section_mm`: diameter or thickness, > 0.
    Conduction(const Metal& metal, double section_mm, bool round, double start_C);

    void advance(double step_s, const Surroundings& around);
    /// Advances until `reached()` or `longest_s`, in steps of a two-hundredth of the time so far (at least 0.05 s);
    /// returns the time, nothing when it was not reached.
    template <class Reached>
    std::optional<double> advanceUntil(const Surroundings& around, double longest_s, Reached reached) {
        double time_s = 0;
        while (!reached()) {
            if (time_s >= longest_s) return std::nullopt;
            const double step_s = std::max(0.05, time_s / 200);
            advance(step_s, around);
            time_s += step_s;
        }
        return time_s;
    }

    double outside_C() const { return outside_C_; }
    double middle_C() const { return shells_C_.front(); }

private:
    const Metal& metal_;
    double half_m_;
    bool round_;
    std::vector<double> shells_C_;  ///< from the middle outwards
    double outside_C_;
};

}  // namespace soak
