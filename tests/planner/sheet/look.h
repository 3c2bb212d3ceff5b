// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QFontMetricsF>
#include <catch2/catch.hpp>
#include <ostream>

#include "planner/sheet/render.h"

inline std::ostream& operator<<(std::ostream& out, const QString& text) { return out << text.toStdString(); }

namespace soak {

/// The sheet, or the test fails with its error.
inline PreparedSheet prepared(const SheetContent& content, const SheetOptions& options = {}) {
    auto sheet = prepareSheet(content, options);
    if (!sheet) FAIL(sheet.error().text());
    return std::move(sheet).value();
}

/// All text of a page, one line a mark.
inline QString textOf(const Page& page) {
    QStringList lines;
    for (const TextMark& mark : page.marks.texts) lines << mark.text;
    return lines.join('\n');
}

inline QString textOf(const PreparedSheet& sheet) {
    QStringList pages;
    for (const Page& page : sheet.pages) pages << textOf(page);
    return pages.join('\n');
}

/// What the ink of a text covers, mm.
inline QRectF inkOf(const TextMark& mark, const Typesetter& typesetter) {
    const QFontMetricsF metrics(typesetter.font(mark.type));
    QRectF ink = metrics.tightBoundingRect(mark.text);
    const double free = mark.at.width() - metrics.horizontalAdvance(mark.text) * kUnit_mm;
    const double x = mark.at.left() + (mark.align == Align::left ? 0 : mark.align == Align::centre ? free / 2 : free);
    const double baseline = mark.at.top() + (mark.at.height() + metrics.capHeight() * kUnit_mm) / 2;
    return {x + ink.left() * kUnit_mm, baseline + ink.top() * kUnit_mm, ink.width() * kUnit_mm,
            ink.height() * kUnit_mm};
}

}  // namespace soak
