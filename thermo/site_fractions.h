// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "phase_model.h"

namespace soak {

inline constexpr double kLeastFraction = 1e-20;  ///< smallest site fraction: below it a constituent weighs nothing in G

/// Square of the Euclidean distance of the square roots of site fractions: the natural metric of mixing entropy.
double distance2(const double* y, const double* z, int n);

/// Moves y by `alpha` times the Newton step dz (in units of sqrt(y)), keeps it positive and each sublattice summing to
/// 1. Small fractions move in their logarithm, where ideal mixing is linear.
void move(const PhaseModel& model, const double* dz, double alpha, double* y);

}  // namespace soak
