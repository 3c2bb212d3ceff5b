// SPDX-License-Identifier: GPL-3.0-or-later
#include "heat_model.h"

#include <QtConcurrent>
#include <numeric>

namespace soak::desk {

HeatModel::HeatModel(QObject* parent) : QAbstractTableModel(parent) {
    workers_.setThreadPriority(QThread::LowPriority);  // the window comes first
    connect(&watcher_, &QFutureWatcherBase::resultsReadyAt, this, &HeatModel::append);
    connect(&watcher_, &QFutureWatcherBase::progressValueChanged, this,
            [this](int done) { emit progress(done, watcher_.progressMaximum()); });
    connect(&watcher_, &QFutureWatcherBase::finished, this, [this] { emit finished(watcher_.isCanceled()); });
}

HeatModel::~HeatModel() { stop(); }

void HeatModel::stop() {
    watcher_.cancel();
    watcher_.waitForFinished();
}

void HeatModel::show(std::shared_ptr<const DeskData> data) {
    stop();
    watcher_.setFuture({});  // results of the earlier store that are still under way belong to nobody
    beginResetModel();
    data_ = std::move(data);
    rows_.clear();
    for (size_t i = 0; i < data_->heats.size(); ++i)
        rows_.push_back({data_->heats[i].number, data_->heats[i].grade, int(i), {}});
    endResetModel();
}

void HeatModel::judgeAll() {
    if (!data_ || data_->heats.empty()) return;
    stop();
    std::vector<int> items(data_->heats.size());
    std::iota(items.begin(), items.end(), 0);
    // The worker sees values only: the store's records never change while they are shared.
    const auto judge_one = [data = data_](int item) {
        TriageQuestion question{{{data->heats[size_t(item)], {}, {}}}, data->cycles, data->furnaces, {}, 1};
        Rows rows = triage(question, *data->shelf);
        for (TriageRow& row : rows) row.item = item;
        return rows;
    };
    watcher_.setFuture(QtConcurrent::mapped(&workers_, std::move(items), judge_one));
}

void HeatModel::append(int begin, int end) {
    for (int i = begin; i < end; ++i) {
        const Rows judged = watcher_.resultAt(i);
        if (!judged.empty()) place(judged.front().item, judged);
    }
}

void HeatModel::place(int item, const Rows& judged) {
    // Rows of one heat stand together and in the order of the heats, so the first is found by halving.
    const auto first = std::lower_bound(rows_.begin(), rows_.end(), item,
                                        [](const Row& row, int wanted) { return row.item < wanted; });
    if (first == rows_.end() || first->item != item) return;
    const int at = int(first - rows_.begin());
    int held = 0;
    while (size_t(at + held) < rows_.size() && rows_[size_t(at + held)].item == item) ++held;
    const int wanted = int(judged.size());
    if (wanted > held) {
        beginInsertRows({}, at + held, at + wanted - 1);
        rows_.insert(rows_.begin() + at + held, size_t(wanted - held), rows_[size_t(at)]);
        endInsertRows();
    }
    for (int i = 0; i < wanted; ++i) rows_[size_t(at + i)].judged = judged[size_t(i)];
    emit dataChanged(index(at, 0), index(at + wanted - 1, columns - 1));
}

void HeatModel::setUnits(Units units) {
    units_ = units;
    if (!rows_.empty()) emit dataChanged(index(0, 0), index(int(rows_.size()) - 1, columns - 1));
}

const TriageRow* HeatModel::judgedAt(int row) const {
    const auto& judged = rows_[size_t(row)].judged;
    return judged ? &*judged : nullptr;
}

int HeatModel::rowCount(const QModelIndex& parent) const { return parent.isValid() ? 0 : int(rows_.size()); }
int HeatModel::columnCount(const QModelIndex& parent) const { return parent.isValid() ? 0 : int(columns); }

/// Worst first: what could not be computed, then no window, then the smallest margin; unjudged heats come last.
double HeatModel::sortValue(const Row& row) const {
    if (!row.judged) return 1e9;
    if (row.judged->verdict == Verdict::notComputed) return -2e9;
    if (row.judged->verdict == Verdict::noWindow) return -1e9;
    return row.judged->margin_K.value_or(-5e8);
}

QString HeatModel::textAt(const Row& row, int column) const {
    switch (column) {
        case verdictColumn:
            return row.judged ? word(row.judged->verdict) : QStringLiteral("…");
        case heatColumn:
            return row.heat;
        case gradeColumn:
            return row.grade;
        case cycleColumn:
            return row.judged ? row.judged->cycle : QString();
        case marginColumn:
            return row.judged && row.judged->margin_K ? units_.signedDifference(*row.judged->margin_K) : QString();
        default:
            return {};
    }
}

QString HeatModel::whyText(const Row& row) const {
    if (!row.judged) return tr("Not judged yet");
    const TriageRow& judged = *row.judged;
    const QString reason = units_.sentence(judged.reason);
    return judged.furnace.isEmpty() ? reason : tr("In %1. %2").arg(judged.furnace, reason);
}

QVariant HeatModel::data(const QModelIndex& index, int role) const {
    const Row& row = rows_[size_t(index.row())];
    switch (role) {
        case Qt::DisplayRole:
            return textAt(row, index.column());
        case Qt::ToolTipRole:
            return whyText(row);
        case Qt::TextAlignmentRole:
            return index.column() == marginColumn ? QVariant(Qt::AlignRight | Qt::AlignVCenter) : QVariant();
        case Qt::AccessibleTextRole:
            return index.column() == verdictColumn && !row.judged ? tr("not judged yet") : textAt(row, index.column());
        case sortRole:
            return index.column() == marginColumn || index.column() == verdictColumn ? QVariant(sortValue(row))
                                                                                     : textAt(row, index.column());
        case marginRole:
            return row.judged && row.judged->margin_K ? QVariant(*row.judged->margin_K) : QVariant();
        case verdictRole:
            return row.judged ? QVariant(int(row.judged->verdict)) : QVariant();
        default:
            return {};
    }
}

QVariant HeatModel::headerData(int section, Qt::Orientation orientation, int role) const {
    if (orientation != Qt::Horizontal || role != Qt::DisplayRole) return {};
    switch (section) {
        case verdictColumn:
            return tr("Verdict");
        case heatColumn:
            return tr("Heat");
        case gradeColumn:
            return tr("Grade");
        case cycleColumn:
            return tr("Cycle");
        case marginColumn:
            return tr("Margin");
        default:
            return {};
    }
}

HeatFilter::HeatFilter(QObject* parent) : QSortFilterProxyModel(parent) {
    setSortRole(HeatModel::sortRole);
    setDynamicSortFilter(true);
}

void HeatFilter::search(const QString& words) {
    words_ = words.split(QLatin1Char(' '), Qt::SkipEmptyParts);
    invalidateFilter();
}

bool HeatFilter::filterAcceptsRow(int row, const QModelIndex& parent) const {
    QString all;
    for (int column = 0; column < HeatModel::marginColumn; ++column)
        all += sourceModel()->index(row, column, parent).data().toString() + QLatin1Char(' ');
    all += sourceModel()->index(row, 0, parent).data(Qt::ToolTipRole).toString();
    return std::all_of(words_.begin(), words_.end(),
                       [&](const QString& word) { return all.contains(word, Qt::CaseInsensitive); });
}

}  // namespace soak::desk
