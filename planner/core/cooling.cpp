// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/cooling.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"
#include "planner/core/conduction.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

constexpr double kLongest_s = 3600;  // a piece that may stand an hour in air needs no limit in seconds

/// What was dissolved and would come back first: the highest computed floor of that kind, its margin taken off.
void findWhatComesBack(CoolingAnswer& answer, const std::vector<Limit>& floors) {
    for (const Limit& floor : floors) {
        const bool returns = floor.kind == "dissolved" || floor.kind == "above_ae3" || floor.kind == "above_ae1";
        if (!returns || !floor.temperature_C || floor.set) continue;
        const double begins_C = *floor.temperature_C - floor.margin_K;
        if (answer.begins_C && *answer.begins_C >= begins_C) continue;
        answer.begins_C = begins_C;
        answer.phase = floor.kind == "dissolved" ? floor.phase : QString("ferrite");
    }
}

std::optional<double> secondsInAir(const CoolingQuestion& question, double until_C, const Metal& metal) {
    const bool round = question.product_form == "bar" || question.product_form == "ring";
    Conduction piece(metal, *question.section_mm, round, question.coldest_metal_C);
    const Transfer& air = question.context->book->kinetics.transferOf("still air");
    return piece.advanceUntil({20, air.convection_W_per_m2K, metal.emissivity}, kLongest_s,
                              [&] { return piece.outside_C() <= until_C; });
}

void findBudget(CoolingAnswer& answer, const CoolingQuestion& question) {
    const Metal* metal = question.context->book->kinetics.metalOf(question.context->family);
    if (!answer.begins_C || !question.section_mm || !metal || *question.section_mm <= 0) return;
    if (question.coldest_metal_C <= *answer.begins_C) {
        answer.budget_s = 0;
        return;
    }
    answer.budget_s = secondsInAir(question, *answer.begins_C, *metal);
    answer.basis = QString(
                       "outside of the %1 section in still air from %2 to %3; %4; conduction and radiation, rule "
                       "of thumb: no time is allowed below")
                       .arg(withUnit(*question.section_mm, "mm"), celsiusText(question.coldest_metal_C),
                            celsiusText(*answer.begins_C), metal->source);
}

/// The cycle's own seconds, or the published ones for the section.
void findSetDelay(CoolingAnswer& answer, const CoolingQuestion& question) {
    for (const CycleLimit& limit : *question.cycle_limits) {
        if (limit.kind != "quench_delay") continue;
        std::optional<double> seconds = limit.high;
        QString source = limit.source;
        if (!seconds && question.section_mm)
            if (const DelayRule* rule =
                    question.context->book->cooling.delayFor(question.context->family, *question.section_mm))
                seconds = rule->seconds, source = rule->source;
        if (!seconds || (answer.set_s && *answer.set_s <= *seconds)) continue;
        answer.set_s = seconds;
        answer.basis += (answer.basis.isEmpty() ? "" : "; ") + QString("set: ") + source;
    }
}

void compareWithQuench(CoolingAnswer& answer, const CoolingQuestion& question) {
    if (!question.quenches->empty()) {
        answer.quench = question.quenches->front().id;
        answer.transfer_s = question.quenches->front().transfer_max_s;
    }
    for (const auto& one : {answer.budget_s, answer.set_s})
        if (one) answer.allowed_s = std::min(answer.allowed_s.value_or(*one), *one);
    answer.too_slow = answer.allowed_s && answer.transfer_s && *answer.transfer_s > *answer.allowed_s;
}

QString secondsText(double seconds) { return withUnit(std::floor(seconds + 1e-6), "s"); }

void saySentence(CoolingAnswer& answer) {
    if (!answer.allowed_s) return;
    const bool by_physics = answer.budget_s && *answer.allowed_s == *answer.budget_s;
    answer.sentence =
        by_physics
            ? QString("Under the quench within %1 of opening the door: %2 comes back below %3")
                  .arg(secondsText(*answer.allowed_s), answer.phase, celsiusText(*answer.begins_C))
            : QString("Under the quench within %1 of opening the door, as set").arg(secondsText(*answer.allowed_s));
    if (!answer.transfer_s)
        answer.sentence += ".";
    else if (answer.too_slow)
        answer.sentence += QString("; %1 took up to %2 when measured: too slow.")
                               .arg(answer.quench, withUnit(std::ceil(*answer.transfer_s), "s"));
    else if (*answer.transfer_s > 0)
        answer.sentence += QString("; %1 took at most %2 when measured.")
                               .arg(answer.quench, withUnit(std::ceil(*answer.transfer_s), "s"));
    else
        answer.sentence += QString("; %1 quenches in place.").arg(answer.quench);
}

double contentOf(const Analysis& analysis, const QString& element) {
    const auto at = analysis.find(element.toStdString());
    return at == analysis.end() ? 0 : at->second.wt.value_or(0);
}

void findCrossings(CoolingAnswer& answer, const CoolingQuestion& question) {
    const LimitContext& context = *question.context;
    for (const CrossingRule& rule : context.book->cooling.crossings) {
        if (!rule.families.contains(context.family)) continue;
        if (rule.least_wt && contentOf(*context.analysis, rule.element) < *rule.least_wt) continue;
        Crossing crossing{rule.what, rule.low_C, rule.high_C, false, rule.because, rule.source};
        if (!rule.phase.isEmpty()) {
            const auto solvus = context.report ? context.report->sweep().lastVanishing(rule.phase.toStdString())
                                               : std::optional<Event>();
            if (!solvus) continue;
            crossing.high_C = celsius(solvus->temperature_K);
            crossing.computed = true;
        }
        if (crossing.high_C > crossing.low_C) answer.crossings.push_back(crossing);
    }
}

/// The highest temperature at which the carbide still holds on beside metal with only `least_wt` of the element:
/// carbide formed below it can draw the boundary down to that content. Carbon is uniform, being fast (C. Stawstroem,
/// M. Hillert, J. Iron Steel Inst. 207 (1969) 77-85). By bisection on the engine's own equilibrium to 1 K.
std::optional<double> depletedBelow_C(const SensitisationRule& rule, const LimitContext& context, double solvus_C) {
    auto beside = context.report->changed(rule.element.toStdString(), rule.least_wt);
    if (!beside) return std::nullopt;
    const std::string phase = rule.phase.toStdString();
    const auto there = [&](double at_C) {
        const auto state = beside.value().stateAt(kelvin(at_C));
        return state && state.value().find(phase);
    };
    double low = rule.low_C, high = solvus_C;
    if (!there(low)) return std::nullopt;
    while (high - low > 1) (there((low + high) / 2) ? low : high) = (low + high) / 2;
    return low;
}

void findSensitisation(CoolingAnswer& answer, const CoolingQuestion& question) {
    const LimitContext& context = *question.context;
    const SensitisationRule* rule = context.book->cooling.sensitisationOf(context.family);
    if (!rule || !context.report || !context.missing.isEmpty()) return;
    const auto solvus = context.report->sweep().lastVanishing(rule->phase.toStdString());
    if (!solvus || celsius(solvus->temperature_K) <= rule->low_C) return;
    const auto depleted_C = depletedBelow_C(*rule, context, celsius(solvus->temperature_K));
    if (!depleted_C) return;
    const double nose_s = rule->noseAt_s(contentOf(*context.analysis, "C"));
    answer.needed_K_per_s = (*depleted_C - rule->low_C) / nose_s;
    answer.crossings.push_back({"sensitisation", rule->low_C, *depleted_C, true,
                                QString("%1 beside the boundary carbide can fall below %2; with this carbon the nose "
                                        "is passed in %3 or faster")
                                    .arg(rule->element, withUnit(rule->least_wt, "%"),
                                         nose_s < 600 ? secondsText(nose_s) : withUnit(std::floor(nose_s / 60), "min")),
                                rule->source});
}

}  // namespace

CoolingAnswer coolingOf(const CoolingQuestion& question) {
    CoolingAnswer answer;
    findWhatComesBack(answer, *question.floors);
    findBudget(answer, question);
    findSetDelay(answer, question);
    compareWithQuench(answer, question);
    saySentence(answer);
    findCrossings(answer, question);
    findSensitisation(answer, question);
    return answer;
}

}  // namespace soak
