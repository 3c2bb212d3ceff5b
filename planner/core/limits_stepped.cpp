// SPDX-License-Identifier: GPL-3.0-or-later
// A casting heated in steps: a hold below its first melting lets the segregation spread, and what is left of it decides
// where the metal between the dendrites begins to melt.
#include <algorithm>

#include "base/units.h"
#include "planner/core/limit_making.h"
#include "planner/core/units_text.h"
#include "thermo/back_diffusion.h"

namespace soak {
namespace {

constexpr double kBelow_K = 80,
                 kAbove_K = 5;  // around the two ends: the last drop lies below, the mean's solidus is the most

struct Hold {
    double temperature_C, hours, spacing_um;
};

/// What the cycle says, or why it says too little.
Result<Hold> holdOf(const CycleLimit& limit, const LimitContext& context) {
    if (!limit.low || !limit.high)
        return Error{Fault::input, "a stepped limit needs its lower step: `high` in °C and `low` in hours", {}, {}};
    bool is_number = false;
    const double spacing_um = limit.phase.toDouble(&is_number);
    return Hold{*limit.high, *limit.low,
                is_number ? spacing_um : context.book->kinetics.spacingOf("casting").spacing_um};
}

/// Share of the segregation left by element; elements without a published diffusivity keep all of theirs.
std::map<std::string, double> leftAfter(const Hold& hold, const std::map<std::string, double>& elements,
                                        const QString& matrix, const LimitContext& context) {
    std::map<std::string, double> left;
    for (const auto& [element, wt] : elements) {
        const auto* row = context.book->kinetics.diffusionOf(context.family, QString::fromStdString(element), matrix);
        const auto D = row ? row->at(hold.temperature_C) : std::nullopt;
        if (D) left[element] = segregationLeft(*D * hold.hours * 3600, hold.spacing_um * 1e-6);
    }
    return left;
}

/// In words, for the element whose enrichment between the dendrites is the most that is left.
QString percentLeft(const std::map<std::string, double>& left, const std::map<std::string, double>& last_wt,
                    const Analysis& mean) {
    std::string most;
    double most_wt = 0, share = 0;
    for (const auto& [element, part] : left) {
        const auto at = mean.find(element);
        const double mean_wt = at == mean.end() ? 0 : at->second.wt.value_or(0);
        const double enriched_wt = part * (last_wt.at(element) - mean_wt);
        if (mean_wt > 0 && (most.empty() || enriched_wt > most_wt)) most = element, most_wt = enriched_wt, share = part;
    }
    if (most.empty()) return "no published diffusivity";
    return QString("%1 of the segregation of %2 is left")
        .arg(withUnit(100 * share, "%", share < 0.01 ? 2 : 0), QString::fromStdString(most));
}

}  // namespace

std::vector<Limit> steppedSolidusLimit(const CycleLimit& limit, const LimitContext& context) {
    Limit ceiling = blankLimit(limit, Side::ceiling, "first melting after the lower step");
    const auto hold = holdOf(limit, context);
    if (!hold) return {notComputed(ceiling, QString::fromStdString(hold.error().text()))};
    const Family* family = context.book->find(context.family);
    const auto rule = family ? context.book->segregation.find(family->data_set) : context.book->segregation.end();
    if (rule == context.book->segregation.end())
        return {notComputed(ceiling, "data/segregation.toml has no row for this data set")};
    const auto path = context.report->freezing(rule->second.freezing);
    if (!path) return {notComputed(ceiling, QString::fromStdString(path.error().text()))};
    const double cast_K = path.value().end_K;
    const QString cast = "the cast metal begins to melt at " + celsiusText(celsius(cast_K));
    if (kelvin(hold.value().temperature_C) >= cast_K)
        return {impossible(
            ceiling, "the lower step itself, " + celsiusText(hold.value().temperature_C) + ", is too hot: " + cast)};

    const Sweep& sweep = context.report->sweep();
    const auto solidus = sweep.firstAppearing("liquid");
    if (!solidus || sweep.states.front().matrixLabels.empty())
        return {notComputed(ceiling, "the solidus was not found in the sweep")};
    const auto& last = path.value().steps.back().liquid_wt;
    const auto left =
        leftAfter(hold.value(), last, QString::fromStdString(sweep.states.front().matrixLabels.front()), context);
    const auto melting = context.report->meltingAfter(last, left, cast_K - kBelow_K, solidus->temperature_K + kAbove_K);
    if (!melting) return {notComputed(ceiling, QString::fromStdString(melting.error().text()))};

    Event event;
    event.label = "liquid";
    event.temperature_K = std::clamp(melting.value().temperature_K, cast_K, std::max(cast_K, solidus->temperature_K));
    event.K_per_wt = melting.value().K_per_wt;
    Limit made = limitAt(ceiling, event, context);
    made.remark = QString("after %1 at %2 over an arm spacing of %3: %4; %5")
                      .arg(withUnit(hold.value().hours, "h", 1), celsiusText(hold.value().temperature_C),
                           withUnit(hold.value().spacing_um, "µm"), percentLeft(left, last, *context.analysis), cast);
    return {made};
}

}  // namespace soak
