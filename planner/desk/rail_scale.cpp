// SPDX-License-Identifier: GPL-3.0-or-later
#include "rail_scale.h"

#include <algorithm>
#include <cmath>

#include "thermo/base/units.h"

namespace soak::desk {
namespace {

constexpr double kAround_K = 150, kNarrowest_K = 20;

void stretch(Range_C& range, double at_C) {
    range.low = std::min(range.low, at_C);
    range.high = std::max(range.high, at_C);
}

/// The limit that comes first among those that have a temperature.
std::optional<double> binding(const std::vector<Limit>& limits) {
    for (const Limit& limit : limits)
        if (limit.temperature_C) return limit.temperature_C;
    return {};
}

Range_C bandRange(const WindowAnswer& answer) {
    Range_C range{answer.setpoint_C, answer.setpoint_C};
    if (answer.band.low_C < answer.band.high_C) stretch(range, answer.band.low_C), stretch(range, answer.band.high_C);
    return range;
}

}  // namespace

Range_C openingRange(const WindowAnswer& answer) {
    Range_C range = bandRange(answer);
    if (const auto floor = binding(answer.floors)) stretch(range, *floor);
    if (const auto ceiling = binding(answer.ceilings)) stretch(range, *ceiling);
    const Range_C outer = fullRange(answer);
    return {std::max(range.low - kAround_K, outer.low), std::min(range.high + kAround_K, outer.high)};
}

Range_C fullRange(const WindowAnswer& answer) {
    Range_C range = bandRange(answer);
    for (const auto* limits : {&answer.floors, &answer.ceilings})
        for (const Limit& limit : *limits)
            if (limit.temperature_C) stretch(range, *limit.temperature_C);
    stretch(range, range.low - kNarrowest_K), stretch(range, range.high + kNarrowest_K);
    if (answer.sweep && !answer.sweep->states.empty()) {
        stretch(range, celsius(answer.sweep->states.front().temperature_K));
        stretch(range, celsius(answer.sweep->states.back().temperature_K));
    }
    return range;
}

Range_C zoomed(Range_C range, double about_C, double factor, Range_C outer) {
    const double width = std::clamp((range.high - range.low) * factor, kNarrowest_K, outer.high - outer.low);
    const double share = (about_C - range.low) / (range.high - range.low);
    const double low = about_C - share * width;
    return shifted({low, low + width}, 0, outer);
}

Range_C shifted(Range_C range, double kelvins, Range_C outer) {
    const double width = range.high - range.low;
    const double low = std::clamp(range.low + kelvins, outer.low, std::max(outer.low, outer.high - width));
    return {low, low + width};
}

std::vector<double> ticks(double low, double high, double points_per_unit, double spacing) {
    const double wanted = spacing / points_per_unit;
    const double power = std::pow(10, std::floor(std::log10(wanted)));
    double step = 10 * power;
    for (const double factor : {1.0, 2.0, 2.5, 5.0}) {
        if (factor == 2.5 && power < 10) continue;  // 25 reads well, 2.5 does not
        if (factor * power >= wanted) {
            step = factor * power;
            break;
        }
    }
    std::vector<double> values;
    for (double value = std::ceil(low / step) * step; value <= high; value += step) values.push_back(value);
    return values;
}

}  // namespace soak::desk
