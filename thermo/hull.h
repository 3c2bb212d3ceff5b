// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <vector>

namespace soak {

/// Lower hull of G over composition by linear programming: minimise sum x_j G_j subject to sum x_j A_j = b, x >= 0.
/// Revised simplex with a dense inverse (at most a few dozen rows), started from one artificial column per element.
struct Hull {
    /// Columns come in two blocks: a shared constant one (samples) and one that the caller grows.
    struct Block {
        const Eigen::MatrixXd* A;      ///< rows x count
        const Eigen::VectorXd* G;      ///< infinite where a column must not enter
        const Eigen::VectorXd* atoms;  ///< pricing is per mole of atoms
        Eigen::Index count;
    };
    std::vector<int> basis;  ///< column of each row: 0.. = first block, then the second; negative = artificial
    Eigen::VectorXd amount;  ///< of the basis columns
    Eigen::VectorXd mu;      ///< the plane through the basis columns
    bool feasible = false;   ///< no artificial column carries an amount

    void solve(const Eigen::VectorXd& b, const Block& first, const Block& second);
};

}  // namespace soak
