// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <vector>

#include "equilibrium.h"

namespace soak::test {

/// What a general-purpose constrained optimiser found.
struct NloptState {
    std::vector<PhaseSet> sets;
    double gibbs = 0;      ///< J per mole of atoms, at its own amounts
    double imbalance = 0;  ///< largest error of mass, mole per mole of atoms
    int evaluations = 0;
};

/// Minimises total G over the amounts and site fractions of the given sets, mass balance and sublattice sums held as
/// equality constraints, by NLopt's SLSQP with the same G and gradient that the solver uses. No other phase may enter.
NloptState minimizeWithNlopt(const System& system, const Eigen::VectorXd& b, double T, std::vector<PhaseSet> start);

}  // namespace soak::test
