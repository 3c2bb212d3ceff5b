// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

#include "planner/core/fahrenheit_text.h"
#include "planner/core/units_text.h"
#include "planner/core/window.h"

namespace soak::desk {

/// How temperatures are written on the screen. Differences convert by 1.8 only; in Celsius they are written in K.
struct Units {
    bool fahrenheit = false;

    /// "1060 °C" or "1940 °F", thin space before the unit, true minus sign.
    QString temperature(double celsius) const;
    /// The other scale, for the reading beside it.
    QString otherTemperature(double celsius) const;
    /// "15 K" or "27 °F"; one decimal only when the size is under 1.
    QString difference(double kelvins) const;
    /// The same with a sign in front, "+15 K".
    QString signedDifference(double kelvins) const;
    /// A sentence of core's, which speaks Celsius, in the scale that is shown.
    QString sentence(const QString& celsius) const { return fahrenheit ? inFahrenheit(celsius) : celsius; }
    QStringList sentences(QStringList celsius) const;
};

/// A share, "0.31 %": the digits grow as it gets smaller, never more than two.
QString percent(double fraction);
/// The same text with every number kept on one line with its unit: thin spaces become narrow no-break spaces.
QString unbroken(QString text);
/// "specification minimum" for "specification minimum 1040 °C", where the temperature stands beside it anyway.
QString causeWithoutTemperature(const Limit& limit, const Units& units);
/// What is shown for a limit: floors rounded up, ceilings down, in the unit that is shown.
QString limitTemperature(const Limit& limit, const Units& units);

}  // namespace soak::desk
