// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/conduction.h"

#include <cmath>

#include "base/units.h"

namespace soak {
namespace {

constexpr size_t kShells = 16;
constexpr double kStefanBoltzmann = 5.670374e-8;  // W/(m2 K4), CODATA 2018

/// Radiation as a coefficient on the temperature difference: exact for the two temperatures at hand.
double radiation_W_per_m2K(double emissivity, double a_K, double b_K) {
    return emissivity * kStefanBoltzmann * (a_K * a_K + b_K * b_K) * (a_K + b_K);
}

}  // namespace

Conduction::Conduction(const Metal& metal, double section_mm, bool round, double start_C)
    : metal_(metal), half_m_(section_mm / 2000), round_(round), shells_C_(kShells, start_C), outside_C_(start_C) {}

void Conduction::advance(double step_s, const Surroundings& around) {
    const double width = half_m_ / double(kShells);
    // Areas between shells and volumes of shells, per unit of length (bar) or of face (plate); pi cancels.
    const auto area = [&](size_t face) { return round_ ? 2 * double(face) * width : 1.0; };
    const auto volume = [&](size_t shell) { return round_ ? double(2 * shell + 1) * width * width : width; };

    std::vector<double> below(kShells, 0), diagonal(kShells), above(kShells, 0), right(kShells);
    for (size_t i = 0; i < kShells; ++i) {
        const double store = metal_.density.at(shells_C_[i]) * metal_.heat.at(shells_C_[i]) * volume(i) / step_s;
        diagonal[i] = store;
        right[i] = store * shells_C_[i];
    }
    for (size_t i = 0; i + 1 < kShells; ++i) {
        const double k = metal_.conductivity.at((shells_C_[i] + shells_C_[i + 1]) / 2);
        const double flow = k * area(i + 1) / width;
        diagonal[i] += flow, above[i] = -flow;
        diagonal[i + 1] += flow, below[i + 1] = -flow;
    }
    // Half a shell of metal and the surface in series.
    const double h = around.convection_W_per_m2K +
                     radiation_W_per_m2K(around.emissivity, kelvin(outside_C_), kelvin(around.temperature_C));
    const double half_shell = 2 * metal_.conductivity.at(outside_C_) / width;
    const double through = area(kShells) * h * half_shell / (h + half_shell);
    diagonal.back() += through;
    right.back() += through * around.temperature_C;

    for (size_t i = 1; i < kShells; ++i) {  // Thomas
        const double factor = below[i] / diagonal[i - 1];
        diagonal[i] -= factor * above[i - 1];
        right[i] -= factor * right[i - 1];
    }
    shells_C_.back() = right.back() / diagonal.back();
    for (size_t i = kShells - 1; i-- > 0;) shells_C_[i] = (right[i] - above[i] * shells_C_[i + 1]) / diagonal[i];
    outside_C_ = (half_shell * shells_C_.back() + h * around.temperature_C) / (half_shell + h);
}

}  // namespace soak
