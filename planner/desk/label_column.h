// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <vector>

namespace soak::desk {

/// Places labels of given heights in a column, each as near as possible to where it wants its middle, none over
/// another, all between `top` and `bottom` as long as they fit. Returns the tops, in the order given. Order from
/// top to bottom follows the wishes; equal wishes keep the order given.
std::vector<double> placeLabels(const std::vector<double>& wanted_middle, const std::vector<double>& height, double top,
                                double bottom, double gap);

}  // namespace soak::desk
