// SPDX-License-Identifier: GPL-3.0-or-later
// Where an equilibrium is sought from when nothing near is known: the lower hull over samples of every phase.
#include <algorithm>
#include <limits>

#include "base/units.h"
#include "equilibrium.h"
#include "site_fractions.h"

namespace soak {

bool Solver::solveHull(Hull& hull, const std::vector<PhaseSet>& extra, bool withSamples) {
    ++counters.hulls;
    const auto& samples = system_->samples();
    const int elements = system_->elementCount();
    const auto count = static_cast<Eigen::Index>(extra.size());
    Eigen::MatrixXd A(elements, count);
    Eigen::VectorXd G(count), atoms(count);
    for (Eigen::Index k = 0; k < count; ++k) {
        const PhaseSet& set = extra[static_cast<size_t>(k)];
        system_->phases()[static_cast<size_t>(set.phase)].amounts(set.y.data(), A.col(k).data(), elements);
        G[k] = set.gibbs;
        atoms[k] = set.atoms;
    }
    hull.solve(b_, {&samples.composition, &sampleG_, &samples.atoms, withSamples ? samples.count() : 0},
               {&A, &G, &atoms, count});
    return hull.feasible;
}

std::vector<PhaseSet> Solver::setsOf(const Hull& hull, const std::vector<PhaseSet>& extra, int sampleCount) const {
    const auto& samples = system_->samples();
    std::vector<PhaseSet> sets;
    for (size_t i = 0; i < hull.basis.size(); ++i) {
        const int k = hull.basis[i];
        const double x = hull.amount[static_cast<Eigen::Index>(i)];
        if (k < 0 || x < 1e-13) continue;
        PhaseSet set;
        if (k < sampleCount) {
            set.phase = samples.phase[static_cast<size_t>(k)];
            const auto n = system_->phases()[static_cast<size_t>(set.phase)].size;
            std::copy(samples.site(k), samples.site(k) + n, set.y.begin());
            set.gibbs = sampleG_[k];
        } else {
            set = extra[static_cast<size_t>(k - sampleCount)];
        }
        set.n = x;
        sets.push_back(set);
    }
    return sets;
}

/// Columns of one phase that are not held apart by a miscibility gap become one set.
void Solver::mergeSets(std::vector<PhaseSet>& sets, double T) const {
    for (size_t s = 0; s < sets.size(); ++s)
        for (size_t t = sets.size(); t-- > s + 1;) {
            PhaseSet &one = sets[s], &other = sets[t];
            if (one.phase != other.phase) continue;
            const auto n = static_cast<size_t>(system_->phases()[static_cast<size_t>(one.phase)].size);
            PhaseSet between = one;
            between.n = one.n + other.n;
            bool convex = true;
            for (double share : {one.n / between.n, 0.5}) {
                PhaseSet probe = one;
                for (size_t c = 0; c < n; ++c) probe.y[c] = share * one.y[c] + (1 - share) * other.y[c];
                complete(probe, T);
                convex = convex && probe.gibbs <= share * one.gibbs + (1 - share) * other.gibbs;
            }
            if (!convex) continue;
            for (size_t c = 0; c < n; ++c) between.y[c] = (one.n * one.y[c] + other.n * other.y[c]) / between.n;
            complete(between, T);
            one = between;
            sets.erase(sets.begin() + static_cast<long>(t));
        }
}

/// The overall composition as a single solution phase, for every phase in which each element has one place.
void Solver::addOverall(std::vector<PhaseSet>& into, double T) const {
    const int elements = system_->elementCount();
    for (size_t f = 0; f < allowed_.size(); ++f) {
        const PhaseModel& model = system_->phases()[f];
        if (!allowed_[f]) continue;
        std::vector<int> places(static_cast<size_t>(elements), 0);
        for (int e : model.element)
            if (e >= 0) ++places[static_cast<size_t>(e)];
        if (std::any_of(places.begin(), places.end(), [](int k) { return k != 1; })) continue;
        // Sublattices without vacancies fix the number of formula units; they must all agree.
        std::vector<double> held(static_cast<size_t>(model.sublattices), 0), sites(held);
        std::vector<bool> vacant(static_cast<size_t>(model.sublattices), false);
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c) {
            const auto s = static_cast<size_t>(model.sublattice[c]);
            sites[s] = model.sites[c];
            if (model.element[c] < 0)
                vacant[s] = true;
            else
                held[s] += b_[model.element[c]];
        }
        double units = 0;
        for (size_t s = 0; s < held.size(); ++s)
            if (!vacant[s]) units = std::max(units, held[s] / sites[s]);
        bool fits = units > 0;
        for (size_t s = 0; s < held.size(); ++s) {
            const double filled = held[s] / sites[s] / units;
            fits = fits && (vacant[s] ? filled < 0.999 : filled > 1 - 1e-9);
        }
        if (!fits) continue;
        PhaseSet set;
        set.phase = static_cast<int>(f);
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c) {
            const auto s = static_cast<size_t>(model.sublattice[c]);
            const double y =
                model.element[c] < 0 ? 1 - held[s] / sites[s] / units : b_[model.element[c]] / sites[s] / units;
            set.y[c] = std::max(y, kLeastFraction);
        }
        complete(set, T);
        into.push_back(set);
    }
}

Point Solver::coldStart(double T) {
    setTemperature(T);
    samplesAt(T);
    Point p;
    p.T = T;
    std::vector<PhaseSet> extra;
    addOverall(extra, T);
    Hull hull;
    if (!solveHull(hull, extra, true)) return p;
    p.sets = setsOf(hull, extra, system_->samples().count());
    mergeSets(p.sets, T);
    p.mu = hull.mu;
    return p;
}

/// Refines the hull with minima of every phase until its energy and the best lower bound meet. The plane of a hull that
/// is still coarse swings wildly, so the minima are sought at a plane between it and the best one known (smoothing
/// after P. Wentges, Int. Trans. Oper. Res. 4 (1997) 151-162); mu b - (largest driving force) bounds the energy from
/// below.
bool Solver::columnStart(Point& p) {
    constexpr double kTrust = 0.75;  // weight of the best plane
    constexpr int kRounds = 200;
    ++counters.fallbacks;
    setTemperature(p.T);
    samplesAt(p.T);
    std::vector<PhaseSet> extra;
    addOverall(extra, p.T);
    Hull hull;
    if (!solveHull(hull, extra, true)) return false;
    Eigen::VectorXd best = hull.mu;
    double bound = -std::numeric_limits<double>::infinity();
    Point probe;
    probe.T = p.T;
    for (int round = 0; round < kRounds; ++round) {
        if (hull.feasible) p.sets = setsOf(hull, extra, system_->samples().count());
        probe.minima.clear();  // every phase is searched, from the columns of the basis too
        for (const PhaseSet& set : p.sets) probe.minima.push_back({set, 0});
        probe.mu = round == 0 ? hull.mu : Eigen::VectorXd(kTrust * best + (1 - kTrust) * hull.mu);
        const double lower = probe.mu.dot(b_) - prove(probe, true);
        if (lower > bound) {
            bound = lower;
            best = probe.mu;
        }
        if (hull.mu.dot(b_) - bound < 1e-5 * kGas * p.T) break;
        for (const Minimum& m : probe.minima) {
            PhaseSet set = m.set;
            complete(set, p.T);
            extra.push_back(set);
        }
        if (!solveHull(hull, extra, true) && round > 10) break;
    }
    if (p.sets.empty()) return false;
    p.mu = best;
    mergeSets(p.sets, p.T);
    p.minima.clear();
    return true;
}

/// As many sets as elements: a new one can only take another's place. The hull over them all decides which.
bool Solver::exchange(Point& p, const std::vector<Minimum>& entering) {
    std::vector<PhaseSet> columns = p.sets;
    for (const Minimum& m : entering) columns.push_back(m.set);
    for (PhaseSet& set : columns) complete(set, p.T);
    Hull hull;
    if (!solveHull(hull, columns, false)) return false;
    for (const PhaseSet& set : columns) p.minima.push_back({set, 0});  // what loses its place is watched further
    p.sets = setsOf(hull, columns, 0);
    p.mu = hull.mu;
    return !p.sets.empty();
}

}  // namespace soak
