// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "base/result.h"

namespace soak {

/// Whether a number can be the temperature of an equilibrium in °C. Fault::range, with the reading in °F or K that
/// would make sense, for one that no furnace reaches.
Result<Done> checkCalculationTemperature(double temperature_C);

/// The same for a furnace's setpoint when no furnace is named.
Result<Done> checkSetpoint(double setpoint_C);

}  // namespace soak
