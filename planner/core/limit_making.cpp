// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/limit_making.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

/// A slope says what a small change does. Where an amount hardly changes with temperature a straight line would run
/// on for thousands of kelvin, which says no more than "anywhere in the range".
constexpr double kFarthest_K = 300;

QString marginText(double margin_K, Side side) {
    if (margin_K == 0) return {};
    const bool up = (side == Side::floor) == (margin_K > 0);
    return QString(up ? " + " : " \u2212 ") + withUnit(std::abs(margin_K), "K");
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

/// The model's part, K. The mean difference counts where it lies to the unsafe side: a floor computed too low, a
/// ceiling too high, an amount that must be reached computed too large, one that must not be passed too small.
double model_K(const ModelScatter& scatter, Side side, const Slope& slope) {
    if (scatter.in_volume_percent) {
        if (slope.volume_percent_per_K == 0) return 0;
        const double unsafe = std::max(slope.at_least ? scatter.mean : -scatter.mean, 0.0);
        return std::hypot(scatter.scatter, unsafe) / std::abs(slope.volume_percent_per_K);
    }
    const double unsafe = std::max(side == Side::floor ? -scatter.mean : scatter.mean, 0.0);
    return std::hypot(scatter.scatter, unsafe);
}

}  // namespace

/// Certificate rounding: the last digit hides a uniform half either way. A "less than" hides everything below its
/// bound.
double rounding_wt(const Content& content) {
    return (content.less_than ? content.wt.value_or(0) : content.digit_wt) / std::sqrt(12.0);
}

Limit blankLimit(const CycleLimit& limit, Side side, const QString& cause) {
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

Limit limitAt(Limit limit, const Event& event, const LimitContext& context, const Slope& slope) {
    const double into_safe_K = limit.side == Side::floor ? limit.margin_K : -limit.margin_K;
    limit.K_per_wt = event.K_per_wt;
    limit.temperature_C =
        celsius(event.temperature_K) + into_safe_K + censoredShift_K(limit.side, limit.K_per_wt, *context.analysis);
    double certificate = 0, laboratory = 0;
    for (const auto& [element, K_per_wt] : limit.K_per_wt) {
        const auto at = context.analysis->find(element);
        if (at == context.analysis->end() || !at->second.wt) continue;
        certificate += std::pow(K_per_wt * rounding_wt(at->second), 2);
        if (!at->second.less_than)
            laboratory += std::pow(K_per_wt * context.book->laboratory_wt(element, *at->second.wt), 2);
    }
    const ModelScatter scatter = context.book->scatterOf(context.family, limit.kind, limit.phase);
    limit.certificate_K = std::min(std::sqrt(certificate), kFarthest_K);
    limit.laboratory_K = std::min(std::sqrt(laboratory), kFarthest_K);
    limit.model_K = std::min(model_K(scatter, limit.side, slope), kFarthest_K);
    limit.uncertainty_K = std::hypot(limit.certificate_K, limit.laboratory_K, limit.model_K);
    if (scatter.rows < 5 && limit.remark.isEmpty())
        limit.remark = scatter.rows == 0 ? QString("little evidence: ") + scatter.source
                                         : QString("little evidence: %1 published values").arg(scatter.rows);
    return limit;
}

// Ac on slow heating lies 5 to 30 K above equilibrium, more in alloy steels (common practice): that much is no
// disagreement.
constexpr double kHeatingShift_K = 30;

void addOpinions(Limit& limit, const Event& event, const QString& quantity, const LimitContext& context) {
    limit.opinions = context.book->relations.opinionsOn(quantity, context.family, amountsOf(*context.analysis));
    const auto median_C = medianOf(limit.opinions);
    if (!median_C) return;
    const double computed_C = celsius(event.temperature_K), apart_K = *median_C - computed_C;
    double scatter_K = 15;  // where the papers state none: usual for such regressions
    for (const Opinion& one : limit.opinions)
        if (one.in_range && one.scatter) scatter_K = std::max(scatter_K, *one.scatter);
    const double explained_K = 2 * std::hypot(limit.uncertainty_K, scatter_K) + (apart_K > 0 ? kHeatingShift_K : 0);
    if (std::abs(apart_K) <= explained_K) return;
    limit.disagreement = QString("published relations put %1 at %2, the equilibrium at %3: have it measured")
                             .arg(quantity, celsiusText(*median_C), celsiusText(computed_C));
}

std::size_t solidStates(const Sweep& sweep) {
    const auto melting = std::find_if(sweep.states.begin(), sweep.states.end(),
                                      [](const State& state) { return state.moleFraction("liquid") > kPresent; });
    return static_cast<std::size_t>(melting - sweep.states.begin());
}

}  // namespace soak
