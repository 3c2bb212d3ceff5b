// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QWidget>

#include "heat_model.h"

class QLabel;
class QLineEdit;
class QProgressBar;
class QPushButton;
class QStackedWidget;
class QTableView;

namespace soak::desk {

/// The list of heats: search on top, verdicts and margins as they arrive, a summary and a stop below.
class HeatPanel : public QWidget {
    Q_OBJECT

public:
    explicit HeatPanel(QWidget* parent = nullptr);

    void showStore(std::shared_ptr<const DeskData> store);
    void judgeAll();
    void stop();
    void setUnits(Units units) { model_->setUnits(units); }
    /// Selects the row of a heat (and of a cycle, when it has been judged by more than one). False: not in the list.
    bool choose(const QString& heat, const QString& cycle = {});
    void focusSearch();
    HeatModel* model() const { return model_; }
    QTableView* table() const { return table_; }
    QLineEdit* searchBox() const { return search_; }

signals:
    /// Cycle and furnace are those of the row, empty when it has not been judged.
    void heatChosen(const QString& heat, const QString& cycle, const QString& furnace);
    void importWanted();

private:
    void tellCurrent();
    void tellProgress(int done, int total);
    void summarise();

    HeatModel* model_;
    HeatFilter* filter_;
    QLineEdit* search_;
    QStackedWidget* pages_;
    QTableView* table_;
    QLabel* summary_;
    QProgressBar* progress_;
    QPushButton* stop_;
    QString told_;  // what was told last: rows that move while verdicts arrive are not a choice
};

}  // namespace soak::desk
