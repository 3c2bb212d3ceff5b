// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QWidget>

class QVBoxLayout;

namespace soak::desk {

/// What stands in the window while no store is open: what to do first.
class StartPage : public QWidget {
    Q_OBJECT

public:
    explicit StartPage(QWidget* parent = nullptr);
    void setRecent(const QStringList& paths);

signals:
    void demoWanted();
    void newWanted();
    void openWanted();
    void recentWanted(const QString& path);

private:
    QVBoxLayout* recent_;
};

}  // namespace soak::desk
