// SPDX-License-Identifier: GPL-3.0-or-later
// The main window's sheets: issue, preview and print, save as PDF. Core fills the sheet, the sheet room lays it out.
#include <QActionGroup>
#include <QFileDialog>
#include <QFileInfo>
#include <QInputDialog>
#include <QMenuBar>
#include <QPrintPreviewDialog>
#include <QPrinter>
#include <QSettings>
#include <QStatusBar>

#include "db/store.h"
#include "main_window.h"
#include "planner/core/sheet_issue.h"
#include "planner/sheet/render.h"

namespace soak::desk {
namespace {

const QString kPaper = QStringLiteral("paper"), kSecondLanguage = QStringLiteral("second_language"),
              kName = QStringLiteral("name");

SheetOptions optionsAtHand() {
    const QSettings settings;
    SheetOptions options;
    options.paper = settings.value(kPaper).toString() == QStringLiteral("letter") ? Paper::letter : Paper::a4;
    options.second_language = settings.value(kSecondLanguage).toString();
    return options;
}

/// A submenu of which one entry holds; the choice is kept under `key`.
void addChoice(QMenu* menu, const QString& key, const QList<std::pair<QString, QString>>& entries) {
    auto* group = new QActionGroup(menu);
    const QString now = QSettings().value(key, entries.front().second).toString();
    for (const auto& [text, value] : entries) {
        QAction* action = menu->addAction(text);
        action->setCheckable(true);
        action->setChecked(value == now);
        group->addAction(action);
        QObject::connect(action, &QAction::triggered, menu, [key, value = value] { QSettings().setValue(key, value); });
    }
}

QString fileName(const WindowAnswer& answer, const std::optional<SheetContent>& issued) {
    const QString name =
        issued ? issued->number + QLatin1Char('-') + issued->revision : QStringLiteral("draft-") + answer.heat;
    return QString(name).replace(QLatin1Char('/'), QLatin1Char('_')) + QStringLiteral(".pdf");
}

}  // namespace

void MainWindow::buildSheetMenu() {
    QMenu* sheet = menuBar()->addMenu(tr("&Sheet"));
    answer_actions_ << sheet->addAction(tr("&Issue…"), QKeySequence(Qt::CTRL | Qt::Key_Return), this,
                                        &MainWindow::issue)
                    << sheet->addAction(tr("&Preview and print…"), QKeySequence::Print, this, &MainWindow::preview)
                    << sheet->addAction(tr("Save as P&DF…"), QKeySequence(Qt::CTRL | Qt::SHIFT | Qt::Key_P), this,
                                        &MainWindow::savePdf);
    for (QAction* action : answer_actions_) action->setEnabled(false);
    sheet->addSeparator();
    addChoice(sheet->addMenu(tr("P&aper")), kPaper,
              {{tr("A4"), QStringLiteral("a4")}, {tr("Letter"), QStringLiteral("letter")}});
    addChoice(sheet->addMenu(tr("Second &language")), kSecondLanguage,
              {{tr("None"), QString()},
               {tr("German"), QStringLiteral("de")},
               {tr("Polish"), QStringLiteral("pl")},
               {tr("Portuguese"), QStringLiteral("pt")}});
}

Job MainWindow::job() const {
    return {heat_, *data_->cycle(answer_.cycle), *data_->furnace(answer_.furnace), answer_.setpoint_C, {}};
}

/// The issued sheet of this very answer, or a draft of it.
Result<SheetContent> MainWindow::sheetAtHand() const {
    if (issued_) return *issued_;
    Result<Store> store = Store::open(data_->path, Access::read);
    if (!store) return std::move(store).error();
    return draftSheet(store.value(), answer_, job(), data_->shelf->rules);
}

void MainWindow::issue() {
    if (!shown_) return;
    const QStringList obstacles = obstaclesToIssue(answer_);
    if (!obstacles.isEmpty()) {
        complain(tr("This sheet cannot be issued"),
                 Error{Fault::input,
                       obstacles.join(QStringLiteral("; ")).toStdString() + ". A draft can be printed.",
                       {},
                       {}});
        return;
    }
    bool agreed = false;
    const QString name = QInputDialog::getText(
        this, tr("Issue sheet"),
        tr("%1 by %2 in %3 at %4.\nWho releases it?")
            .arg(answer_.heat, answer_.cycle, answer_.furnace, units_.temperature(answer_.setpoint_C)),
        QLineEdit::Normal, QSettings().value(kName).toString(), &agreed);
    if (!agreed || name.trimmed().isEmpty()) return;
    QSettings().setValue(kName, name.trimmed());
    Result<Store> store = Store::open(data_->path);
    if (!store) {
        complain(tr("Nothing was issued"), store.error());
        return;
    }
    Result<SheetContent> sheet = issueSheet(store.value(), answer_, job(), data_->shelf->rules, name.trimmed());
    if (!sheet) {
        complain(tr("Nothing was issued"), sheet.error());
        return;
    }
    issued_ = std::move(sheet).value();
    statusBar()->showMessage(
        tr("Sheet %1 rev %2 is issued and kept in the store.").arg(issued_->number, issued_->revision));
    preview();
}

void MainWindow::preview() {
    if (!shown_) return;
    Result<SheetContent> content = sheetAtHand();
    Result<PreparedSheet> prepared =
        content ? prepareSheet(content.value(), optionsAtHand()) : Result<PreparedSheet>(content.error());
    if (!prepared) {
        complain(tr("The sheet could not be laid out"), prepared.error());
        return;
    }
    QPrinter printer(QPrinter::HighResolution);
    printer.setPageSize(prepared.value().paper);
    printer.setDocName(prepared.value().title);
    QPrintPreviewDialog dialog(&printer, this);
    dialog.setWindowTitle(prepared.value().title);
    dialog.resize(900, 700);
    std::optional<Error> failed;
    connect(&dialog, &QPrintPreviewDialog::paintRequested, this, [&](QPrinter* device) {
        Result<Done> printed = printSheet(prepared.value(), *device);
        if (!printed) failed = std::move(printed).error();
    });
    dialog.exec();
    if (failed) complain(tr("The sheet could not be printed"), *failed);
    for (const QString& notice : prepared.value().notices) statusBar()->showMessage(notice);
}

Result<Done> MainWindow::writePdf(const QString& path, QStringList* notices) const {
    if (!shown_) return Error{Fault::input, "there is no answer to make a sheet of: choose a heat first", {}, {}};
    Result<SheetContent> content = sheetAtHand();
    if (!content) return std::move(content).error();
    return renderPdf(content.value(), optionsAtHand(), path, notices);
}

void MainWindow::savePdf() {
    if (!shown_) return;
    const QString path =
        QFileDialog::getSaveFileName(this, tr("Save sheet"), fileName(answer_, issued_), tr("PDF (*.pdf)"));
    if (path.isEmpty()) return;
    QStringList notices;
    const Result<Done> written = writePdf(path, &notices);
    if (!written)
        complain(tr("The PDF was not written"), written.error());
    else
        statusBar()->showMessage(tr("%1 is written. %2").arg(path, notices.join(QLatin1Char(' '))));
}

}  // namespace soak::desk
