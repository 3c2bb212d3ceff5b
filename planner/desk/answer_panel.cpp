// SPDX-License-Identifier: GPL-3.0-or-later
#include "answer_panel.h"

#include <QFrame>
#include <QGridLayout>
#include <QHeaderView>
#include <QLabel>
#include <QPushButton>
#include <QScrollArea>
#include <QTableWidget>
#include <QVBoxLayout>
#include <algorithm>
#include <cmath>

#include "answer_text.h"
#include "fold.h"
#include "planner/core/sheet_issue.h"
#include "planner/core/verdict.h"
#include "sensitivity_bars.h"
#include "verdict_mark.h"

namespace soak::desk {
namespace {

QFont scaled(QFont font, double factor, bool strong) {
    font.setPointSizeF(font.pointSizeF() * factor);
    if (strong) font.setWeight(QFont::DemiBold);
    return font;
}

QLabel* wrapping(bool selectable = true) {
    auto* label = new QLabel;
    label->setWordWrap(true);
    label->setTextFormat(Qt::PlainText);
    label->setAlignment(Qt::AlignLeft | Qt::AlignTop);
    if (selectable) label->setTextInteractionFlags(Qt::TextSelectableByMouse | Qt::TextSelectableByKeyboard);
    return label;
}

/// The limit that binds: the first that has a temperature, or the first that says why it has none.
const Limit* bindingOf(const std::vector<Limit>& limits) {
    for (const Limit& limit : limits)
        if (limit.temperature_C) return &limit;
    return limits.empty() ? nullptr : &limits.front();
}

}  // namespace

AnswerPanel::AnswerPanel(QWidget* parent) : QWidget(parent), body_(new QWidget), empty_(wrapping()) {
    auto* outer = new QVBoxLayout(this);
    outer->setContentsMargins(16, 12, 12, 8);
    outer->addWidget(empty_);
    outer->addWidget(body_, 1);
    auto* column = new QVBoxLayout(body_);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(8);
    buildHead(column);
    buildStack(column);
    buildButtons(column);
    buildFolds(column);
    setAccessibleName(tr("Answer"));
    clear({});
}

void AnswerPanel::buildHead(QVBoxLayout* column) {
    mark_ = new VerdictMark;
    headline_ = new QLabel;
    headline_->setFont(scaled(font(), 1.55, true));
    headline_->setWordWrap(true);
    auto* head = new QHBoxLayout;
    head->setSpacing(12);
    head->addWidget(mark_, 0, Qt::AlignVCenter);
    head->addWidget(headline_, 1);
    column->addLayout(head);
    reason_ = wrapping();
    reason_->setMinimumHeight(5 *
                              reason_->fontMetrics().lineSpacing());  // the stack below must not jump while dragging
    column->addWidget(reason_);
}

AnswerPanel::Line AnswerPanel::addLine(QGridLayout* grid, int row, bool strong) {
    Line line{new QLabel, new QLabel, new QLabel};
    for (QLabel* label : {line.name, line.value, line.note}) label->setTextFormat(Qt::PlainText);
    line.value->setAlignment(Qt::AlignRight | Qt::AlignVCenter);
    line.value->setFont(scaled(font(), strong ? 1.2 : 1.0, true));
    line.note->setWordWrap(true);
    grid->addWidget(line.name, row, 0, Qt::AlignTop);
    grid->addWidget(line.value, row, 1, Qt::AlignTop);
    grid->addWidget(line.note, row, 2, Qt::AlignTop);
    return line;
}

void AnswerPanel::buildStack(QVBoxLayout* column) {
    auto* frame = new QFrame;
    frame->setFrameShape(QFrame::StyledPanel);
    frame->setBackgroundRole(QPalette::Base);
    frame->setAutoFillBackground(true);
    auto* grid = new QGridLayout(frame);
    grid->setContentsMargins(12, 8, 12, 8);
    grid->setHorizontalSpacing(12);
    grid->setVerticalSpacing(6);
    grid->setColumnStretch(2, 1);
    ceiling_ = addLine(grid, 0, false);
    hottest_ = addLine(grid, 1, false);
    setpoint_ = addLine(grid, 2, true);
    coldest_ = addLine(grid, 3, false);
    floor_ = addLine(grid, 4, false);
    column->addWidget(frame);
    grade_ = wrapping();
    column->addWidget(grade_);
    warnings_ = wrapping();
    column->addWidget(warnings_);
}

void AnswerPanel::buildButtons(QVBoxLayout* column) {
    suggest_ = new QPushButton;
    issue_ = new QPushButton(tr("&Issue sheet"));
    print_ = new QPushButton(tr("&Preview and print…"));
    for (QPushButton* button : {suggest_, issue_, print_}) button->setMinimumHeight(32);
    issue_->setFont(scaled(font(), 1.0, true));
    auto* row = new QHBoxLayout;
    row->setSpacing(8);
    row->addWidget(issue_);
    row->addWidget(print_);
    row->addStretch(1);
    column->addLayout(row);
    column->insertWidget(column->count() - 1, suggest_, 0, Qt::AlignLeft);
    connect(issue_, &QPushButton::clicked, this, &AnswerPanel::issueWanted);
    connect(print_, &QPushButton::clicked, this, &AnswerPanel::printWanted);
    connect(suggest_, &QPushButton::clicked, this, [this] {
        if (answer_.suggested_setpoint_C) emit setpointWanted(*answer_.suggested_setpoint_C);
    });
}

QLabel* AnswerPanel::addTextFold(QVBoxLayout* column, const QString& title, Fold*& fold) {
    QLabel* text = wrapping();
    text->setTextFormat(Qt::RichText);
    fold = new Fold(title, text);
    column->addWidget(fold);
    return text;
}

void AnswerPanel::buildFolds(QVBoxLayout* column) {
    auto* list = new QWidget;
    auto* folds = new QVBoxLayout(list);
    folds->setContentsMargins(0, 0, 0, 0);
    folds->setSpacing(0);

    auto* limits = new QWidget;
    auto* inside = new QVBoxLayout(limits);
    limits_ = new QTableWidget(0, 3);
    limits_->setHorizontalHeaderLabels({tr("Limit"), tr("Metal"), tr("±")});
    limits_->verticalHeader()->hide();
    limits_->setSelectionBehavior(QAbstractItemView::SelectRows);
    limits_->setSelectionMode(QAbstractItemView::SingleSelection);
    limits_->setEditTriggers(QAbstractItemView::NoEditTriggers);
    limits_->setTabKeyNavigation(false);
    limits_->setShowGrid(false);
    limits_->horizontalHeader()->setSectionResizeMode(0, QHeaderView::Stretch);
    limits_->horizontalHeader()->setSectionResizeMode(1, QHeaderView::ResizeToContents);
    limits_->horizontalHeader()->setSectionResizeMode(2, QHeaderView::ResizeToContents);
    limits_->setAccessibleName(tr("All limits, hottest first"));
    limit_details_ = wrapping();
    limit_details_->setTextFormat(Qt::RichText);
    bars_title_ = wrapping(false);
    bars_ = new SensitivityBars;
    inside->addWidget(limits_);
    inside->addWidget(limit_details_);
    inside->addWidget(bars_title_);
    inside->addWidget(bars_);
    limits_fold_ = new Fold(tr("All limits and what moves them"), limits);
    folds->addWidget(limits_fold_);
    connect(limits_, &QTableWidget::currentCellChanged, this, [this](int row) { selectLimit(row); });

    phases_ = addTextFold(folds, tr("Phases at the setpoint"), phases_fold_);
    band_ = addTextFold(folds, tr("What the furnace does"), band_fold_);
    grade_text_ = addTextFold(folds, tr("Grade check"), grade_fold_);
    published_ = addTextFold(folds, tr("Published ranges of the grade"), published_fold_);
    remarks_ = addTextFold(folds, tr("Remarks and versions"), remarks_fold_);
    folds->addStretch(1);
    for (const Fold* fold : {phases_fold_, band_fold_})
        connect(fold, &Fold::toggled, this, &AnswerPanel::fillFollowing);

    folds_ = new QScrollArea;
    folds_->setWidgetResizable(true);
    folds_->setFrameShape(QFrame::NoFrame);
    folds_->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    folds_->setFocusPolicy(Qt::NoFocus);
    folds_->setWidget(list);
    column->addWidget(folds_, 1);
}

void AnswerPanel::clear(const QString& sentence) {
    body_->hide();
    empty_->setText(sentence);
    empty_->show();
}

void AnswerPanel::setAnswer(const WindowAnswer& answer) {
    ribbons_ = answer.sweep ? Ribbons(*answer.sweep) : Ribbons();
    empty_->hide();
    body_->show();
    follow(answer);
    fillLimits();
    grade_fold_->setTitle(tr("Grade check: %1").arg(answer_.grade_check.verdict));
    grade_text_->setText(gradeCheckText(answer_.grade_check));
    fillRemarks();
}

void AnswerPanel::fillRemarks() {
    published_->setText(
        linesOr(units_.sentences(answer_.published), tr("No published range of this grade is in the store.")) +
        QStringLiteral("<br><i>") + tr("For information: the limits above decide.") + QStringLiteral("</i>"));
    QStringList remarks = units_.sentences(answer_.remarks);
    if (!answer_.left_out.isEmpty())
        remarks << tr("Kept and grade-checked, not in the equilibrium: %1.")
                       .arg(answer_.left_out.join(QStringLiteral(", ")));
    if (!answer_.data_set.isEmpty())
        remarks << tr("Data %1, version %2; program %3.")
                       .arg(answer_.data_set, answer_.data_version, answer_.program_version);
    remarks_->setText(linesOr(remarks, tr("Nothing to remark.")));
}

void AnswerPanel::follow(const WindowAnswer& answer) {
    answer_ = answer;
    answer_.sweep.reset();  // held as ribbons; a drag must not copy it
    mark_->setVerdict(answer_.verdict);
    headline_->setText(verdictHeadline(answer_, units_));
    reason_->setText(unbroken(units_.sentence(answer_.reason)));
    fillStack();
    fillButtons();
    fillFollowing();
}

void AnswerPanel::setUnits(Units units) {
    units_ = units;
    if (!body_->isVisibleTo(this)) return;
    headline_->setText(verdictHeadline(answer_, units_));
    reason_->setText(unbroken(units_.sentence(answer_.reason)));
    fillStack();
    fillButtons();
    fillFollowing();
    fillLimits();
    fillRemarks();
}

void AnswerPanel::fillLimitLine(const Line& line, const std::vector<Limit>& limits, const QString& name) {
    const Limit* limit = bindingOf(limits);
    line.name->setText(name);
    if (!limit) {
        line.value->setText(QStringLiteral("–"));
        line.note->setText(tr("none is set for this cycle"));
        return;
    }
    line.value->setText(limitTemperature(*limit, units_));
    const bool scatters = limit->temperature_C && !limit->set && limit->uncertainty_K > 0;
    const QString spread = scatters ? QStringLiteral(" (±%1)").arg(units_.difference(limit->uncertainty_K)) : QString();
    line.note->setText(unbroken(limit->temperature_C || limit->remark.isEmpty()
                                    ? causeWithoutTemperature(*limit, units_) + spread
                                    : units_.sentence(limit->remark)));
}

void AnswerPanel::fillStack() {
    fillLimitLine(ceiling_, answer_.ceilings, tr("Ceiling"));
    fillLimitLine(floor_, answer_.floors, tr("Floor"));
    const bool has_band = answer_.band.high_C > answer_.band.low_C;
    const auto seen = [&](const Line& line, const QString& name, double at_C, std::optional<double> spare_K,
                          const QString& good, const QString& bad) {
        line.name->setText(name);
        line.value->setText(has_band ? units_.temperature(at_C) : QStringLiteral("–"));
        line.note->setText(!has_band || !spare_K
                               ? QString()
                               : (*spare_K >= 0 ? good : bad).arg(units_.difference(std::abs(*spare_K))));
    };
    const Limit *ceiling = bindingOf(answer_.ceilings), *floor = bindingOf(answer_.floors);
    std::optional<double> above, below;
    if (ceiling) above = marginTo(*ceiling, answer_.band);
    if (floor) below = marginTo(*floor, answer_.band);
    seen(hottest_, tr("Hottest metal"), answer_.band.high_C, above, tr("%1 below the ceiling"),
         tr("%1 above the ceiling"));
    seen(coldest_, tr("Coldest metal"), answer_.band.low_C, below, tr("%1 above the floor"), tr("%1 below the floor"));
    setpoint_.name->setText(tr("Setpoint"));
    setpoint_.name->setMinimumHeight(setpoint_.value->sizeHint().height());
    setpoint_.value->setText(units_.temperature(answer_.setpoint_C));
    setpoint_.note->setText(tr("%1 in %2").arg(units_.otherTemperature(answer_.setpoint_C), answer_.furnace));
    const GradeCheck& check = answer_.grade_check;
    grade_->setVisible(!check.verdict.isEmpty());
    QString grade = tr("Grade %1: %2").arg(answer_.grade, check.verdict);
    for (const Finding& finding : check.findings)
        if (finding.fails) {
            grade += QStringLiteral(" – ") + finding.text;
            break;
        }
    grade_->setText(unbroken(grade));
    warnings_->setVisible(!answer_.band.warnings.isEmpty());
    warnings_->setText(answer_.band.warnings.join(QLatin1Char('\n')));
}

void AnswerPanel::fillButtons() {
    const QStringList obstacles = obstaclesToIssue(answer_);
    issue_->setEnabled(obstacles.isEmpty());
    issue_->setToolTip(obstacles.isEmpty() ? tr("Gives the sheet a number and keeps it in the store.")
                                           : tr("Only a draft: %1").arg(obstacles.join(QStringLiteral("; "))));
    const auto& suggested = answer_.suggested_setpoint_C;
    const bool elsewhere = suggested && std::abs(*suggested - answer_.setpoint_C) > 0.01;
    suggest_->setEnabled(elsewhere);  // it stays where it is, so that nothing jumps while dragging
    suggest_->setText(elsewhere
                          ? tr("&Use %1, which fits better").arg(temperatureText(*suggested, controller_fahrenheit_))
                      : suggested ? tr("No setpoint fits better")
                                  : tr("No setpoint fits"));
}

void AnswerPanel::fillFollowing() {
    if (band_fold_->isOpen()) band_->setText(bandDetails(answer_.band, units_));
    phases_fold_->setTitle(tr("Phases at %1").arg(units_.temperature(answer_.setpoint_C)));
    if (phases_fold_->isOpen()) phases_->setText(phaseTable(ribbons_, answer_.setpoint_C));
}

void AnswerPanel::fillLimits() {
    listed_ = answer_.ceilings;
    listed_.insert(listed_.end(), answer_.floors.begin(), answer_.floors.end());
    std::stable_sort(listed_.begin(), listed_.end(), [](const Limit& a, const Limit& b) {
        const double none = a.side == Side::ceiling ? 1e9 : -1e9;  // without a temperature: at its own end
        if (a.side != b.side) return a.side == Side::ceiling;
        return a.temperature_C.value_or(none) > b.temperature_C.value_or(none);
    });
    const Limit* binding = bindingOf(answer_.floors);
    limits_->setRowCount(int(listed_.size()));
    int select = 0;
    for (int row = 0; row < int(listed_.size()); ++row) {
        const Limit& limit = listed_[size_t(row)];
        const QString side = limit.side == Side::floor ? tr("Floor") : tr("Ceiling");
        const QString cause = units_.sentence(limit.cause);
        auto* name = new QTableWidgetItem(side + QStringLiteral(": ") + cause);
        name->setToolTip(cause);
        limits_->setItem(row, 0, name);
        auto* at = new QTableWidgetItem(limit.temperature_C ? limitTemperature(limit, units_)
                                        : limit.impossible  ? tr("none")
                                        : limit.computed    ? QStringLiteral("–")
                                                            : tr("not computed"));
        at->setTextAlignment(Qt::AlignRight | Qt::AlignVCenter);
        limits_->setItem(row, 1, at);
        auto* spread = new QTableWidgetItem(
            limit.set || limit.uncertainty_K == 0 ? QString() : units_.difference(limit.uncertainty_K));
        spread->setTextAlignment(Qt::AlignRight | Qt::AlignVCenter);
        limits_->setItem(row, 2, spread);
        if (binding && limit.side == Side::floor && limit.cause == binding->cause) select = row;
    }
    limits_->resizeRowsToContents();
    int height = limits_->horizontalHeader()->sizeHint().height() + 4;
    for (int row = 0; row < limits_->rowCount(); ++row) height += limits_->rowHeight(row);
    limits_->setFixedHeight(std::min(height, 260));
    limits_->setCurrentCell(listed_.empty() ? -1 : select, 0);
    selectLimit(listed_.empty() ? -1 : select);
}

void AnswerPanel::selectLimit(int row) {
    const bool any = row >= 0 && row < int(listed_.size());
    limit_details_->setText(any ? limitDetails(listed_[size_t(row)], units_) : tr("This cycle has no limits."));
    const std::map<std::string, double> slopes = any ? listed_[size_t(row)].K_per_wt : std::map<std::string, double>();
    bars_title_->setText(slopes.empty() ? QString()
                                        : tr("0.01 % more of an element moves this limit by (root scale):"));
    bars_title_->setVisible(!slopes.empty());
    bars_->setVisible(!slopes.empty());
    bars_->setSlopes(slopes, units_);
}

void AnswerPanel::showLimit(Side side, int index) {
    const auto& limits = side == Side::floor ? answer_.floors : answer_.ceilings;
    if (index < 0 || index >= int(limits.size())) return;
    limits_fold_->setOpen(true);
    for (int row = 0; row < int(listed_.size()); ++row)
        if (listed_[size_t(row)].side == side && listed_[size_t(row)].cause == limits[size_t(index)].cause) {
            limits_->setCurrentCell(row, 0);
            folds_->ensureWidgetVisible(limits_fold_, 0, 0);
            return;
        }
}

}  // namespace soak::desk
