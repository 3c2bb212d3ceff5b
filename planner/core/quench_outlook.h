// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/limits.h"
#include "planner/core/window.h"

namespace soak {

/// Ms, Mf, Bs, retained austenite and hardness of the martensite from the austenite at metal temperatures; a
/// temperature without austenite gives nothing. Ms and Bs are the middle of the published relations that are in range
/// for this composition, Mf = Ms - 215 K (W. Steven, A.G. Haynes 1956).
std::vector<QuenchOutlook> quenchOutlook(const LimitContext& context, const std::vector<double>& from_C);

}  // namespace soak
