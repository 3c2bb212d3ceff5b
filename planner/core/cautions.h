// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/window.h"

namespace soak {

/// The cautions that apply to a treatment in a furnace with a quench medium, what is special to this job before what
/// holds everywhere, dangers first, at most `most`: a page that warns of everything warns of nothing.
std::vector<Caution> cautionsFor(const std::vector<Caution>& all, const Cycle& cycle, const QString& family,
                                 const Furnace& furnace, const QString& quench_medium, double setpoint_C,
                                 std::size_t most);

}  // namespace soak
