// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <cstdio>
#include <string>

namespace soak {

/// Gas constant in J/(mol K): the value that the assessments were made with, not the later exact one.
inline constexpr double kGas = 8.31451;

inline constexpr double kelvin(double celsius) { return celsius + 273.15; }
inline constexpr double celsius(double kelvin) { return kelvin - 273.15; }
inline constexpr double fahrenheit(double celsius) { return celsius * 1.8 + 32.0; }
inline constexpr double celsiusFromFahrenheit(double fahrenheit) { return (fahrenheit - 32.0) / 1.8; }
/// "1050.0 °C" for a message, from kelvin.
inline std::string inCelsius(double kelvin) {
    char text[32];
    std::snprintf(text, sizeof text, "%.1f °C", celsius(kelvin));
    return text;
}
/// A temperature difference: multiplied by 1.8 only, never offset by 32.
inline constexpr double fahrenheitDifference(double kelvins) { return kelvins * 1.8; }

}  // namespace soak
