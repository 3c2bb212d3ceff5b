// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <vector>

#include "planner/core/window.h"

namespace soak::desk {

/// The upright temperature axis: degrees Celsius to points on the screen, hot is up.
struct RailScale {
    double low_C = 0, high_C = 1;  ///< at the bottom and the top
    double top = 0, bottom = 1;    ///< y of the two, top < bottom

    double y(double celsius) const { return bottom - (celsius - low_C) / (high_C - low_C) * (bottom - top); }
    double celsius(double at_y) const { return low_C + (bottom - at_y) / (bottom - top) * (high_C - low_C); }
    double pointsPerKelvin() const { return (bottom - top) / (high_C - low_C); }
    bool shows(double at_C) const { return at_C >= low_C && at_C <= high_C; }
};

struct Range_C {
    double low = 0, high = 0;
};

/// Where the axis opens: the window (or, without one, the limits that cross) and the band, with 150 K on each side.
Range_C openingRange(const WindowAnswer& answer);
/// Everything: the whole sweep, every limit, the band.
Range_C fullRange(const WindowAnswer& answer);
/// Zoomed about a temperature; never narrower than 20 K nor wider than `outer`.
Range_C zoomed(Range_C range, double about_C, double factor, Range_C outer);
/// Shifted by `kelvins`, kept within `outer`.
Range_C shifted(Range_C range, double kelvins, Range_C outer);

/// Round values between two readings, at least `spacing` points apart: 1, 2 or 5 times a power of ten, and 25s.
std::vector<double> ticks(double low, double high, double points_per_unit, double spacing);

}  // namespace soak::desk
