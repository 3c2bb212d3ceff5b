// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/limits.h"

#include <algorithm>
#include <cmath>
#include <functional>

#include "base/units.h"
#include "planner/core/retained_austenite.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

constexpr double kPresent = 1e-9;  // mole fraction below which a phase counts as absent: only zero-amount rounding

QStringList groupOf(const QString& phase) {
    // Carbides of the trade, as the labels of the data sets have them. Nitrides and carbonitrides of the stabilisers
    // (MX) count as carbide: a point count under the microscope cannot tell them apart.
    if (phase == "carbide")
        return {"M23C6", "M7C3", "M6C", "M2C", "MX", "cementite", "M3C2", "M5C2", "xi_carbide", "MoC", "hexagonal_MC"};
    if (phase == "ferrite" || phase == "delta ferrite") return {"ferrite", "delta ferrite"};
    return {phase};
}

QString marginText(double margin_K, Side side) {
    if (margin_K == 0) return {};
    return QString(side == Side::floor ? " + " : " \u2212 ") + withUnit(margin_K, "K");
}

Limit blank(const CycleLimit& limit, Side side, const QString& cause) {
    Limit made;
    made.side = side;
    made.kind = limit.kind;
    made.phase = limit.phase;
    made.cause = cause + marginText(limit.margin_K, side);
    made.because = limit.because;
    made.source = limit.source;
    made.margin_K = limit.margin_K;
    return made;
}

Limit notComputed(Limit limit, const QString& why) {
    limit.computed = false;
    limit.remark = why;
    return limit;
}
Limit notBinding(Limit limit, const QString& why) {
    limit.remark = why;
    return limit;
}
Limit impossible(Limit limit, const QString& why) {
    limit.impossible = true;
    limit.remark = why;
    return limit;
}

/// A "less than" value was computed at its bound. Where 0 is the unsafe end, the exact derivative carries the limit
/// there.
double censoredShift_K(Side side, const std::map<std::string, double>& K_per_wt, const Analysis& analysis) {
    double shift = 0;
    for (const auto& [element, content] : analysis) {
        const auto at = K_per_wt.find(element);
        if (!content.less_than || !content.wt || at == K_per_wt.end()) continue;
        const double to_zero_K = -at->second * *content.wt;
        const bool raises_floor = side == Side::floor && to_zero_K > 0;
        const bool lowers_ceiling = side == Side::ceiling && to_zero_K < 0;
        if (raises_floor || lowers_ceiling) shift += to_zero_K;
    }
    return shift;
}

/// Certificate rounding: the last digit hides a uniform half either way. A "less than" hides everything below its
/// bound.
double rounding_wt(const Content& content) {
    return (content.less_than ? content.wt.value_or(0) : content.digit_wt) / std::sqrt(12.0);
}

/// The model's part, K. `volume_percent_per_K` turns a scatter in vol% into one in K. The mean difference counts where
/// it lies to the unsafe side: a floor computed too low, a ceiling computed too high.
double model_K(const ModelScatter& scatter, Side side, double volume_percent_per_K) {
    if (scatter.in_volume_percent) {
        if (volume_percent_per_K == 0) return 0;
        return std::hypot(scatter.mean, scatter.scatter) / std::abs(volume_percent_per_K);
    }
    const double unsafe = side == Side::floor ? std::max(-scatter.mean, 0.0) : std::max(scatter.mean, 0.0);
    return std::hypot(scatter.scatter, unsafe);
}

Limit computedAt(Limit limit, const Event& event, const LimitContext& context, double volume_percent_per_K = 0) {
    const double into_safe_K = limit.side == Side::floor ? limit.margin_K : -limit.margin_K;
    limit.K_per_wt = event.K_per_wt;
    limit.temperature_C =
        celsius(event.temperature_K) + into_safe_K + censoredShift_K(limit.side, limit.K_per_wt, *context.analysis);
    double certificate = 0, laboratory = 0;
    for (const auto& [element, slope] : limit.K_per_wt) {
        const auto at = context.analysis->find(element);
        if (at == context.analysis->end() || !at->second.wt) continue;
        certificate += std::pow(slope * rounding_wt(at->second), 2);
        if (!at->second.less_than)
            laboratory += std::pow(slope * context.book->laboratory_wt(element, *at->second.wt), 2);
    }
    const ModelScatter scatter = context.book->scatterOf(context.family, limit.kind, limit.phase);
    limit.certificate_K = std::sqrt(certificate);
    limit.laboratory_K = std::sqrt(laboratory);
    limit.model_K = model_K(scatter, limit.side, volume_percent_per_K);
    limit.uncertainty_K = std::sqrt(certificate + laboratory + limit.model_K * limit.model_K);
    if (scatter.rows < 5 && limit.remark.isEmpty())
        limit.remark = scatter.rows == 0 ? QString("little evidence: ") + scatter.source
                                         : QString("little evidence: %1 published values").arg(scatter.rows);
    return limit;
}

// ---- limits set by the beginning or the end of a phase ------------------------------------------------------------

double amount(const State& state, const QStringList& labels) {
    double sum = 0;
    for (const QString& label : labels) sum += state.moleFraction(label.toStdString());
    return sum;
}
bool anywhere(const Sweep& sweep, const QStringList& labels) {
    return std::any_of(labels.begin(), labels.end(),
                       [&](const QString& label) { return sweep.presentAnywhere(label.toStdString()); });
}

std::vector<Limit> dissolved(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const Limit floor = blank(limit, Side::floor, limit.phase + " dissolved");
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
    return {computedAt(floor, *last, context)};
}

/// An unbroken stretch of the sweep's states without any of the labels.
struct Gap {
    std::size_t first = 0, last = 0;  // states
};
std::vector<Gap> gapsWithout(const Sweep& sweep, const QStringList& labels) {
    std::vector<Gap> gaps;
    bool open = false;
    for (std::size_t i = 0; i < sweep.states.size(); ++i) {
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

std::vector<Limit> notYetFormed(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const QStringList labels = labelsOf(limit.phase);
    const Limit ceiling = blank(limit, Side::ceiling, limit.phase + " not yet formed");
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
    if (gap.last + 1 == sweep.states.size())
        return {notBinding(ceiling, limit.phase + " does not form on further heating")};
    const Event* event = eventBetween(sweep, labels, EventKind::appears, gap.last);
    if (!event) return {notComputed(ceiling, "where " + limit.phase + " begins to form was not found in the sweep")};
    return {computedAt(ceiling, *event, context)};
}

std::vector<Limit> belowSolidus(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    Limit ceiling = blank(limit, Side::ceiling, "solidus");
    if (const auto first = sweep.firstAppearing("liquid")) return {computedAt(ceiling, *first, context)};
    if (sweep.states.empty() || sweep.presentAnywhere("liquid"))
        return {notComputed(ceiling, "the solidus was not found in the sweep")};
    ceiling.temperature_C = celsius(sweep.states.back().temperature_K) - limit.margin_K;
    return {notBinding(ceiling, "no liquid up to the highest temperature computed, which stands for the solidus")};
}

std::vector<Limit> firstAustenite(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const Side side = limit.kind == "above_ae1" ? Side::floor : Side::ceiling;
    const Limit made = blank(limit, side, "Ae1");
    if (!sweep.presentAnywhere("austenite")) {
        const QString why = "austenite never forms in this heat";
        return {side == Side::floor ? impossible(made, why) : notBinding(made, why)};
    }
    if (!sweep.states.empty() && sweep.states.front().moleFraction("austenite") > kPresent)
        return {notComputed(made, "austenite is stable already at the lowest temperature computed")};
    const auto first = sweep.firstAppearing("austenite");
    if (!first) return {notComputed(made, "the first austenite was not found in the sweep")};
    return {computedAt(made, *first, context)};
}

std::vector<Limit> aboveAe3(const CycleLimit& limit, const LimitContext& context) {
    const Sweep& sweep = context.report->sweep();
    const QStringList labels = labelsOf("ferrite");
    const Limit floor = blank(limit, Side::floor, "Ae3");
    const auto gaps = gapsWithout(sweep, labels);
    if (gaps.empty()) return {impossible(floor, "ferrite is there at every temperature: no temperature removes it")};
    if (gaps.front().first == 0) return {notBinding(floor, "no ferrite even at the lowest temperature computed")};
    const Event* event = eventBetween(sweep, labels, EventKind::vanishes, gaps.front().first - 1);
    if (!event) return {notComputed(floor, "where the last ferrite goes was not found in the sweep")};
    return {computedAt(floor, *event, context)};
}

// ---- limits set by an amount --------------------------------------------------------------------------------------

/// A quantity of the state with its bounds: the allowed temperatures are those where low <= quantity <= high.
struct Bounded {
    std::function<double(const State&)> quantity;
    double low = -1e300, high = 1e300;
    QString name, unit;  // "ferrite", "vol%"
    bool in_volume_percent = false;
    /// Exact solution for one label or one element, where there is one.
    std::function<Result<Event>(double value, double from_K, double to_K)> exact;
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

/// Solid states only: amounts mean nothing to a furnace once the metal melts.
std::vector<const State*> solidStates(const Sweep& sweep) {
    std::vector<const State*> states;
    for (const State& state : sweep.states) {
        if (state.moleFraction("liquid") > kPresent) break;
        states.push_back(&state);
    }
    return states;
}

QString boundText(const Bounded& bounded, bool least) {
    const double value = least ? bounded.low : bounded.high;
    return bounded.name + (least ? " at least " : " at most ") +
           withUnit(value, bounded.unit, value == std::round(value) ? 0 : 2);
}

Limit boundary(const CycleLimit& limit, Side side, const Bounded& bounded, const std::vector<const State*>& states,
               const std::vector<double>& values, std::size_t outside, std::size_t inside,
               const LimitContext& context) {
    const bool least = values[outside] < bounded.low;
    const double value = least ? bounded.low : bounded.high;
    const Limit made = blank(limit, side, boundText(bounded, least));
    const std::size_t below = std::min(outside, inside), above = std::max(outside, inside);
    const double from_K = states[below]->temperature_K, to_K = states[above]->temperature_K;
    auto event = bounded.exact ? bounded.exact(value, from_K, to_K)
                               : context.report->crossing(bounded.quantity, value, from_K, to_K);
    if (!event && bounded.exact) event = context.report->crossing(bounded.quantity, value, from_K, to_K);
    if (!event) return notComputed(made, QString::fromStdString(event.error().text()));
    const double slope = (values[above] - values[below]) / (to_K - from_K);
    return computedAt(made, event.value(), context, bounded.in_volume_percent ? slope : 0);
}

std::vector<Limit> between(const CycleLimit& limit, const Bounded& bounded, const LimitContext& context) {
    const auto states = solidStates(context.report->sweep());
    std::vector<double> values;
    for (const State* state : states) values.push_back(bounded.quantity(*state));
    const bool least = bounded.low > -1e299;
    const Limit either = blank(limit, Side::floor, boundText(bounded, least));
    const auto runs = allowedRuns(values, bounded);
    if (runs.empty()) return {impossible(either, "no temperature gives this amount in this heat")};

    const double reference_K = kelvin(context.reference_C);
    const auto distance = [&](const Run& run) {
        return std::max(
            {states[run.first]->temperature_K - reference_K, reference_K - states[run.last]->temperature_K, 0.0});
    };
    const Run run = *std::min_element(runs.begin(), runs.end(),
                                      [&](const Run& a, const Run& b) { return distance(a) < distance(b); });
    std::vector<Limit> made;
    if (run.first > 0)
        made.push_back(boundary(limit, Side::floor, bounded, states, values, run.first - 1, run.first, context));
    if (run.last + 1 < states.size())
        made.push_back(boundary(limit, Side::ceiling, bounded, states, values, run.last + 1, run.last, context));
    if (made.empty()) made.push_back(notBinding(either, "kept at every temperature computed"));
    return made;
}

std::vector<Limit> fraction(const CycleLimit& limit, const LimitContext& context) {
    const QStringList labels = labelsOf(limit.phase);
    Bounded bounded{[labels](const State& state) {
                        double sum = 0;
                        for (const QString& label : labels) sum += 100 * state.volumeFraction(label.toStdString());
                        return sum;
                    },
                    limit.low.value_or(-1e300),
                    limit.high.value_or(1e300),
                    limit.phase,
                    "vol%",
                    true,
                    {}};
    QStringList present;
    for (const QString& label : labels)
        if (context.report->sweep().presentAnywhere(label.toStdString())) present << label;
    if (present.size() == 1)
        bounded.exact = [report = context.report, label = present.first().toStdString()](double value, double from_K,
                                                                                         double to_K) {
            return report->crossingOfFraction(label, value / 100, from_K, to_K);
        };
    return between(limit, bounded, context);
}

std::vector<Limit> matrixContent(const CycleLimit& limit, const LimitContext& context) {
    const std::string element = limit.phase.toStdString();
    const Bounded bounded{[element](const State& state) { return state.matrixContent(element).value_or(0); },
                          limit.low.value_or(-1e300),
                          limit.high.value_or(1e300),
                          limit.phase + " in the matrix",
                          "wt%",
                          false,
                          [report = context.report, element](double value, double from_K, double to_K) {
                              return report->crossingOfContent(element, value, from_K, to_K);
                          }};
    return between(limit, bounded, context);
}

std::vector<Limit> retainedAustenite(const CycleLimit& limit, const LimitContext& context) {
    const Bounded bounded{[](const State& state) { return retainedAustenite_vol(state, kQuenchedTo_C); },
                          -1e300,
                          limit.high.value_or(1e300),
                          "retained austenite",
                          "vol%",
                          false,
                          {}};
    auto made = between(limit, bounded, context);
    for (Limit& one : made)
        if (one.temperature_C) one.remark = kRetainedAusteniteSource;
    return made;
}

// ---- limits set by people -----------------------------------------------------------------------------------------

Limit setAt(const CycleLimit& limit, Side side, const QString& what, double temperature_C) {
    Limit made =
        blank(limit, side, what + (side == Side::floor ? " minimum " : " maximum ") + celsiusText(temperature_C));
    made.temperature_C = temperature_C + (side == Side::floor ? limit.margin_K : -limit.margin_K);
    made.set = true;
    return made;
}

std::vector<Limit> bySpecification(const CycleLimit& limit, const LimitContext&) {
    std::vector<Limit> made;
    if (limit.low) made.push_back(setAt(limit, Side::floor, "specification", *limit.low));
    if (limit.high) made.push_back(setAt(limit, Side::ceiling, "specification", *limit.high));
    return made;
}

std::vector<Limit> byFurnace(const CycleLimit& limit, const LimitContext& context) {
    std::optional<double> low = limit.low, high = limit.high;
    if (!context.furnace.id.isEmpty()) {
        low = std::max(low.value_or(context.furnace.minimum_C), context.furnace.minimum_C);
        high = std::min(high.value_or(context.furnace.maximum_C), context.furnace.maximum_C);
    }
    std::vector<Limit> made;
    if (low) made.push_back(setAt(limit, Side::floor, "furnace", *low));
    if (high) made.push_back(setAt(limit, Side::ceiling, "furnace", *high));
    return made;
}

struct Kind {
    QStringView word;
    Side side;  // the side a limit of this kind is reported on when nothing can be computed
    bool computed;
    std::vector<Limit> (*make)(const CycleLimit&, const LimitContext&);
};
constexpr Kind kKinds[] = {
    {u"dissolved", Side::floor, true, dissolved},
    {u"not_yet_formed", Side::ceiling, true, notYetFormed},
    {u"below_solidus", Side::ceiling, true, belowSolidus},
    {u"above_ae1", Side::floor, true, firstAustenite},
    {u"below_ae1", Side::ceiling, true, firstAustenite},
    {u"above_ae3", Side::floor, true, aboveAe3},
    {u"fraction", Side::floor, true, fraction},
    {u"matrix_content", Side::floor, true, matrixContent},
    {u"retained_austenite", Side::ceiling, true, retainedAustenite},
    {u"specification", Side::floor, false, bySpecification},
    {u"furnace", Side::floor, false, byFurnace},
};

QString plainCause(const CycleLimit& limit) {
    return limit.phase.isEmpty() ? QString(limit.kind).replace('_', ' ')
                                 : QString(limit.kind).replace('_', ' ') + " (" + limit.phase + ")";
}

}  // namespace

QStringList labelsOf(const QString& phase) { return groupOf(phase); }

std::vector<Limit> evaluate(const CycleLimit& limit, const LimitContext& context) {
    const auto kind =
        std::find_if(std::begin(kKinds), std::end(kKinds), [&](const Kind& one) { return limit.kind == one.word; });
    if (kind == std::end(kKinds)) {
        const QString why = "this kind of limit is not judged: \"" + limit.kind + "\"";
        return {notComputed(blank(limit, Side::floor, plainCause(limit)), why)};
    }
    if (kind->computed) {
        const Limit bare = blank(limit, kind->side, plainCause(limit));
        if (!context.missing.isEmpty()) return {notComputed(bare, listed(context.missing) + " missing")};
        if (!context.report) return {notComputed(bare, context.report_missing)};
    }
    return kind->make(limit, context);
}

}  // namespace soak
