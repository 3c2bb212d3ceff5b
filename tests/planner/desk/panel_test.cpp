// SPDX-License-Identifier: GPL-3.0-or-later
#include <QLabel>
#include <QPushButton>
#include <QSignalSpy>
#include <QTableWidget>
#include <QTest>
#include <memory>

#include "made_answer.h"
#include "planner/desk/answer_panel.h"
#include "planner/desk/answer_text.h"
#include "planner/desk/fold.h"

using namespace soak;
using namespace soak::desk;

class PanelTest : public QObject {
    Q_OBJECT

private:
    static std::unique_ptr<AnswerPanel> openPanel(const WindowAnswer& answer = made::duplex()) {
        auto panel = std::make_unique<AnswerPanel>();
        panel->resize(410, 700);
        panel->setAnswer(answer);
        panel->show();
        QCoreApplication::processEvents();
        return panel;
    }

    static bool says(const AnswerPanel& panel, const QString& text) {
        const auto labels = panel.findChildren<QLabel*>();
        return std::any_of(labels.begin(), labels.end(),
                           [&](const QLabel* label) { return label->isVisible() && label->text().contains(text); });
    }

    static QPushButton* button(const AnswerPanel& panel, const QString& text) {
        for (QPushButton* one : panel.findChildren<QPushButton*>())
            if (QString(one->text()).remove('&').contains(text)) return one;
        return nullptr;
    }

private slots:
    void the_word_stands_beside_the_mark_for_every_verdict() {
        WindowAnswer answer = made::duplex();
        const std::vector<std::pair<Verdict, QString>> words{{Verdict::inside, "Inside, 9\u2009K to spare"},
                                                             {Verdict::tight, "Tight, 9\u2009K to spare"},
                                                             {Verdict::noWindow, "No window"},
                                                             {Verdict::notComputed, "Not computed"}};
        answer.margin_K = 8.6;
        for (const auto& [verdict, text] : words) {
            answer.verdict = verdict;
            QCOMPARE(verdictHeadline(answer, {}), text);
        }
        answer.verdict = Verdict::outside;
        answer.margin_K = -12.2;
        QCOMPARE(verdictHeadline(answer, {}), QStringLiteral("Outside by 12\u2009K"));
        QCOMPARE(verdictHeadline(answer, {true}), QStringLiteral("Outside by 22\u2009°F"));
    }

    void it_shows_what_the_metal_sees_between_its_two_limits() {
        const auto panel = openPanel();
        for (const char* text : {"1152\u2009°C", "1061\u2009°C", "1050\u2009°C", "1039\u2009°C", "1031\u2009°C",
                                 "91\u2009K below the ceiling", "9\u2009K above the floor", "1922\u2009°F in F2"})
            QVERIFY2(says(*panel, QString::fromUtf8(text)), text);
    }

    void numbers_follow_the_setpoint_and_the_unit() {
        const auto panel = openPanel();
        panel->follow(made::at(made::duplex(), 1030));
        QVERIFY(says(*panel, QString::fromUtf8("1019\u2009°C")));
        QVERIFY(says(*panel, QString::fromUtf8("Outside by")));
        panel->setUnits({true});
        QVERIFY(says(*panel, QString::fromUtf8("1866\u2009°F")));  // 1019 °C
        QVERIFY(!says(*panel, QString::fromUtf8("\u2009K ")));
    }

    void nothing_in_the_answer_jumps_while_dragging() {
        const auto panel = openPanel();
        const QPoint before = button(*panel, "Issue sheet")->mapTo(panel.get(), QPoint());
        WindowAnswer moved = made::at(made::duplex(), 1044);
        moved.reason += QStringLiteral(" A second sentence that is rather longer than the first one was.");
        panel->follow(moved);
        QCoreApplication::processEvents();
        QCOMPARE(button(*panel, "Issue sheet")->mapTo(panel.get(), QPoint()), before);
    }

    void a_limit_that_is_asked_for_opens_with_its_reason_and_what_moves_it() {
        const auto panel = openPanel();
        panel->showLimit(Side::ceiling, 0);
        QVERIFY(says(*panel, "ferrite above 60 vol% costs toughness"));
        const auto* table = panel->findChild<QTableWidget*>();
        QVERIFY(table->isVisible());
        QVERIFY(table->item(table->currentRow(), 0)->text().contains("ferrite at most 60 %"));
    }

    void all_limits_are_listed_hottest_first() {
        const auto panel = openPanel();
        const auto* table = panel->findChild<QTableWidget*>();
        QCOMPARE(table->rowCount(), 7);
        QVERIFY(table->item(0, 0)->text().contains("solidus"));
        QVERIFY(table->item(6, 0)->text().contains("ferrite at least 40 %"));
    }

    void a_limit_that_was_not_computed_says_why_instead_of_a_number() {
        WindowAnswer answer = made::duplex();
        Limit missing = made::limit(Side::floor, QStringLiteral("Cr2N dissolved"), 0, 1);
        missing.temperature_C.reset();
        missing.computed = false;
        missing.remark = QStringLiteral("N missing");
        answer.floors = {missing};
        answer.low_C.reset();
        answer.verdict = Verdict::notComputed;
        answer.margin_K.reset();
        const auto panel = openPanel(answer);
        QVERIFY(says(*panel, "N missing"));
        QVERIFY(says(*panel, "Not computed"));
    }

    void the_suggested_setpoint_is_one_press_away() {
        const auto panel = openPanel();
        QSignalSpy wanted(panel.get(), &AnswerPanel::setpointWanted);
        QTest::mouseClick(button(*panel, "1091"), Qt::LeftButton);
        QCOMPARE(wanted.size(), 1);
        QCOMPARE(wanted[0][0].toDouble(), 1091.0);
        panel->follow(made::at(made::duplex(), 1091));
        QVERIFY(!button(*panel, "No setpoint fits better")->isEnabled());
    }

    void a_sheet_that_may_not_be_issued_says_why() {
        WindowAnswer answer = made::duplex();
        answer.band.may_issue = false;
        answer.band.warnings = QStringList{QStringLiteral("survey overdue since 2024-09-28")};
        const auto panel = openPanel(answer);
        QVERIFY(!button(*panel, "Issue sheet")->isEnabled());
        QVERIFY(button(*panel, "Issue sheet")->toolTip().contains("survey overdue since 2024-09-28"));
        QVERIFY(button(*panel, "Preview")->isEnabled());
        QVERIFY(says(*panel, "survey overdue since 2024-09-28"));
    }

    void grade_and_window_are_two_answers() {
        WindowAnswer answer = made::duplex();
        answer.grade_check.verdict = QStringLiteral("fails");
        answer.grade_check.findings = {{QStringLiteral("C"), QStringLiteral("C 0.034 above 0.030"), {}, true}};
        const auto panel = openPanel(answer);
        QVERIFY(says(*panel, "C 0.034 above 0.030"));
        QVERIFY(says(*panel, "Inside"));
    }

    void text_of_a_file_is_never_taken_for_markup() {
        GradeCheck check;
        check.findings = {{QStringLiteral("C"), QStringLiteral("C <0.03"), QStringLiteral("a & b"), true}};
        QVERIFY(gradeCheckText(check).contains("C &lt;0.03"));
        QCOMPARE(linesOr(QStringList{QStringLiteral("<i>")}, {}), QStringLiteral("&lt;i&gt;"));
    }

    void every_fold_opens_with_the_keyboard() {
        const auto panel = openPanel();
        for (Fold* fold : panel->findChildren<Fold*>()) {
            QVERIFY(!fold->heading()->accessibleName().isEmpty());
            QTest::keyClick(fold->heading(), Qt::Key_Space);
            QVERIFY(fold->isOpen());
        }
    }
};

QTEST_MAIN(PanelTest)
#include "panel_test.moc"
