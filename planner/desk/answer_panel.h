// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QWidget>

#include "ribbon.h"
#include "units.h"

class QGridLayout;
class QLabel;
class QPushButton;
class QScrollArea;
class QTableWidget;
class QVBoxLayout;

namespace soak::desk {

class Fold;
class SensitivityBars;
class VerdictMark;

/// The answer in words: verdict, what the metal sees between its two binding limits (hot is up, as on the rail), and
/// the buttons; these never scroll. Everything else is folded below.
class AnswerPanel : public QWidget {
    Q_OBJECT

public:
    explicit AnswerPanel(QWidget* parent = nullptr);

    /// A new answer.
    void setAnswer(const WindowAnswer& answer);
    /// The same heat at another setpoint.
    void follow(const WindowAnswer& answer);
    void clear(const QString& sentence);
    void setUnits(Units units);
    /// The scale of the furnace's controller: setpoints to be set there are named in it first.
    void setController(bool fahrenheit) { controller_fahrenheit_ = fahrenheit; }
    /// Opens the list of limits at one of them, with its reason, uncertainty and sensitivities.
    void showLimit(Side side, int index);

signals:
    void issueWanted();
    void printWanted();
    void setpointWanted(double celsius);

private:
    struct Line {
        QLabel *name, *value, *note;
    };
    void buildHead(QVBoxLayout* column);
    void buildStack(QVBoxLayout* column);
    void buildButtons(QVBoxLayout* column);
    void buildFolds(QVBoxLayout* column);
    Line addLine(QGridLayout* grid, int row, bool strong);
    QLabel* addTextFold(QVBoxLayout* column, const QString& title, Fold*& fold);
    void fillLimits();
    void fillRemarks();
    void fillFollowing();
    void fillStack();
    void fillLimitLine(const Line& line, const std::vector<Limit>& limits, const QString& name);
    void fillButtons();
    void selectLimit(int row);

    WindowAnswer answer_;
    Ribbons ribbons_;
    Units units_;
    bool controller_fahrenheit_ = false;
    std::vector<Limit> listed_;  // as in the table: ceilings from the highest down to the lowest floor

    QWidget* body_;
    QLabel *empty_, *headline_, *reason_, *grade_, *warnings_;
    VerdictMark* mark_;
    Line ceiling_, hottest_, setpoint_, coldest_, floor_;
    QPushButton *issue_, *print_, *suggest_;
    QScrollArea* folds_;
    Fold *limits_fold_, *phases_fold_, *band_fold_, *published_fold_, *grade_fold_, *remarks_fold_;
    QTableWidget* limits_;
    QLabel *limit_details_, *bars_title_;
    SensitivityBars* bars_;
    QLabel *phases_, *band_, *published_, *grade_text_, *remarks_;
};

}  // namespace soak::desk
