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
    bool isOpen() const { return open_; }
    void setOpen(bool open);
    QToolButton* heading() const { return heading_; }

signals:
    void toggled(bool open);

private:
    QToolButton* heading_;
    QWidget* body_;
    bool open_ = false;
};

}  // namespace soak::desk
