// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/content.h"

#include <QRegularExpression>
#include <QStringList>
#include <algorithm>
#include <cmath>

namespace soak {
namespace {

/// Powers of ten that turn a column's number into wt%.
int shiftOf(AmountUnit unit) {
    switch (unit) {
        case AmountUnit::percent:
            return 0;
        case AmountUnit::thousandth:
            return 3;
        case AmountUnit::ppm:
            return 4;
    }
    return 0;
}

QString unitText(AmountUnit unit) {
    switch (unit) {
        case AmountUnit::percent:
            return "wt%";
        case AmountUnit::thousandth:
            return "thousandths of a wt%";
        case AmountUnit::ppm:
            return "ppm";
    }
    return {};
}

/// Not seen by the instrument, in the words of certificates (English and German).
bool isNotDetected(const QString& word) {
    static const QStringList words = {"nnw",
                                      "n.n",
                                      "nn",
                                      "n.d",
                                      "nd",
                                      "n.nw",
                                      "not detected",
                                      "trace",
                                      "traces",
                                      "tr",
                                      "not detectable",
                                      "nicht nachweisbar",
                                      "spuren",
                                      "sp"};
    return words.contains(word.endsWith('.') ? word.chopped(1) : word);
}

bool isMissing(const QString& word) {
    static const QStringList words = {
        "", "-", "--", "n.b", "n.g", "n.a", "na", "n/a", "\u2013", "\u2014", "\u2212", "not determined", "not tested"};
    return words.contains(word.size() > 1 && word.endsWith('.') ? word.chopped(1) : word);
}

bool isBalance(const QString& word) {
    static const QStringList words = {"rest", "bal", "bal.", "balance", "remainder", "basis"};
    return words.contains(word);
}

/// Takes a unit written behind the number away; nothing written leaves the column's.
QString takeUnit(QString text, AmountUnit& unit, bool& written) {
    static const QRegularExpression percent(R"(\s*(wt\.?|mass|gew\.?-?)?\s*%$)",
                                            QRegularExpression::CaseInsensitiveOption);
    static const QRegularExpression ppm(R"(\s*(wt\.?)?\s*ppm$)", QRegularExpression::CaseInsensitiveOption);
    const qsizetype before = text.size();
    if (text.contains(ppm))
        unit = AmountUnit::ppm;
    else if (text.contains(percent))
        unit = AmountUnit::percent;
    text.remove(ppm).remove(percent);
    written = text.size() != before;
    return text.trimmed();
}

bool isPlainNumber(const QString& text) {
    static const QRegularExpression plain(R"(^(\d+([.,]\d*)?|[.,]\d+)$)");
    return plain.match(text).hasMatch();
}

int decimalsOf(const QString& number) {
    const qsizetype point = number.indexOf('.');
    return point < 0 ? 0 : int(number.size() - point - 1);
}

/// "1740" in ppm -> 0.174. The shift is left to the decimal reader, so that 0.174 is the nearest double to 0.174.
double scaled(const QString& number, AmountUnit unit) {
    return QString("%1e-%2").arg(number).arg(shiftOf(unit)).toDouble();
}

/// Why something that is no plain number was refused, with an offer when there is one.
QString refusalOf(const QString& text) {
    QString letters = text;
    letters.replace(QChar('O'), QChar('0'), Qt::CaseInsensitive).replace('l', '1').replace('I', '1').replace(',', '.');
    if (isPlainNumber(letters)) return "a letter in a number: " + letters + " meant? Correct it in the file";
    static const QRegularExpression negative(R"(^[-\x{2212}]\s*\d*[.,]?\d+$)");
    if (negative.match(text).hasMatch())
        return "negative: an instrument's zero? A negative amount is never computed with; write \"<\" and the "
               "detection limit, or leave the cell empty";
    static const QRegularExpression exponent(R"(^\d+([.,]\d+)?[eE][+-]?\d+$)");
    if (exponent.match(text).hasMatch()) return "a spreadsheet's form of a number: write it out as on the certificate";
    return "not a number";
}

/// How the number came about, when it is not simply the cell's text.
QString remarkOf(const QString& text, const CellReading& cell, AmountUnit unit) {
    QStringList parts;
    if (cell.content.less_than) parts << "a bound, not a value";
    if (unit != AmountUnit::percent) parts << "given in " + unitText(unit);
    if (unit == AmountUnit::percent && cell.unit_in_cell) parts << "given with a % sign";
    if (text.contains(',')) parts << "decimal comma";
    return parts.join("; ");
}

}  // namespace

QString amountText(const Content& content) {
    if (!content.wt) return {};
    const int decimals = std::max(0, int(std::lround(-std::log10(content.digit_wt))));
    return (content.less_than ? "< " : "") + QString::number(*content.wt, 'f', decimals) + " wt%";
}

CellReading readCell(const QString& raw, AmountUnit column_unit) {
    const auto without = [&](CellKind kind, bool less_than, const QString& remark) {
        return CellReading{kind, {raw, std::nullopt, less_than, 0, remark}, false};
    };
    QString text = raw;
    text = text.replace(QChar(0x00A0), ' ').replace(QChar(0x2009), ' ').trimmed();
    const QString word = text.toLower();
    if (word.isEmpty()) return without(CellKind::missing, false, "empty: no value");
    if (isMissing(word)) return without(CellKind::missing, false, "not a zero: no value");
    if (isNotDetected(word)) return without(CellKind::not_detected, true, "not detected, no bound given: no number");
    if (isBalance(word)) return without(CellKind::balance, false, "the balance");

    static const QRegularExpression below(R"(^(<=?|\x{2264})\s*)");
    const bool censored = text.contains(below);
    text.remove(below);
    AmountUnit unit = column_unit;
    bool unit_written = false;
    text = takeUnit(text, unit, unit_written);
    if (!isPlainNumber(text)) return without(CellKind::refused, false, refusalOf(text));

    QString number = text;
    number.replace(',', '.');
    // In small units a comma before three digits may part thousands; in wt% it cannot: 1 740 % is more than all.
    static const QRegularExpression thousands(R"(^\d{1,3}[.,]\d{3}$)");
    if (unit != AmountUnit::percent && thousands.match(text).hasMatch())
        return without(CellKind::refused, false,
                       "two readings: " + number + " or " + QString(number).remove('.') + " " + unitText(unit) +
                           "? Write it without a separator");
    const double digit_wt = std::pow(10.0, -decimalsOf(number) - shiftOf(unit));
    CellReading cell{censored ? CellKind::censored : CellKind::number,
                     {raw, scaled(number, unit), censored, digit_wt, {}},
                     unit_written};
    cell.content.remark = remarkOf(text, cell, unit);
    return cell;
}

}  // namespace soak
