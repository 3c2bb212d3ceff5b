// SPDX-License-Identifier: GPL-3.0-or-later
#include "hull.h"

#include <limits>

#include "support.h"

using namespace soak;
using namespace soak::test;

namespace {

struct Columns {
    Eigen::MatrixXd A;
    Eigen::VectorXd G, atoms;
    Hull::Block block() const { return {&A, &G, &atoms, A.cols()}; }
};

/// Random compositions with a bowl-shaped energy, the pure elements first, so that every composition is within reach.
Columns randomColumns(int elements, int count, Random& random) {
    Columns c{Eigen::MatrixXd::Zero(elements, count), Eigen::VectorXd(count), Eigen::VectorXd(count)};
    for (int k = 0; k < count; ++k) {
        for (int e = 0; e < elements; ++e) c.A(e, k) = k < elements ? (e == k ? 1 : 0) : uniform(random, 0, 1);
        c.atoms[k] = uniform(random, 1, 30);
        c.A.col(k) *= c.atoms[k] / c.A.col(k).sum();
        c.G[k] = c.atoms[k] * uniform(random, -1e5, 0);
    }
    return c;
}

/// The lowest energy over every choice of as many columns as elements that holds b with positive amounts.
double exhaustive(const Columns& c, const Eigen::VectorXd& b) {
    const int rows = static_cast<int>(b.size()), count = static_cast<int>(c.A.cols());
    double best = std::numeric_limits<double>::infinity();
    std::vector<int> pick(static_cast<size_t>(rows));
    const auto choose = [&](auto&& self, int depth, int from) -> void {
        if (depth == rows) {
            Eigen::MatrixXd B(rows, rows);
            Eigen::VectorXd g(rows);
            for (int r = 0; r < rows; ++r) {
                B.col(r) = c.A.col(pick[static_cast<size_t>(r)]);
                g[r] = c.G[pick[static_cast<size_t>(r)]];
            }
            const Eigen::FullPivLU<Eigen::MatrixXd> lu(B);
            if (!lu.isInvertible()) return;
            const Eigen::VectorXd x = lu.solve(b);
            if (x.minCoeff() >= -1e-12) best = std::min(best, x.dot(g));
            return;
        }
        for (int k = from; k < count; ++k) {
            pick[static_cast<size_t>(depth)] = k;
            self(self, depth + 1, k + 1);
        }
    };
    choose(choose, 0, 0);
    return best;
}

double energyOf(const Hull& hull, const Columns& first, const Columns& second) {
    double sum = 0;
    for (size_t r = 0; r < hull.basis.size(); ++r) {
        const int k = hull.basis[r], split = static_cast<int>(first.A.cols());
        if (k >= 0) sum += hull.amount[static_cast<Eigen::Index>(r)] * (k < split ? first.G[k] : second.G[k - split]);
    }
    return sum;
}

Eigen::VectorXd randomOverall(int elements, Random& random) {
    Eigen::VectorXd b(elements);
    for (double& x : b) x = std::pow(10, -uniform(random, 0, 4));
    return b / b.sum();
}

}  // namespace

TEST_CASE("the hull is the lowest of all choices of columns", "[hull]") {
    Random random(1);
    for (int elements : {1, 2, 3})
        for (int draw = 0; draw < 60; ++draw) {
            const Columns first = randomColumns(elements, 14, random), second = randomColumns(elements, 6, random);
            Columns all{Eigen::MatrixXd(elements, 20), Eigen::VectorXd(20), Eigen::VectorXd(20)};
            all.A << first.A, second.A;
            all.G << first.G, second.G;
            const Eigen::VectorXd b = randomOverall(elements, random);
            Hull hull;
            hull.solve(b, first.block(), second.block());
            REQUIRE(hull.feasible);
            CHECK(energyOf(hull, first, second) == Approx(exhaustive(all, b)).epsilon(1e-10));
        }
}

TEST_CASE("no column lies below the hull's plane, and amounts hold the composition", "[hull]") {
    Random random(2);
    for (int elements : {1, 4, 9, 15})
        for (int draw = 0; draw < 10; ++draw) {
            const Columns first = randomColumns(elements, 400, random), second = randomColumns(elements, 20, random);
            const Eigen::VectorXd b = randomOverall(elements, random);
            Hull hull;
            hull.solve(b, first.block(), second.block());
            REQUIRE(hull.feasible);
            for (const Columns* c : {&first, &second}) {
                const Eigen::VectorXd height = (c->G - c->A.transpose() * hull.mu).cwiseQuotient(c->atoms);
                CHECK(height.minCoeff() > -1e-5);
            }
            Eigen::VectorXd held = Eigen::VectorXd::Zero(elements);
            for (size_t r = 0; r < hull.basis.size(); ++r)
                if (hull.basis[r] >= 0) {
                    const int k = hull.basis[r];
                    held +=
                        hull.amount[static_cast<Eigen::Index>(r)] * (k < 400 ? first.A.col(k) : second.A.col(k - 400));
                }
            CHECK((held - b).cwiseAbs().maxCoeff() < 1e-12);
            CHECK(hull.amount.minCoeff() >= -1e-15);
        }
}

TEST_CASE("a composition that no column can hold is said to be out of reach", "[hull]") {
    Columns only{Eigen::MatrixXd(2, 2), Eigen::VectorXd(2), Eigen::VectorXd(2)};
    only.A << 3, 1, 1, 1;  // A3B and AB: nothing richer in A than 75 %
    only.G << -4e4, -2e4;
    only.atoms << 4, 2;
    const Columns none{Eigen::MatrixXd(2, 0), Eigen::VectorXd(0), Eigen::VectorXd(0)};
    Hull hull;
    hull.solve(Eigen::Vector2d(0.9, 0.1), only.block(), none.block());
    CHECK_FALSE(hull.feasible);
    hull.solve(Eigen::Vector2d(0.7, 0.3), only.block(), none.block());
    CHECK(hull.feasible);
}
