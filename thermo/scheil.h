// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <map>
#include <string>
#include <vector>

#include "alloy.h"

namespace soak {

/// How a melt freezes between dendrites.
struct FreezingChoice {
    /// Elements that spread through the solid at once: the lever rule for them, Gulliver-Scheil for all others.
    std::vector<std::string> fast;
    double last_liquid = 0.02;   ///< mass fraction of liquid at which the metal counts as solid, 0..1
    double most_per_step = 0.1;  ///< of the liquid, frozen in one step: the fineness of the path
    double most_step_K = 12;
};

struct FreezingStep {
    double temperature_K = 0;
    double liquid = 1;                        ///< mass fraction of the whole
    std::map<std::string, double> liquid_wt;  ///< wt% of the liquid
    std::vector<std::string> solid;           ///< labels that froze in this step
};

struct FreezingPath {
    std::vector<FreezingStep> steps;  ///< falling temperature; the first is the liquidus
    double end_K = 0;                 ///< where `last_liquid` is left, or where all of it freezes at once
    bool invariant = false;           ///< the last liquid froze at one temperature
    /// dT/d(wt%) of `end_K`, the balance element giving way: the exact slope of the last liquid's own liquidus, carried
    /// back to the alloy by its enrichment. Constant partition along the path is assumed: right in sign, off by a
    /// factor of up to three where an element changes which phase freezes (19Cr-10Ni-2.4Mo: 5 against 17 K per wt% of
    /// Mo by a difference).
    std::map<std::string, double> K_per_wt;
};

/// Freezing without diffusion in the solid, with complete mixing in the liquid, step by step with the engine's own
/// equilibria; the segregated metal begins to melt at `end_K` when it is heated again.
/// Source: G.H. Gulliver, J. Inst. Met. 9 (1913) 120-157; E. Scheil, Z. Metallkd. 34 (1942) 70-72; interstitials by the
/// lever rule: Q. Chen, B. Sundman, Mater. Trans. 43 (2002) 551-559.
/// Errors: those of Alloy; Fault::range when the alloy is not all liquid at `from_K`.
Result<FreezingPath> freeze(const Alloy& alloy, double from_K, const FreezingChoice& choice);

}  // namespace soak
