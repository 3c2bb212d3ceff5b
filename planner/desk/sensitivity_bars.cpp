// SPDX-License-Identifier: GPL-3.0-or-later
#include "sensitivity_bars.h"

#include <QPainter>
#include <algorithm>
#include <cmath>

#include "phase_colours.h"

namespace soak::desk {
namespace {

constexpr size_t kAtMost = 8;
constexpr double kStep_wt = 0.01, kSmallest_K = 0.005;

/// Digits that a sensitivity deserves: two that count, none above ten.
QString perStep(double kelvins, const Units& units) {
    const double shown = units.fahrenheit ? kelvins * 1.8 : kelvins;
    const double size = std::abs(shown);
    const QString text = number(shown, size >= 10 ? 0 : size >= 1 ? 1 : 2);
    return (shown > 0 ? QStringLiteral("+") : QString()) + text + QChar(0x2009) +
           (units.fahrenheit ? QStringLiteral("°F") : QStringLiteral("K"));
}

}  // namespace

SensitivityBars::SensitivityBars(QWidget* parent) : QWidget(parent) {
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
}

void SensitivityBars::setSlopes(const std::map<std::string, double>& K_per_wt, Units units) {
    units_ = units;
    bars_.clear();
    for (const auto& [element, slope] : K_per_wt)
        if (std::abs(slope * kStep_wt) >= kSmallest_K)
            bars_.push_back({QString::fromStdString(element), slope * kStep_wt});
    std::stable_sort(bars_.begin(), bars_.end(),
                     [](const Bar& a, const Bar& b) { return std::abs(a.K) > std::abs(b.K); });
    if (bars_.size() > kAtMost) bars_.resize(kAtMost);
    QStringList spoken;
    for (const Bar& bar : bars_) spoken << tr("%1 %2").arg(bar.element, perStep(bar.K, units_));
    setAccessibleName(tr("Change of the limit for 0.01 % more: %1").arg(spoken.join(QStringLiteral(", "))));
    updateGeometry();
    update();
}

QSize SensitivityBars::sizeHint() const { return {220, int(bars_.size()) * (fontMetrics().height() + 5) + 2}; }

void SensitivityBars::paintEvent(QPaintEvent*) {
    if (bars_.empty()) return;
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const QFontMetricsF metrics(font());
    const double line = metrics.height() + 5;
    const double names = metrics.horizontalAdvance(QStringLiteral("Mo")) + 10;
    const double values = metrics.horizontalAdvance(QStringLiteral("+88.8 °F")) + 8;
    const double half = std::max(10.0, (width() - names - values) / 2), zero = names + half;
    // Nitrogen and carbon are a hundred times stronger than chromium: the root keeps the small ones visible.
    const double longest = std::sqrt(std::abs(bars_.front().K));
    const QColor ink = palette().color(QPalette::WindowText);
    const bool dark = isDark(palette().color(QPalette::Window));
    const QColor up = dark ? QColor(0xe6, 0x9f, 0x00) : QColor(0xd5, 0x5e, 0x00);
    const QColor down = dark ? QColor(0x56, 0xb4, 0xe9) : QColor(0x00, 0x72, 0xb2);
    for (size_t i = 0; i < bars_.size(); ++i) {
        const double y = double(i) * line, length = half * std::sqrt(std::abs(bars_[i].K)) / longest;
        painter.setPen(ink);
        painter.drawText(QRectF(0, y, names - 6, line), Qt::AlignLeft | Qt::AlignVCenter, bars_[i].element);
        painter.drawText(QRectF(width() - values, y, values, line), Qt::AlignRight | Qt::AlignVCenter,
                         perStep(bars_[i].K, units_));
        painter.fillRect(QRectF(bars_[i].K > 0 ? zero : zero - length, y + 4, length, line - 8),
                         bars_[i].K > 0 ? up : down);
    }
    QColor axis = ink;
    axis.setAlphaF(0.5f);
    painter.setPen(QPen(axis, 1));
    painter.drawLine(QPointF(zero, 0), QPointF(zero, double(bars_.size()) * line));
}

}  // namespace soak::desk
