// SPDX-License-Identifier: GPL-3.0-or-later
// How the rail is painted. The ground (ribbons, axes, ledges, labels) is painted once per view into a pixmap.
#include <QPainter>
#include <QPainterPath>
#include <algorithm>
#include <cmath>
#include <numeric>

#include "phase_colours.h"
#include "rail.h"
#include "thermo/base/units.h"
#include "verdict_mark.h"

namespace soak::desk {
namespace {

constexpr double kTickSpacing = 44, kLedgeDepth = 9;
constexpr double kLeastInLegend = 2e-4;  // less is narrower than a hair, even magnified

QColor faded(QColor colour, double alpha) {
    colour.setAlphaF(float(alpha));
    return colour;
}

QFont smaller(QFont font) {
    font.setPointSizeF(font.pointSizeF() * 0.88);
    return font;
}

QFont bolder(QFont font) {
    font.setWeight(QFont::DemiBold);
    return font;
}

/// The part of a phase between two rows of the screen where it is at least a hair wide.
QPolygonF outline(const std::vector<QPointF>& spans, size_t from, size_t to, double top) {
    QPolygonF polygon;
    for (size_t row = from; row < to; ++row) polygon << QPointF(spans[row].x(), top + double(row));
    for (size_t row = to; row-- > from;) polygon << QPointF(spans[row].y(), top + double(row));
    return polygon;
}

}  // namespace

void Rail::paintGround() {
    const double ratio = devicePixelRatioF();
    const double legend_height = QFontMetricsF(smaller(font())).height() * 2 + 10;
    layout_ = RailLayout::of(size(), QFontMetricsF(font()), legend_height);
    scale_.top = layout_.main.top();
    scale_.bottom = layout_.main.bottom();
    placeLedgeLabels();
    ground_ = QPixmap(size() * ratio);
    ground_.setDevicePixelRatio(ratio);
    ground_.fill(palette().color(QPalette::Window));
    QPainter painter(&ground_);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setFont(font());
    const Spans main = spansOf(layout_.main, false), minor = spansOf(layout_.minor, true);
    paintRibbon(painter, layout_.main, main);
    paintRibbon(painter, layout_.minor, minor);
    paintOutsideWindow(painter);
    paintPhaseNames(painter, layout_.main, main);
    paintPhaseNames(painter, layout_.minor, minor);
    for (const Ledge& ledge : ledges_) paintLedge(painter, ledge);
    paintAxes(painter);
    for (const Ledge& ledge : ledges_) paintLedgeLabel(painter, ledge);
    paintLegend(painter);
}

Rail::Spans Rail::spansOf(const QRectF& box, bool minor) const {
    const auto& labels = ribbons_.labels();
    std::vector<size_t> order(labels.size());
    std::iota(order.begin(), order.end(), size_t(0));
    if (minor)  // what the minor ribbon is for comes first; a last remnant of matrix must not push it aside
        std::stable_partition(order.begin(), order.end(), [&](size_t i) { return !phaseLook(labels[i]).matrix; });
    const size_t rows = size_t(std::max(0.0, std::floor(box.height()))) + 1;
    Spans spans(labels.size(), std::vector<QPointF>(rows));
    for (size_t row = 0; row < rows; ++row) {
        const auto fractions = ribbons_.fractionsAt(scale_.celsius(box.top() + double(row)));
        double x = box.left();
        for (const size_t i : order) {
            double share = fractions[i];
            if (minor) share = share < Ribbons::kMinorBelow ? share / Ribbons::kMinorBelow : 0;
            const double right = std::min(box.right(), x + share * box.width());
            spans[i][row] = QPointF(x, right);
            x = right;
        }
    }
    return spans;
}

void Rail::paintRibbon(QPainter& painter, const QRectF& box, const Spans& spans) {
    const QColor base = palette().color(QPalette::Base);
    const bool dark = isDark(base);
    painter.fillRect(box, base);
    const auto& labels = ribbons_.labels();
    const size_t rows = spans.empty() ? 0 : spans.front().size();
    painter.save();
    painter.setClipRect(box);
    for (size_t i = 0; i < labels.size(); ++i) {
        const PhaseLook look = phaseLook(labels[i]);
        const QColor colour = look.colour(dark);
        const QBrush hatch = hatchBrush(look.hatch, faded(readableOn(colour), 0.45), devicePixelRatioF());
        for (size_t from = 0; from < rows;) {
            if (spans[i][from].y() - spans[i][from].x() < 0.02) {
                ++from;
                continue;
            }
            size_t to = from;
            while (to < rows && spans[i][to].y() - spans[i][to].x() >= 0.02) ++to;
            const QPolygonF shape = outline(spans[i], from, to, box.top());
            painter.setPen(QPen(faded(base, 0.9), 1));
            painter.setBrush(colour);
            painter.drawPolygon(shape);
            painter.setPen(Qt::NoPen);
            painter.setBrush(hatch);
            painter.drawPolygon(shape);
            from = to;
        }
    }
    painter.restore();
    painter.setPen(QPen(faded(palette().color(QPalette::WindowText), 0.35), 1));
    painter.setBrush(Qt::NoBrush);
    painter.drawRect(box);
}

void Rail::paintPhaseNames(QPainter& painter, const QRectF& box, const Spans& spans) {
    const bool dark = isDark(palette().color(QPalette::Base));
    painter.setFont(smaller(font()));
    const QFontMetricsF metrics(painter.font());
    const size_t tall = size_t(metrics.height()) + 2;
    for (size_t i = 0; i < spans.size(); ++i) {
        const QString& label = ribbons_.labels()[i];
        const double wide = metrics.horizontalAdvance(label) + 8;
        double best = 0, best_left = 0;
        size_t best_row = 0;
        for (size_t row = 0; row + tall < spans[i].size(); row += 3) {
            double left = 0, right = 1e9;
            for (size_t k = row; k <= row + tall; k += 2) {
                left = std::max(left, spans[i][k].x());
                right = std::min(right, spans[i][k].y());
            }
            // Room beyond three times the need is no better; then the lower place wins, away from the band.
            const double room = std::min(right - left, 3 * wide);
            if (room >= wide && room >= best) best = room, best_left = (left + right - wide) / 2, best_row = row;
        }
        if (best <= 0) continue;
        const QColor colour = phaseLook(label).colour(dark);
        const QRectF place(best_left, box.top() + double(best_row) + 1, wide, double(tall));
        const bool hatched = phaseLook(label).hatch != Hatch::none;  // then the name needs a quiet ground of its own
        painter.setPen(Qt::NoPen);
        painter.setBrush(hatched ? colour : QColor(Qt::transparent));
        painter.drawRoundedRect(place, 3, 3);
        painter.setPen(hatched ? readableOn(colour) : faded(palette().color(QPalette::Text), 0.8));
        painter.drawText(place, Qt::AlignCenter, label);
    }
    painter.setFont(font());
}

void Rail::paintOutsideWindow(QPainter& painter) {
    const QColor veil = faded(palette().color(QPalette::Window), 0.5);
    const QRectF box = layout_.ribbons();
    const auto cover = [&](double from_C, double to_C) {
        const double top = std::clamp(scale_.y(to_C), box.top(), box.bottom());
        const double bottom = std::clamp(scale_.y(from_C), box.top(), box.bottom());
        painter.fillRect(QRectF(box.left(), top, box.width(), bottom - top), veil);
    };
    if (!low_C_ && !high_C_) return;
    if (low_C_) cover(scale_.low_C, *low_C_);
    if (high_C_) cover(*high_C_, scale_.high_C);
}

void Rail::paintAxes(QPainter& painter) {
    const QColor ink = palette().color(QPalette::WindowText);
    const QColor ground = palette().color(QPalette::Window);
    const QFontMetricsF metrics(font());
    const auto tick = [&](double y, const QString& text, const QRectF& column, bool left) {
        painter.setPen(QPen(faded(ink, 0.55), 1));
        const double edge = left ? column.right() : column.left();
        painter.drawLine(QPointF(edge, y), QPointF(edge + (left ? -5 : 5), y));
        const double width = metrics.horizontalAdvance(text);
        const QRectF box(left ? column.right() - 9 - width : column.left() + 9, y - metrics.height() / 2, width,
                         metrics.height());
        painter.fillRect(box.adjusted(-2, 1, 2, -1), ground);  // a ledge passing behind must not strike the number out
        painter.setPen(faded(ink, 0.8));
        painter.drawText(box, Qt::AlignCenter, text);
    };
    const double per_K = scale_.pointsPerKelvin();
    for (const double value : ticks(scale_.low_C, scale_.high_C, per_K, kTickSpacing))
        tick(scale_.y(value), number(value), layout_.celsius, true);
    for (const double value : ticks(fahrenheit(scale_.low_C), fahrenheit(scale_.high_C), per_K / 1.8, kTickSpacing))
        tick(scale_.y(celsiusFromFahrenheit(value)), number(value), layout_.fahrenheit, false);

    painter.setFont(smaller(font()));
    painter.setPen(faded(ink, 0.75));
    const auto head = [&](const QRectF& column, const QString& text, Qt::Alignment where) {
        painter.drawText(QRectF(column.left(), 2, column.width(), layout_.main.top() - 6), where | Qt::AlignBottom,
                         text);
    };
    head(layout_.celsius.adjusted(0, 0, -9, 0), QStringLiteral("°C"), Qt::AlignRight);
    head(layout_.main, tr("All phases"), Qt::AlignLeft);
    head(layout_.minor, tr("Under 5 %"), Qt::AlignLeft);
    head(layout_.fahrenheit.adjusted(9, 0, 0, 0), QStringLiteral("°F"), Qt::AlignLeft);
    head(layout_.labels, tr("Limits of the metal"), Qt::AlignLeft);
    const auto foot = [&](const QRectF& box, const QStringList& marks) {
        for (int i = 0; i < marks.size(); ++i) {
            const double x = box.left() + box.width() * i / double(marks.size() - 1);
            painter.drawLine(QPointF(x, box.bottom()), QPointF(x, box.bottom() + 3));
            const Qt::Alignment where = i == 0                  ? Qt::AlignLeft
                                        : i + 1 == marks.size() ? Qt::AlignRight
                                                                : Qt::AlignHCenter;
            const QRectF place(x - (i == 0 ? 0 : i + 1 == marks.size() ? 80 : 40), box.bottom() + 3, 80, 18);
            painter.drawText(place, where | Qt::AlignTop, marks[i]);
        }
    };
    foot(layout_.main, {QStringLiteral("0"), QStringLiteral("50"), QStringLiteral("100 vol%")});
    foot(layout_.minor, {QStringLiteral("0"), QStringLiteral("5 vol%")});
    painter.setFont(font());
}

void Rail::paintLedge(QPainter& painter, const Ledge& ledge) {
    if (ledge.beyond) return;
    const QColor ink = palette().color(QPalette::WindowText);
    const double y = scale_.y(ledge.at_C), away = ledge.side == Side::floor ? 1 : -1;
    const double left = layout_.main.left(), right = layout_.brackets.right();
    if (ledge.binding) {
        const double end = layout_.minor.right();
        const QRectF depth = QRectF(QPointF(left, y), QPointF(end, y + away * kLedgeDepth)).normalized();
        painter.fillRect(depth, faded(palette().color(QPalette::Window), 0.6));
        const Hatch hatch = ledge.side == Side::floor ? Hatch::rising : Hatch::falling;
        painter.fillRect(depth, hatchBrush(hatch, ink, devicePixelRatioF()));
        painter.setPen(QPen(ink, 2));
        painter.drawLine(QPointF(left - 4, y), QPointF(end + 4, y));
        painter.setPen(QPen(faded(ink, 0.5), 1));
        painter.drawLine(QPointF(end + 4, y), QPointF(right, y));
    } else {
        painter.setPen(QPen(faded(ink, 0.6), 1, Qt::CustomDashLine));
        QPen pen = painter.pen();
        pen.setDashPattern({4, 3});
        painter.setPen(pen);
        painter.drawLine(QPointF(left, y), QPointF(right, y));
        painter.setPen(QPen(faded(ink, 0.6), 1));
        for (double x = layout_.minor.right() - 20; x < layout_.minor.right(); x += 5)  // which side is forbidden
            painter.drawLine(QPointF(x, y + away * 5), QPointF(x + 4, y));
    }
}

void Rail::paintLedgeLabel(QPainter& painter, const Ledge& ledge) {
    const QColor ink = palette().color(QPalette::WindowText);
    const double y = std::clamp(scale_.y(ledge.at_C), layout_.labels.top(), layout_.labels.bottom());
    const double x = layout_.brackets.left() + 6 + 7 * ledge.lane;
    if (!ledge.beyond && ledge.uncertainty_K > 0) {
        painter.setPen(QPen(ink, ledge.binding ? 1.6 : 1));
        const double top = std::max(layout_.labels.top(), scale_.y(ledge.at_C + ledge.uncertainty_K));
        const double bottom = std::min(layout_.labels.bottom(), scale_.y(ledge.at_C - ledge.uncertainty_K));
        painter.drawLine(QPointF(x, top), QPointF(x, bottom));
        painter.drawLine(QPointF(x - 3, top), QPointF(x + 3, top));
        painter.drawLine(QPointF(x - 3, bottom), QPointF(x + 3, bottom));
    }
    painter.setPen(QPen(faded(ink, 0.5), 1));
    const double middle = ledge.label.center().y();
    if (!ledge.beyond) painter.drawLine(QPointF(layout_.brackets.right(), y), QPointF(ledge.label.left() - 3, middle));

    const QString arrow = !ledge.beyond                ? QString()
                          : ledge.at_C > scale_.high_C ? QStringLiteral("\u2191 ")
                                                       : QStringLiteral("\u2193 ");
    const QString what = ledge.side == Side::floor ? tr("Floor") : tr("Ceiling");
    QString head = arrow + what + QLatin1Char(' ') + ledge.temperature;
    if (ledge.uncertainty_K > 0) head += QStringLiteral(" ±") + units_.difference(ledge.uncertainty_K);
    painter.setPen(ledge.binding ? ink : faded(ink, 0.72));
    painter.setFont(ledge.binding ? bolder(font()) : smaller(font()));
    const QFontMetricsF head_metrics(painter.font());
    QRectF line(ledge.label.left(), ledge.label.top(), ledge.label.width(), head_metrics.height());
    painter.drawText(line, Qt::AlignLeft | Qt::AlignVCenter,
                     head_metrics.elidedText(head, Qt::ElideRight, line.width()));
    painter.setFont(smaller(font()));
    const QFontMetricsF cause_metrics(painter.font());
    line = QRectF(line.left(), line.bottom(), line.width(), cause_metrics.height());
    painter.drawText(line, Qt::AlignLeft | Qt::AlignVCenter,
                     cause_metrics.elidedText(ledge.cause, Qt::ElideRight, line.width()));
    painter.setFont(font());
}

void Rail::paintLegend(QPainter& painter) {
    const bool dark = isDark(palette().color(QPalette::Base));
    painter.setFont(smaller(font()));
    const QFontMetricsF metrics(painter.font());
    const double line = metrics.height() + 3;
    double x = layout_.legend.left(), y = layout_.legend.top() + 2;
    const auto& labels = ribbons_.labels();
    std::vector<bool> seen(labels.size(), false);
    for (double at = scale_.top; at <= scale_.bottom; at += 2) {
        const auto fractions = ribbons_.fractionsAt(scale_.celsius(at));
        for (size_t i = 0; i < labels.size(); ++i)
            if (fractions[i] > kLeastInLegend) seen[i] = true;
    }
    for (size_t i = 0; i < labels.size(); ++i) {
        if (!seen[i]) continue;
        const double width = 18 + metrics.horizontalAdvance(labels[i]) + 14;
        if (x + width > layout_.legend.right()) x = layout_.legend.left(), y += line;
        const PhaseLook look = phaseLook(labels[i]);
        const QRectF swatch(x, y + 2, 13, metrics.height() - 4);
        painter.setPen(QPen(faded(palette().color(QPalette::WindowText), 0.4), 1));
        painter.setBrush(look.colour(dark));
        painter.drawRect(swatch);
        painter.fillRect(swatch,
                         hatchBrush(look.hatch, faded(readableOn(look.colour(dark)), 0.5), devicePixelRatioF()));
        painter.setPen(faded(palette().color(QPalette::WindowText), 0.85));
        painter.drawText(QPointF(x + 18, y + metrics.ascent()), labels[i]);
        x += width;
    }
    painter.setFont(font());
}

void Rail::paintBand(QPainter& painter) {
    const QColor base = palette().color(QPalette::Base), ink = palette().color(QPalette::WindowText);
    const QRectF ribbons = layout_.ribbons();
    const QRectF clip(0, ribbons.top() - 1, layout_.fahrenheit.right(), ribbons.height() + 2);
    painter.save();
    painter.setClipRect(clip.adjusted(0, -12, 0, 12));
    const QRectF block(ribbons.left() - 5, scale_.y(band_.high_C), ribbons.width() + 10,
                       std::max(3.0, scale_.y(band_.low_C) - scale_.y(band_.high_C)));
    painter.setPen(QPen(ink, 1.6));
    painter.setBrush(faded(base, 0.62));
    painter.drawRoundedRect(block, 4, 4);
    const QColor alarm = verdictColour(Verdict::outside, isDark(base));
    const auto wrong = [&](double from_C, double to_C) {  // the part of the band that the window does not hold
        if (to_C <= from_C) return;
        const QRectF part(block.left() + 1, scale_.y(to_C), block.width() - 2, scale_.y(from_C) - scale_.y(to_C));
        painter.fillRect(part, faded(alarm, 0.3));
        painter.fillRect(part, hatchBrush(Hatch::crossed, faded(alarm, 0.9), devicePixelRatioF()));
    };
    if (low_C_) wrong(band_.low_C, std::min(*low_C_, band_.high_C));
    if (high_C_) wrong(std::max(*high_C_, band_.low_C), band_.high_C);

    const double y = scale_.y(setpoint_C_);
    painter.setPen(QPen(palette().color(QPalette::Highlight), 2.5));
    painter.drawLine(QPointF(layout_.celsius.right() - 4, y), QPointF(layout_.fahrenheit.left() + 4, y));
    painter.setPen(QPen(ink, 1.4));
    for (const double dy : {-5.0, 5.0}) {  // a grip, so that the block looks as if it could be moved
        if (block.height() < 16) break;
        painter.drawLine(QPointF(ribbons.center().x() - 12, y + dy), QPointF(ribbons.center().x() + 12, y + dy));
    }
    paintTag(painter, layout_.celsius, number(setpoint_C_), true);
    paintTag(painter, layout_.fahrenheit, number(fahrenheit(setpoint_C_)), false);
    painter.restore();
}

void Rail::paintTag(QPainter& painter, const QRectF& column, const QString& text, bool points_right) {
    painter.setFont(bolder(font()));
    const QFontMetricsF metrics(painter.font());
    const double y = scale_.y(setpoint_C_), half = metrics.height() / 2 + 3;
    const QRectF box = points_right ? QRectF(column.left() + 1, y - half, column.width() - 9, 2 * half)
                                    : QRectF(column.left() + 8, y - half, column.width() - 9, 2 * half);
    const double base_x = points_right ? box.right() - 1 : box.left() + 1;
    const double tip_x = points_right ? column.right() - 1 : column.left() + 1;
    QPainterPath shape;
    shape.addRoundedRect(box, 3, 3);
    QPainterPath nose;
    nose.addPolygon(QPolygonF({QPointF(base_x, y - half + 4), QPointF(tip_x, y), QPointF(base_x, y + half - 4)}));
    nose.closeSubpath();
    painter.setPen(Qt::NoPen);
    painter.setBrush(palette().color(QPalette::Highlight));
    painter.drawPath(shape.united(nose));
    painter.setPen(palette().color(QPalette::HighlightedText));
    painter.drawText(box, Qt::AlignCenter, text);
}

void Rail::paintEmpty(QPainter& painter) {
    painter.fillRect(rect(), palette().color(QPalette::Window));
    painter.setPen(faded(palette().color(QPalette::WindowText), 0.8));
    painter.drawText(QRectF(rect()).adjusted(40, 40, -40, -40), Qt::AlignCenter | Qt::TextWordWrap, sentence_);
}

void Rail::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    if (!sentence_.isEmpty()) {
        paintEmpty(painter);
        return;
    }
    if (ground_.isNull()) paintGround();
    painter.drawPixmap(0, 0, ground_);
    if (hover_C_ && drag_ == Drag::none) {
        painter.setPen(QPen(faded(palette().color(QPalette::WindowText), 0.35), 1, Qt::DotLine));
        const double y = scale_.y(*hover_C_);
        painter.drawLine(QPointF(layout_.main.left(), y), QPointF(layout_.minor.right(), y));
    }
    paintBand(painter);
    if (hasFocus()) {
        painter.setPen(QPen(palette().color(QPalette::Highlight), 1));
        painter.setBrush(Qt::NoBrush);
        painter.drawRoundedRect(QRectF(rect()).adjusted(0.5, 0.5, -0.5, -0.5), 3, 3);
    }
}

}  // namespace soak::desk
