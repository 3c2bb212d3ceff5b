// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <vector>

#include "draw.h"
#include "system.h"

namespace soak::campaign {

/// The deepest point found below the tangent plane.
struct Deepest {
    double drivingForce = 0;  ///< (mu a - G) per mole of atoms, J; negative when all found lies above the plane
    int phase = -1;           ///< index into System::phases
    std::vector<double> y;
};

/// Searches every allowed phase from random site fractions by multiplicative descent on G - mu a. Shares nothing with
/// the solver but the models: neither its starting points nor its way down.
Deepest deepestBelowPlane(const System& system, const std::vector<char>& allowed, double T, const Eigen::VectorXd& mu,
                          Random& random);

}  // namespace soak::campaign
