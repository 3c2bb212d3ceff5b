// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/plausible.h"

#include <QString>

#include "base/units.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

// Steel is cast below 1700 degC and treated below 1350 degC; larger numbers are degF or K. The least is room
// temperature, rounded down (common practice).
constexpr double kLeast_C = 0, kHottestMelt_C = 1800, kHottestFurnace_C = 1400;

Result<Done> within(double temperature_C, double highest_C) {
    if (temperature_C >= kLeast_C && temperature_C <= highest_C) return Done{};
    QString message = QString("%1 is outside %2 to %3")
                          .arg(celsiusText(temperature_C), celsiusText(kLeast_C), celsiusText(highest_C));
    const double from_F = celsiusFromFahrenheit(temperature_C);
    if (temperature_C > highest_C && from_F <= highest_C)
        message += QString("; did you mean %1? That is %2").arg(withUnit(temperature_C, "°F"), celsiusText(from_F));
    return Error{Fault::range, message.toStdString(), {}, {}};
}

}  // namespace

Result<Done> checkCalculationTemperature(double temperature_C) { return within(temperature_C, kHottestMelt_C); }
Result<Done> checkSetpoint(double setpoint_C) { return within(setpoint_C, kHottestFurnace_C); }

}  // namespace soak
