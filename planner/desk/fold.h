// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QToolButton>
#include <QWidget>

namespace soak::desk {

/// A heading that opens and closes what lies under it. Works with the keyboard: Space on the heading.
class Fold : public QWidget {
    Q_OBJECT

public:
    Fold(const QString& title, QWidget* body, QWidget* parent = nullptr);
    void setTitle(const QString& title);
    bool isOpen() const { return heading_->isChecked(); }
    void setOpen(bool open) { heading_->setChecked(open); }
    QToolButton* heading() const { return heading_; }

signals:
    void toggled(bool open);

private:
    QToolButton* heading_;
};

}  // namespace soak::desk
