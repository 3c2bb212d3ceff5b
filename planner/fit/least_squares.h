// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <functional>

#include "base/result.h"

namespace soak::fit {

struct Solution {
    Eigen::VectorXd values;
    Eigen::VectorXd deviation;  ///< one standard deviation of each value, from the curvature
    double sum = 0;             ///< of squares
    int rounds = 0;
};

/// Least squares after Levenberg and Marquardt. `residuals` are dimensionless (difference over scatter, priors among
/// them); derivatives are central differences over `step`, since the engine's exact derivatives are those of
/// composition and temperature, not of parameters; every event behind a residual is itself solved, so the differences
/// are smooth. Source: D.W. Marquardt, J. Soc. Ind. Appl. Math. 11 (1963) 431-441.
using Residuals = std::function<Result<Eigen::VectorXd>(const Eigen::VectorXd& values)>;
Result<Solution> leastSquares(const Residuals& residuals, Eigen::VectorXd start, const Eigen::VectorXd& step);

}  // namespace soak::fit
