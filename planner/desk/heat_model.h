// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QAbstractTableModel>
#include <QFutureWatcher>
#include <QSortFilterProxyModel>
#include <QThreadPool>
#include <memory>
#include <vector>

#include "desk_data.h"
#include "planner/core/triage.h"
#include "units.h"

namespace soak::desk {

/// The heats of a store, one row per heat and standing cycle. Every heat stands there at once; verdicts arrive from
/// workers as they are computed, and the work can be stopped.
class HeatModel : public QAbstractTableModel {
    Q_OBJECT

public:
    enum Column { verdictColumn, heatColumn, gradeColumn, cycleColumn, marginColumn, columns };
    enum Role { sortRole = Qt::UserRole, marginRole, verdictRole };

    explicit HeatModel(QObject* parent = nullptr);
    ~HeatModel() override;

    /// Shows the heats of a store, none of them judged.
    void show(std::shared_ptr<const DeskData> data);
    /// Judges every heat against its standing cycles, in the background.
    void judgeAll();
    /// Stops after the heats at hand; what has been judged stays.
    void stop();
    bool isJudging() const { return watcher_.isRunning(); }
    void setUnits(Units units);

    QString heatAt(int row) const { return rows_[size_t(row)].heat; }
    /// Nothing when the row has not been judged or has no standing cycle.
    const TriageRow* judgedAt(int row) const;

    int rowCount(const QModelIndex& parent = {}) const override;
    int columnCount(const QModelIndex& parent = {}) const override;
    QVariant data(const QModelIndex& index, int role) const override;
    QVariant headerData(int section, Qt::Orientation orientation, int role) const override;

signals:
    void progress(int done, int total);
    void finished(bool stopped);

private:
    struct Row {
        QString heat, grade;
        int item = 0;
        std::optional<TriageRow> judged;
    };
    using Rows = std::vector<TriageRow>;

    void append(int begin, int end);
    void place(int item, const Rows& rows);
    QString textAt(const Row& row, int column) const;
    QString whyText(const Row& row) const;
    double sortValue(const Row& row) const;

    std::shared_ptr<const DeskData> data_;
    std::vector<Row> rows_;
    QThreadPool workers_;  // not the global pool: Qt paints with that one, and would wait behind the heats
    QFutureWatcher<Rows> watcher_;
    Units units_;
};

/// Search over heat, grade, cycle, verdict and reason; every word must be found.
class HeatFilter : public QSortFilterProxyModel {
public:
    explicit HeatFilter(QObject* parent = nullptr);
    void search(const QString& words);

protected:
    bool filterAcceptsRow(int row, const QModelIndex& parent) const override;

private:
    QStringList words_;
};

}  // namespace soak::desk
