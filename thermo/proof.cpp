// SPDX-License-Identifier: GPL-3.0-or-later
// Whether a phase, or a second set of one, lies below the tangent plane of a point.
#include <algorithm>
#include <cmath>
#include <iterator>
#include <limits>

#include "base/units.h"
#include "curvature.h"
#include "equilibrium.h"
#include "site_fractions.h"

namespace soak {
namespace {

constexpr int kMost = PhaseModel::kMost;
constexpr double kViolation = 2e-8;  // driving force, in RT per mole of atoms, above which a phase enters
constexpr double kNear = 0.05;       // height, in RT per mole of atoms, below which a minimum is followed exactly
constexpr double kQuadratic = 0.02;  // Newton decrement, in RT, below which it tells what is left to fall
constexpr double kGrowth = 1e-3;     // site fraction that a constituent may still gain at the end of a search
constexpr double kValley = 0.15;     // of a site fraction in one step of a search: short enough to stay in its valley
constexpr double kArrived = 2e-4;    // distance2 at which a search is on its way to a known place
constexpr double kSame = 1e-5;       // distance2 below which two places are one
constexpr double kCrest = 0.03;      // Bohr magnetons within which a set is close to where its moment is zero
constexpr double kSoft = 2;          // R T over the least curvature above which a valley is flat; 1 when ideal
constexpr double kResettle = 0.02;   // fall of a sample, in RT per mole of atoms, that opens its class again
constexpr size_t kStarts = 24,
                 kFewStarts = 8;  // searches of one phase at most: when all its classes are open, and else

}  // namespace

/// True where a search that has come to y will end in a place that is known already.
bool Solver::leadsToKnown(const Minimum& m, const double* y, const std::vector<Minimum>& known,
                          const std::vector<PhaseSet>& sets) const {
    const int n = system_->phases()[static_cast<size_t>(m.set.phase)].size;
    for (const PhaseSet& set : sets)
        if (set.phase == m.set.phase && !set.unstable && distance2(set.y.data(), y, n) < kArrived) return true;
    return std::any_of(known.begin(), known.end(), [&](const Minimum& other) {
        return other.set.phase == m.set.phase && other.height < m.height + 1e-6 &&
               distance2(other.set.y.data(), y, n) < kArrived / 2;
    });
}

/// Newton's way down from m to the nearest minimum of its phase's distance to the plane. Ends early on the way to a
/// place that is known, and far above the plane, where the height need not be exact.
void Solver::descend(Minimum& m, double T, const Eigen::VectorXd& mu, const std::vector<Minimum>& known,
                     const std::vector<PhaseSet>& sets) {
    ++counters.descents;
    const PhaseModel& model = system_->phases()[static_cast<size_t>(m.set.phase)];
    const int n = model.size, elements = system_->elementCount();
    Curvature local;
    double last[kMost], dz[kMost], promised = 0, before = 0, alpha = 1;
    double* y = m.set.y.data();
    for (int turn = 0, halvings = 0; turn < 130; ++turn) {
        ++counters.descentSteps;
        local.evaluate(model, at_.data(), T, y, elements);
        m.height = local.G;
        for (int e = 0; e < elements; ++e) m.height -= local.a[e] * mu[e];
        m.set.atoms = local.atoms;
        const bool fell = turn == 0 || m.height < before - 1e-4 * alpha * promised;
        if (!fell && promised >= 1e-7 && halvings++ < 30) {  // too far: half as far, from where it stood
            alpha /= 2;
            std::copy(last, last + n, y);
            move(model, dz, alpha, y);
            continue;
        }
        halvings = 0;
        promised = local.residual(model, mu.data(), dz);
        before = m.height;
        local.backward(dz, n);
        double change = 0;
        for (int c = 0; c < n; ++c) {
            dz[c] = -dz[c];
            change = std::max(change, std::abs(dz[c] * local.root[c]));
        }
        std::copy(y, y + n, last);
        // A constituent that has almost vanished hardly shows in the decrement, even when it is on its way back.
        double growth = 0;
        for (int c = 0; c < n && promised < kQuadratic * kGas * T; ++c)
            if (dz[c] > 0.1 * local.root[c])
                growth = std::max(growth, y[c] * std::exp(std::min(dz[c] / local.root[c], 60.0)));
        const double most = local.shifted ? kValley : 2 * kValley;
        alpha = change > most ? most / change : 1;
        move(model, dz, alpha, y);
        if (local.shifted || growth > kGrowth) continue;
        if (alpha == 1 && leadsToKnown(m, y, known, sets)) return;
        const double beyond = m.height - kNear * kGas * T * local.atoms;
        if (promised < std::max(1e-9, std::min(0.1 * beyond, kQuadratic * kGas * T))) {
            m.height -= beyond > 0 ? promised : promised / 2;  // at least what Newton's step promises
            break;
        }
    }
    double amounts[Curvature::kMostElements];
    m.set.atoms = model.amounts(y, amounts, elements);
}

/// True when a known place of the phase no longer lies where it lay when every class of the phase was last open: what
/// led to it then may lead elsewhere now, as when a miscibility gap opens.
bool Solver::hasMoved(const Point& p, int phase, const std::vector<Minimum>& found) const {
    constexpr double kMoved = 1e-3;
    const int n = system_->phases()[static_cast<size_t>(phase)].size;
    const auto away = [&](const PhaseSet& set) {
        if (set.phase != phase) return false;
        if (set.unstable) return true;
        return std::none_of(p.anchors.begin(), p.anchors.end(), [&](const PhaseSet& anchor) {
            return anchor.phase == phase && distance2(anchor.y.data(), set.y.data(), n) < kMoved;
        });
    };
    return std::any_of(p.sets.begin(), p.sets.end(), away) ||
           std::any_of(found.begin(), found.end(), [&](const Minimum& m) { return away(m.set); });
}

/// Between two states the height of a phase changes almost linearly over its corners, all of which are samples: a
/// lower bound of its height now, J per mole of formula unit.
double Solver::heldBound(const Point& p, size_t phase) const {
    const auto& first = system_->samples().first;
    const int from = first[phase], count = first[phase + 1] - from;
    const double fall = (p.sampleHeight.segment(from, count) - height_.segment(from, count)).maxCoeff();
    return p.lowest[phase] - 1.25 * std::max(fall, 0.0) - 0.01 * kGas * p.T;
}

/// Searches from m and keeps the place where that ends in `mine`, unless it is known already: then false. `low` becomes
/// the height of the place when that is lower. `toTheEnd`: even where it seems to lead to what is known.
bool Solver::consider(Minimum m, const Point& p, std::vector<Minimum>& mine, double& low, bool toTheEnd) {
    const int n = system_->phases()[static_cast<size_t>(m.set.phase)].size;
    if (toTheEnd)
        descend(m, p.T, p.mu, {}, {});
    else
        descend(m, p.T, p.mu, mine, p.sets);
    for (const PhaseSet& set : p.sets)
        if (set.phase == m.set.phase && distance2(set.y.data(), m.set.y.data(), n) < kSame &&
            m.height > -kViolation * kGas * p.T * m.set.atoms)
            return false;
    for (Minimum& other : mine)
        if (distance2(other.set.y.data(), m.set.y.data(), n) < 10 * kSame) {
            if (m.height < other.height) other = m;
            return false;
        }
    low = std::min(low, m.height);
    if (m.height < 5 * kNear * kGas * p.T * m.set.atoms) mine.push_back(m);  // what lies higher is only a bound
    return true;
}

/// The best sample of every class of the phase that must be searched, lowest first: all that come near the plane when
/// thorough, else those that have fallen since their last search.
std::vector<std::pair<double, int>> Solver::startsOf(Point& p, size_t phase, bool thorough) {
    const auto& samples = system_->samples();
    const int first = samples.first[phase], last = samples.first[phase + 1];
    const int firstKind = samples.firstKind[phase], kinds = samples.firstKind[phase + 1] - firstKind;
    const auto atoms = samples.atoms.segment(first, last - first);
    const double reach = (thorough ? 4.0 : 2.0) * kGas * p.T * atoms.maxCoeff();
    const double fall = kResettle * kGas * p.T * atoms.minCoeff();
    std::vector<std::pair<double, int>> starts;
    bestAt_.assign(static_cast<size_t>(kinds), -1);
    for (int k = first; k < last; ++k) {
        int& best = bestAt_[static_cast<size_t>(samples.kind[static_cast<size_t>(k)])];
        if (best < 0 || height_[k] < height_[best]) best = k;
    }
    for (int kind = 0; kind < kinds; ++kind) {
        const int at = bestAt_[static_cast<size_t>(kind)];
        if (at < 0) continue;
        double& settled = p.settled[static_cast<size_t>(firstKind + kind)];
        if (height_[at] < reach && (thorough || height_[at] < settled - fall))
            starts.emplace_back(height_[at], at);
        else if (height_[at] > settled)
            settled = height_[at];  // the fall counts from the highest place since the last search
    }
    std::sort(starts.begin(), starts.end());
    return starts;
}

/// R T over the least curvature of G at a point: 1 in an ideal solution, more where the valley is flat. `v` becomes the
/// direction of least curvature.
double Solver::softness(const PhaseModel& model, const Curvature& local, double T, double* v) {
    const int n = model.size;
    double grown = 0;
    for (int c = 0; c < n; ++c) v[c] = 1 + 0.1 * c;  // any start will do: the softest direction outgrows the rest
    for (int turn = 0; turn < 6; ++turn) {
        local.project(model, v);
        double norm = 0;
        for (int c = 0; c < n; ++c) norm += v[c] * v[c];
        if (norm == 0) return 0;
        for (int c = 0; c < n; ++c) v[c] /= std::sqrt(norm);
        local.forward(v, n);
        local.backward(v, n);
        grown = 0;
        for (int c = 0; c < n; ++c) grown += v[c] * v[c];
    }
    return std::sqrt(grown) * kGas * T;
}

/// Two places of one phase can lie so close together that no sample lies between them: near the end of a miscibility
/// gap, in one flat valley, and on either side of the crest that G has where the magnetic moment changes sign. There
/// the stable set is left a little to both sides, and searched from to the end.
void Solver::searchAround(const PhaseSet& set, const Point& p, std::vector<Minimum>& mine, double& low) {
    const PhaseModel& model = system_->phases()[static_cast<size_t>(set.phase)];
    Curvature local;
    local.evaluate(model, at_.data(), p.T, set.y.data(), system_->elementCount());
    double v[kMost];
    const auto searchAlong = [&](double distance) {
        double change = 0;
        for (int c = 0; c < model.size; ++c) change = std::max(change, std::abs(v[c] * local.root[c]));
        for (double side : {distance, -distance}) {
            Minimum m;
            m.set = set;
            move(model, v, side / change, m.set.y.data());
            consider(m, p, mine, low, true);
        }
    };
    if (softness(model, local, p.T, v) > kSoft || set.unstable) {
        searchAlong(0.08);
        searchAlong(0.25);
    }
    if (!model.magnetic || std::abs(model.magnetism(set.y.data()).beta) > kCrest) return;
    std::fill(v, v + model.size, 0.0);
    model.momentTerms.gradient(model.momentAt.data(), set.y.data(), v);
    for (int c = 0; c < model.size; ++c) v[c] *= local.root[c];
    local.project(model, v);
    searchAlong(0.01);
}

/// Every class of the phase counts as not searched; its known places are where they were then.
void Solver::reopen(Point& p, size_t phase, const std::vector<Minimum>& mine) const {
    const auto& firstKind = system_->samples().firstKind;
    std::fill(p.settled.begin() + firstKind[phase], p.settled.begin() + firstKind[phase + 1],
              std::numeric_limits<double>::infinity());
    const int index = static_cast<int>(phase);
    std::erase_if(p.anchors, [index](const PhaseSet& anchor) { return anchor.phase == index; });
    for (const PhaseSet& set : p.sets)
        if (set.phase == index) p.anchors.push_back(set);
    for (const Minimum& m : mine) p.anchors.push_back(m.set);
}

/// Searches one phase; adds its minima near the plane to `found` and returns a lower bound of its height.
double Solver::searchPhase(Point& p, size_t phase, bool thorough, std::vector<Minimum>& found) {
    const auto& samples = system_->samples();
    const int index = static_cast<int>(phase);
    std::vector<Minimum> mine;
    double low = std::numeric_limits<double>::infinity();
    for (const Minimum& m : p.minima)
        if (m.set.phase == index) consider(m, p, mine, low);
    if (!system_->isConvex(phase, p.T))
        for (const PhaseSet& set : p.sets)
            if (set.phase == index) searchAround(set, p, mine, low);
    const bool opened = hasMoved(p, index, mine);
    if (opened) reopen(p, phase, mine);
    const bool stable =
        std::any_of(p.sets.begin(), p.sets.end(), [index](const PhaseSet& set) { return set.phase == index; });
    auto starts = startsOf(p, phase, thorough);
    if (!starts.empty() && system_->isConvex(phase, p.T)) {  // one valley: what is known of it is all there is
        for (const auto& [height, at] : starts)
            p.settled[static_cast<size_t>(samples.firstKind[phase] + samples.kind[static_cast<size_t>(at)])] = height;
        starts.resize(stable || std::isfinite(low) ? 0 : 1);
    }
    if (const size_t most = thorough || opened ? kStarts : kFewStarts; starts.size() > most) starts.resize(most);
    for (const auto& [height, at] : starts) {
        Minimum m;
        m.set.phase = index;
        std::copy_n(samples.site(at), system_->phases()[phase].size, m.set.y.begin());
        consider(m, p, mine, low);
        p.settled[static_cast<size_t>(samples.firstKind[phase] + samples.kind[static_cast<size_t>(at)])] = height;
    }
    for (const Minimum& m : mine) low = std::min(low, m.height);
    if (stable) low = std::min(low, 0.0);
    found.insert(found.end(), mine.begin(), mine.end());
    return std::isfinite(low) ? low : 0;  // nothing near: searched again soon
}

double Solver::prove(Point& p, bool thorough) {
    const double RT = kGas * p.T;
    const auto& samples = system_->samples();
    const size_t phases = system_->phases().size();
    setTemperature(p.T);
    height_.noalias() = -(samples.composition.transpose() * p.mu);
    height_ += samplesAt(p.T);
    const bool tracked = !thorough && p.sampleHeight.size() == height_.size() && p.lowest.size() == phases;
    if (thorough) p.anchors.clear();
    if (thorough || p.settled.empty())
        p.settled.assign(static_cast<size_t>(samples.firstKind.back()), std::numeric_limits<double>::infinity());
    std::vector<Minimum> found;
    std::vector<double> lowest(phases, std::numeric_limits<double>::infinity());
    for (size_t f = 0; f < phases; ++f) {
        if (!allowed_[f]) continue;
        const double bound = tracked ? heldBound(p, f) : -1;
        if (bound >
            0.02 * RT * samples.atoms.segment(samples.first[f], samples.first[f + 1] - samples.first[f]).maxCoeff()) {
            lowest[f] = bound;
            std::copy_if(p.minima.begin(), p.minima.end(), std::back_inserter(found),
                         [f](const Minimum& m) { return m.set.phase == static_cast<int>(f); });
        } else {
            lowest[f] = searchPhase(p, f, thorough, found);
        }
    }
    p.proof = 0;
    for (const Minimum& m : found) p.proof = std::max(p.proof, -m.height / m.set.atoms);
    p.minima = std::move(found);
    p.lowest = std::move(lowest);
    p.sampleHeight = height_;
    return p.proof;
}

std::vector<Minimum> Solver::violators(const Point& p) const {
    std::vector<Minimum> list;
    for (const Minimum& m : p.minima)
        if (-m.height / m.set.atoms > kViolation * kGas * p.T) list.push_back(m);
    std::sort(list.begin(), list.end(),
              [](const Minimum& x, const Minimum& y) { return x.height / x.set.atoms < y.height / y.set.atoms; });
    return list;
}

}  // namespace soak
