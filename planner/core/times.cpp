// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/times.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"
#include "planner/core/conduction.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

constexpr double kPi = 3.14159265358979;
constexpr double kWithin_K = 10;        // the middle counts as at temperature
constexpr double kRest = 0.1;           // of the segregation
constexpr double kLongest_s = 4e5;      // a heat-up of more than four days says nothing
constexpr double kEnriched = 1.3;       // an element this much richer in the particle must diffuse away
constexpr double kMostMinutes = 60000;  // beyond a thousand hours: "does not dissolve in practice"

QString minutesText(double minutes) {
    if (minutes < 1) return "less than " + withUnit(1, "min");
    if (minutes >= kMostMinutes) return "more than " + withUnit(std::floor(kMostMinutes / 60), "h");
    return minutes < 300 ? withUnit(std::ceil(minutes), "min") : withUnit(std::ceil(minutes / 60), "h");
}

void findHeatUp(SoakTime& soak, const SoakQuestion& question) {
    const auto& kinetics = question.context->book->kinetics;
    const Metal* metal = kinetics.metalOf(question.context->family);
    if (!metal || !question.section_mm || *question.section_mm <= 0) return;
    const Transfer& transfer = kinetics.transferOf(question.furnace_kind);
    const double around_C = question.answer->setpoint_C;
    // A bar is round; everything else counts as a plate, the slower of the two.
    Conduction piece(*metal, *question.section_mm, question.product_form == "bar", 20);
    const auto seconds = piece.advanceUntil({around_C, transfer.convection_W_per_m2K, metal->emissivity}, kLongest_s,
                                            [&] { return piece.middle_C() >= around_C - kWithin_K; });
    if (!seconds) return;
    soak.heat_up_min = *seconds / 60;
    soak.lines << QString(
                      "heat-up of one piece of %1 to within %2 in the middle: %3 (computed: conduction and "
                      "radiation, %4; %5; a load takes longer, the load sensor decides)")
                      .arg(withUnit(*question.section_mm, "mm"), withUnit(kWithin_K, "K"),
                           minutesText(*soak.heat_up_min), metal->source, transfer.source);
}

/// The state nearest below a temperature in which the label is there.
const PhaseAmount* lastSeen(const Sweep& sweep, const std::string& label, double below_K) {
    const PhaseAmount* seen = nullptr;
    for (const State& state : sweep.states)
        if (state.temperature_K <= below_K + 0.5)
            if (const PhaseAmount* phase = state.find(label)) seen = phase;
    return seen;
}

/// The matrix through which what dissolves must spread: the largest one at that temperature; all kinds of ferrite are
/// one.
QString matrixAt(const Sweep& sweep, double T_K) {
    const auto above = std::find_if(sweep.states.begin(), sweep.states.end(),
                                    [&](const State& state) { return state.temperature_K >= T_K; });
    const State& state = above == sweep.states.end() ? sweep.states.back() : *above;
    std::map<QString, double> amounts;
    for (const std::string& label : state.matrixLabels) {
        const QString name = QString::fromStdString(label);
        amounts[name.contains("ferrite") ? "ferrite" : name] += state.volumeFraction(label);
    }
    const auto most = std::max_element(amounts.begin(), amounts.end(),
                                       [](const auto& a, const auto& b) { return a.second < b.second; });
    return most == amounts.end() ? QString() : most->first;
}

struct Dissolution {
    double minutes = 0;
    QString element, row;
};

/// Carbon and nitrogen are uniform in the matrix, being fast; each slow element that the particle is rich in must be
/// carried away. The content that the matrix holds beside the particle at the soak is the one at which the particle
/// would just be stable there: the exact slope dT/d(wt%) of the solvus gives it.
std::optional<Dissolution> slowestOf(const Limit& floor, const LimitContext& context, double soak_C, double radius_um) {
    const Sweep& sweep = context.report->sweep();
    const double solvus_C = *floor.temperature_C - floor.margin_K;
    const PhaseAmount* particle = lastSeen(sweep, floor.phase.toStdString(), kelvin(solvus_C));
    const Family* family = context.book->find(context.family);
    if (!particle || !family || soak_C <= solvus_C) return std::nullopt;
    const auto rule = context.book->segregation.find(family->data_set);
    const QString matrix = matrixAt(sweep, kelvin(soak_C));
    std::optional<Dissolution> slowest;
    for (const auto& [element, K_per_wt] : floor.K_per_wt) {
        const auto content = context.analysis->find(element);
        const auto in_particle = particle->wt.find(element);
        if (content == context.analysis->end() || in_particle == particle->wt.end() || K_per_wt <= 0) continue;
        if (rule != context.book->segregation.end()) {
            const auto& fast = rule->second.freezing.fast;
            if (std::find(fast.begin(), fast.end(), element) != fast.end()) continue;
        }
        const double matrix_wt = content->second.wt.value_or(0);
        if (in_particle->second < kEnriched * matrix_wt || in_particle->second < 1) continue;
        const PropertyRow* D =
            context.book->kinetics.diffusionOf(context.family, QString::fromStdString(element), matrix);
        const auto value = D ? D->at(soak_C) : std::nullopt;
        if (!value || *value <= 0) continue;
        const double excess_wt = (soak_C - solvus_C) / K_per_wt;
        const double supersaturation = std::min(1.0, excess_wt / std::max(1e-9, in_particle->second - matrix_wt));
        const double minutes = dissolution_s(radius_um, *value, supersaturation) / 60;
        if (!slowest || minutes > slowest->minutes)
            slowest = Dissolution{minutes, QString::fromStdString(element), D->source};
    }
    return slowest;
}

void findDissolution(SoakTime& soak, const SoakQuestion& question) {
    if (!question.context->report) return;
    const double soak_C = question.answer->band.low_C;
    for (const Limit& floor : question.answer->floors) {
        if (floor.kind != "dissolved" || !floor.temperature_C) continue;
        const auto* size = question.context->book->kinetics.particleOf(question.context->family, floor.phase);
        if (!size) continue;
        const auto slowest = slowestOf(floor, *question.context, soak_C, size->radius_um);
        if (!slowest) continue;
        soak.dissolve_min = std::max(soak.dissolve_min.value_or(0), slowest->minutes);
        soak.lines << QString(
                          "%1 of %2 dissolves in %3 at %4 (diffusion of %5 in the matrix, %6; M.J. Whelan 1969; "
                          "the size is a rule of thumb: %7)")
                          .arg(floor.phase, withUnit(2 * size->radius_um, "µm", size->radius_um < 0.5 ? 1 : 0),
                               minutesText(slowest->minutes), celsiusText(std::floor(soak_C)), slowest->element,
                               slowest->row, size->source);
    }
}

void findHomogenising(SoakTime& soak, const SoakQuestion& question) {
    if (question.answer->kind != "homogenise" || !question.context->report) return;
    const double soak_C = question.answer->band.low_C;
    const QString matrix = matrixAt(question.context->report->sweep(), kelvin(soak_C));
    const Spacing& spacing = question.context->book->kinetics.spacingOf(question.product_form);
    std::optional<Dissolution> slowest;
    for (const auto& [element, content] : *question.context->analysis) {
        const QString symbol = QString::fromStdString(element);
        const PropertyRow* D = question.context->book->kinetics.diffusionOf(question.context->family, symbol, matrix);
        const auto value = D ? D->at(soak_C) : std::nullopt;
        if (!value || *value <= 0 || content.wt.value_or(0) < 0.3) continue;
        const double minutes = homogenising_s(spacing.spacing_um, *value, kRest) / 60;
        if (!slowest || minutes > slowest->minutes) slowest = Dissolution{minutes, symbol, D->source};
    }
    if (!slowest) return;
    soak.homogenise_min = slowest->minutes;
    soak.lines << QString(
                      "segregation over %1 falls to a tenth in %2 at %3 (slowest: %4, %5; the spacing is a rule of "
                      "thumb: %6)")
                      .arg(withUnit(spacing.spacing_um, "µm"), minutesText(slowest->minutes),
                           celsiusText(std::floor(soak_C)), slowest->element, slowest->row, spacing.source);
}

}  // namespace

double dissolution_s(double radius_um, double D_m2_per_s, double supersaturation) {
    const double radius_m = radius_um * 1e-6;
    return radius_m * radius_m / (2 * D_m2_per_s * std::max(supersaturation, 1e-9));
}

double homogenising_s(double spacing_um, double D_m2_per_s, double rest) {
    const double spacing_m = spacing_um * 1e-6;
    return -std::log(rest) * spacing_m * spacing_m / (4 * kPi * kPi * D_m2_per_s);
}

SoakTime soakOf(const SoakQuestion& question) {
    SoakTime soak;
    soak.rule_min = question.rule_min;
    findHeatUp(soak, question);
    findDissolution(soak, question);
    findHomogenising(soak, question);
    const double needed_min = soak.dissolve_min.value_or(0) + soak.homogenise_min.value_or(0);
    soak.rule_too_short = soak.rule_min && needed_min > *soak.rule_min;
    if (soak.rule_too_short)
        soak.lines << QString("the shop's rule gives %1, less than this estimate: ask the metallurgist")
                          .arg(minutesText(*soak.rule_min));
    return soak;
}

}  // namespace soak
