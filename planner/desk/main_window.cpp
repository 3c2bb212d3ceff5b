// SPDX-License-Identifier: GPL-3.0-or-later
#include "main_window.h"

#include <QComboBox>
#include <QDragEnterEvent>
#include <QFileDialog>
#include <QFileInfo>
#include <QLabel>
#include <QMenu>
#include <QMessageBox>
#include <QMimeData>
#include <QSettings>
#include <QSplitter>
#include <QStackedWidget>
#include <QStatusBar>
#include <QVBoxLayout>
#include <QtConcurrent>
#include <cmath>

#include "answer_panel.h"
#include "db/certificate.h"
#include "db/demo.h"
#include "db/store.h"
#include "heat_panel.h"
#include "import_dialog.h"
#include "planner/core/band.h"
#include "rail.h"
#include "start_page.h"

namespace soak::desk {
namespace {

constexpr int kRecentStores = 6;

QString heatTitle(const Heat& heat) {
    QStringList parts{heat.grade};
    if (!heat.product_form.isEmpty()) parts << heat.product_form;
    if (heat.section_mm) parts << withUnit(*heat.section_mm, QStringLiteral("mm"));
    return QStringLiteral("<b>%1</b>&nbsp; %2")
        .arg(heat.number.toHtmlEscaped(), parts.join(QStringLiteral(", ")).toHtmlEscaped());
}

/// Setpoints that this furnace's controller can be set to.
Rail::Stepper stepperOf(const Furnace& furnace) {
    return [furnace](double celsius, int steps) {
        const double wanted = celsius + steps * step_K(furnace);
        const double up = stepUp_C(furnace, wanted), down = stepDown_C(furnace, wanted);
        const double next = up - wanted < wanted - down ? up : down;
        return next < furnace.minimum_C || next > furnace.maximum_C ? celsius : next;
    };
}

}  // namespace

MainWindow::MainWindow(QWidget* parent)
    : QMainWindow(parent),
      pages_(new QStackedWidget),
      start_(new StartPage),
      bench_(new QSplitter),
      heats_(new HeatPanel),
      title_(new QLabel),
      cycle_(new QComboBox),
      furnace_(new QComboBox),
      rail_(new Rail),
      answer_panel_(new AnswerPanel) {
    setWindowTitle(tr("Soakwright"));
    setAcceptDrops(true);
    resize(1366, 768);
    bench_->addWidget(heats_);
    bench_->addWidget(buildBench());
    bench_->addWidget(answer_panel_);
    bench_->setStretchFactor(0, 0);
    bench_->setStretchFactor(1, 1);
    bench_->setStretchFactor(2, 0);
    bench_->setSizes({456, 520, 390});
    bench_->setChildrenCollapsible(false);
    pages_->addWidget(start_);
    pages_->addWidget(bench_);
    setCentralWidget(pages_);
    buildMenus();
    statusBar();

    connect(start_, &StartPage::demoWanted, this, [this] { makeStore(true); });
    connect(start_, &StartPage::newWanted, this, [this] { makeStore(false); });
    connect(start_, &StartPage::openWanted, this, &MainWindow::chooseStore);
    connect(start_, &StartPage::recentWanted, this, [this](const QString& path) { openStore(path); });
    connect(heats_, &HeatPanel::heatChosen, this, &MainWindow::chooseHeat);
    connect(heats_, &HeatPanel::importWanted, this, &MainWindow::chooseCertificate);
    connect(cycle_, &QComboBox::activated, this, [this] {
        fillFurnaces({});
        ask();
    });
    connect(furnace_, &QComboBox::activated, this, &MainWindow::ask);
    connect(rail_, &Rail::setpointMoved, this, &MainWindow::moveSetpoint);
    connect(rail_, &Rail::limitClicked, answer_panel_, &AnswerPanel::showLimit);
    connect(answer_panel_, &AnswerPanel::setpointWanted, this, &MainWindow::moveSetpoint);
    connect(answer_panel_, &AnswerPanel::issueWanted, this, &MainWindow::issue);
    connect(answer_panel_, &AnswerPanel::printWanted, this, &MainWindow::preview);
    connect(&judge_, &Judge::answered, this, &MainWindow::showAnswer);
    connect(&judge_, &Judge::failed, this, &MainWindow::cannotAnswer);
    connect(&loading_, &QFutureWatcherBase::finished, this, &MainWindow::storeLoaded);

    const QSettings settings;
    restoreGeometry(settings.value(QStringLiteral("geometry")).toByteArray());
    setFahrenheit(settings.value(QStringLiteral("fahrenheit")).toBool());
    tellRecent();
}

MainWindow::~MainWindow() {
    loading_.waitForFinished();
    judge_.forget();
}

QWidget* MainWindow::buildBench() {
    auto* bench = new QWidget;
    auto* column = new QVBoxLayout(bench);
    column->setContentsMargins(8, 12, 8, 8);
    column->setSpacing(8);
    QFont strong = title_->font();
    strong.setPointSizeF(strong.pointSizeF() * 1.15);
    title_->setFont(strong);
    title_->setTextFormat(Qt::RichText);
    auto* choosers = new QHBoxLayout;
    choosers->setSpacing(8);
    const auto chooser = [&](const QString& name, QComboBox* box, int stretch) {
        auto* label = new QLabel(name);
        label->setBuddy(box);
        box->setMinimumHeight(32);
        box->setMinimumContentsLength(8);
        box->setSizeAdjustPolicy(QComboBox::AdjustToMinimumContentsLengthWithIcon);
        choosers->addWidget(label);
        choosers->addWidget(box, stretch);
    };
    chooser(tr("C&ycle"), cycle_, 3);
    chooser(tr("F&urnace"), furnace_, 2);
    cycle_->setAccessibleName(tr("Cycle"));
    furnace_->setAccessibleName(tr("Furnace"));
    column->addWidget(title_);
    column->addLayout(choosers);
    column->addWidget(rail_, 1);
    return bench;
}

void MainWindow::openStore(const QString& path, const QString& heat, const QString& cycle, const QString& furnace) {
    if (loading_.isRunning()) return;
    wish_ = {heat, cycle, furnace};
    statusBar()->showMessage(tr("Opening %1…").arg(path));
    setEnabled(false);
    const QDate today = QDate::currentDate();
    loading_.setFuture(QtConcurrent::run(
        &loader_, [path, today] { return std::make_shared<Result<DeskData>>(loadDesk(path, today)); }));
}

void MainWindow::storeLoaded() {
    setEnabled(true);
    statusBar()->clearMessage();
    const auto loaded = loading_.result();
    if (!*loaded) {
        complain(tr("The store could not be opened"), loaded->error());
        return;
    }
    forgetAnswer();
    data_ = std::make_shared<const DeskData>(std::move(*loaded).value());
    remember(data_->path);
    setWindowTitle(
        tr("%1 – Soakwright").arg(data_->shop.name.isEmpty() ? QFileInfo(data_->path).fileName() : data_->shop.name));
    pages_->setCurrentWidget(bench_);
    for (QAction* action : store_actions_) action->setEnabled(true);
    heats_->showStore(data_);
    title_->clear();
    cycle_->clear();
    furnace_->clear();
    const QString sentence = data_->heats.empty() ? tr("The metal stands here once a heat is in the list.")
                             : data_->cycles.empty()
                                 ? tr("This store has no cycles yet, so nothing can be judged.")
                                 : tr("Choose a heat on the left: its window and your furnace appear here.");
    rail_->clear(sentence);
    answer_panel_->clear({});
    heats_->judgeAll();
    if (!wish_.heat.isEmpty() && !heats_->choose(wish_.heat, wish_.cycle))
        cannotAnswer(tr("Heat %1 is not in this store.").arg(wish_.heat));
    emit storeShown();
}

void MainWindow::chooseHeat(const QString& heat, const QString& cycle, const QString& furnace) {
    const Heat* found = data_->heat(heat);
    if (!found) return;
    heat_ = *found;
    title_->setText(heatTitle(heat_));
    const bool wished = heat == wish_.heat;
    fillCycles(wished && !wish_.cycle.isEmpty() ? wish_.cycle : cycle);
    fillFurnaces(wished && !wish_.furnace.isEmpty() ? wish_.furnace : furnace);
    wish_ = {};
    ask();
}

/// Standing cycles of the heat's grade first, then all others.
void MainWindow::fillCycles(const QString& wanted) {
    cycle_->clear();
    const auto standing = data_->standingCycles(heat_);
    const auto add = [this](const Cycle& cycle) {
        cycle_->addItem(QStringLiteral("%1  %2, %3").arg(cycle.name, cycle.kind, units_.temperature(cycle.setpoint_C)),
                        cycle.name);
    };
    for (const Cycle* cycle : standing) add(*cycle);
    if (!standing.empty() && standing.size() < data_->cycles.size()) cycle_->insertSeparator(cycle_->count());
    for (const Cycle& cycle : data_->cycles)
        if (std::find(standing.begin(), standing.end(), &cycle) == standing.end()) add(cycle);
    int index = cycle_->findData(wanted);
    if (index < 0) index = standing.empty() ? -1 : 0;
    cycle_->setCurrentIndex(index);
    cycle_->setPlaceholderText(tr("no standing cycle"));
}

/// The cycle's own furnaces first, then all others.
void MainWindow::fillFurnaces(const QString& wanted) {
    furnace_->clear();
    const Cycle* cycle = data_->cycle(cycle_->currentData().toString());
    const QStringList own = cycle ? cycle->furnaces : QStringList();
    const auto add = [this](const Furnace& furnace) {
        furnace_->addItem(QStringLiteral("%1  %2").arg(furnace.id, furnace.kind), furnace.id);
    };
    for (const Furnace& furnace : data_->furnaces)
        if (own.contains(furnace.id)) add(furnace);
    if (furnace_->count() > 0 && size_t(furnace_->count()) < data_->furnaces.size())
        furnace_->insertSeparator(furnace_->count());
    for (const Furnace& furnace : data_->furnaces)
        if (!own.contains(furnace.id)) add(furnace);
    const int index = furnace_->findData(wanted);
    furnace_->setCurrentIndex(index >= 0 ? index : 0);
}

void MainWindow::ask() {
    if (!data_) return;
    const Cycle* cycle = data_->cycle(cycle_->currentData().toString());
    const Furnace* furnace = data_->furnace(furnace_->currentData().toString());
    if (!cycle) {
        cannotAnswer(
            tr("No standing cycle of this shop names the grade %1. Choose a cycle above to try one.").arg(heat_.grade));
        return;
    }
    if (!furnace) {
        cannotAnswer(tr("This store has no furnaces yet, so the metal's band cannot be told."));
        return;
    }
    forgetAnswer();
    rail_->setStepper(stepperOf(*furnace));
    answer_panel_->setController(furnace->controller_fahrenheit);
    judge_.ask(data_, Job{heat_, *cycle, *furnace, {}, {}});
    statusBar()->showMessage(tr("Computing the window of %1…").arg(heat_.number));
}

void MainWindow::showAnswer(const WindowAnswer& answer) {
    statusBar()->clearMessage();
    const bool nothing_to_draw = !answer.sweep && answer.floors.empty() && answer.ceilings.empty();
    if (nothing_to_draw)
        rail_->clear(answer.reason);
    else
        rail_->setAnswer(answer);
    answer_panel_->setAnswer(answer);
    answer_ = answer;
    answer_.sweep.reset();
    shown_ = true;
    issued_.reset();
    for (QAction* action : answer_actions_) action->setEnabled(true);
    emit answerShown();
}

void MainWindow::moveSetpoint(double celsius) {
    if (!shown_) return;
    const Furnace* furnace = data_->furnace(answer_.furnace);
    if (!furnace) return;
    Result<WindowAnswer> moved = atSetpoint(answer_, *furnace, data_->shelf->rules, celsius);
    if (!moved) {
        statusBar()->showMessage(QString::fromStdString(moved.error().text()), 8000);
        return;
    }
    answer_ = std::move(moved).value();
    issued_.reset();
    rail_->follow(answer_);
    answer_panel_->follow(answer_);
}

void MainWindow::forgetAnswer() {
    judge_.forget();
    statusBar()->clearMessage();
    shown_ = false;
    issued_.reset();
    for (QAction* action : answer_actions_) action->setEnabled(false);
}

void MainWindow::cannotAnswer(const QString& reason) {
    forgetAnswer();
    rail_->clear(reason);
    answer_panel_->clear({});
    emit complained(reason);
}

void MainWindow::complain(const QString& title, const Error& error) {
    const QString sentence = QString::fromStdString(error.text());
    emit complained(sentence);
    auto* box = new QMessageBox(QMessageBox::Warning, title, sentence, QMessageBox::Ok, this);
    box->setAttribute(Qt::WA_DeleteOnClose);
    if (!error.repeat.empty()) box->setDetailedText(QString::fromStdString(error.repeat));
    box->open();
}

void MainWindow::makeStore(bool demonstration) {
    const QString offer = demonstration ? QStringLiteral("quillmere.soak") : QStringLiteral("shop.soak");
    const QString path = QFileDialog::getSaveFileName(this, tr("Make a store"), offer, tr("Stores (*.soak)"), nullptr,
                                                      QFileDialog::DontConfirmOverwrite);
    if (path.isEmpty()) return;
    Result<Store> made = demonstration ? createDemoShop(path) : createEmpty(path);
    if (!made) {
        complain(tr("The store could not be made"), made.error());
        return;
    }
    openStore(path);
}

void MainWindow::chooseStore() {
    const QString path =
        QFileDialog::getOpenFileName(this, tr("Open a store"), {}, tr("Stores (*.soak);;All files (*)"));
    if (!path.isEmpty()) openStore(path);
}

void MainWindow::chooseCertificate() {
    const QString path =
        QFileDialog::getOpenFileName(this, tr("Import a certificate"), {}, tr("Tables (*.csv *.txt);;All files (*)"));
    if (!path.isEmpty()) importFile(path);
}

void MainWindow::importFile(const QString& path) {
    if (!data_) return;
    Result<Certificate> certificate = readCertificate(path);
    if (!certificate) {
        complain(tr("The file could not be read"), certificate.error());
        return;
    }
    QStringList stored;
    for (const Heat& heat : data_->heats) stored << heat.number;
    auto* dialog = new ImportDialog(certificate.value(), stored, this);
    dialog->setAttribute(Qt::WA_DeleteOnClose);
    connect(dialog, &QDialog::accepted, this, [this, dialog, path] {
        Result<Store> store = Store::open(data_->path);
        if (!store) {
            complain(tr("Nothing was stored"), store.error());
            return;
        }
        const Result<int> count =
            store.value().storeHeats(dialog->heats(), QFileInfo(path).fileName(), data_->shop.today);
        if (!count)
            complain(tr("Nothing was stored"), count.error());
        else
            openStore(data_->path, heat_.number);
    });
    dialog->open();
}

void MainWindow::setFahrenheit(bool fahrenheit) {
    units_.fahrenheit = fahrenheit;
    if (fahrenheit_action_) fahrenheit_action_->setChecked(fahrenheit);
    rail_->setUnits(units_);
    answer_panel_->setUnits(units_);
    heats_->setUnits(units_);
}

QStringList MainWindow::recentStores() const { return QSettings().value(QStringLiteral("recent")).toStringList(); }

void MainWindow::remember(const QString& path) {
    QStringList recent = recentStores();
    const QString whole = QFileInfo(path).absoluteFilePath();
    recent.removeAll(whole);
    recent.prepend(whole);
    QSettings().setValue(QStringLiteral("recent"), recent.mid(0, kRecentStores));
    tellRecent();
}

void MainWindow::tellRecent() {
    QStringList present;
    for (const QString& path : recentStores())
        if (QFileInfo::exists(path)) present << path;
    start_->setRecent(present);
    recent_menu_->clear();
    recent_menu_->setEnabled(!present.isEmpty());
    for (const QString& path : present)
        recent_menu_->addAction(QFileInfo(path).fileName(), this, [this, path] { openStore(path); })->setToolTip(path);
}

void MainWindow::dragEnterEvent(QDragEnterEvent* event) {
    if (data_ && event->mimeData()->hasUrls()) event->acceptProposedAction();
}

void MainWindow::dropEvent(QDropEvent* event) {
    for (const QUrl& url : event->mimeData()->urls())
        if (url.isLocalFile()) {
            importFile(url.toLocalFile());
            return;
        }
}

void MainWindow::closeEvent(QCloseEvent* event) {
    QSettings settings;
    settings.setValue(QStringLiteral("geometry"), saveGeometry());
    settings.setValue(QStringLiteral("fahrenheit"), units_.fahrenheit);
    heats_->stop();
    QMainWindow::closeEvent(event);
}

}  // namespace soak::desk
