// SPDX-License-Identifier: GPL-3.0-or-later
#include "units.h"

#include <cmath>

#include "thermo/base/units.h"

namespace soak::desk {
namespace {

QString inCelsius(double celsius) { return withUnit(celsius, QStringLiteral("°C")); }
QString inFahrenheit(double celsius) { return withUnit(soak::fahrenheit(celsius), QStringLiteral("°F")); }

}  // namespace

QString percent(double fraction) {
    const double value = fraction * 100;
    return withUnit(value, QStringLiteral("%"), value >= 10 ? 0 : value >= 1 ? 1 : 2);
}

QString Units::temperature(double celsius) const { return fahrenheit ? inFahrenheit(celsius) : inCelsius(celsius); }
QString Units::otherTemperature(double celsius) const {
    return fahrenheit ? inCelsius(celsius) : inFahrenheit(celsius);
}

QString Units::difference(double kelvins) const {
    const double shown = fahrenheit ? fahrenheitDifference(kelvins) : kelvins;
    const int decimals = std::abs(shown) < 0.95 && shown != 0 ? 1 : 0;
    return withUnit(shown, fahrenheit ? QStringLiteral("°F") : QStringLiteral("K"), decimals);
}

QString Units::signedDifference(double kelvins) const {
    const QString text = difference(kelvins);
    return kelvins > 0 ? QLatin1Char('+') + text : text;
}

QStringList Units::sentences(QStringList celsius) const {
    for (QString& line : celsius) line = sentence(line);
    return celsius;
}

QString unbroken(QString text) { return text.replace(QChar(0x2009), QChar(0x202f)); }

QString causeWithoutTemperature(const Limit& limit, const Units& units) {
    if (!limit.temperature_C) return units.sentence(limit.cause);
    const QString tail = QLatin1Char(' ') + celsiusText(*limit.temperature_C);
    return units.sentence(limit.cause.endsWith(tail) ? limit.cause.chopped(tail.size()) : limit.cause);
}

QString limitTemperature(const Limit& limit, const Units& units) {
    if (!limit.temperature_C) return QStringLiteral("–");
    // 1e-6: a limit that is a whole number already must not be pushed to the next by the last bit.
    const double exact = units.fahrenheit ? fahrenheit(*limit.temperature_C) : *limit.temperature_C;
    const double safe = limit.side == Side::floor ? std::ceil(exact - 1e-6) : std::floor(exact + 1e-6);
    return withUnit(safe, units.fahrenheit ? QStringLiteral("°F") : QStringLiteral("°C"));
}

}  // namespace soak::desk
