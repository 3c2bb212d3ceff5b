// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/units_text.h"

#include <QStringList>
#include <cmath>

#include "base/units.h"

namespace soak {

QString number(double value, int decimals) {
    const QString digits = QString::number(std::abs(value), 'f', decimals);
    const bool is_zero = digits.toDouble() == 0.0;  // no "−0"
    return value < 0 && !is_zero ? QStringLiteral("\u2212") + digits : digits;
}

QString withUnit(double value, const QString& unit, int decimals) {
    return number(value, decimals) + QChar(0x2009) + unit;
}

QString celsiusText(double temperature_C, int decimals) {
    return withUnit(temperature_C, QStringLiteral("°C"), decimals);
}

QString temperatureText(double temperature_C, bool fahrenheit_first) {
    const QString in_C = celsiusText(temperature_C);
    const QString in_F = withUnit(fahrenheit(temperature_C), QStringLiteral("°F"));
    return fahrenheit_first ? in_F + " (" + in_C + ")" : in_C + " (" + in_F + ")";
}

QString differenceText(double difference_K, bool fahrenheit_first) {
    return fahrenheit_first ? withUnit(fahrenheitDifference(difference_K), QStringLiteral("°F"))
                            : withUnit(difference_K, QStringLiteral("K"));
}

QString listed(const QStringList& words) {
    if (words.size() < 2) return words.join(QString());
    return words.mid(0, words.size() - 1).join(", ") + " and " + words.last();
}

}  // namespace soak
