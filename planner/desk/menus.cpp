// SPDX-License-Identifier: GPL-3.0-or-later
// The main window's menus: everything that can be done, with its keys.
#include <QMenuBar>
#include <QMessageBox>
#include <QTableView>

#include "answer_panel.h"
#include "heat_panel.h"
#include "main_window.h"
#include "rail.h"

namespace soak::desk {

void MainWindow::buildMenus() {
    buildFileMenu();
    buildSheetMenu();
    buildViewMenu();
    QMenu* help = menuBar()->addMenu(tr("&Help"));
    help->addAction(tr("&Keys"), QKeySequence(Qt::Key_F1), this,
                    [this] { QMessageBox::information(this, tr("Keys"), rail_->whatsThis()); });
    help->addAction(tr("&About Soakwright"), this, [this] {
        QMessageBox::about(
            this, tr("About Soakwright"),
            tr("<b>Soakwright %1</b><p>Plans heat-treatment windows from a heat's chemistry. It advises; a "
               "responsible person decides and signs. Site procedures, the equipment makers' "
               "instructions, local codes and licensed practice come first.</p>"
               "<p>GNU General Public License, version 3 or later.</p>")
                .arg(QStringLiteral(SOAKWRIGHT_VERSION)));
    });
}

void MainWindow::buildFileMenu() {
    QMenu* file = menuBar()->addMenu(tr("&File"));
    file->addAction(tr("&Open store…"), QKeySequence::Open, this, &MainWindow::chooseStore);
    recent_menu_ = file->addMenu(tr("Open &recent"));
    file->addAction(tr("&New store…"), QKeySequence::New, this, [this] { makeStore(false); });
    file->addAction(tr("New &demonstration shop…"), this, [this] { makeStore(true); });
    file->addSeparator();
    store_actions_ << file->addAction(tr("&Import certificate…"), QKeySequence(Qt::CTRL | Qt::Key_I), this,
                                      &MainWindow::chooseCertificate);
    store_actions_ << file->addAction(tr("&Judge all heats again"), QKeySequence(Qt::Key_F5), heats_,
                                      &HeatPanel::judgeAll);
    file->addSeparator();
    file->addAction(tr("&Quit"), QKeySequence::Quit, this, &QWidget::close);
    for (QAction* action : store_actions_) action->setEnabled(false);
}

void MainWindow::buildViewMenu() {
    QMenu* view = menuBar()->addMenu(tr("&View"));
    view->addAction(tr("&Search heats"), QKeySequence::Find, heats_, &HeatPanel::focusSearch);
    view->addAction(tr("&List of heats"), QKeySequence(Qt::CTRL | Qt::Key_L), this,
                    [this] { heats_->table()->setFocus(); });
    view->addAction(tr("&Temperature rail"), QKeySequence(Qt::CTRL | Qt::Key_R), this, [this] { rail_->setFocus(); });
    view->addSeparator();
    view->addAction(tr("Zoom &in"), QKeySequence::ZoomIn, rail_, &Rail::zoomIn);
    view->addAction(tr("Zoom &out"), QKeySequence::ZoomOut, rail_, &Rail::zoomOut);
    view->addAction(tr("Zoom to the &window"), QKeySequence(Qt::CTRL | Qt::Key_0), rail_, &Rail::showWindow);
    view->addAction(tr("Zoom to &all temperatures"), QKeySequence(Qt::CTRL | Qt::Key_9), rail_, &Rail::showAll);
    view->addSeparator();
    fahrenheit_action_ = view->addAction(tr("Temperatures in °&F"));
    fahrenheit_action_->setCheckable(true);
    connect(fahrenheit_action_, &QAction::toggled, this, &MainWindow::setFahrenheit);
}

}  // namespace soak::desk
