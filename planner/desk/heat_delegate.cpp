// SPDX-License-Identifier: GPL-3.0-or-later
#include "heat_delegate.h"

#include <QApplication>
#include <QPainter>
#include <algorithm>
#include <cmath>

#include "heat_model.h"
#include "phase_colours.h"
#include "verdict_mark.h"

namespace soak::desk {
namespace {

constexpr double kFullBar_K = 50;  // margins beyond it fill the bar
constexpr int kRowHeight = 28;

/// The cell's own ground (selection, hover, focus) without its text.
QColor paintGround(QPainter& painter, QStyleOptionViewItem option) {
    option.text.clear();
    const QWidget* widget = option.widget;
    (widget ? widget->style() : QApplication::style())->drawControl(QStyle::CE_ItemViewItem, &option, &painter, widget);
    const bool selected = option.state & QStyle::State_Selected;
    return option.palette.color(selected ? QPalette::HighlightedText : QPalette::Text);
}

}  // namespace

void HeatDelegate::paint(QPainter* painter, const QStyleOptionViewItem& option, const QModelIndex& index) const {
    if (index.column() == HeatModel::verdictColumn)
        paintVerdictCell(*painter, option, index);
    else if (index.column() == HeatModel::marginColumn)
        paintMarginCell(*painter, option, index);
    else
        QStyledItemDelegate::paint(painter, option, index);
}

void HeatDelegate::paintVerdictCell(QPainter& painter, const QStyleOptionViewItem& option,
                                    const QModelIndex& index) const {
    QStyleOptionViewItem cell = option;
    initStyleOption(&cell, index);
    const QString text = cell.text;
    const QColor ink = paintGround(painter, cell);
    const QVariant verdict = index.data(HeatModel::verdictRole);
    if (verdict.isValid()) {
        const bool selected = option.state & QStyle::State_Selected;
        const auto value = Verdict(verdict.toInt());
        const QColor mark = selected ? ink : verdictColour(value, isDark(option.palette.color(QPalette::Base)));
        const QRectF box(option.rect.left() + 8, option.rect.center().y() - 5.5, 12, 12);
        paintVerdict(painter, box, value, mark);
    }
    painter.setPen(ink);
    painter.drawText(QRectF(option.rect).adjusted(28, 0, -2, 0), Qt::AlignLeft | Qt::AlignVCenter, text);
}

void HeatDelegate::paintMarginCell(QPainter& painter, const QStyleOptionViewItem& option,
                                   const QModelIndex& index) const {
    QStyleOptionViewItem cell = option;
    initStyleOption(&cell, index);
    const QString text = cell.text;
    const QColor ink = paintGround(painter, cell);
    const QVariant margin = index.data(HeatModel::marginRole);
    if (!margin.isValid()) return;
    const double text_width = option.fontMetrics.horizontalAdvance(QStringLiteral("+888 K")) + 8;
    const QRectF box = QRectF(option.rect).adjusted(4, 0, -6, 0);
    const QRectF bar(box.left(), box.center().y() - 4, std::max(0.0, box.width() - text_width), 8);
    const double share = std::clamp(margin.toDouble() / kFullBar_K, -1.0, 1.0), zero = bar.center().x();
    const double length = std::abs(share) * bar.width() / 2;
    const bool selected = option.state & QStyle::State_Selected;
    const auto verdict = Verdict(index.data(HeatModel::verdictRole).toInt());
    const QColor fill = selected ? ink : verdictColour(verdict, isDark(option.palette.color(QPalette::Base)));
    painter.fillRect(QRectF(share < 0 ? zero - length : zero, bar.top(), length, bar.height()), fill);
    QColor axis = ink;
    axis.setAlphaF(0.5f);
    painter.fillRect(QRectF(zero - 0.5, bar.top() - 3, 1, bar.height() + 6), axis);
    painter.setPen(ink);
    painter.drawText(box, Qt::AlignRight | Qt::AlignVCenter, text);
}

QSize HeatDelegate::sizeHint(const QStyleOptionViewItem& option, const QModelIndex& index) const {
    QSize size = QStyledItemDelegate::sizeHint(option, index);
    size.setHeight(std::max(size.height(), kRowHeight));
    return size;
}

}  // namespace soak::desk
