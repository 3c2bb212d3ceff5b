// SPDX-License-Identifier: GPL-3.0-or-later
#include "fold.h"

#include <QVBoxLayout>
#include <utility>

namespace soak::desk {

Fold::Fold(const QString& title, QWidget* body, QWidget* parent)
    : QWidget(parent), heading_(new QToolButton), body_(body) {
    heading_->setAutoRaise(true);
    heading_->setToolButtonStyle(Qt::ToolButtonTextBesideIcon);
    heading_->setArrowType(Qt::RightArrow);
    heading_->setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
    heading_->setMinimumHeight(32);
    heading_->setFocusPolicy(Qt::StrongFocus);
    setTitle(title);
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(0);
    column->addWidget(heading_);
    column->addWidget(body);
    body->setContentsMargins(20, 0, 4, 8);
    body->hide();
    connect(heading_, &QToolButton::clicked, this, [this] { setOpen(!isOpen()); });
}

void Fold::setOpen(bool open) {
    heading_->setArrowType(open ? Qt::DownArrow : Qt::RightArrow);
    body_->setVisible(open);
    if (std::exchange(open_, open) != open) emit toggled(open);
}

void Fold::setTitle(const QString& title) {
    heading_->setText(title);
    heading_->setAccessibleName(title);
}

}  // namespace soak::desk
