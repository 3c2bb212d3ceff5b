// SPDX-License-Identifier: GPL-3.0-or-later
#include "proof.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"

namespace soak::campaign {
namespace {

constexpr int kDraws = 160;  // random points of a phase, of which the lowest are starts
constexpr int kLowest = 5;   // starts taken from the lowest draws
constexpr int kBlind = 3;    // starts taken whatever their height
constexpr int kSteps = 400;  // of one descent
constexpr double kLeast = 1e-18;

struct Search {
    const PhaseModel& model;
    const Eigen::VectorXd& at;
    double T;
    const Eigen::VectorXd& mu;
    using Sites = std::vector<double>;

    double plane(const double* y) const {
        double sum = 0;
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c)
            if (model.element[c] >= 0) sum += mu[model.element[c]] * model.sites[c] * y[c];
        return sum;
    }
    double atoms(const double* y) const {
        double sum = 0;
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c)
            if (model.element[c] >= 0) sum += model.sites[c] * y[c];
        return sum;
    }
    double height(const double* y) const { return model.gibbs(at.data(), T, y) - plane(y); }

    void normalize(double* y) const {
        for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
            double sum = 0;
            for (int c = model.start[s]; c < model.start[s + 1]; ++c) sum += y[c] = std::max(y[c], kLeast);
            for (int c = model.start[s]; c < model.start[s + 1]; ++c) y[c] /= sum;
        }
    }

    /// Per sublattice: evenly spread, sparse, or nearly one constituent.
    Sites random(Random& random) const {
        Sites y(static_cast<size_t>(model.size));
        for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
            const double sharpness = std::pow(10, uniform(random, 0, 1.5));
            for (int c = model.start[s]; c < model.start[s + 1]; ++c)
                y[static_cast<size_t>(c)] = std::pow(uniform(random, 1e-12, 1), sharpness);
        }
        normalize(y.data());
        return y;
    }

    /// y_i <- y_i exp(-step (dF/dy_i) / (RT a)): exact in one step for an ideal phase, downhill for any.
    double descend(Sites& y) const {
        const auto n = static_cast<size_t>(model.size);
        const double RT = kGas * T;
        Sites g(n), next(n);
        double step = 0.5, F = height(y.data());
        for (int turn = 0; turn < kSteps; ++turn) {
            model.gradient(at.data(), T, y.data(), g.data());
            double slope = 0;  // of F along the step, from the spread of the gradient in each sublattice
            for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
                double mean = 0;
                const auto from = static_cast<size_t>(model.start[s]), to = static_cast<size_t>(model.start[s + 1]);
                for (size_t c = from; c < to; ++c) {
                    if (model.element[c] >= 0) g[c] -= mu[model.element[c]] * model.sites[c];
                    mean += y[c] * g[c];
                }
                for (size_t c = from; c < to; ++c) {
                    g[c] = (g[c] - mean) / (RT * model.sites[c]);
                    slope += RT * model.sites[c] * y[c] * g[c] * g[c];
                }
            }
            if (slope < 1e-9 * RT) break;
            for (;; step /= 2) {
                for (size_t c = 0; c < n; ++c) next[c] = y[c] * std::exp(std::clamp(-step * g[c], -30.0, 30.0));
                normalize(next.data());
                const double below = height(next.data());
                if (below < F - 0.1 * std::min(step, 1.0) * slope || step < 1e-4) {
                    if (below > F) return F;
                    F = below;
                    break;
                }
            }
            y.swap(next);
            step = std::min(2 * step, 1.0);
        }
        return F;
    }
};

}  // namespace

Deepest deepestBelowPlane(const System& system, const std::vector<char>& allowed, double T, const Eigen::VectorXd& mu,
                          Random& random) {
    Deepest deepest;
    deepest.drivingForce = -1e30;
    Eigen::VectorXd at;
    system.parametersAt(T, at);
    for (size_t f = 0; f < system.phases().size(); ++f) {
        const PhaseModel& model = system.phases()[f];
        if (!allowed[f]) continue;
        const Search search{model, at, T, mu};
        std::vector<std::pair<double, Search::Sites>> draws;
        const int count = model.size == model.sublattices ? 1 : kDraws;
        for (int k = 0; k < count; ++k) {
            auto y = search.random(random);
            const double height = search.height(y.data()) / search.atoms(y.data());
            draws.emplace_back(height, std::move(y));
        }
        // The blind ones stand in front, whatever their height; the rest by height.
        const auto rest = draws.begin() + std::min(kBlind, count);
        std::sort(rest, draws.end(), [](const auto& x, const auto& y) { return x.first < y.first; });
        draws.resize(std::min(draws.size(), static_cast<size_t>(kBlind + kLowest)));
        for (auto& [height, y] : draws) {
            const double force = -search.descend(y) / search.atoms(y.data());
            if (force > deepest.drivingForce) deepest = {force, static_cast<int>(f), y};
        }
    }
    return deepest;
}

}  // namespace soak::campaign
