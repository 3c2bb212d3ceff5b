// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "alloy.h"

namespace soak {

/// Share (0..1) of a segregation that is left after holding: the amplitude of a cosine over one arm spacing,
///   exp(-4 pi^2 sum(D t) / spacing^2)      D m2/s, t s, spacing m
/// Source: P.G. Shewmon, Diffusion in Solids, McGraw-Hill 1963. The last liquid freezes as a narrow peak, which decays
/// faster than a cosine of one spacing: what is left is not underestimated.
double segregationLeft(double sum_Dt_m2, double spacing_m);

/// Where the metal between the dendrites begins to melt when part of the segregation is left.
struct InterdendriticMelting {
    double temperature_K = 0;
    Chemistry local;                         ///< of the last metal to freeze, after the hold
    std::map<std::string, double> K_per_wt;  ///< by the alloy's own contents, its enrichment kept (first order)
};

/// `last_liquid_wt`: composition of the last liquid of the segregated casting, wt%. `left`: share of the segregation
/// left by element, 0..1; an element that is not named keeps all of it. The local content of each element is
/// mean + left (last - mean); its solidus is sought between the two temperatures.
/// Everything left: the solidus of the last liquid. Nothing left: the solidus of the alloy.
/// Errors: those of Alloy; Fault::range when the first liquid does not come between the two temperatures.
Result<InterdendriticMelting> meltingAfterHold(const Alloy& alloy, const std::map<std::string, double>& last_liquid_wt,
                                               const std::map<std::string, double>& left, double from_K, double to_K);

}  // namespace soak
