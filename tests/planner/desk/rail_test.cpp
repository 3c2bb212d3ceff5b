// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/desk/rail.h"

#include <QElapsedTimer>
#include <QSignalSpy>
#include <QTest>
#include <cmath>

#include "made_answer.h"
#include "timing.h"

using namespace soak;
using namespace soak::desk;

class RailTest : public QObject {
    Q_OBJECT

private:
    static double step(double celsius, int steps) { return std::round(celsius) + steps; }

    static std::unique_ptr<Rail> openRail() {
        auto rail = std::make_unique<Rail>();
        rail->resize(600, 640);
        rail->setStepper(step);
        rail->setAnswer(made::duplex());
        rail->grab();
        return rail;
    }

private slots:
    void opens_on_the_window_and_150_K_around_it() {
        const auto rail = openRail();
        QCOMPARE(rail->view().low, 1030.4 - 150);
        QCOMPARE(rail->view().high, 1152.3 + 150);
    }

    void hot_is_up() {
        const auto rail = openRail();
        QVERIFY(rail->yOf(1152) < rail->yOf(1030));
    }

    void arrow_keys_move_by_one_step_of_the_controller_and_page_keys_by_five() {
        const auto rail = openRail();
        QSignalSpy moved(rail.get(), &Rail::setpointMoved);
        for (const auto key : {Qt::Key_Up, Qt::Key_Down, Qt::Key_PageUp, Qt::Key_PageDown})
            QTest::keyClick(rail.get(), key);
        QCOMPARE(moved.size(), 4);
        QCOMPARE(moved[0][0].toDouble(), 1051.0);
        QCOMPARE(moved[1][0].toDouble(), 1049.0);
        QCOMPARE(moved[2][0].toDouble(), 1055.0);
        QCOMPARE(moved[3][0].toDouble(), 1045.0);
    }

    void dragging_the_band_moves_the_setpoint_by_as_much_as_the_pointer() {
        const auto rail = openRail();
        QSignalSpy moved(rail.get(), &Rail::setpointMoved);
        const int x = 150;
        const double start = rail->yOf(1050) + 3;
        QTest::mousePress(rail.get(), Qt::LeftButton, {}, QPoint(x, int(start)));
        QTest::mouseMove(rail.get(), QPoint(x, int(start + rail->yOf(1090) - rail->yOf(1050))));
        QTest::mouseRelease(rail.get(), Qt::LeftButton, {}, QPoint(x, int(start)));
        QVERIFY(!moved.isEmpty());
        QVERIFY(std::abs(moved.last()[0].toDouble() - 1090) <= 1);  // one step: the pointer stands on whole points
    }

    void following_a_drag_keeps_the_view_and_the_limits() {
        const auto rail = openRail();
        const Range_C before = rail->view();
        const size_t limits = rail->ledges().size();
        rail->follow(made::at(made::duplex(), 1080));
        QCOMPARE(rail->setpoint_C(), 1080.0);
        QCOMPARE(rail->view().low, before.low);
        QCOMPARE(rail->ledges().size(), limits);
    }

    void zoom_reaches_all_temperatures_and_returns() {
        const auto rail = openRail();
        QTest::keyClick(rail.get(), Qt::Key_End);
        QVERIFY(rail->view().low <= 600.0 && rail->view().high >= 1500.0);
        QTest::keyClick(rail.get(), Qt::Key_Home);
        QCOMPARE(rail->view().low, 1030.4 - 150);
        QTest::keyClick(rail.get(), Qt::Key_Plus);
        QVERIFY(rail->view().high - rail->view().low < 1152.3 - 1030.4 + 300);
    }

    void a_click_on_a_limit_names_it() {
        const auto rail = openRail();
        QSignalSpy clicked(rail.get(), &Rail::limitClicked);
        for (const Ledge& ledge : rail->ledges()) {
            QTest::mouseClick(rail.get(), Qt::LeftButton, {}, ledge.label.center().toPoint());
            QCOMPARE(clicked.last()[0].value<Side>(), ledge.side);
            QCOMPARE(clicked.last()[1].toInt(), ledge.index);
        }
        QCOMPARE(clicked.size(), qsizetype(rail->ledges().size()));
    }

    void labels_of_limits_never_lie_on_each_other() {
        WindowAnswer crowded = made::duplex();
        for (int i = 0; i < 8; ++i)
            crowded.floors.push_back(made::limit(Side::floor, QStringLiteral("limit %1").arg(i), 1029 - 0.5 * i, 4));
        Rail rail;
        rail.resize(520, 640);
        rail.setAnswer(crowded);
        rail.grab();
        for (const Ledge& a : rail.ledges())
            for (const Ledge& b : rail.ledges())
                if (&a != &b) QVERIFY(!a.label.intersects(b.label.adjusted(0, 0.1, 0, -0.1)));
    }

    void only_the_first_limit_of_each_side_binds() {
        const auto rail = openRail();
        int binding = 0;
        for (const Ledge& ledge : rail->ledges()) binding += ledge.binding;
        QCOMPARE(binding, 2);
    }

    void the_reading_gives_amounts_and_compositions_at_that_temperature() {
        const auto rail = openRail();
        const QString text = rail->reading(900);
        QVERIFY(text.contains("900"));
        QVERIFY(text.contains("1652"));  // °F
        QVERIFY(text.contains("sigma"));
        QVERIFY(text.contains("Cr\u00a031"));
        QVERIFY(!rail->reading(1100).contains("sigma"));
        QVERIFY(rail->reading(100).isEmpty());  // outside the sweep: no number
    }

    void dragging_paints_more_than_60_pictures_a_second() {
        const auto rail = openRail();
        const WindowAnswer answer = made::duplex();
        QPixmap target(rail->size());
        constexpr int kPictures = 120;
        QElapsedTimer timer;
        timer.start();
        for (int i = 0; i < kPictures; ++i) {
            rail->follow(made::at(answer, 1050 + i % 40));
            rail->render(&target);
        }
        const double each_ms = double(timer.elapsed()) / kPictures;
        qInfo("one picture of a drag: %.2f ms", each_ms);
        QVERIFY(!kSpeedCounts || each_ms < 1000.0 / 60);
    }

    void limits_change_their_unit_with_the_setting() {
        const auto rail = openRail();
        rail->setUnits({true});
        for (const Ledge& ledge : rail->ledges()) QVERIFY(ledge.temperature.endsWith("°F"));
        rail->setUnits({false});
        for (const Ledge& ledge : rail->ledges()) QVERIFY(ledge.temperature.endsWith("°C"));
    }

    void without_an_answer_it_says_what_to_do() {
        const auto rail = openRail();
        rail->clear(QStringLiteral("Choose a heat on the left."));
        QCOMPARE(rail->accessibleDescription(), QStringLiteral("Choose a heat on the left."));
        QSignalSpy moved(rail.get(), &Rail::setpointMoved);
        QTest::keyClick(rail.get(), Qt::Key_Up);
        QVERIFY(moved.isEmpty());
    }
};

QTEST_MAIN(RailTest)
#include "rail_test.moc"
