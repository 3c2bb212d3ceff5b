// SPDX-License-Identifier: GPL-3.0-or-later
#include "hull.h"

#include <algorithm>
#include <cmath>

namespace soak {
namespace {

constexpr double kArtificial = 1e6;  // J/mol: far above every G at hand
constexpr double kImproves = 1e-5;  // J/mol of atoms: a column that lies less below the plane is on it, within rounding
constexpr double kSmallPivot = 1e-9;  // share of the largest entry of a direction below which a pivot is rounding

}  // namespace

void Hull::solve(const Eigen::VectorXd& b, const Block& first, const Block& second) {
    const Eigen::Index rows = b.size();
    basis.assign(static_cast<size_t>(rows), -1);
    Eigen::VectorXd cost = Eigen::VectorXd::Constant(rows, kArtificial);
    Eigen::MatrixXd inverse = Eigen::MatrixXd::Identity(rows, rows), matrix = inverse;
    amount = b;
    Eigen::VectorXd priced, direction(rows), column(rows);
    for (int turn = 0; turn < 600; ++turn) {
        mu.noalias() = inverse.transpose() * cost;
        double best = -kImproves;
        int entering = -1;
        int offset = 0;
        for (const Block* block : {&first, &second}) {
            if (block->count > 0) {
                priced.noalias() = -(block->A->leftCols(block->count).transpose() * mu);
                priced += block->G->head(block->count);
                priced.array() /= block->atoms->head(block->count).array();
                Eigen::Index at = 0;
                const double least = priced.minCoeff(&at);
                if (least < best) {
                    best = least;
                    entering = offset + static_cast<int>(at);
                }
            }
            offset += static_cast<int>(block->count);
        }
        if (entering < 0 || std::find(basis.begin(), basis.end(), entering) != basis.end()) break;
        const bool inFirst = entering < first.count;
        const Block& block = inFirst ? first : second;
        const Eigen::Index at = inFirst ? entering : entering - first.count;
        column = block.A->col(at);
        direction.noalias() = inverse * column;
        double ratio = HUGE_VAL;
        Eigen::Index leaving = -1;
        const double least = kSmallPivot * direction.cwiseAbs().maxCoeff();
        for (Eigen::Index i = 0; i < rows; ++i) {
            if (direction[i] <= least) continue;
            const double r = std::max(amount[i], 0.0) / direction[i];
            const double tie = 1e-13 + 1e-12 * r;  // of equal ratios the largest pivot keeps the basis well apart
            if (leaving < 0 || r < ratio - tie || (r < ratio + tie && direction[i] > direction[leaving]))
                ratio = r, leaving = i;
        }
        if (leaving < 0) break;  // unbounded cannot happen: every column has positive atoms
        amount -= ratio * direction;
        amount[leaving] = ratio;
        basis[static_cast<size_t>(leaving)] = entering;
        cost[leaving] = (*block.G)[at];
        matrix.col(leaving) = column;
        if (turn % 25 == 24) {
            inverse = matrix.partialPivLu().inverse();
            amount.noalias() = inverse * b;
        } else {
            const double pivot = direction[leaving];
            inverse.row(leaving) /= pivot;
            for (Eigen::Index i = 0; i < rows; ++i)
                if (i != leaving) inverse.row(i) -= direction[i] * inverse.row(leaving);
        }
    }
    inverse = matrix.partialPivLu().inverse();
    amount.noalias() = inverse * b;
    mu.noalias() = inverse.transpose() * cost;
    feasible = amount.allFinite() && mu.allFinite();
    for (Eigen::Index i = 0; i < rows; ++i)
        if (basis[static_cast<size_t>(i)] < 0 && amount[i] > 1e-12) feasible = false;
}

}  // namespace soak
