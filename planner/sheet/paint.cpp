// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/paint.h"

#include <QFontMetricsF>
#include <QPainterPath>
#include <cmath>

namespace soak {
namespace {

QRectF units(const QRectF& mm) {
    return {mm.left() / kUnit_mm, mm.top() / kUnit_mm, mm.width() / kUnit_mm, mm.height() / kUnit_mm};
}

QColor grey(int level) { return QColor(level, level, level); }

void paintText(QPainter& painter, const TextMark& mark, const Typesetter& typesetter) {
    const QFont font = typesetter.font(mark.type);
    const QFontMetricsF metrics(font);
    const QRectF at = units(mark.at);
    const double free = at.width() - metrics.horizontalAdvance(mark.text);
    const double shift = mark.align == Align::left ? 0 : mark.align == Align::centre ? free / 2 : free;
    painter.setFont(font);
    painter.setPen(Qt::black);
    painter.drawText(QPointF(at.left() + shift, at.top() + (at.height() + metrics.capHeight()) / 2), mark.text);
}

void paintFigure(QPainter& painter, const FigureMark& mark) {
    QPen pen(Qt::black, mark.stroke_mm / kUnit_mm, mark.dashed ? Qt::DashLine : Qt::SolidLine, Qt::FlatCap,
             Qt::MiterJoin);
    painter.setPen(mark.stroke_mm > 0 ? pen : QPen(Qt::NoPen));
    painter.setBrush(mark.fill_grey >= 0 ? QBrush(grey(mark.fill_grey)) : QBrush(Qt::NoBrush));
    const QRectF at = units(mark.at);
    switch (mark.kind) {
        case FigureMark::Kind::line:
            painter.drawLine(at.topLeft(), at.bottomRight());
            break;
        case FigureMark::Kind::rectangle:
            painter.drawRect(at);
            break;
        case FigureMark::Kind::ellipse:
            painter.drawEllipse(at);
            break;
        case FigureMark::Kind::polygon: {
            QPolygonF polygon;
            for (const QPointF& corner : mark.corners) polygon << corner / kUnit_mm;
            painter.drawPolygon(polygon);
            break;
        }
    }
}

/// Modules of one row that touch are one rectangle: no hairlines between them on paper.
void paintCode(QPainter& painter, const CodeMark& mark) {
    constexpr int quiet = 4;  // modules of white that the standard asks for on each side
    if (mark.modules <= 0) return;
    const QRectF at = units(mark.at);
    const double module = at.width() / (mark.modules + 2 * quiet);
    QPainterPath path;
    for (int row = 0; row < mark.modules; ++row) {
        for (int from = 0; from < mark.modules; ++from) {
            if (!mark.dark.testBit(row * mark.modules + from)) continue;
            int to = from;
            while (to < mark.modules && mark.dark.testBit(row * mark.modules + to)) ++to;
            path.addRect(at.left() + (from + quiet) * module, at.top() + (row + quiet) * module, (to - from) * module,
                         module * 1.01);
            from = to;
        }
    }
    path.setFillRule(Qt::WindingFill);
    painter.fillPath(path, Qt::black);
}

/// Across the page, outlined so that a photocopier which drops the light grey still shows it.
void paintWatermark(QPainter& painter, const WatermarkMark& mark, const Page& page, const Typesetter& typesetter) {
    const double width = page.size_mm.width() / kUnit_mm, height = page.size_mm.height() / kUnit_mm;
    const QFont font = typesetter.font({200, true});
    QPainterPath letters;
    letters.addText(0, 0, font, mark.text);
    const QRectF box = letters.boundingRect();
    const double scale = 0.82 * std::hypot(width, height) / (box.width() + box.height());
    painter.save();
    painter.translate(width / 2, height / 2);
    painter.rotate(-std::atan2(height, width) * 180 / M_PI);
    painter.scale(scale, scale);
    painter.translate(-box.center());
    painter.setPen(QPen(grey(150), 35 / scale));
    painter.setBrush(grey(232));
    painter.drawPath(letters);
    painter.restore();
}

}  // namespace

void paintPage(QPainter& painter, const Page& page, const Typesetter& typesetter, double dots_per_mm) {
    painter.save();
    painter.setRenderHints(QPainter::Antialiasing | QPainter::TextAntialiasing);
    painter.scale(dots_per_mm * kUnit_mm, dots_per_mm * kUnit_mm);
    for (const WatermarkMark& mark : page.watermarks) paintWatermark(painter, mark, page, typesetter);
    for (const FigureMark& mark : page.marks.figures) paintFigure(painter, mark);
    for (const CodeMark& mark : page.marks.codes) paintCode(painter, mark);
    for (const TextMark& mark : page.marks.texts) paintText(painter, mark, typesetter);
    painter.restore();
}

}  // namespace soak
