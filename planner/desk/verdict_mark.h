// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QColor>
#include <QRectF>
#include <QWidget>

#include "planner/core/window.h"

class QPainter;

namespace soak::desk {

/// Inside = filled circle, tight = triangle, outside = square, no window = two bars, not computed = open ring. The
/// shape carries the meaning, the colour repeats it, and the word always stands beside it.
void paintVerdict(QPainter& painter, const QRectF& box, Verdict verdict, const QColor& colour);
/// Okabe and Ito's bluish green, orange, vermilion; the ground's own grey for "not computed".
QColor verdictColour(Verdict verdict, bool on_dark);

/// The mark alone, as tall as it is asked to be.
class VerdictMark : public QWidget {
public:
    explicit VerdictMark(QWidget* parent = nullptr);
    void setVerdict(Verdict verdict);
    QSize sizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    Verdict verdict_ = Verdict::notComputed;
};

}  // namespace soak::desk
