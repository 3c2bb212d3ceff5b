// SPDX-License-Identifier: GPL-3.0-or-later
#include <QComboBox>
#include <QElapsedTimer>
#include <QFile>
#include <QSettings>
#include <QSignalSpy>
#include <QTableView>
#include <QTemporaryDir>
#include <QTest>

#include "db/demo.h"
#include "planner/desk/answer_panel.h"
#include "planner/desk/heat_panel.h"
#include "planner/desk/import_dialog.h"
#include "planner/desk/main_window.h"
#include "planner/desk/rail.h"
#include "timing.h"

using namespace soak;
using namespace soak::desk;

/// The whole desk on the demonstration shop, with the real engine.
class WindowTest : public QObject {
    Q_OBJECT

private:
    QTemporaryDir folder_;
    QString store_;

    static constexpr int kPatience_ms = 60000;  // under the sanitizers an equilibrium takes long

    void open(MainWindow& window, const QString& heat = {}, const QString& cycle = {}, const QString& furnace = {}) {
        QSignalSpy shown(&window, &MainWindow::storeShown), answered(&window, &MainWindow::answerShown);
        window.openStore(store_, heat, cycle, furnace);
        QVERIFY(shown.wait(kPatience_ms));
        window.heats()->stop();  // one answer is enough here
        if (!heat.isEmpty()) QVERIFY(!answered.isEmpty() || answered.wait(kPatience_ms));
    }

private slots:
    void initTestCase() {
        QVERIFY(folder_.isValid());
        QSettings::setPath(QSettings::NativeFormat, QSettings::UserScope, folder_.path());
        QCoreApplication::setOrganizationName(QStringLiteral("soakwright-test"));
        store_ = folder_.filePath(QStringLiteral("demo.soak"));
        const Result<Store> made = createDemoShop(store_);
        QVERIFY2(made, made ? "" : made.error().text().c_str());
    }

    void a_heat_is_answered_and_every_number_follows_the_arrow_keys() {
        MainWindow window;
        open(window, QStringLiteral("K40217"), QStringLiteral("SA-300"), QStringLiteral("F2"));
        QVERIFY(window.answer());
        QCOMPARE(window.answer()->heat, QStringLiteral("K40217"));
        QCOMPARE(window.cycleBox()->currentData().toString(), QStringLiteral("SA-300"));
        QCOMPARE(window.furnaceBox()->currentData().toString(), QStringLiteral("F2"));
        QCOMPARE(window.rail()->setpoint_C(), 1060.0);
        const double coldest = window.answer()->band.low_C;
        QTest::keyClick(window.rail(), Qt::Key_Up);
        QCOMPARE(window.rail()->setpoint_C(), 1061.0);  // F2's controller takes steps of 1 °C
        QVERIFY(window.answer()->band.low_C > coldest);
        QVERIFY(!window.rail()->reading(700).isEmpty());
    }

    void another_furnace_gives_another_band() {
        MainWindow window;
        open(window, QStringLiteral("K40217"), QStringLiteral("SA-300"), QStringLiteral("F2"));
        const double width = window.answer()->band.high_C - window.answer()->band.low_C;
        QSignalSpy answered(&window, &MainWindow::answerShown);
        const int other = window.furnaceBox()->findData(QStringLiteral("F1"));
        window.furnaceBox()->setCurrentIndex(other);
        emit window.furnaceBox()->activated(other);
        QVERIFY(answered.wait(kPatience_ms));
        QVERIFY(window.answer()->band.high_C - window.answer()->band.low_C > width);
    }

    void the_setpoint_stays_on_the_controllers_scale_and_inside_the_furnace() {
        MainWindow window;
        open(window, QStringLiteral("K40217"), QStringLiteral("SA-300"), QStringLiteral("F1"));
        QTest::keyClick(window.rail(), Qt::Key_Up);
        QCOMPARE(window.rail()->setpoint_C(), 1065.0);  // steps of 5 °C
        for (int i = 0; i < 20; ++i) QTest::keyClick(window.rail(), Qt::Key_PageUp);
        QVERIFY(window.rail()->setpoint_C() <= 1150);
    }

    void a_heat_that_is_not_there_is_said() {
        MainWindow window;
        QSignalSpy complained(&window, &MainWindow::complained);
        open(window);
        QVERIFY(!window.heats()->choose(QStringLiteral("nowhere")));
        QSignalSpy shown(&window, &MainWindow::storeShown);
        window.openStore(store_, QStringLiteral("nowhere"));
        QVERIFY(shown.wait(kPatience_ms));
        QCOMPARE(complained.size(), 1);
        QVERIFY(complained[0][0].toString().contains("nowhere"));
        QVERIFY(!window.answer());
    }

    void a_file_that_is_no_store_is_refused_with_its_name() {
        MainWindow window;
        QSignalSpy complained(&window, &MainWindow::complained);
        const QString path = folder_.filePath(QStringLiteral("missing.soak"));
        window.openStore(path);
        QVERIFY(complained.wait(kPatience_ms));
        QVERIFY(complained[0][0].toString().contains("missing.soak"));
    }

    void all_numbers_follow_a_drag_at_30_pictures_a_second_or_better() {
        MainWindow window;
        window.resize(1366, 768);
        open(window, QStringLiteral("D7718"), QStringLiteral("SA-22"), QStringLiteral("F2"));
        window.show();
        QCoreApplication::processEvents();
        constexpr int kPictures = 60;
        QElapsedTimer timer;
        timer.start();
        for (int i = 0; i < kPictures; ++i) {
            QTest::keyClick(window.rail(), i % 20 < 10 ? Qt::Key_Up : Qt::Key_Down);
            QCoreApplication::processEvents();
        }
        const double each_ms = double(timer.elapsed()) / kPictures;
        qInfo("one step of the whole desk: %.2f ms", each_ms);
        QVERIFY(!kSpeedCounts || each_ms < 1000.0 / 30);
    }

    void painting_never_waits_for_the_heats_that_are_being_judged() {
        // Qt paints large areas with the global thread pool: heats that fill it would stop the window.
        MainWindow window;
        QSignalSpy shown(&window, &MainWindow::storeShown);
        window.openStore(store_);
        QVERIFY(shown.wait(kPatience_ms));
        QVERIFY(window.heats()->model()->isJudging());
        QCOMPARE(QThreadPool::globalInstance()->activeThreadCount(), 0);
        window.heats()->stop();
    }

    void the_sheet_of_the_answer_is_written_as_a_PDF() {
        MainWindow window;
        QVERIFY(!window.writePdf(folder_.filePath(QStringLiteral("none.pdf"))));
        open(window, QStringLiteral("K40217"), QStringLiteral("SA-300"), QStringLiteral("F2"));
        const QString path = folder_.filePath(QStringLiteral("sheet.pdf"));
        const Result<Done> written = window.writePdf(path);
        QVERIFY2(written, written ? "" : written.error().text().c_str());
        QFile file(path);
        QVERIFY(file.open(QIODevice::ReadOnly));
        QVERIFY(file.read(5) == "%PDF-");
    }

    void an_agreed_import_stands_in_the_list() {
        const QString path = folder_.filePath(QStringLiteral("delivery.csv"));
        QFile file(path);
        QVERIFY(file.open(QIODevice::WriteOnly));
        file.write("heat,grade,C,Si,Mn,Cr,Ni,N\n0007,1.4307,\"0,021\",0.4,1.5,18.2,8.1,0.06\n");
        file.close();
        MainWindow window;
        open(window);
        const int before = window.heats()->model()->rowCount();
        QSignalSpy shown(&window, &MainWindow::storeShown);
        window.importFile(path);
        auto* dialog = window.findChild<ImportDialog*>();
        QVERIFY(dialog);
        dialog->accept();
        QVERIFY(shown.wait(kPatience_ms));
        window.heats()->stop();
        QCOMPARE(window.heats()->model()->rowCount(), before + 1);
        QVERIFY(window.heats()->choose(QStringLiteral("0007")));  // leading zeros survive
    }

    void it_fits_a_small_screen() {
        MainWindow window;
        open(window, QStringLiteral("K40217"));
        window.resize(1366, 768);
        window.show();
        QCoreApplication::processEvents();
        QVERIFY(window.width() <= 1366);
        QVERIFY(window.height() <= 768);
        QVERIFY(window.minimumSizeHint().width() <= 1366 && window.minimumSizeHint().height() <= 720);
    }

    void everything_that_takes_the_keyboard_has_a_name_for_a_screen_reader() {
        MainWindow window;
        open(window, QStringLiteral("K40217"));
        window.show();
        for (QWidget* widget :
             {static_cast<QWidget*>(window.rail()), static_cast<QWidget*>(window.cycleBox()),
              static_cast<QWidget*>(window.furnaceBox()), static_cast<QWidget*>(window.heats()->table())}) {
            QVERIFY(widget->focusPolicy() & Qt::TabFocus);
            QVERIFY(!widget->accessibleName().isEmpty());
        }
        QVERIFY(window.rail()->accessibleDescription().contains("1060"));
    }

    void pictures_in_light_and_dark_are_kept() {
        for (const bool dark : {false, true}) {
            MainWindow window;
            if (dark) {
                QPalette palette(QColor(37, 39, 42));
                palette.setColor(QPalette::Base, QColor(28, 30, 32));
                window.setPalette(palette);
            }
            open(window, QStringLiteral("K40217"));
            window.resize(1366, 768);
            window.show();
            QCoreApplication::processEvents();
            const QString path = QCoreApplication::applicationDirPath() + (dark ? "/desk-dark.png" : "/desk-light.png");
            QVERIFY(window.grab().save(path));
        }
    }
};

QTEST_MAIN(WindowTest)
#include "window_test.moc"
