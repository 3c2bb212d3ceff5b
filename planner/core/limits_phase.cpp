// SPDX-License-Identifier: GPL-3.0-or-later
// Limits set by the beginning or the end of a phase.
#include <algorithm>

#include "base/units.h"
#include "planner/core/limit_making.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

constexpr double kLeastExcess_wt = 0.005;  // below it an excess would be printed as 0.00

double amount(const State& state, const QStringList& labels) {
    double sum = 0;
    for (const QString& label : labels) sum += state.moleFraction(label.toStdString());
    return sum;
}
bool anywhere(const Sweep& sweep, const QStringList& labels) {
    return std::any_of(labels.begin(), labels.end(),
                       [&](const QString& label) { return sweep.presentAnywhere(label.toStdString()); });
}

/// An unbroken stretch of solid states without any of the labels.
struct Gap {
    std::size_t first = 0, last = 0;
};
std::vector<Gap> gapsWithout(const Sweep& sweep, const QStringList& labels) {
    std::vector<Gap> gaps;
    bool open = false;
    for (std::size_t i = 0; i < solidStates(sweep); ++i) {
        const bool absent = amount(sweep.states[i], labels) < kPresent;
        if (absent && !open) gaps.push_back({i, i});
        if (absent) gaps.back().last = i;
        open = absent;
    }
    return gaps;
}
/// The event of one of the labels between two neighbouring states.
const Event* eventBetween(const Sweep& sweep, const QStringList& labels, EventKind kind, std::size_t below) {
    const double low = sweep.states[below].temperature_K, high = sweep.states[below + 1].temperature_K;
    for (const Event& event : sweep.events)
        if (event.kind == kind && event.temperature_K >= low - 0.2 && event.temperature_K <= high + 0.2 &&
            labels.contains(QString::fromStdString(event.label)))
            return &event;
    return nullptr;
}

}  // namespace

/// Mass per cent of the labels left where the metal begins to melt, when they go later than that; 0 otherwise.
double excess_wt(const LimitContext& context, const QStringList& labels, const Event& last) {
    constexpr double kJustBelow_K = 0.05;
    const Sweep& sweep = context.report->sweep();
    const auto melting = sweep.firstAppearing("liquid");
    const std::size_t solid = solidStates(sweep);
    if (!melting || solid == 0 || last.temperature_K <= melting->temperature_K) return 0;
    const auto at_solidus = context.report->stateAt(melting->temperature_K - kJustBelow_K);
    const State& state = at_solidus ? at_solidus.value() : sweep.states[solid - 1];
    double sum = 0;
    for (const QString& label : labels) sum += 100 * state.massFraction(label.toStdString());
    return sum;
}

std::vector<Limit> dissolvedLimit(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const Limit floor = blankLimit(limit, Side::floor, limit.phase + " dissolved");
    std::optional<Event> last;
    for (const QString& label : labelsOf(limit.phase)) {
        const std::string name = label.toStdString();
        if (sweep.presentAtTop(name))
            return {impossible(
                floor, limit.phase + " is still there at the highest temperature computed: no temperature removes it")};
        const auto event = sweep.lastVanishing(name);
        if (event && (!last || event->temperature_K > last->temperature_K)) last = event;
    }
    if (!last) return {notBinding(floor, limit.phase + " is never stable in this heat")};
    if (const double excess = excess_wt(context, labelsOf(limit.phase), *last); excess > kLeastExcess_wt)
        return {
            impossible(floor, QString("it cannot be dissolved at any temperature: excess %1 %2 where melting begins")
                                  .arg(limit.phase, withUnit(excess, "%", 2)))};
    return {limitAt(floor, *last, context)};
}

std::vector<Limit> notYetFormedLimit(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const QStringList labels = labelsOf(limit.phase);
    const Limit ceiling = blankLimit(limit, Side::ceiling, limit.phase + " not yet formed");
    if (!anywhere(sweep, labels)) return {notBinding(ceiling, limit.phase + " never forms in this heat")};
    const auto gaps = gapsWithout(sweep, labels);
    if (gaps.empty())
        return {impossible(ceiling, limit.phase + " is there at every temperature: no temperature removes it")};
    const double reference_K = kelvin(context.reference_C);
    const auto distance = [&](const Gap& gap) {
        const double low = sweep.states[gap.first].temperature_K, high = sweep.states[gap.last].temperature_K;
        return std::max({low - reference_K, reference_K - high, 0.0});
    };
    const Gap gap = *std::min_element(gaps.begin(), gaps.end(),
                                      [&](const Gap& a, const Gap& b) { return distance(a) < distance(b); });
    if (gap.last + 1 >= solidStates(sweep))
        return {notBinding(ceiling, limit.phase + " does not form before the metal melts")};
    const Event* event = eventBetween(sweep, labels, EventKind::appears, gap.last);
    if (!event) return {notComputed(ceiling, "where " + limit.phase + " begins to form was not found in the sweep")};
    return {limitAt(ceiling, *event, context)};
}

std::vector<Limit> solidusLimit(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    Limit ceiling = blankLimit(limit, Side::ceiling, "solidus");
    if (const auto first = sweep.firstAppearing("liquid")) return {limitAt(ceiling, *first, context)};
    if (sweep.states.empty() || sweep.presentAnywhere("liquid"))
        return {notComputed(ceiling, "the solidus was not found in the sweep")};
    ceiling.temperature_C = celsius(sweep.states.back().temperature_K) - limit.margin_K;
    return {notBinding(ceiling, "no liquid up to the highest temperature computed, which stands for the solidus")};
}

std::vector<Limit> segregatedSolidusLimit(const CycleLimit& limit, const LimitContext& context) {
    const Limit ceiling = blankLimit(limit, Side::ceiling, "segregated solidus");
    const Family* family = context.book->find(context.family);
    const auto rule = family ? context.book->segregation.find(family->data_set) : context.book->segregation.end();
    if (rule == context.book->segregation.end())
        return {notComputed(ceiling, "data/segregation.toml has no row for this data set")};
    const auto path = context.report->freezing(rule->second.freezing);
    if (!path) return {notComputed(ceiling, QString::fromStdString(path.error().text()))};
    Event event;
    event.label = "liquid";
    event.temperature_K = path.value().end_K;
    event.K_per_wt = path.value().K_per_wt;
    Limit made = limitAt(ceiling, event, context);
    made.remark = "as cast, before any homogenising; " + rule->second.source;
    return {made};
}

std::vector<Limit> firstAusteniteLimit(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const Side side = limit.kind == "above_ae1" ? Side::floor : Side::ceiling;
    const Limit made = blankLimit(limit, side, "Ae1");
    if (!sweep.presentAnywhere("austenite")) {
        const QString why = "austenite never forms in this heat";
        return {side == Side::floor ? impossible(made, why) : notBinding(made, why)};
    }
    if (!sweep.states.empty() && sweep.states.front().moleFraction("austenite") > kPresent)
        return {notComputed(made, "austenite is stable already at the lowest temperature computed")};
    const auto first = sweep.firstAppearing("austenite");
    if (!first) return {notComputed(made, "the first austenite was not found in the sweep")};
    Limit at = limitAt(made, *first, context);
    addOpinions(at, *first, "Ac1", context);
    return {at};
}

std::vector<Limit> lastFerriteLimit(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const QStringList labels = labelsOf("ferrite");
    const Limit floor = blankLimit(limit, Side::floor, "Ae3");
    const auto gaps = gapsWithout(sweep, labels);
    if (gaps.empty()) return {impossible(floor, "ferrite is there at every temperature: no temperature removes it")};
    if (gaps.front().first == 0) return {notBinding(floor, "no ferrite even at the lowest temperature computed")};
    const Event* event = eventBetween(sweep, labels, EventKind::vanishes, gaps.front().first - 1);
    if (!event) return {notComputed(floor, "where the last ferrite goes was not found in the sweep")};
    Limit at = limitAt(floor, *event, context);
    addOpinions(at, *event, "Ac3", context);
    return {at};
}

}  // namespace soak
