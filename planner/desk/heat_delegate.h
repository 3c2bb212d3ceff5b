// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QStyledItemDelegate>

namespace soak::desk {

/// Paints the verdict as mark and word, and the margin as a small bar around zero with its number.
class HeatDelegate : public QStyledItemDelegate {
public:
    using QStyledItemDelegate::QStyledItemDelegate;
    void paint(QPainter* painter, const QStyleOptionViewItem& option, const QModelIndex& index) const override;
    QSize sizeHint(const QStyleOptionViewItem& option, const QModelIndex& index) const override;

private:
    void paintVerdictCell(QPainter& painter, const QStyleOptionViewItem& option, const QModelIndex& index) const;
    void paintMarginCell(QPainter& painter, const QStyleOptionViewItem& option, const QModelIndex& index) const;
};

}  // namespace soak::desk
