// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/fit/least_squares.h"

namespace soak::fit {
namespace {

constexpr int kMostRounds = 12;
constexpr int kMostTries = 6;     // of a larger damping in one round
constexpr double kEnough = 1e-3;  // a relative gain in the sum of squares below this ends the search
constexpr double kFirstDamping = 1e-2;

Result<Eigen::MatrixXd> slopes(const Residuals& residuals, const Eigen::VectorXd& at, const Eigen::VectorXd& step,
                               Eigen::Index rows) {
    Eigen::MatrixXd jacobian(rows, at.size());
    for (Eigen::Index k = 0; k < at.size(); ++k) {
        Eigen::VectorXd moved = at;
        moved[k] = at[k] + step[k];
        const auto up = residuals(moved);
        if (!up) return up.error();
        moved[k] = at[k] - step[k];
        const auto down = residuals(moved);
        if (!down) return down.error();
        jacobian.col(k) = (up.value() - down.value()) / (2 * step[k]);
    }
    return jacobian;
}

}  // namespace

Result<Solution> leastSquares(const Residuals& residuals, Eigen::VectorXd start, const Eigen::VectorXd& step) {
    auto first = residuals(start);
    if (!first) return first.error();
    Eigen::VectorXd r = std::move(first).value();
    Solution best{std::move(start), {}, r.squaredNorm(), 0};
    double damping = kFirstDamping;
    Eigen::MatrixXd normal;
    bool goes_on = true;
    while (goes_on && best.rounds < kMostRounds) {
        ++best.rounds;
        const auto jacobian = slopes(residuals, best.values, step, r.size());
        if (!jacobian) return jacobian.error();
        normal = jacobian.value().transpose() * jacobian.value();
        const Eigen::VectorXd downhill = -jacobian.value().transpose() * r;
        goes_on = false;
        for (int attempt = 0; attempt < kMostTries; ++attempt, damping *= 8) {
            Eigen::MatrixXd damped = normal;
            damped.diagonal() *= 1 + damping;
            const Eigen::VectorXd moved = best.values + damped.ldlt().solve(downhill);
            const auto tried = residuals(moved);
            if (!tried || tried.value().squaredNorm() >= best.sum) continue;
            goes_on = best.sum - tried.value().squaredNorm() > kEnough * best.sum;
            best.values = moved;
            best.sum = tried.value().squaredNorm();
            r = tried.value();
            damping /= 8;
            break;
        }
    }
    best.deviation = normal.inverse().diagonal().cwiseMax(0.0).cwiseSqrt();
    return best;
}

}  // namespace soak::fit
