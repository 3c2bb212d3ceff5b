// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <array>
#include <vector>

#include "phase_model.h"

namespace soak {

/// One composition set of one phase.
struct PhaseSet {
    int phase = 0;                              ///< index into System::phases
    double n = 0;                               ///< mole of formula units per mole of atoms of the alloy
    double atoms = 0;                           ///< mole of atoms per formula unit
    double gibbs = 0;                           ///< J per mole of formula unit
    std::array<double, PhaseModel::kMost> y{};  ///< site fractions
    bool unstable = false;                      ///< its curvature is not positive: it wants to split
};

/// A local minimum of one phase's distance to the tangent plane.
struct Minimum {
    PhaseSet set;       ///< n unused
    double height = 0;  ///< G - mu a, J per mole of formula unit; negative = the phase wants to form
};

/// One solved state. What stands below `proof` speeds up the next state near it; it carries no part of the answer.
struct Point {
    double T = 0;
    std::vector<PhaseSet> sets;
    Eigen::VectorXd mu;           ///< J per mole of atoms, in the system's order of elements
    double gibbs = 0;             ///< J per mole of atoms
    double proof = 0;             ///< largest driving force left, J per mole of atoms
    std::vector<Minimum> minima;  ///< of phases and sets that are not stable
    std::vector<double> lowest;   ///< per phase: lower bound of its height, J per mole of formula unit
    /// Per class of samples (System::Samples::kind, all phases end to end): the height of its best sample when a search
    /// from it last ended in a place that was known already.
    std::vector<double> settled;
    std::vector<PhaseSet> anchors;  ///< where the known places of each phase lay when its classes were last all open
    Eigen::VectorXd sampleHeight;   ///< heights of the samples at this state
};

/// What takes the place of a given temperature: sum over sets of n (q . a) = 0, q one weight per element and set.
struct Condition {
    std::vector<Eigen::VectorXd> weight;  ///< per set; empty vectors count as zero
};

}  // namespace soak
