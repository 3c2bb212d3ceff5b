// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/band.h"

#include <catch2/catch.hpp>

#include "planner/core/units_text.h"
#include "shop.h"

using namespace soak;

// Worked example of the demonstration shop's page, F1 at 1120 degC: -11 survey, -8.4 thermocouple (0.75 % of reading,
// IEC 60584-1 class 2), -3 instrument, -4 swing; added up 1093.6, root of squares 1105.3; with 1.7 offset 1095.3,
// 1107.0.
TEST_CASE("band of F1 at 1120 is the shop's worked example") {
    Furnace f1 = shop::furnace("F1");
    SECTION("offset set to zero") {
        f1.offset_K = 0;
        const auto band = bandAt(f1, 1120, shop::rules());
        REQUIRE(band);
        CHECK(band.value().added_low_C == Approx(1093.6).margin(0.05));
        CHECK(band.value().root_low_C == Approx(1105.3).margin(0.05));
        CHECK(band.value().added_high_C == Approx(1120 + 10 + 8.4 + 3 + 4).margin(1e-9));
    }
    SECTION("reads 1.7 low: the metal is hotter than the reading") {
        const auto band = bandAt(f1, 1120, shop::rules());
        REQUIRE(band);
        CHECK(band.value().added_low_C == Approx(1095.3).margin(0.05));
        CHECK(band.value().root_low_C == Approx(1107.0).margin(0.05));
        CHECK(band.value().offset_K == 1.7);
    }
}

TEST_CASE("the shop's rule decides and is named") {
    const Furnace f1 = shop::furnace("F1");
    const auto added = bandAt(f1, 1120, shop::rules("added up")),
               root = bandAt(f1, 1120, shop::rules("root of squares"));
    REQUIRE((added && root));
    CHECK(added.value().low_C == added.value().added_low_C);
    CHECK(added.value().rule == "added up");
    CHECK(root.value().low_C == root.value().root_low_C);
    CHECK_FALSE(bandAt(f1, 1120, shop::rules("by feel")));
}

// F3 at 770: survey -5/+4, type N class 1 0.4 % of 770 = 3.08, instrument 1, swing 2, offset +0.6; hottest added up
// 780.7, which the shop's page rounds to 781.
TEST_CASE("band of F3 at 770") {
    const auto band = bandAt(shop::furnace("F3"), 770, shop::rules("added up"));
    REQUIRE(band);
    CHECK(band.value().high_C == Approx(770 + 0.6 + 4 + 3.08 + 1 + 2).margin(1e-9));
    CHECK(band.value().low_C == Approx(770 + 0.6 - 5 - 3.08 - 1 - 2).margin(1e-9));
}

TEST_CASE("survey is interpolated between its temperatures and held beyond them, signs kept") {
    const Furnace f1 = shop::furnace("F1");
    CHECK(surveyAt(f1, 950).value().coldest_K == Approx(-9));
    CHECK(surveyAt(f1, 1085).value().hottest_K == Approx(9.5));
    CHECK(surveyAt(f1, 700).value().coldest_K == Approx(-8));
    CHECK(surveyAt(f1, 1150).value().hottest_K == Approx(10));
    CHECK_FALSE(surveyAt(Furnace{}, 700));
}

TEST_CASE("a zone that is hotter than setpoint everywhere shifts the band") {
    Furnace f1 = shop::furnace("F1");
    f1.offset_K = 0;
    f1.survey = {{1120, 3, 9}};
    const auto band = bandAt(f1, 1120, shop::rules());
    REQUIRE(band);
    CHECK(band.value().added_low_C == Approx(1120 + 3 - 8.4 - 3 - 4));
    CHECK(band.value().root_low_C == Approx(1120 + 3 - std::sqrt(8.4 * 8.4 + 9 + 16)));
}

// IEC 60584-1 tolerances as on the shop's page: the larger of the fixed value and the share of the reading.
TEST_CASE("thermocouple tolerances") {
    CHECK(thermocoupleTolerance_K("K", 1, 300).value() == Approx(1.5));
    CHECK(thermocoupleTolerance_K("K", 1, 930).value() == Approx(3.72));
    CHECK(thermocoupleTolerance_K("N", 2, 200).value() == Approx(2.5));
    CHECK(thermocoupleTolerance_K("K", 2, 1050).value() == Approx(7.875));
    CHECK(thermocoupleTolerance_K("S", 2, 500).value() == Approx(1.5));
    CHECK(thermocoupleTolerance_K("R", 2, 1200).value() == Approx(3.0));
    CHECK(thermocoupleTolerance_K("S", 1, 1200).value() == Approx(1.3));
    CHECK_FALSE(thermocoupleTolerance_K("K", 1, 1100));  // class 1 ends at 1000 degC
    CHECK_FALSE(thermocoupleTolerance_K("Q", 2, 500));
}

TEST_CASE("overdue tests block issue and are named; the band is computed all the same") {
    const auto band = bandAt(shop::furnace("F6"), 1050, shop::rules());
    REQUIRE(band);
    CHECK_FALSE(band.value().may_issue);
    CHECK(band.value().warnings.join('\n').contains("survey overdue since 2024-09-28"));
    CHECK(band.value().warnings.join('\n').contains("accuracy test overdue since 2024-12-31"));

    const auto in_date = bandAt(shop::furnace("F1"), 1050, shop::rules());
    CHECK(in_date.value().may_issue);
    ShopRules undated = shop::rules();
    undated.today = {};
    CHECK_FALSE(bandAt(shop::furnace("F1"), 1050, undated).value().may_issue);
}

TEST_CASE("a temperature in the wrong unit is refused and the right one offered") {
    const auto band = bandAt(shop::furnace("F4"), 1886, shop::rules());
    REQUIRE_FALSE(band);
    CHECK(band.error().fault == Fault::range);
    const QString message = QString::fromStdString(band.error().text());
    CHECK(message.contains("did you mean 1886\u2009°F"));
    CHECK(message.contains("1030\u2009°C"));
    // Too hot in either unit: nothing is offered.
    CHECK_FALSE(
        QString::fromStdString(bandAt(shop::furnace("F4"), 3000, shop::rules()).error().text()).contains("mean"));
}

TEST_CASE("setpoints go to the controller's own step") {
    const Furnace f1 = shop::furnace("F1"), f4 = shop::furnace("F4");
    CHECK(stepUp_C(f1, 1041) == Approx(1045));
    CHECK(stepDown_C(f1, 1044) == Approx(1040));
    CHECK(stepUp_C(f1, 1040) == Approx(1040));
    // 1030 degC = 1886 degF; steps of 5 degF: 1885 below, 1890 above
    CHECK(stepDown_C(f4, 1030) == Approx((1885 - 32) / 1.8));
    CHECK(stepUp_C(f4, 1030) == Approx((1890 - 32) / 1.8));
    CHECK(step_K(f4) == Approx(5 / 1.8));
}

TEST_CASE("temperatures and differences in words") {
    CHECK(temperatureText(1030, true) == "1886\u2009°F (1030\u2009°C)");
    CHECK(temperatureText(1030) == "1030\u2009°C (1886\u2009°F)");
    CHECK(differenceText(8, true) == "14\u2009°F");  // never 46: a difference is not shifted by 32
    CHECK(celsiusText(-8.4, 1) == "\u22128.4\u2009°C");
    CHECK(number(-0.04, 1) == "0.0");
    CHECK(listed({"C", "Mn", "Si"}) == "C, Mn and Si");
}
