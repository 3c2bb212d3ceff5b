// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/fahrenheit_text.h"

#include <QRegularExpression>

#include "base/units.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

/// "1040", "−8.4": a number of a sentence and the decimals that it shows.
struct Shown {
    double value = 0;
    int decimals = 0;
};
Shown shown(QString digits) {
    digits.replace(QChar(0x2212), QLatin1Char('-'));
    const qsizetype point = digits.indexOf(QLatin1Char('.'));
    return {digits.toDouble(), point < 0 ? 0 : int(digits.size() - point - 1)};
}

QString asFahrenheit(const QString& digits) {
    const Shown from = shown(digits);
    return number(fahrenheit(from.value), from.decimals);
}

}  // namespace

QString inFahrenheit(const QString& sentence) {
    // 1: Fahrenheit that stands there already; 2: start of a range, 3: its word, 4: a temperature; 5: a difference.
    static const QRegularExpression pattern(
        QStringLiteral("(\\d+(?:\\.\\d+)?\\s?°F) \\([^()]*°C\\)|"
                       "(?:([−-]?\\d+(?:\\.\\d+)?)( to | and |–|-))?([−-]?\\d+(?:\\.\\d+)?)\\s?°C|"
                       "([−-]?\\d+(?:\\.\\d+)?)\\s?K\\b"),
        QRegularExpression::UseUnicodePropertiesOption);
    QString text;
    qsizetype from = 0;
    for (auto found = pattern.globalMatch(sentence); found.hasNext();) {
        const QRegularExpressionMatch match = found.next();
        text += sentence.mid(from, match.capturedStart() - from);
        from = match.capturedEnd();
        if (match.hasCaptured(1)) {
            text += match.captured(1);
        } else if (match.hasCaptured(5)) {
            const Shown kelvins = shown(match.captured(5));
            text += withUnit(fahrenheitDifference(kelvins.value), QStringLiteral("°F"), kelvins.decimals);
        } else {
            if (match.hasCaptured(2)) text += asFahrenheit(match.captured(2)) + match.captured(3);
            text += asFahrenheit(match.captured(4)) + QChar(0x2009) + QStringLiteral("°F");
        }
    }
    return text + sentence.mid(from);
}

}  // namespace soak
