// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/planner.h"

namespace soak {

/// One heat that wants into a charge, judged in the furnace of the charge.
struct LoadItem {
    QString heat, cycle, cooling;  ///< heats that cool in different ways never share a charge
    WindowAnswer answer;
};

/// Heats that can share one charge at one setpoint.
struct LoadGroup {
    std::vector<int> items;
    double setpoint_C = 0;
    double low_C = 0, high_C = 0;    ///< the setpoints that serve all of them
    double margin_K = 0;             ///< the smallest, at the setpoint
    bool tight = false;              ///< some margin is smaller than the shop asks for
    QString lower_by, upper_by;      ///< "F2407/1: specification minimum 1100 °C": who sets the range
    std::optional<double> soak_min;  ///< the longest of the group by the shop's rules
};

struct LoadPlan {
    std::vector<LoadGroup> groups;                  ///< the fewest
    std::vector<std::pair<int, QString>> left_out;  ///< heats that no setpoint of this furnace serves, and why
    QStringList why_apart;                          ///< one sentence for each pair of neighbouring groups
};

/// The fewest groups: each heat allows a range of setpoints (its window after the shop's margins, which contain its
/// uncertainty); as few setpoints as possible are placed so that every range holds one (taking the lowest upper end
/// each time is optimal for intervals).
LoadPlan planLoads(const std::vector<LoadItem>& items, const Furnace& furnace, const ShopRules& rules);

}  // namespace soak
