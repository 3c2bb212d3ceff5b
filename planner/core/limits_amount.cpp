// SPDX-License-Identifier: GPL-3.0-or-later
// Limits set by an amount: a phase's volume, an element's content of the matrix, austenite that stays after the quench.
#include <algorithm>
#include <cmath>
#include <functional>

#include "base/units.h"
#include "planner/core/limit_making.h"
#include "planner/core/retained_austenite.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

constexpr double kNoLow = -1e300, kNoHigh = 1e300;

/// A quantity of the state with its bounds: the allowed temperatures are those where low <= quantity <= high.
struct Bounded {
    std::function<double(const State&)> quantity;
    double low = kNoLow, high = kNoHigh;
    QString name, unit;  // "ferrite", "vol%"
    bool in_volume_percent = false;
    /// Where the quantity equals a value between two neighbouring states.
    std::function<Result<Event>(double value, const State& below, const State& above)> solve;
};

/// Allowed neighbouring states, or (first > last) two neighbours that lie on opposite sides of a narrow range.
struct Run {
    std::size_t first = 0, last = 0;
};
std::vector<Run> allowedRuns(const std::vector<double>& values, const Bounded& bounded) {
    std::vector<Run> runs;
    bool open = false;
    for (std::size_t i = 0; i < values.size(); ++i) {
        const bool allowed = values[i] >= bounded.low && values[i] <= bounded.high;
        if (allowed && !open) runs.push_back({i, i});
        if (allowed) runs.back().last = i;
        const bool jumps = i > 0 && !allowed && !open &&
                           (values[i - 1] < bounded.low ? values[i] > bounded.high
                                                        : values[i - 1] > bounded.high && values[i] < bounded.low);
        if (jumps) runs.push_back({i, i - 1});
        open = allowed;
    }
    return runs;
}

/// The run that holds the reference temperature, or the nearest one.
Run nearestRun(const std::vector<Run>& runs, const std::vector<State>& states, double reference_C) {
    const double reference_K = kelvin(reference_C);
    const auto distance = [&](const Run& run) {
        return std::max(
            {states[run.first].temperature_K - reference_K, reference_K - states[run.last].temperature_K, 0.0});
    };
    return *std::min_element(runs.begin(), runs.end(),
                             [&](const Run& a, const Run& b) { return distance(a) < distance(b); });
}

QString amountText(const Bounded& bounded, double value) {
    return withUnit(value, bounded.unit, value == std::round(value) ? 0 : 2);
}
QString boundText(const Bounded& bounded, bool at_least) {
    return bounded.name + (at_least ? " at least " : " at most ") +
           amountText(bounded, at_least ? bounded.low : bounded.high);
}

/// "... comes no lower than 8.3 vol% (at 1010 degC)": what the heat can do instead.
QString nearestAmountText(const Bounded& bounded, const std::vector<State>& states, const std::vector<double>& values) {
    if (values.empty()) return "no solid state was computed";
    const bool too_much = *std::min_element(values.begin(), values.end()) > bounded.high;
    const auto nearest =
        too_much ? std::min_element(values.begin(), values.end()) : std::max_element(values.begin(), values.end());
    const State& state = states[static_cast<std::size_t>(nearest - values.begin())];
    return QString("in this heat it comes no %1 than %2 (at %3): no temperature changes that")
        .arg(too_much ? "lower" : "higher", withUnit(*nearest, bounded.unit, 2),
             celsiusText(celsius(state.temperature_K)));
}

/// The limit between a state where the amount is not allowed and its neighbour where it is.
Limit boundary(const CycleLimit& limit, Side side, const Bounded& bounded, const std::vector<State>& states,
               const std::vector<double>& values, std::size_t outside, std::size_t inside,
               const LimitContext& context) {
    const bool at_least = values[outside] < bounded.low;
    const Limit made = blankLimit(limit, side, boundText(bounded, at_least));
    const State &below = states[std::min(outside, inside)], &above = states[std::max(outside, inside)];
    const auto event = bounded.solve(at_least ? bounded.low : bounded.high, below, above);
    if (!event) return notComputed(made, QString::fromStdString(event.error().text()));
    const double rise =
        (values[inside] - values[outside]) / (states[inside].temperature_K - states[outside].temperature_K);
    return limitAt(made, event.value(), context, {bounded.in_volume_percent ? rise : 0, at_least});
}

std::vector<Limit> between(const CycleLimit& limit, const Bounded& bounded, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const std::vector<State> states(sweep.states.begin(),
                                    sweep.states.begin() + static_cast<std::ptrdiff_t>(solidStates(sweep)));
    std::vector<double> values;
    for (const State& state : states) values.push_back(bounded.quantity(state));
    const Limit either = blankLimit(limit, Side::floor, boundText(bounded, bounded.low > kNoLow));
    const auto runs = allowedRuns(values, bounded);
    if (runs.empty()) return {impossible(either, nearestAmountText(bounded, states, values))};

    const Run run = nearestRun(runs, states, context.reference_C);
    std::vector<Limit> made;
    if (run.first > 0)
        made.push_back(boundary(limit, Side::floor, bounded, states, values, run.first - 1, run.first, context));
    if (run.last + 1 < states.size())
        made.push_back(boundary(limit, Side::ceiling, bounded, states, values, run.last + 1, run.last, context));
    if (made.empty()) made.push_back(notBinding(either, "kept at every temperature computed"));
    return made;
}

/// By bisection on the quantity itself.
auto generalSolution(AlloyReport* report, const std::string& name,
                     const std::function<double(const State&)>& quantity) {
    return [report, name, quantity](double value, const State& below, const State& above) {
        return report->crossing(name, quantity, value, below.temperature_K, above.temperature_K);
    };
}

}  // namespace

std::vector<Limit> fractionLimit(const CycleLimit& limit, const LimitContext& context) {
    const QStringList labels = labelsOf(limit.phase);
    const auto percent = [labels](const State& state) {
        double sum = 0;
        for (const QString& label : labels) sum += 100 * state.volumeFraction(label.toStdString());
        return sum;
    };
    // One label alone has an exact solution; a group of them at once is solved by bisection.
    const auto solve = [labels, report = context.report,
                        general = generalSolution(context.report, limit.phase.toStdString(), percent)](
                           double value, const State& below, const State& above) {
        std::vector<std::string> present;
        for (const QString& label : labels)
            if (const auto name = label.toStdString(); below.find(name) || above.find(name)) present.push_back(name);
        if (present.size() == 1)
            if (auto exact =
                    report->crossingOfFraction(present[0], value / 100, below.temperature_K, above.temperature_K))
                return exact;
        return general(value, below, above);
    };
    return between(
        limit, {percent, limit.low.value_or(kNoLow), limit.high.value_or(kNoHigh), limit.phase, "vol%", true, solve},
        context);
}

std::vector<Limit> matrixContentLimit(const CycleLimit& limit, const LimitContext& context) {
    const std::string element = limit.phase.toStdString();
    const auto content = [element](const State& state) { return state.matrixContent(element).value_or(0); };
    const auto solve = [element, report = context.report](double value, const State& below, const State& above) {
        return report->crossingOfContent(element, value, below.temperature_K, above.temperature_K);
    };
    return between(limit,
                   {content, limit.low.value_or(kNoLow), limit.high.value_or(kNoHigh), limit.phase + " in the matrix",
                    "wt%", false, solve},
                   context);
}

std::vector<Limit> grainPinnedLimit(const CycleLimit& limit, const LimitContext& context) {
    const Limit bare = blankLimit(limit, Side::ceiling, "grain held by " + limit.phase);
    const ParticleSize* size = context.book->particleOf(context.family, limit.phase);
    if (!size) return {notComputed(bare, "no particle size of " + limit.phase + " is known (data/particles.toml)")};
    if (!limit.high || *limit.high <= 0) return {notComputed(bare, "the limit names no grain size")};
    // Largest mean grain radius that particles of radius r and volume fraction f hold: R = 4 r / (9 f).
    // M. Hillert, Acta Metall. 13 (1965) 227-238.
    const double grain_radius_um = *limit.high / 2;
    CycleLimit amount = limit;
    amount.low = 100 * 4 * size->radius_um / (9 * grain_radius_um);
    amount.high.reset();
    std::vector<Limit> made;
    for (Limit& one : fractionLimit(amount, context)) {
        one.cause = blankLimit(limit, one.side,
                               QString("grain of %1 held by at least %2 of %3")
                                   .arg(withUnit(*limit.high, "µm"), withUnit(*amount.low, "vol%", 2), limit.phase))
                        .cause;
        // What holds the grain is there at low temperatures too, but a cycle does not ask for it there.
        if (one.side == Side::floor && one.temperature_C) continue;
        if (one.temperature_C) one.remark = "rule of thumb: Hillert 1965 with particles of " + size->source;
        made.push_back(std::move(one));
    }
    if (made.empty()) made.push_back(notBinding(bare, "kept at every higher temperature computed"));
    return made;
}

std::vector<Limit> martensiteStartLimit(const CycleLimit& limit, const LimitContext& context) {
    const auto start = [](const State& state) {
        const PhaseAmount* austenite = state.find("austenite");
        return austenite ? martensiteStart_C(austenite->wt) : kNoHigh / 2;
    };
    auto made = between(limit,
                        {start, limit.low.value_or(kNoLow), limit.high.value_or(kNoHigh), "martensite start", "°C",
                         false, generalSolution(context.report, "martensite start", start)},
                        context);
    for (Limit& one : made)
        if (one.temperature_C) one.remark = kRetainedAusteniteSource;
    return made;
}

std::vector<Limit> quenchedHardnessLimit(const CycleLimit& limit, const LimitContext& context) {
    const Relation& relation = context.book->relations.relations.at("HRC_MAX_A255");
    const auto hardness = [&relation](const State& state) { return quenchedHardness_HRC(state, relation); };
    auto made = between(limit,
                        {hardness, limit.low.value_or(kNoLow), limit.high.value_or(kNoHigh), "hardness as quenched",
                         "HRC", false, generalSolution(context.report, "hardness as quenched", hardness)},
                        context);
    for (Limit& one : made)
        if (one.temperature_C)
            one.remark = "rule of thumb: full martensite after " + relation.source + ", carbon of the austenite";
    return made;
}

std::vector<Limit> retainedAusteniteLimit(const CycleLimit& limit, const LimitContext& context) {
    const auto retained = [](const State& state) { return retainedAustenite_vol(state, kQuenchedTo_C); };
    auto made = between(limit,
                        {retained, kNoLow, limit.high.value_or(kNoHigh), "retained austenite", "vol%", false,
                         generalSolution(context.report, "retained austenite", retained)},
                        context);
    for (Limit& one : made)
        if (one.temperature_C) one.remark = kRetainedAusteniteSource;
    return made;
}

}  // namespace soak
