// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/window.h"

namespace soak {

/// The chance that all metal of the band lies inside every limit: contents drawn from the certificate's rounding and
/// the laboratory's scatter (the same draw moves every limit, through the exact slopes), the model's scatter drawn for
/// each limit by itself, limits set by people exact. Seeded: the same answer every time. Nothing without a verdict.
std::optional<double> chanceInside(const WindowAnswer& answer);

}  // namespace soak
