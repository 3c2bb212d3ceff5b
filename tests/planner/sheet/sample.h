// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/sheet_content.h"

namespace soak::sample {

inline TwoUnits celsius(double value_C, double value_F) { return {{value_C, 0, "°C"}, Quantity{value_F, 0, "°F"}}; }

/// A released sheet of the invented shop, with everything that a usual one has.
SheetContent solutionAnneal();
/// The same as a draft, with its reason.
SheetContent draft();
/// A vacuum furnace whose controller shows Fahrenheit; hardening, gas quench, a list of heats.
SheetContent harden();
/// Far more of everything than a page holds: long words, long lists, long sentences.
SheetContent overlong();

}  // namespace soak::sample
