// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/quench_outlook.h"

#include <cmath>

#include "base/units.h"
#include "planner/core/retained_austenite.h"

namespace soak {
namespace {

constexpr double kMfBelowMs_K = 215;  // W. Steven, A.G. Haynes, J. Iron Steel Inst. 183 (1956) 349-359 (from memory)

QuenchOutlook outlookFrom(const LimitContext& context, const State& state, const PhaseAmount& austenite,
                          double from_C) {
    const RelationBook& relations = context.book->relations;
    Formula::Values wt;
    for (const auto& [element, amount] : austenite.wt) wt[QString::fromStdString(element)] = amount;
    QuenchOutlook outlook;
    outlook.from_C = from_C;
    outlook.carbon_wt = wt.count("C") ? wt.at("C") : 0;
    const auto on_Ms = relations.opinionsOn("Ms", context.family, wt);
    outlook.Ms_C = medianOf(on_Ms);
    if (outlook.Ms_C) outlook.Mf_C = *outlook.Ms_C - kMfBelowMs_K;
    outlook.Bs_C = medianOf(relations.opinionsOn("Bs", context.family, wt));
    outlook.retained_vol = retainedAustenite_vol(state, kQuenchedTo_C);
    const Relation& hardness = relations.relations.at("HRC_MAX_A255");
    if (outOfRange(hardness.range, wt).isEmpty()) outlook.hardness_HRC = quenchedHardness_HRC(state, hardness);
    QStringList names;
    for (const Opinion& one : on_Ms)
        if (one.in_range) names << one.name;
    outlook.basis = (names.isEmpty() ? QString("no relation for Ms is in range") : "Ms " + names.join(", ")) +
                    "; retained austenite Koistinen and Marburger 1959; hardness ASTM A255";
    return outlook;
}

}  // namespace

std::vector<QuenchOutlook> quenchOutlook(const LimitContext& context, const std::vector<double>& from_C) {
    std::vector<QuenchOutlook> outlooks;
    if (!context.report) return outlooks;
    for (const double at_C : from_C) {
        if (!outlooks.empty() && std::abs(outlooks.back().from_C - at_C) < 0.5) continue;
        const auto state = context.report->stateAt(kelvin(at_C));
        const PhaseAmount* austenite = state ? state.value().find("austenite") : nullptr;
        if (austenite) outlooks.push_back(outlookFrom(context, state.value(), *austenite, at_C));
    }
    return outlooks;
}

}  // namespace soak
