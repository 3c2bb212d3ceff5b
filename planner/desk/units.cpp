// SPDX-License-Identifier: GPL-3.0-or-later
#include "units.h"

#include <cmath>

#include "thermo/base/units.h"

namespace soak::desk {
namespace {

const QChar kThinSpace(0x2009);
const QChar kMinus(0x2212);

QString inCelsius(double celsius) { return number(celsius) + kThinSpace + QStringLiteral("°C"); }
QString inFahrenheit(double celsius) { return number(fahrenheit(celsius)) + kThinSpace + QStringLiteral("°F"); }

}  // namespace

QString number(double value, int decimals) {
    QString text = QString::number(std::abs(value), 'f', decimals);
    const bool zero = text.toDouble() == 0;
    return value < 0 && !zero ? kMinus + text : text;
}

QString percent(double fraction) {
    const double value = fraction * 100;
    const int decimals = value >= 10 ? 0 : value >= 1 ? 1 : 2;
    return number(value, decimals) + kThinSpace + QLatin1Char('%');
}

QString Units::temperature(double celsius) const { return fahrenheit ? inFahrenheit(celsius) : inCelsius(celsius); }

QString Units::otherTemperature(double celsius) const {
    return fahrenheit ? inCelsius(celsius) : inFahrenheit(celsius);
}

QString Units::difference(double kelvins) const {
    const double shown = fahrenheit ? fahrenheitDifference(kelvins) : kelvins;
    const int decimals = std::abs(shown) < 0.95 && shown != 0 ? 1 : 0;
    return number(shown, decimals) + kThinSpace + (fahrenheit ? QStringLiteral("°F") : QStringLiteral("K"));
}

QString Units::signedDifference(double kelvins) const {
    const QString text = difference(kelvins);
    return kelvins > 0 ? QLatin1Char('+') + text : text;
}

QString limitTemperature(const Limit& limit, const Units& units) {
    if (!limit.temperature_C) return QStringLiteral("–");
    // 1e-6: a limit that is a whole number already must not be pushed to the next by the last bit.
    const double exact = units.fahrenheit ? fahrenheit(*limit.temperature_C) : *limit.temperature_C;
    const double safe = limit.side == Side::floor ? std::ceil(exact - 1e-6) : std::floor(exact + 1e-6);
    return number(safe) + kThinSpace + (units.fahrenheit ? QStringLiteral("°F") : QStringLiteral("°C"));
}

}  // namespace soak::desk
