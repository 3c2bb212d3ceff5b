// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/limits.h"
#include "planner/core/window.h"

namespace soak {

struct SoakQuestion {
    const WindowAnswer* answer = nullptr;  ///< floors, kind, setpoint and band are read
    const LimitContext* context = nullptr;
    std::optional<double> section_mm;
    QString product_form, furnace_kind;
    std::optional<double> rule_min;
};

/// Heat-up by conduction with published properties, dissolution under diffusion control, homogenising between
/// dendrites.
SoakTime soakOf(const SoakQuestion& question);

/// Seconds until a sphere of `radius_um` is gone, D in m2/s; `supersaturation` is (c interface - c matrix) / (c
/// particle
/// - c interface), 0..1. r^2 falls in proportion to time: t = r^2 / (2 D supersaturation).
/// M.J. Whelan, Met. Sci. J. 3 (1969) 95-97, without the transient, which would make it shorter.
double dissolution_s(double radius_um, double D_m2_per_s, double supersaturation);

/// Seconds until a sinusoidal segregation of wavelength `spacing_um` has fallen to `rest` (0..1) of its start:
/// t = -ln(rest) spacing^2 / (4 pi^2 D). P.G. Shewmon, Diffusion in Solids, McGraw-Hill 1963.
double homogenising_s(double spacing_um, double D_m2_per_s, double rest);

}  // namespace soak
