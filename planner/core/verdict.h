// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/window.h"

namespace soak {

/// How far the band stays inside a limit, K; negative: beyond it. Nothing when the limit does not bind.
std::optional<double> marginTo(const Limit& limit, const Band& band);
/// The margin that the shop asks for at a limit before it is not called tight.
double neededMargin_K(const Limit& limit, const ShopRules& rules);

/// Window from the limits (sorted, binding first), then verdict, margin and reason for the band in the answer.
void decide(WindowAnswer& answer, const Furnace& furnace, const ShopRules& rules);

/// The setpoint on the controller's scale nearest to `standing_C` at which nothing is tight; where there is none, the
/// one whose smaller margin is largest; nothing when no setpoint keeps the band inside. Never beyond a limit set by
/// people.
std::optional<double> suggestSetpoint(const WindowAnswer& answer, const Furnace& furnace, const ShopRules& rules,
                                      double standing_C);

/// A furnace without an id has no band of its own: the metal is taken to be at the setpoint.
Result<Band> bandOrSetpoint(const Furnace& furnace, double setpoint_C, const ShopRules& rules);

/// Temperatures as shown: floors up, ceilings down, whole degrees.
QString shownTemperature(const Limit& limit);

}  // namespace soak
