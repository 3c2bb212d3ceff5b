// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QPainter>

#include "planner/sheet/page.h"
#include "planner/sheet/typesetter.h"

namespace soak {

/// Paints one page. The painter's unit is the device's; `dots_per_mm` says how many make a millimetre.
/// Black, white and greys only.
void paintPage(QPainter& painter, const Page& page, const Typesetter& typesetter, double dots_per_mm);

}  // namespace soak
