// SPDX-License-Identifier: GPL-3.0-or-later
// How a point with given sets becomes an equilibrium between them.
#include <algorithm>
#include <array>
#include <cmath>

#include "base/units.h"
#include "equilibrium.h"
#include "site_fractions.h"

namespace soak {
namespace {

constexpr int kMost = PhaseModel::kMost;
constexpr double kLeastAmount = 1e-11;  // formula units per mole of the alloy below which a set may leave
constexpr double kLargestMove = 0.25;   // of a site fraction in one step
constexpr double kLargestStep = 40;     // K in one step

}  // namespace

/// Two sets that have run into each other are one. True when that happened.
bool Solver::removeTwins(Point& p) const {
    bool any = false;
    for (size_t s = 0; s < p.sets.size(); ++s)
        for (size_t t = p.sets.size(); t-- > s + 1;) {
            if (p.sets[t].phase != p.sets[s].phase) continue;
            const int n = system_->phases()[static_cast<size_t>(p.sets[s].phase)].size;
            if (distance2(p.sets[s].y.data(), p.sets[t].y.data(), n) > 1e-8) continue;
            p.sets[s].n += p.sets[t].n;
            p.sets.erase(p.sets.begin() + static_cast<long>(t));
            any = true;
        }
    return any;
}

/// Newton with full steps, which are few where the start is near.
bool Solver::refine(Point& p, const Condition* condition, Eigen::VectorXd* dT_db) {
    const auto& models = system_->phases();
    std::vector<int> negative(p.sets.size(), 0);
    for (int turn = 0; turn < 80; ++turn) {
        ++counters.newton;
        if (condition) system_->slopesAt(p.T, slope_);
        setTemperature(p.T);
        if (!step_.compute(*system_, p, b_, at_, slope_, condition)) return false;
        const int sets = static_cast<int>(p.sets.size());
        // An amount that would turn negative stops the step short of zero; a set that does so again leaves.
        double largest = 0, largestN = 0, reach = std::min(1.0, kLargestStep / std::abs(step_.T));
        bool guarded = false;
        int leaving = -1;
        for (int s = 0; s < sets && !condition; ++s) {
            const double n = p.sets[static_cast<size_t>(s)].n, dn = step_.n[s];
            if (n + dn >= 0) continue;
            guarded = true;
            if (n < kLeastAmount) {
                leaving = s;
                reach = 0;
                break;
            }
            const bool again = ++negative[static_cast<size_t>(s)] >= 3;
            const double most = (again ? 1.0 : 0.9) * n / -dn;
            if (most >= reach) continue;
            reach = most;
            leaving = again ? s : -1;
        }
        for (int s = 0; s < sets && reach > 0; ++s) {
            PhaseSet& set = p.sets[static_cast<size_t>(s)];
            const PhaseModel& model = models[static_cast<size_t>(set.phase)];
            double dz[kMost];
            const double change = step_.sites(s, reach, dz);
            for (int c = 0; c < model.size; ++c) {
                largest = std::max(largest, std::abs(dz[c]));
                if (set.y[static_cast<size_t>(c)] > 1e-12)
                    largest = std::max(largest, 1e-3 * std::abs(dz[c]) / step_.curvature(s).root[c]);
            }
            guarded = guarded || change > kLargestMove;
            move(model, dz, change > kLargestMove ? kLargestMove / change : 1, set.y.data());
            largestN = std::max(largestN, reach * std::abs(step_.n[s]) * set.atoms);
            set.n += reach * step_.n[s];
        }
        p.mu += reach * step_.mu;
        p.T += reach * step_.T;
        if (p.T < 200 || p.T > 6000) return false;
        if (leaving >= 0) {
            if (p.sets.size() == 1) return false;
            p.minima.push_back({p.sets[static_cast<size_t>(leaving)], 0});  // it may come back: the proof watches it
            p.sets.erase(p.sets.begin() + leaving);
            negative.erase(negative.begin() + leaving);
        }
        if (!condition && removeTwins(p)) {
            guarded = true;
            negative.assign(p.sets.size(), 0);
        }
        const double driftMu = reach * step_.mu.cwiseAbs().maxCoeff();
        if (guarded || largest > 1e-7 || largestN > 1e-9 || driftMu > 1e-5 * kGas * p.T ||
            std::abs(reach * step_.T) > 1e-6)
            continue;
        if (dT_db) {  // one more factorisation at the solution: the exact slope of T with every element's amount
            system_->slopesAt(p.T, slope_);
            setTemperature(p.T);
            if (!step_.compute(*system_, p, b_, at_, slope_, condition)) return false;
            *dT_db = step_.dT_db;
        }
        total(p);
        return true;
    }
    return false;
}

/// Newton downhill: every step is shortened for all sets alike until the energy above the step's own plane falls, so
/// that the way from a point whose sets add up to the alloy leads to a lower one, wherever it starts. Slower than
/// refine, for where that leads astray.
bool Solver::settle(Point& p) {
    const auto& models = system_->phases();
    double amounts[Curvature::kMostElements];
    const Eigen::Map<const Eigen::VectorXd> a(amounts, system_->elementCount());
    // Energy above the plane mu, and a price on what is missing of the alloy: more than the plane itself may move, else
    // a step could buy a lower energy with another alloy.
    Eigen::VectorXd price(system_->elementCount());
    const auto merit = [&](Point& q, const Eigen::VectorXd& mu) {
        double sum = 0;
        Eigen::VectorXd lack = b_;
        for (PhaseSet& set : q.sets) {
            const PhaseModel& model = models[static_cast<size_t>(set.phase)];
            model.amounts(set.y.data(), amounts, system_->elementCount());
            sum += set.n * (model.gibbs(at_.data(), q.T, set.y.data()) - a.dot(mu));
            lack -= set.n * a;
        }
        return sum + lack.cwiseAbs().dot(price);
    };
    ++counters.settled;
    setTemperature(p.T);
    for (int turn = 0; turn < 400; ++turn) {
        ++counters.newton;
        if (!step_.compute(*system_, p, b_, at_, slope_, nullptr)) return false;
        const int sets = static_cast<int>(p.sets.size());
        std::vector<std::array<double, kMost>> dz(p.sets.size());
        std::vector<double> change(p.sets.size());
        double reach = 1, largest = 0;
        int leaving = -1;
        for (int s = 0; s < sets; ++s) {
            const double n = p.sets[static_cast<size_t>(s)].n, dn = step_.n[s];
            if (n < kLeastAmount && dn < 0) leaving = s;
            if (n + dn < 0) reach = std::min(reach, 0.9 * n / -dn);
            const auto at = static_cast<size_t>(s);
            change[at] = step_.sites(s, 1, dz[at].data());
            if (n > kLeastAmount && change[at] > kLargestMove) reach = std::min(reach, kLargestMove / change[at]);
            largest = std::max({largest, change[at], std::abs(dn)});
        }
        if (leaving >= 0) {
            if (sets == 1) return false;
            p.minima.push_back({p.sets[static_cast<size_t>(leaving)], 0});
            p.sets.erase(p.sets.begin() + leaving);
            continue;
        }
        const Eigen::VectorXd plane = p.mu + step_.mu;
        price = 2 * step_.mu.cwiseAbs().array() + 10 * kGas * p.T;
        const double before = merit(p, plane);
        Point next = p;
        for (int halving = 0;; ++halving, reach /= 2) {
            for (size_t k = 0; k < p.sets.size(); ++k) {
                PhaseSet& set = next.sets[k] = p.sets[k];
                move(models[static_cast<size_t>(set.phase)], dz[k].data(), std::min(reach, kLargestMove / change[k]),
                     set.y.data());
                set.n += reach * step_.n[static_cast<Eigen::Index>(k)];
            }
            if (merit(next, plane) < before + 1e-10 * kGas * p.T) break;
            if (halving == 30) return false;
        }
        next.mu = p.mu + reach * step_.mu;
        p = std::move(next);
        if (removeTwins(p) || reach < 1 || largest > 1e-4) continue;
        total(p);
        if (stands(p)) return true;
    }
    return false;
}

bool Solver::solveCondition(Point& start, const Condition& condition, Eigen::VectorXd& dT_db) {
    return refine(start, &condition, &dT_db);
}

}  // namespace soak
