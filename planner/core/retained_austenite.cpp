// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/retained_austenite.h"

#include <algorithm>
#include <cmath>

namespace soak {

const QString kRetainedAusteniteSource =
    "rule of thumb: Ms after Capdevila et al. 2002 (C to 1.65, Cr to 17.9 %), retained austenite after Koistinen and "
    "Marburger 1959 (plain carbon steels), both put to the computed austenite";

// Ms = 764.2 - 302.6 C - 30.6 Mn - 16.6 Ni - 8.9 Cr + 2.4 Mo - 11.3 Cu + 8.58 Co + 7.4 W - 14.5 Si, in K; wt%
// C. Capdevila, F.G. Caballero, C. Garcia de Andres, ISIJ Int. 42 (2002) 894-902 (coefficients and range from memory);
// its training set reaches C 1.65, Mn 3.76, Si 3.40, Cr 17.9, Ni 27.2, Mo 5.10, V 4.55, Co 30 %.
double martensiteStart_C(const std::map<std::string, double>& austenite_wt) {
    const auto wt = [&](const char* element) {
        const auto at = austenite_wt.find(element);
        return at == austenite_wt.end() ? 0.0 : at->second;
    };
    return 764.2 - 302.6 * wt("C") - 30.6 * wt("Mn") - 16.6 * wt("Ni") - 8.9 * wt("Cr") + 2.4 * wt("Mo") -
           11.3 * wt("Cu") + 8.58 * wt("Co") + 7.4 * wt("W") - 14.5 * wt("Si") - 273.15;
}

double quenchedHardness_HRC(const State& state, const Relation& relation) {
    const auto range = relation.range.find("C");
    const double low = range == relation.range.end() ? 0 : range->second.low_wt.value_or(0);
    const double high = range == relation.range.end() ? 1e9 : range->second.high_wt.value_or(1e9);
    const PhaseAmount* austenite = state.find("austenite");
    double wt = low;
    if (austenite)
        if (const auto carbon = austenite->wt.find("C"); carbon != austenite->wt.end()) wt = carbon->second;
    return relation.formula.value({{"C", std::clamp(wt, low, high)}}).value_or(0);
}

// f = exp(-0.011 (Ms - Tq)), Tq between Ms and about -80 degC
// D.P. Koistinen, R.E. Marburger, Acta Metall. 7 (1959) 59-60 (constant read second-hand; steels of 0.37 to 1.1 % C).
double retainedAustenite_vol(const State& state, double quenched_to_C) {
    const PhaseAmount* austenite = state.find("austenite");
    if (!austenite) return 0;
    const double undercooling_K = std::max(martensiteStart_C(austenite->wt) - quenched_to_C, 0.0);
    return 100 * state.volumeFraction("austenite") * std::exp(-0.011 * undercooling_K);
}

}  // namespace soak
