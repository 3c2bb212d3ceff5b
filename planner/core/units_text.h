// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

namespace soak {

// Numbers as people read them: true minus sign, thin space before the unit, differences converted by 1.8 only.

/// "−8.4", "1093.6"
QString number(double value, int decimals = 0);
/// "1093.6 °C" with a thin space
QString withUnit(double value, const QString& unit, int decimals = 0);
QString celsiusText(double temperature_C, int decimals = 0);
/// "1030 °C (1886 °F)", the controller's unit first; both rounded to whole degrees.
QString temperatureText(double temperature_C, bool fahrenheit_first = false);
/// "8 K"; as Fahrenheit "14 °F": multiplied by 1.8, never shifted by 32.
QString differenceText(double difference_K, bool fahrenheit_first = false);
/// "C, Mn and Si"
QString listed(const QStringList& words);

}  // namespace soak
