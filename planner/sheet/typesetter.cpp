// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/typesetter.h"

#include <QFontDatabase>
#include <QFontMetricsF>
#include <QRegularExpression>
#include <algorithm>
#include <cmath>

namespace soak {
namespace {

/// A number and its unit keep together: a thin space between them, which is no place to break.
QString bound(QString text) {
    static const QRegularExpression gap(
        "(?<=[0-9]) (?=(?:(?:°C|°F|K|mm|m|s|min|h|kg|bar|mbar|Pa|MPa|HB|HRC|HV)\\b|%))");
    return text.replace(gap, QString(QChar(0x2009)));
}

/// Line ends and tabs become spaces; other control and direction characters, which could hide or turn a text, go.
QString printable(const QString& text) {
    QString clean;
    for (const QChar letter : text) {
        if (letter.category() == QChar::Other_Control || letter == QChar::LineSeparator)
            clean += ' ';
        else if (letter.category() != QChar::Other_Format)
            clean += letter;
    }
    return clean;
}

}  // namespace

Result<Typesetter> Typesetter::of(const Layout& layout, double leading) {
    for (const QString& family : layout.fonts) {
        if (!QFontDatabase::hasFamily(family)) continue;
        Typesetter typesetter;
        typesetter.family_ = family;
        typesetter.leading_ = leading;
        return typesetter;
    }
    return Error{Fault::data,
                 ("none of the sheet's font families is installed: " + layout.fonts.join(", ") +
                  "; install the Debian package fonts-open-sans")
                     .toStdString(),
                 "",
                 {}};
}

QFont Typesetter::font(Type type) const {
    QFont font(family_);
    font.setPixelSize(int(std::lround(type.size_pt * kPoint_mm / kUnit_mm)));
    font.setWeight(type.bold ? QFont::Bold : QFont::Normal);
    font.setHintingPreference(QFont::PreferNoHinting);
    font.setStyleStrategy(QFont::PreferOutline);
    return font;
}

double Typesetter::width_mm(const QString& text, Type type) const {
    return QFontMetricsF(font(type)).horizontalAdvance(text) * kUnit_mm;
}

double Typesetter::capHeight_mm(Type type) const { return QFontMetricsF(font(type)).capHeight() * kUnit_mm; }

double Typesetter::sizeForDigits_pt(double height_mm) const {
    const Type probe{100, true};
    // A round figure overshoots; the flat-topped capital is the height that the eye takes.
    return height_mm / capHeight_mm(probe) * probe.size_pt;
}

bool Typesetter::hasTabularFigures() const {
    for (const bool bold : {false, true}) {
        const Type type{48, bold};
        for (const QChar digit : QStringLiteral("123456789"))
            if (std::abs(width_mm(digit, type) - width_mm("0", type)) > kUnit_mm) return false;
    }
    return true;
}

QStringList Typesetter::lines(const QString& text, Type type, double width, double indent) const {
    const QFontMetricsF metrics(font(type));
    double room = (width - indent) / kUnit_mm;
    QStringList lines;
    QString line;
    const auto close = [&](const QString& full) {
        lines << full;
        room = width / kUnit_mm;
    };
    for (QString word : bound(printable(text)).split(' ', Qt::SkipEmptyParts)) {
        const QString longer = line.isEmpty() ? word : line + ' ' + word;
        if (metrics.horizontalAdvance(longer) <= room) {
            line = longer;
            continue;
        }
        if (!line.isEmpty()) close(line);
        while (word.size() > 1 && metrics.horizontalAdvance(word) > room) {
            qsizetype fits = 1;
            while (fits < word.size() && metrics.horizontalAdvance(word.left(fits + 1)) <= room) ++fits;
            if (word[fits - 1].isHighSurrogate()) ++fits;
            close(word.left(fits));
            word.remove(0, fits);
        }
        line = word;
    }
    lines << line;
    return lines;
}

std::vector<Row> Typesetter::paragraph(const QString& text, Type type, double x, double width, Align align) const {
    std::vector<Row> rows;
    for (const QString& line : lines(text, type, width)) {
        Row row{lineHeight_mm(type), {}};
        row.marks.texts.push_back({QRectF(x, 0, width, row.height), line, type, align});
        rows.push_back(std::move(row));
    }
    return rows;
}

Row stacked(const std::vector<Row>& rows, double gap_mm) {
    Row whole;
    for (const Row& row : rows) {
        if (whole.height > 0) whole.height += gap_mm;
        Marks marks = row.marks;
        marks.move(0, whole.height);
        whole.marks.add(std::move(marks));
        whole.height += row.height;
    }
    return whole;
}

double heightOf(const std::vector<Row>& rows) {
    double height = 0;
    for (const Row& row : rows) height += row.height;
    return height;
}

void append(std::vector<Row>& to, std::vector<Row> rows) {
    for (Row& row : rows) to.push_back(std::move(row));
}

Row space(double height_mm) { return Row{height_mm, {}}; }

}  // namespace soak
