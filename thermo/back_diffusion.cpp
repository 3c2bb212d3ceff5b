// SPDX-License-Identifier: GPL-3.0-or-later
#include "back_diffusion.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "base/units.h"

namespace soak {

double segregationLeft(double sum_Dt_m2, double spacing_m) {
    return std::exp(-4 * std::numbers::pi * std::numbers::pi * sum_Dt_m2 / (spacing_m * spacing_m));
}

Result<InterdendriticMelting> meltingAfterHold(const Alloy& alloy, const std::map<std::string, double>& last_liquid_wt,
                                               const std::map<std::string, double>& left, double from_K, double to_K) {
    InterdendriticMelting found;
    found.local = alloy.chemistry();
    std::map<std::string, double> enrichment;
    for (auto& [element, wt] : found.local.wt) {
        const auto last = last_liquid_wt.find(element);
        const auto share = left.find(element);
        const double mean = wt;
        if (last == last_liquid_wt.end()) continue;
        wt = mean + (share == left.end() ? 1 : share->second) * (last->second - mean);
        if (mean > 0) enrichment[element] = wt / mean;
    }
    auto local = alloy.changed(found.local);
    if (!local) return std::move(local).error();
    const auto sweep = local.value().sweep(from_K, to_K);
    if (!sweep) return sweep.error();
    const auto melting = sweep.value().firstAppearing("liquid");
    if (!melting)
        return Error{Fault::range,
                     "the metal between the dendrites does not begin to melt between " +
                         std::to_string(std::lround(celsius(from_K))) + " and " +
                         std::to_string(std::lround(celsius(to_K))) + " degC",
                     {},
                     {}};
    found.temperature_K = melting->temperature_K;
    for (const auto& [element, slope] : melting->K_per_wt)
        if (const auto at = enrichment.find(element); at != enrichment.end())
            found.K_per_wt[element] = slope * at->second;
    return found;
}

}  // namespace soak
