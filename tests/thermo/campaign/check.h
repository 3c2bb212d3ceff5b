// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <string>
#include <vector>

#include "draw.h"

namespace soak::campaign {

/// What one case gave.
struct Outcome {
    Case drawn;
    double T = 0;  ///< K; where it was solved
    /// Each in words; empty when all is well. `wrongMinimum`: a phase below the plane, or two different energies.
    std::vector<std::string> failures;
    bool wrongMinimum = false;
    double balance = 0;  ///< largest error of mass, mole per mole of atoms
    double proof = 0;    ///< largest driving force that the independent search found, RT per mole of atoms
    int sets = 0;
};

/// Draws case `number` of `seed`, solves it and checks it.
Outcome run(const Source& source, unsigned long seed, long number, bool gas);

}  // namespace soak::campaign
