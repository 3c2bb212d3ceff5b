// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <cmath>

#include "alloy_inside.h"
#include "base/units.h"

namespace soak {
namespace {

constexpr double kStep = 15;          // K between states of a sweep
constexpr double kLiquidStep = 40;    // where everything is molten
constexpr double kResolution = 0.02;  // K: events closer than this that cannot be told apart count as one
constexpr double kProof = 1e-6;       // largest driving force of an accepted event, in RT

using Counts = std::map<std::string, int>;  // label -> number of sets that carry it

struct Found {
    double T = 0;
    std::string phase, label;
    EventKind kind = EventKind::appears;
    Eigen::VectorXd dT_db;
};

/// Walks up in temperature, and between two states with different phases finds every event.
class Walk {
public:
    explicit Walk(Alloy::Inside& inside) : in_(inside) {}

    Result<Done> run(double from, double to) {
        auto done = in_.solve(from);
        if (!done) return done;
        points.push_back(in_.solver->point());
        while (points.back().T < to) {
            const Point& last = points.back();
            const bool liquid = last.sets.size() == 1 && in_.labelsOf(last, false)[0] == "liquid";
            const double next = std::min(to, last.T + (liquid ? kLiquidStep : kStep));
            done = in_.solve(next);
            if (!done) return done;
            const Point reached = in_.solver->point();
            done = between(last, reached, 0);
            if (!done) return done;
            points.push_back(reached);
            in_.solver->startFrom(points.back());
        }
        return done;
    }

    std::vector<Point> points;
    std::vector<Found> events;

private:
    Counts counts(const Point& p) const {
        Counts list;
        for (const auto& label : in_.labelsOf(p, false)) ++list[label];
        return list;
    }

    /// Labels that differ, with the change of their number of sets from `a` to `b`.
    static Counts differences(const Counts& a, const Counts& b) {
        Counts list;
        for (const auto& [label, n] : a)
            if (const auto other = b.find(label); other == b.end() || other->second != n)
                list[label] = (other == b.end() ? 0 : other->second) - n;
        for (const auto& [label, n] : b)
            if (!a.count(label)) list[label] = n;
        return list;
    }

    /// A phase may come and go between two states: looks closer where the parabola through its last three heights above
    /// the tangent plane dips to the plane.
    bool mayHide(const Point& a, const Point& b) const {
        if (points.size() < 2 || &a != &points.back()) return false;
        const Point& before = points[points.size() - 2];
        const auto& samples = in_.system->samples();
        for (size_t f = 0; f < a.lowest.size(); ++f) {
            const double near = 0.02 * kGas * a.T * samples.atoms[samples.first[f]];
            const double h0 = before.lowest[f], h1 = a.lowest[f], h2 = b.lowest[f];
            if (!(h0 > 0 && h1 > 0 && h2 > 0 && h1 < near && h2 < near)) continue;
            const double slope = (h2 - h1) / (b.T - a.T), earlier = (h1 - h0) / (a.T - before.T);
            const double curvature = (slope - earlier) / (b.T - before.T);
            if (curvature <= 0) continue;
            const double atA = slope - curvature * (b.T - a.T), lowestAt = -atA / (2 * curvature);
            if (lowestAt > 0 && lowestAt < b.T - a.T && h1 - atA * atA / (4 * curvature) < 0.1 * std::min(h1, h2))
                return true;
        }
        return false;
    }

    Result<Done> between(const Point& a, const Point& b, int depth) {
        const Counts change = differences(counts(a), counts(b));
        if (change.empty()) {
            if (!mayHide(a, b)) return Done{};
            return halve(a, b, depth);
        }
        for (const auto& [label, step] : change) {
            if (std::abs(step) != 1) continue;
            Found found;
            if (!direct(step < 0 ? a : b, label, a.T, b.T, found)) continue;
            found.kind = step < 0 ? EventKind::vanishes : EventKind::appears;
            events.push_back(found);
            if (change.size() == 1) return Done{};
            return around(a, b, found.T, depth);
        }
        if (invariant(a, b, change)) return Done{};
        if (b.T - a.T > kResolution && depth < 40) return halve(a, b, depth);
        for (const auto& [label, step] : change) note((a.T + b.T) / 2, label, step, step < 0 ? a : b, {});
        return Done{};
    }

    Result<Done> halve(const Point& a, const Point& b, int depth) {
        in_.solver->startFrom(a);
        auto done = in_.solve((a.T + b.T) / 2);
        if (!done) return done;
        const Point middle = in_.solver->point();
        done = between(a, middle, depth + 1);
        return done ? between(middle, b, depth + 1) : std::move(done);
    }

    /// One event of several is found: the rest lies in what is left on either side of it.
    Result<Done> around(const Point& a, const Point& b, double T, int depth) {
        for (const auto& [low, high] : {std::pair{a.T, T - kResolution}, std::pair{T + kResolution, b.T}}) {
            if (high <= low || depth > 40) continue;
            in_.solver->startFrom(low == a.T ? a : b);
            auto done = in_.solve(low == a.T ? high : low);
            if (!done) return done;
            const Point near = in_.solver->point();
            done = low == a.T ? between(a, near, depth + 1) : between(near, b, depth + 1);
            if (!done) return done;
        }
        return Done{};
    }

    void note(double T, const std::string& label, int step, const Point& holder, const Eigen::VectorXd& slope) {
        Found found;
        found.T = T;
        found.label = label;
        found.kind = step < 0 ? EventKind::vanishes : EventKind::appears;
        found.dT_db = slope;
        const auto labels = in_.labelsOf(holder, false);
        for (size_t s = 0; s < labels.size(); ++s)
            if (labels[s] == label) found.phase = in_.nameOf(holder.sets[s].phase);
        events.push_back(std::move(found));
    }

    bool stands(Point& p, double low, double high) {
        if (p.T < low - kResolution || p.T > high + kResolution) return false;
        Eigen::VectorXd lack = in_.solver->composition();
        for (const PhaseSet& set : p.sets) {
            if (set.n < -1e-8) return false;
            lack -= set.n * in_.amountsOf(set);
        }
        if (lack.cwiseAbs().maxCoeff() > 1e-9) return false;
        return in_.solver->prove(p, false) <= kProof * kGas * p.T;
    }

    /// The sets of `start`, with the amount of `label` zero and T unknown.
    bool direct(const Point& start, const std::string& label, double low, double high, Found& found) {
        const auto labels = in_.labelsOf(start, false);
        size_t at = labels.size();
        for (size_t s = 0; s < labels.size(); ++s)
            if (labels[s] == label && (at == labels.size() || start.sets[s].n < start.sets[at].n)) at = s;
        if (at == labels.size()) return false;
        Condition condition;
        condition.weight.resize(labels.size());
        condition.weight[at] = Eigen::VectorXd::Ones(in_.system->elementCount());
        Point p = start;
        if (!in_.solver->solveCondition(p, condition, found.dT_db) || !stands(p, low, high)) return false;
        found.T = p.T;
        found.label = label;
        found.phase = in_.nameOf(p.sets[at].phase);
        return true;
    }

    /// Everything that is stable on either side meets at one temperature: pure elements, binary eutectoids.
    bool invariant(const Point& a, const Point& b, const Counts& change) {
        Point p = a;
        const auto labelsA = in_.labelsOf(a, false), labelsB = in_.labelsOf(b, false);
        size_t gone = labelsA.size();
        for (size_t s = 0; s < labelsA.size(); ++s)
            if (const auto found = change.find(labelsA[s]); found != change.end() && found->second < 0) gone = s;
        if (gone == labelsA.size()) return false;
        for (size_t s = 0; s < labelsB.size(); ++s)
            if (const auto found = change.find(labelsB[s]); found != change.end() && found->second > 0) {
                p.sets.push_back(b.sets[s]);
                p.sets.back().n = 0;
            }
        if (static_cast<int>(p.sets.size()) != in_.system->elementCount() + 1) return false;
        Condition condition;
        condition.weight.resize(p.sets.size());
        condition.weight[gone] = Eigen::VectorXd::Ones(in_.system->elementCount());
        Eigen::VectorXd slope;
        if (!in_.solver->solveCondition(p, condition, slope) || !stands(p, a.T, b.T)) return false;
        for (const auto& [label, step] : change) note(p.T, label, step, step < 0 ? a : b, slope);
        return true;
    }

    Alloy::Inside& in_;
};

}  // namespace

Result<Sweep> Alloy::sweep(double from_K, double to_K) {
    Inside& in = *inside_;
    if (!(to_K > from_K)) return Error{Fault::input, "a sweep runs from a lower to a higher temperature", "", {}};
    in.starts.clear();
    Walk walk(in);
    auto done = walk.run(from_K, to_K);
    if (!done) return std::move(done).error();
    std::stable_sort(walk.events.begin(), walk.events.end(), [](const Found& x, const Found& y) { return x.T < y.T; });

    // The heating name (delta ferrite) holds from where the set appears until it vanishes again.
    in.starts.clear();
    for (size_t k = 0; k < walk.points.size(); k += 2) in.starts.push_back(walk.points[k]);
    bool heated = in.formsOnHeating(walk.points.front());
    Sweep sweep;
    size_t next = 0;
    const auto passEvents = [&](double T, const Point& after) {
        for (; next < walk.events.size() && walk.events[next].T <= T; ++next) {
            const Found& found = walk.events[next];
            const LabelRule* rule = heatingRule(*in.data, found.phase);
            if (rule && found.label != in.data->phases[static_cast<size_t>(in.data->phaseIndex(found.phase))].label)
                rule = nullptr;
            if (rule && found.kind == EventKind::appears) heated = in.namesOnHeating(*rule, after);
            Event event;
            event.kind = found.kind;
            event.phase = found.phase;
            event.label = rule && heated ? rule->label : found.label;
            event.temperature_K = found.T;
            event.K_per_wt = in.perWt(found.dT_db);
            if (rule && found.kind == EventKind::vanishes) heated = false;
            sweep.events.push_back(std::move(event));
        }
    };
    for (const Point& point : walk.points) {
        passEvents(point.T, point);
        sweep.states.push_back(in.toState(point, heated));
    }
    passEvents(1e9, walk.points.back());
    return sweep;
}

Result<Event> Alloy::Inside::solveBetween(double from_K, double to_K,
                                          const std::function<double(const Point&)>& measure, const Weights& weights) {
    double low = std::min(from_K, to_K), high = std::max(from_K, to_K);
    auto done = solve(low);
    if (!done) return std::move(done).error();
    double atLow = measure(solver->point());
    done = solve(high);
    if (!done) return std::move(done).error();
    double atHigh = measure(solver->point());
    const double first = low, last = high;
    if (atLow * atHigh > 0)
        return Error{
            Fault::range, "the value is not reached between " + inCelsius(low) + " and " + inCelsius(high), "", {}};
    Event event;
    for (int turn = 0; turn < 80; ++turn) {
        const double share = turn % 3 == 2 || atLow == atHigh ? 0.5 : std::clamp(atLow / (atLow - atHigh), 0.1, 0.9);
        const double T = low + share * (high - low);
        done = solve(T);
        if (!done) return std::move(done).error();
        const Point here = solver->point();
        Point p = here;
        Eigen::VectorXd slope;
        if (solver->solveCondition(p, weights(here), slope) && p.T >= first - 1e-3 && p.T <= last + 1e-3 &&
            std::all_of(p.sets.begin(), p.sets.end(), [](const PhaseSet& set) { return set.n > -1e-9; }) &&
            solver->prove(p, false) <= kProof * kGas * p.T) {
            solver->startFrom(here);
            event.temperature_K = p.T;
            event.K_per_wt = perWt(slope);
            return event;
        }
        solver->startFrom(here);
        const double value = measure(here);
        if (value * atLow > 0)
            low = T, atLow = value;
        else
            high = T, atHigh = value;
        if (high - low < 1e-4) {  // the value jumps here: an invariant reaction
            event.temperature_K = (low + high) / 2;
            return event;
        }
    }
    return failed({Fault::noConvergence, "the temperature could not be closed in", "", {}}, (low + high) / 2);
}

Result<Event> Alloy::temperatureOfFraction(std::string_view label, double fraction, double from_K, double to_K) {
    Inside& in = *inside_;
    const auto weights = [&](const Point& p) {
        const auto labels = in.labelsOf(p, in.formsOnHeating(p));
        Condition condition;
        for (size_t s = 0; s < p.sets.size(); ++s) {
            const PhaseData& phase =
                in.data->phases[static_cast<size_t>(in.data->phaseIndex(in.nameOf(p.sets[s].phase)))];
            Eigen::VectorXd volume(in.system->elementCount());
            for (int e = 0; e < volume.size(); ++e)
                volume[e] = phase.volume_cm3.at(
                    in.data->elements[static_cast<size_t>(in.system->elements()[static_cast<size_t>(e)])].symbol);
            condition.weight.push_back(volume * ((labels[s] == label ? 1.0 : 0.0) - fraction));
        }
        return condition;
    };
    const auto measure = [&](const Point& p) {
        const Condition condition = weights(p);
        double sum = 0;
        for (size_t s = 0; s < p.sets.size(); ++s)
            sum += p.sets[s].n * condition.weight[s].dot(in.amountsOf(p.sets[s]));
        return sum;
    };
    auto event = in.solveBetween(from_K, to_K, measure, weights);
    if (!event)
        return std::move(event).error().within(std::string(label) + " at a fraction of " + std::to_string(fraction));
    Event found = std::move(event).value();
    found.label = label;
    return found;
}

Result<Event> Alloy::temperatureOfMatrixContent(std::string_view element, double content_wt, double from_K,
                                                double to_K) {
    Inside& in = *inside_;
    const auto weights = [&](const Point& p) {
        const auto labels = in.labelsOf(p, in.formsOnHeating(p));
        Condition condition;
        for (size_t s = 0; s < p.sets.size(); ++s) {
            if (std::find(in.data->matrix.begin(), in.data->matrix.end(), labels[s]) == in.data->matrix.end()) {
                condition.weight.emplace_back();
                continue;
            }
            Eigen::VectorXd mass(in.system->elementCount());
            for (int e = 0; e < mass.size(); ++e) {
                const auto& data =
                    in.data->elements[static_cast<size_t>(in.system->elements()[static_cast<size_t>(e)])];
                mass[e] = data.mass * ((data.symbol == element ? 1.0 : 0.0) - content_wt / 100);
            }
            condition.weight.push_back(std::move(mass));
        }
        return condition;
    };
    const auto measure = [&](const Point& p) {
        const Condition condition = weights(p);
        double sum = 0;
        for (size_t s = 0; s < p.sets.size(); ++s)
            if (condition.weight[s].size()) sum += p.sets[s].n * condition.weight[s].dot(in.amountsOf(p.sets[s]));
        return sum;
    };
    auto event = in.solveBetween(from_K, to_K, measure, weights);
    if (!event)
        return std::move(event).error().within(std::string(element) + " " + std::to_string(content_wt) +
                                               " wt% in the matrix");
    return event;
}

std::optional<Event> Sweep::lastVanishing(std::string_view label) const {
    for (auto it = events.rbegin(); it != events.rend(); ++it)
        if (it->label == label && it->kind == EventKind::vanishes) return *it;
    return {};
}

std::optional<Event> Sweep::firstAppearing(std::string_view label, double from_K) const {
    for (const Event& event : events)
        if (event.label == label && event.kind == EventKind::appears && event.temperature_K >= from_K) return event;
    return {};
}

bool Sweep::presentAnywhere(std::string_view label) const {
    return std::any_of(states.begin(), states.end(), [&](const State& s) { return s.find(label) != nullptr; }) ||
           std::any_of(events.begin(), events.end(), [&](const Event& e) { return e.label == label; });
}

bool Sweep::presentAtTop(std::string_view label) const {
    return !states.empty() && states.back().find(label) != nullptr;
}

}  // namespace soak
