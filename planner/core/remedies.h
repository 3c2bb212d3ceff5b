// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/window.h"

namespace soak {

/// What would move an answer that is not inside: the setpoint, another furnace, a better class, the chemistry (which
/// elements, how much), the specification, the decision rule, a smaller safety margin, a surer number; or one that says
/// that nothing here will. Best first. Empty for an answer that is inside.
///   others   further furnaces of the shop, judged at their own best setpoint
std::vector<Remedy> remediesFor(const WindowAnswer& answer, const Furnace& furnace, const std::vector<Furnace>& others,
                                const QStringList& cycle_furnaces, const ShopRules& rules);

}  // namespace soak
