// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QFutureWatcher>
#include <QMainWindow>
#include <QThreadPool>
#include <memory>

#include "desk_data.h"
#include "judge.h"
#include "planner/core/sheet_content.h"
#include "units.h"

class QComboBox;
class QLabel;
class QSplitter;
class QStackedWidget;

namespace soak::desk {

class AnswerPanel;
class HeatPanel;
class Rail;
class StartPage;

/// The desk: heats on the left, the metal in the middle, the answer on the right. It asks core and shows what core
/// says; it decides nothing.
class MainWindow : public QMainWindow {
    Q_OBJECT

public:
    explicit MainWindow(QWidget* parent = nullptr);
    ~MainWindow() override;

    /// Opens a store in the background; `heat`, `cycle` and `furnace` are chosen when it is there.
    void openStore(const QString& path, const QString& heat = {}, const QString& cycle = {},
                   const QString& furnace = {});
    /// Shows what a certificate's file was read as and stores what the person agrees to.
    void importFile(const QString& path);
    void setFahrenheit(bool fahrenheit);
    /// Writes the sheet of the answer at hand: the issued one, or a draft. `notices` is for the person at the screen.
    Result<Done> writePdf(const QString& path, QStringList* notices = nullptr) const;

    HeatPanel* heats() const { return heats_; }
    Rail* rail() const { return rail_; }
    AnswerPanel* answerPanel() const { return answer_panel_; }
    QComboBox* cycleBox() const { return cycle_; }
    QComboBox* furnaceBox() const { return furnace_; }
    const WindowAnswer* answer() const { return shown_ ? &answer_ : nullptr; }

signals:
    void storeShown();
    void answerShown();
    /// Something failed; it stands in the window as well.
    void complained(const QString& sentence);

protected:
    void dragEnterEvent(QDragEnterEvent* event) override;
    void dropEvent(QDropEvent* event) override;
    void closeEvent(QCloseEvent* event) override;

private:
    struct Wish {
        QString heat, cycle, furnace;
    };

    void buildMenus();
    void buildFileMenu();
    void buildSheetMenu();
    void buildViewMenu();
    QWidget* buildBench();
    void makeStore(bool demonstration);
    void chooseStore();
    void chooseCertificate();
    void storeLoaded();
    void remember(const QString& path);
    QStringList recentStores() const;
    void tellRecent();

    void chooseHeat(const QString& heat, const QString& cycle, const QString& furnace);
    void fillCycles(const QString& wanted);
    void fillFurnaces(const QString& wanted);
    void ask();
    void showAnswer(const WindowAnswer& answer);
    void moveSetpoint(double celsius);
    void forgetAnswer();
    void cannotAnswer(const QString& reason);
    Job job() const;
    Result<SheetContent> sheetAtHand() const;
    void issue();
    void preview();
    void savePdf();
    void complain(const QString& title, const Error& error);

    std::shared_ptr<const DeskData> data_;
    Heat heat_;
    WindowAnswer answer_;  // without its sweep: the rail and the panel hold what they draw
    bool shown_ = false;
    std::optional<SheetContent> issued_;  // the sheet of exactly this answer
    Wish wish_;
    Units units_;
    Judge judge_;
    QThreadPool loader_;
    QFutureWatcher<std::shared_ptr<Result<DeskData>>> loading_;

    QStackedWidget* pages_;
    StartPage* start_;
    QSplitter* bench_;
    HeatPanel* heats_;
    QLabel* title_;
    QComboBox *cycle_, *furnace_;
    Rail* rail_;
    AnswerPanel* answer_panel_;
    QMenu* recent_menu_ = nullptr;
    QAction* fahrenheit_action_ = nullptr;
    QList<QAction*> store_actions_, answer_actions_;
};

}  // namespace soak::desk
