// SPDX-License-Identifier: GPL-3.0-or-later
#include "start_page.h"

#include <QFileInfo>
#include <QLabel>
#include <QPushButton>
#include <QVBoxLayout>

namespace soak::desk {

StartPage::StartPage(QWidget* parent) : QWidget(parent), recent_(new QVBoxLayout) {
    auto* outer = new QHBoxLayout(this);
    auto* column = new QVBoxLayout;
    outer->addStretch(1);
    outer->addLayout(column);
    outer->addStretch(1);
    column->setSpacing(8);
    column->addStretch(2);
    auto* title = new QLabel(tr("Which setpoint keeps all of this metal right?"));
    QFont large = title->font();
    large.setPointSizeF(large.pointSizeF() * 1.6);
    large.setWeight(QFont::DemiBold);
    title->setFont(large);
    column->addWidget(title);
    auto* sentence =
        new QLabel(tr("A store holds one shop: its heats, furnaces, cycles and sheets, in one file. "
                      "To look around, start with the demonstration shop; everything in it is invented."));
    sentence->setWordWrap(true);
    sentence->setMaximumWidth(460);
    column->addWidget(sentence);
    column->addSpacing(12);
    const auto button = [&](const QString& text, void (StartPage::*wanted)()) {
        auto* made = new QPushButton(text);
        made->setMinimumHeight(36);
        made->setMaximumWidth(320);
        column->addWidget(made);
        connect(made, &QPushButton::clicked, this, wanted);
    };
    button(tr("Make a &demonstration shop…"), &StartPage::demoWanted);
    button(tr("&Open a store…"), &StartPage::openWanted);
    button(tr("Make a &new, empty store…"), &StartPage::newWanted);
    column->addSpacing(12);
    column->addLayout(recent_);
    column->addStretch(3);
}

void StartPage::setRecent(const QStringList& paths) {
    while (QLayoutItem* item = recent_->takeAt(0)) {
        delete item->widget();
        delete item;
    }
    if (paths.isEmpty()) return;
    recent_->addWidget(new QLabel(tr("Opened lately")));
    for (const QString& path : paths) {
        auto* entry = new QPushButton(QFileInfo(path).fileName());
        entry->setToolTip(path);
        entry->setFlat(true);
        entry->setMinimumHeight(32);
        entry->setMaximumWidth(320);
        connect(entry, &QPushButton::clicked, this, [this, path] { emit recentWanted(path); });
        recent_->addWidget(entry);
    }
}

}  // namespace soak::desk
