// SPDX-License-Identifier: GPL-3.0-or-later
#include <QElapsedTimer>
#include <QLineEdit>
#include <QSignalSpy>
#include <QTableView>
#include <QTableWidget>
#include <QTest>
#include <memory>

#include "planner/desk/heat_model.h"
#include "planner/desk/heat_panel.h"
#include "planner/desk/import_dialog.h"
#include "timing.h"

using namespace soak;
using namespace soak::desk;

class HeatsTest : public QObject {
    Q_OBJECT

private:
    /// A shop without cycles: every heat is answered, and none of them needs an equilibrium.
    static std::shared_ptr<const DeskData> shop(int heats) {
        auto data = std::make_shared<DeskData>();
        for (int i = 0; i < heats; ++i) {
            Heat heat;
            heat.number = QStringLiteral("H%1").arg(i, 5, 10, QLatin1Char('0'));
            heat.grade = i % 2 ? QStringLiteral("1.4462") : QStringLiteral("1.4307");
            data->heats.push_back(heat);
        }
        data->shelf = std::make_shared<const Shelf>();
        return data;
    }

    static void judgeAndWait(HeatModel& model) {
        QSignalSpy finished(&model, &HeatModel::finished);
        model.judgeAll();
        QVERIFY(!finished.isEmpty() || finished.wait(30000));
    }

private slots:
    void every_heat_stands_in_the_list_before_it_is_judged() {
        HeatModel model;
        model.show(shop(7));
        QCOMPARE(model.rowCount(), 7);
        QVERIFY(!model.judgedAt(0));
        QCOMPARE(model.index(3, HeatModel::heatColumn).data().toString(), QStringLiteral("H00003"));
    }

    void every_heat_is_answered_and_none_is_lost() {
        HeatModel model;
        model.show(shop(40));
        judgeAndWait(model);
        QCOMPARE(model.rowCount(), 40);
        for (int row = 0; row < 40; ++row) {
            QVERIFY(model.judgedAt(row));
            QCOMPARE(model.judgedAt(row)->verdict, Verdict::notComputed);
            QVERIFY(!model.judgedAt(row)->reason.isEmpty());
            QCOMPARE(model.heatAt(row), QStringLiteral("H%1").arg(row, 5, 10, QLatin1Char('0')));
        }
    }

    void stopping_keeps_what_has_been_judged() {
        HeatModel model;
        model.show(shop(4000));
        model.judgeAll();
        model.stop();
        QVERIFY(!model.isJudging());
        QCoreApplication::processEvents();
        QCOMPARE(model.rowCount(), 4000);
        judgeAndWait(model);
        QVERIFY(model.judgedAt(3999));
    }

    void another_store_takes_nothing_over_from_the_one_before() {
        HeatModel model;
        model.show(shop(200));
        model.judgeAll();
        model.show(shop(3));
        QCoreApplication::processEvents();
        QCOMPARE(model.rowCount(), 3);
        QVERIFY(!model.judgedAt(0));
    }

    void search_needs_every_word() {
        HeatModel model;
        HeatFilter filter;
        filter.setSourceModel(&model);
        model.show(shop(20));
        filter.search(QStringLiteral("1.4462 h0000"));
        QCOMPARE(filter.rowCount(), 5);
        filter.search(QStringLiteral("1.4462 H00004"));
        QCOMPARE(filter.rowCount(), 0);
        filter.search(QString());
        QCOMPARE(filter.rowCount(), 20);
    }

    void choosing_a_heat_tells_it_once() {
        HeatPanel panel;
        panel.resize(400, 600);
        panel.showStore(shop(10));
        QSignalSpy chosen(&panel, &HeatPanel::heatChosen);
        QVERIFY(panel.choose(QStringLiteral("H00004")));
        QCOMPARE(chosen.size(), 1);
        QCOMPARE(chosen[0][0].toString(), QStringLiteral("H00004"));
        QVERIFY(!panel.choose(QStringLiteral("nowhere")));
    }

    void a_search_ends_in_the_list_with_Return() {
        HeatPanel panel;
        panel.showStore(shop(10));
        QSignalSpy chosen(&panel, &HeatPanel::heatChosen);
        QTest::keyClicks(panel.searchBox(), QStringLiteral("H00007"));
        QTest::keyClick(panel.searchBox(), Qt::Key_Return);
        QCOMPARE(chosen.size(), 1);
        QCOMPARE(chosen[0][0].toString(), QStringLiteral("H00007"));
    }

    void an_empty_store_says_what_to_do_first() {
        HeatPanel panel;
        panel.showStore(shop(0));
        panel.show();
        QVERIFY(!panel.table()->isVisible());
    }

    void fifty_thousand_heats_are_searched_faster_than_a_person_types() {
        HeatModel model;
        HeatFilter filter;
        filter.setSourceModel(&model);
        model.show(shop(50000));
        QElapsedTimer timer;
        timer.start();
        filter.search(QStringLiteral("H4999"));
        const int found = filter.rowCount();
        const qint64 spent_ms = timer.elapsed();
        qInfo("search over 50 000 heats: %lld ms", static_cast<long long>(spent_ms));
        QCOMPARE(found, 10);
        QVERIFY(!kSpeedCounts || spent_ms < 1000);
    }

    void an_import_shows_raw_beside_read_and_why_a_row_is_held() {
        const QByteArray file =
            "heat,grade,C,Cr,N\n"
            "D1,1.4462,\"0,021\",22.4,1740 ppm\n"
            "D2,1.4462,0.020,252.0,0.17\n"
            "D3,1.4462,0.019,22.1,0.165\n"
            "D 4,1.4462,0.019,22.1,0.165\n";
        const Result<Certificate> certificate = readCertificateText(file, QStringLiteral("made.csv"));
        QVERIFY(certificate);
        const ImportDialog dialog(certificate.value(), {QStringLiteral("D3"), QStringLiteral("D4")});
        QCOMPARE(dialog.rows()->rowCount(), 4);
        QCOMPARE(dialog.heats().size(), size_t(2));
        QCOMPARE(dialog.heats().front().number, QStringLiteral("D1"));
        QCOMPARE(dialog.rows()->item(0, 5)->text(), QStringLiteral("0,021"));
        QVERIFY(dialog.rows()->item(0, 5)->toolTip().contains("0.021 wt%"));
        QVERIFY(dialog.rows()->item(1, 4)->text().startsWith("held:"));
        QCOMPARE(dialog.rows()->item(2, 4)->text(), QStringLiteral("stored already"));
        QVERIFY(dialog.rows()->item(3, 4)->text().contains("is it D4?"));  // an offer, never a repair
    }
};

QTEST_MAIN(HeatsTest)
#include "heats_test.moc"
