// SPDX-License-Identifier: GPL-3.0-or-later
#include "heat_panel.h"

#include <QHeaderView>
#include <QLabel>
#include <QLineEdit>
#include <QProgressBar>
#include <QPushButton>
#include <QStackedWidget>
#include <QTableView>
#include <QVBoxLayout>

#include "heat_delegate.h"

namespace soak::desk {
namespace {

QWidget* emptyPage(QPushButton* button) {
    auto* page = new QWidget;
    auto* column = new QVBoxLayout(page);
    auto* sentence =
        new QLabel(HeatPanel::tr("No heats yet. Import the file of a certificate, or drop it on this window."));
    sentence->setWordWrap(true);
    sentence->setAlignment(Qt::AlignCenter);
    column->addStretch(1);
    column->addWidget(sentence);
    column->addWidget(button, 0, Qt::AlignCenter);
    column->addStretch(2);
    return page;
}

void setUp(QTableView* table) {
    table->setSelectionBehavior(QAbstractItemView::SelectRows);
    table->setSelectionMode(QAbstractItemView::SingleSelection);
    table->setSortingEnabled(true);
    table->setTabKeyNavigation(false);
    table->setShowGrid(false);
    table->setAlternatingRowColors(true);
    table->setWordWrap(false);
    table->verticalHeader()->hide();
    table->verticalHeader()->setDefaultSectionSize(28);
    table->verticalHeader()->setSectionResizeMode(QHeaderView::Fixed);
    QHeaderView* header = table->horizontalHeader();
    header->setHighlightSections(false);
    header->setDefaultAlignment(Qt::AlignLeft | Qt::AlignVCenter);
    header->setSectionResizeMode(HeatModel::marginColumn, QHeaderView::Stretch);
    const QFontMetrics metrics = table->fontMetrics();
    table->setColumnWidth(HeatModel::verdictColumn, metrics.horizontalAdvance(QStringLiteral("not computed")) + 32);
    table->setColumnWidth(HeatModel::heatColumn, metrics.horizontalAdvance(QStringLiteral("T-21-0463")) + 14);
    table->setColumnWidth(HeatModel::gradeColumn, metrics.horizontalAdvance(QStringLiteral("CD3MWCuN")) + 10);
    table->setColumnWidth(HeatModel::cycleColumn, metrics.horizontalAdvance(QStringLiteral("SA-300")) + 12);
    table->setAccessibleName(HeatPanel::tr("Heats"));
}

}  // namespace

HeatPanel::HeatPanel(QWidget* parent)
    : QWidget(parent),
      model_(new HeatModel(this)),
      filter_(new HeatFilter(this)),
      search_(new QLineEdit),
      pages_(new QStackedWidget),
      table_(new QTableView),
      summary_(new QLabel),
      progress_(new QProgressBar),
      stop_(new QPushButton(tr("&Stop"))) {
    search_->setPlaceholderText(tr("Search heat, grade, cycle, verdict (Ctrl+F)"));
    search_->setClearButtonEnabled(true);
    search_->setMinimumHeight(32);
    search_->setAccessibleName(tr("Search heats"));
    filter_->setSourceModel(model_);
    table_->setModel(filter_);
    table_->setItemDelegate(new HeatDelegate(table_));
    setUp(table_);
    table_->sortByColumn(HeatModel::marginColumn, Qt::AscendingOrder);
    auto* import = new QPushButton(tr("Import certificate…"));
    import->setMinimumHeight(32);
    pages_->addWidget(table_);
    pages_->addWidget(emptyPage(import));
    progress_->setTextVisible(false);
    progress_->setMaximumHeight(6);
    progress_->setAccessibleName(tr("Heats judged"));
    stop_->setMinimumHeight(32);
    progress_->hide();
    stop_->hide();

    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(12, 12, 8, 8);
    column->setSpacing(8);
    column->addWidget(search_);
    column->addWidget(pages_, 1);
    column->addWidget(progress_);
    auto* foot = new QHBoxLayout;
    foot->addWidget(summary_, 1);
    foot->addWidget(stop_);
    column->addLayout(foot);
    summary_->setWordWrap(true);

    connect(search_, &QLineEdit::textChanged, filter_, &HeatFilter::search);
    connect(search_, &QLineEdit::returnPressed, table_, [this] {
        if (filter_->rowCount() > 0) table_->selectRow(0);
        table_->setFocus();
    });
    connect(import, &QPushButton::clicked, this, &HeatPanel::importWanted);
    connect(stop_, &QPushButton::clicked, this, &HeatPanel::stop);
    connect(table_->selectionModel(), &QItemSelectionModel::currentRowChanged, this, &HeatPanel::tellCurrent);
    connect(model_, &HeatModel::progress, this, &HeatPanel::tellProgress);
    connect(model_, &HeatModel::finished, this, [this] {
        progress_->hide();
        stop_->hide();
        summarise();
        if (table_->currentIndex().isValid()) table_->scrollTo(table_->currentIndex());
    });
}

void HeatPanel::showStore(std::shared_ptr<const DeskData> store) {
    pages_->setCurrentIndex(store->heats.empty() ? 1 : 0);
    told_.clear();
    model_->show(std::move(store));
    summarise();
}

void HeatPanel::judgeAll() {
    model_->judgeAll();
    progress_->setVisible(model_->isJudging());
    stop_->setVisible(model_->isJudging());
}

void HeatPanel::stop() { model_->stop(); }

void HeatPanel::focusSearch() {
    search_->setFocus();
    search_->selectAll();
}

bool HeatPanel::choose(const QString& heat, const QString& cycle) {
    int best = -1;
    for (int row = 0; row < filter_->rowCount(); ++row) {
        const int source = filter_->mapToSource(filter_->index(row, 0)).row();
        if (model_->heatAt(source) != heat) continue;
        const TriageRow* judged = model_->judgedAt(source);
        if (best < 0 || (judged && judged->cycle == cycle)) best = row;
    }
    if (best < 0) return false;
    table_->selectRow(best);
    table_->scrollTo(filter_->index(best, 0));
    return true;
}

void HeatPanel::tellCurrent() {
    const QModelIndex current = table_->currentIndex();
    if (!current.isValid()) return;
    const int row = filter_->mapToSource(current).row();
    const TriageRow* judged = model_->judgedAt(row);
    const QString heat = model_->heatAt(row);
    const QString cycle = judged ? judged->cycle : QString(), furnace = judged ? judged->furnace : QString();
    const QString now = heat + QLatin1Char('\n') + cycle;
    if (now == told_) return;
    told_ = now;
    emit heatChosen(heat, cycle, furnace);
}

void HeatPanel::tellProgress(int done, int total) {
    progress_->setMaximum(total);
    progress_->setValue(done);
    summarise();
}

void HeatPanel::summarise() {
    std::map<Verdict, int> counts;
    int judged = 0;
    for (int row = 0; row < model_->rowCount(); ++row)
        if (const TriageRow* answer = model_->judgedAt(row)) ++counts[answer->verdict], ++judged;
    QStringList parts;
    for (const Verdict verdict :
         {Verdict::notComputed, Verdict::noWindow, Verdict::outside, Verdict::tight, Verdict::inside})
        if (counts[verdict] > 0) parts << tr("%1 %2").arg(counts[verdict]).arg(word(verdict));
    const int open = model_->rowCount() - judged;
    if (open > 0 && judged > 0) parts << tr("%1 not judged yet").arg(open);
    summary_->setText(parts.join(QStringLiteral(", ")));
}

}  // namespace soak::desk
