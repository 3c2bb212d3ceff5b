// SPDX-License-Identifier: GPL-3.0-or-later
#include <QTest>
#include <cmath>

#include "made_answer.h"
#include "planner/desk/label_column.h"
#include "planner/desk/phase_colours.h"
#include "planner/desk/rail_scale.h"
#include "planner/desk/ribbon.h"
#include "planner/desk/units.h"

using namespace soak;
using namespace soak::desk;

class PartsTest : public QObject {
    Q_OBJECT

private slots:
    void temperatures_have_a_unit_a_thin_space_and_a_true_minus() {
        QCOMPARE(Units{false}.temperature(1060), QStringLiteral("1060\u2009°C"));
        QCOMPARE(Units{true}.temperature(1030), QStringLiteral("1886\u2009°F"));
        QCOMPARE(Units{false}.temperature(-40), QStringLiteral("\u221240\u2009°C"));
        QCOMPARE(number(-0.2), QStringLiteral("0"));
    }

    void sentences_of_core_are_shown_in_the_scale_of_the_desk() {
        const Units celsius{false}, fahrenheit{true};
        const QString reason = QStringLiteral(
            "Tight: the coldest metal, 1048.6\u2009°C, stays 8.6\u2009K above specification minimum 1040\u2009°C.");
        QCOMPARE(celsius.sentence(reason), reason);
        QCOMPARE(fahrenheit.sentence(reason),
                 QStringLiteral("Tight: the coldest metal, 1919.5\u2009°F, stays 15.5\u2009°F above specification "
                                "minimum 1904\u2009°F."));
        QCOMPARE(fahrenheit.sentence(QStringLiteral("sigma dissolved + 20\u2009K, M23C6 gone, K40217, 5 Knots")),
                 QStringLiteral("sigma dissolved + 36\u2009°F, M23C6 gone, K40217, 5 Knots"));
        QCOMPARE(fahrenheit.sentence(QStringLiteral("1020 to 1100 °C; 1020-1100 °C; \u221240\u2009°C")),
                 QStringLiteral("1868 to 2012\u2009°F; 1868-2012\u2009°F; \u221240\u2009°F"));
        QCOMPARE(fahrenheit.sentence(QStringLiteral("A setpoint of 1886\u2009°F (1030\u2009°C) in F4 fits better.")),
                 QStringLiteral("A setpoint of 1886\u2009°F in F4 fits better."));
    }

    void differences_convert_by_1_8_only() {
        QCOMPARE(Units{true}.difference(10), QStringLiteral("18\u2009°F"));
        QCOMPARE(Units{false}.signedDifference(-3), QStringLiteral("\u22123\u2009K"));
        QCOMPARE(Units{false}.difference(0.4), QStringLiteral("0.4\u2009K"));
    }

    void floors_round_up_and_ceilings_down_in_the_unit_that_is_shown() {
        const Limit floor = made::limit(Side::floor, {}, 1030.1), ceiling = made::limit(Side::ceiling, {}, 1030.9);
        QCOMPARE(limitTemperature(floor, {false}), QStringLiteral("1031\u2009°C"));
        QCOMPARE(limitTemperature(ceiling, {false}), QStringLiteral("1030\u2009°C"));
        QCOMPARE(limitTemperature(floor, {true}), QStringLiteral("1887\u2009°F"));    // 1886.18
        QCOMPARE(limitTemperature(ceiling, {true}), QStringLiteral("1887\u2009°F"));  // 1887.62
        QCOMPARE(limitTemperature(made::limit(Side::floor, {}, 1040), {false}), QStringLiteral("1040\u2009°C"));
    }

    void ribbons_add_up_to_the_whole_and_end_at_events() {
        const Ribbons ribbons(made::duplexSweep());
        for (double at_C = 600; at_C <= 1500; at_C += 3.7) {
            double sum = 0;
            for (const double share : ribbons.fractionsAt(at_C)) sum += share;
            QVERIFY(std::abs(sum - 1) < 1e-12);
        }
        const auto share = [&](const QString& label, double at_C) {
            for (const Reading& reading : ribbons.at(at_C))
                if (reading.label == label) return reading.volume;
            return 0.0;
        };
        QVERIFY(share("M23C6", 904.9) > 0);  // no state lies between 900 and 910: the event ends the ribbon
        QCOMPARE(share("M23C6", 905.1), 0.0);
        QVERIFY(ribbons.at(599).empty());
    }

    void matrix_stands_left_of_carbides_and_these_left_of_intermetallics() {
        const Ribbons ribbons(made::duplexSweep());
        const std::vector<QString> expected{"austenite", "ferrite", "liquid", "M23C6", "Cr2N", "sigma"};
        QCOMPARE(ribbons.labels(), expected);
    }

    void looks_of_phases_differ_without_colour() {
        // What a photocopy leaves: lightness and hatch. Phases that meet in one steel must differ in one of them.
        const QStringList together{"austenite", "ferrite", "delta ferrite", "liquid", "M23C6", "M7C3",
                                   "M6C",       "MX",      "Cr2N",          "sigma",  "chi",   "Laves"};
        for (const bool dark : {false, true})
            for (const QString& a : together)
                for (const QString& b : together) {
                    if (a >= b) continue;
                    const PhaseLook one = phaseLook(a), two = phaseLook(b);
                    const int grey = std::abs(qGray(one.colour(dark).rgb()) - qGray(two.colour(dark).rgb()));
                    QVERIFY2(one.hatch != two.hatch || grey >= 20, qPrintable(a + " and " + b));
                }
    }

    void spelling_of_a_label_does_not_change_its_look() {
        QCOMPARE(phaseLook("delta_ferrite").light, phaseLook("Delta ferrite").light);
        QCOMPARE(phaseLook("a new phase").light, phaseLook("a new phase").light);
        QVERIFY(phaseLook("a new phase").order > phaseLook("sigma").order);
    }

    void ticks_are_round_and_far_enough_apart() {
        const auto values = ticks(880.4, 1302.3, 1.4, 44);
        QCOMPARE(values.front(), 900.0);
        QCOMPARE(values[1] - values[0], 50.0);
        QVERIFY(values.back() <= 1302.3);
        QCOMPARE(ticks(0, 10, 44, 44).size(), size_t(11));
    }

    void zoom_keeps_the_temperature_under_the_pointer() {
        const Range_C range = zoomed({900, 1300}, 1000, 0.5, {600, 1500});
        QCOMPARE(range.high - range.low, 200.0);
        QCOMPARE((1000 - range.low) / (range.high - range.low), 0.25);
        const Range_C all = zoomed({900, 1300}, 1000, 100, {600, 1500});
        QCOMPARE(all.low, 600.0);
        QCOMPARE(all.high, 1500.0);
        QCOMPARE(zoomed({990, 1010}, 1000, 0.1, {600, 1500}).high, 1010.0);
    }

    void a_window_that_does_not_exist_still_opens_on_the_limits_that_cross() {
        WindowAnswer answer = made::duplex();
        answer.low_C.reset(), answer.high_C.reset();
        answer.floors[0].temperature_C = 1160;
        const Range_C range = openingRange(answer);
        QVERIFY(range.low <= 1039 - 149 && range.high >= 1160 + 149);
    }

    void labels_move_apart_by_as_little_as_they_must() {
        const auto tops = placeLabels({100, 104, 300}, {20, 20, 20}, 0, 400, 4);
        QCOMPARE(tops, (std::vector<double>{80, 104, 290}));
        const auto low = placeLabels({395, 398}, {20, 20}, 0, 400, 4);
        QCOMPARE(low, (std::vector<double>{356, 380}));
        QCOMPARE(placeLabels({200, 50}, {20, 20}, 0, 400, 4), (std::vector<double>{190, 40}));
    }
};

QTEST_GUILESS_MAIN(PartsTest)
#include "parts_test.moc"
