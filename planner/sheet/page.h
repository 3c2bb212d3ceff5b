// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QBitArray>
#include <QPointF>
#include <QRectF>
#include <QString>
#include <vector>

namespace soak {

/// A page is a list of marks in mm from its top left corner: what is tested and what is painted is the same list.

struct Type {
    double size_pt = 12;
    bool bold = false;
};

enum class Align { left, centre, right };

/// One line of text, already broken. `at` is its line box; the text stands inside it.
struct TextMark {
    QRectF at;
    QString text;
    Type type;
    Align align = Align::left;
};

/// A closed or open figure. Grey levels from 0 (black) to 255 (white) only; -1 means no fill.
struct FigureMark {
    enum class Kind { line, rectangle, ellipse, polygon };
    Kind kind = Kind::line;
    QRectF at;                     ///< line: from top left to bottom right, either may have no extent
    std::vector<QPointF> corners;  ///< polygon
    double stroke_mm = 0.25;       ///< 0: no outline
    int fill_grey = -1;
    bool dashed = false;
};

struct CodeMark {
    QRectF at;
    int modules = 0;  ///< across, without the quiet zone
    QBitArray dark;   ///< row by row
};

/// Across the page, under everything else.
struct WatermarkMark {
    QString text;
};

/// Lengths in mm; moving marks is moving all of these.
struct Marks {
    std::vector<TextMark> texts;
    std::vector<FigureMark> figures;
    std::vector<CodeMark> codes;
    void move(double dx, double dy);
    void add(Marks other);
};

/// A strip of the page that is never cut.
struct Row {
    double height = 0;
    Marks marks;
};

struct Page {
    QSizeF size_mm;
    Marks marks;
    std::vector<WatermarkMark> watermarks;
};

}  // namespace soak
