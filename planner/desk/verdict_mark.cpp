// SPDX-License-Identifier: GPL-3.0-or-later
#include "verdict_mark.h"

#include <QPainter>

#include "phase_colours.h"

namespace soak::desk {

void paintVerdict(QPainter& painter, const QRectF& box, Verdict verdict, const QColor& colour) {
    const double size = std::min(box.width(), box.height());
    const QRectF square(box.center() - QPointF(size / 2, size / 2), QSizeF(size, size));
    painter.save();
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(Qt::NoPen);
    painter.setBrush(colour);
    switch (verdict) {
        case Verdict::inside:
            painter.drawEllipse(square);
            break;
        case Verdict::tight:
            painter.drawPolygon(
                QPolygonF({QPointF(square.center().x(), square.top()), square.bottomRight(), square.bottomLeft()}));
            break;
        case Verdict::outside:
            painter.drawRect(square.adjusted(size / 16, size / 16, -size / 16, -size / 16));
            break;
        case Verdict::noWindow:
            painter.drawRect(QRectF(square.left(), square.top() + 0.15 * size, size, 0.24 * size));
            painter.drawRect(QRectF(square.left(), square.top() + 0.61 * size, size, 0.24 * size));
            break;
        case Verdict::notComputed: {
            const double pen = size / 7;
            painter.setPen(QPen(colour, pen));
            painter.setBrush(Qt::NoBrush);
            painter.drawEllipse(square.adjusted(pen / 2, pen / 2, -pen / 2, -pen / 2));
            break;
        }
    }
    painter.restore();
}

QColor verdictColour(Verdict verdict, bool on_dark) {
    switch (verdict) {
        case Verdict::inside:
            return on_dark ? QColor(0x1f, 0xb4, 0x8a) : QColor(0x00, 0x7f, 0x5c);
        case Verdict::tight:
            return on_dark ? QColor(0xe6, 0x9f, 0x00) : QColor(0xb3, 0x7a, 0x00);
        case Verdict::outside:
        case Verdict::noWindow:
            return on_dark ? QColor(0xf0, 0x7a, 0x2a) : QColor(0xc2, 0x4f, 0x00);
        case Verdict::notComputed:
            break;
    }
    return on_dark ? QColor(0xb0, 0xb4, 0xb8) : QColor(0x5c, 0x62, 0x68);
}

VerdictMark::VerdictMark(QWidget* parent) : QWidget(parent) {
    setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
    setVerdict(Verdict::notComputed);
}

void VerdictMark::setVerdict(Verdict verdict) {
    verdict_ = verdict;
    setAccessibleName(tr("Verdict: %1").arg(word(verdict)));
    update();
}

QSize VerdictMark::sizeHint() const { return {32, 32}; }

void VerdictMark::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    const bool on_dark = isDark(palette().color(QPalette::Window));
    paintVerdict(painter, QRectF(rect()).adjusted(2, 2, -2, -2), verdict_, verdictColour(verdict_, on_dark));
}

}  // namespace soak::desk
