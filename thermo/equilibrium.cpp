// SPDX-License-Identifier: GPL-3.0-or-later
#include "equilibrium.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"

namespace soak {
namespace {

constexpr double kProven = 1e-6;   // largest driving force of an answer, in RT per mole of atoms
constexpr double kWarmRange = 60;  // K between neighbours that may start from each other

}  // namespace

Solver::Solver(std::shared_ptr<const System> system, Eigen::VectorXd b, std::vector<char> allowed)
    : system_(std::move(system)), b_(std::move(b)), allowed_(std::move(allowed)) {}

void Solver::setTemperature(double T) {
    if (T == atT_) return;
    system_->parametersAt(T, at_);
    atT_ = T;
}

const Eigen::VectorXd& Solver::samplesAt(double T) {
    if (T == sampleT_) return sampleG_;
    system_->sampleGibbs(T, sampleG_);
    const auto& samples = system_->samples();
    for (size_t p = 0; p < allowed_.size(); ++p)
        if (!allowed_[p]) sampleG_.segment(samples.first[p], samples.first[p + 1] - samples.first[p]).setConstant(1e30);
    sampleT_ = T;
    return sampleG_;
}

void Solver::complete(PhaseSet& set, double T) const {
    const PhaseModel& model = system_->phases()[static_cast<size_t>(set.phase)];
    double amounts[Curvature::kMostElements];
    set.atoms = model.amounts(set.y.data(), amounts, system_->elementCount());
    set.gibbs = model.gibbs(at_.data(), T, set.y.data());
}

void Solver::total(Point& p) {
    setTemperature(p.T);
    p.gibbs = 0;
    for (PhaseSet& set : p.sets) {
        complete(set, p.T);
        p.gibbs += set.n * set.gibbs;
    }
}

/// Every set lies on the plane and the sets add up to the alloy: what Newton's last step must have reached.
bool Solver::stands(const Point& p) const {
    double amounts[Curvature::kMostElements];
    const int elements = system_->elementCount();
    const Eigen::Map<const Eigen::VectorXd> a(amounts, elements);
    Eigen::VectorXd lack = b_;
    for (const PhaseSet& set : p.sets) {
        system_->phases()[static_cast<size_t>(set.phase)].amounts(set.y.data(), amounts, elements);
        if (std::abs(set.gibbs - a.dot(p.mu)) > 1e-7 * kGas * p.T * set.atoms) return false;
        lack -= set.n * a;
    }
    return lack.cwiseAbs().maxCoeff() < 1e-10;
}

bool Solver::converge(Point& p, bool thorough) {
    Point best;  // the lowest point so far, with what wants to enter it
    std::vector<Minimum> entering;
    size_t tried = 0;       // how many of these have led nowhere
    bool downhill = false;  // the last attempt went downhill all the way
    bool assured = !thorough;
    // At the end of a miscibility gap two sets become one so gradually that no step gets lower any more.
    const auto settleForBest = [&] {
        if (best.sets.empty() || best.proof > kProven * kGas * best.T) return false;
        p = best;
        return true;
    };
    for (int round = 0; round < 60; ++round) {
        const Point start = p;
        bool refined = refine(p, nullptr, nullptr) && stands(p);
        if (!refined && downhill && stands(start)) {  // so flat that full steps do not come to rest
            p = start;
            refined = true;
        }
        // On a boundary the energy does not change; there the plane must have come nearer to the minima.
        bool better = refined && (best.sets.empty() || p.gibbs < best.gibbs - 1e-9);
        if (better || (refined && p.gibbs < best.gibbs + 1e-6)) {
            // Until the answer stands, a light search is enough to see what enters; then the thorough one confirms.
            prove(p, thorough && assured);
            std::vector<Minimum> now = violators(p);
            if (now.empty() && !assured) {
                prove(p, true);
                now = violators(p);
            }
            if (now.empty()) return true;
            better = better || p.proof < best.proof;
            if (better) entering = std::move(now);
        }
        if (better) {
            best = p;
            tried = 0;
        } else if (!downhill) {  // it led upward: the same start again, downhill
            p = start;
            downhill = true;
            settle(p);
            continue;
        } else {
            if (best.sets.empty()) return false;
            p = best;
            ++tried;
        }
        downhill = false;
        if (tried >= entering.size()) return settleForBest();
        if (static_cast<int>(p.sets.size()) >= system_->elementCount()) {
            // No room: the new set can only take another's place.
            if (!exchange(p, {entering.begin() + static_cast<long>(tried), entering.end()})) return settleForBest();
            continue;
        }
        PhaseSet set = entering[tried].set;
        set.n = 0;
        p.sets.push_back(set);
    }
    return settleForBest();
}

Result<Done> Solver::solveCold(double T) {
    ++counters.cold;
    Point p = coldStart(T);
    if (!p.sets.empty() && converge(p, true)) {
        point_ = std::move(p);
        return Done{};
    }
    Point q;
    q.T = T;
    if (columnStart(q) && converge(q, true)) {
        point_ = std::move(q);
        return Done{};
    }
    return Error{Fault::noConvergence, "the equilibrium at " + inCelsius(T) + " did not converge", "", {}};
}

Result<Done> Solver::solve(double T) {
    ++counters.states;
    if (!point_.sets.empty() && std::abs(T - point_.T) < kWarmRange) {
        Point p = point_;
        p.T = T;
        if (converge(p, false)) {
            point_ = std::move(p);
            return Done{};
        }
    }
    return solveCold(T);
}

}  // namespace soak
