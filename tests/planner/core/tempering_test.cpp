// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/tempering.h"

#include <catch2/catch.hpp>

using namespace soak;

namespace {

const std::vector<TemperingCurve>& curves() {
    static const auto loaded = loadTemperingCurves().value();
    return loaded;
}

}  // namespace

// 600 degC for 2 h: 873.15 * (20 + log10 2) = 17725.8 (worked example of the table of relations).
TEST_CASE("the tempering parameter") { CHECK(temperingParameter(600, 2) == Approx(17725.8).margin(0.1)); }

// ASM Metals Handbook vol. 1, 4140 oil quenched, 2 h: 341 HB at 540 degC, 277 HB at 650 degC (from memory).
TEST_CASE("4140: the published points come back at their own time, longer holds soften", "[published]") {
    const TemperingCurve* curve = curveFor(curves(), {"4140"}, "HB");
    REQUIRE(curve);
    CHECK(*curve->hardnessAt(540, 2) == Approx(341));
    CHECK(*curve->hardnessAt(650, 2) == Approx(277));
    CHECK(*curve->hardnessAt(600, 8) < *curve->hardnessAt(600, 2));
    CHECK(*curve->temperatureFor(277, 2) == Approx(650).margin(0.1));
    CHECK(*curve->temperatureFor(277, 8) < 650);
    CHECK_FALSE(curve->temperatureFor(700, 2));
}

TEST_CASE("a curve with a secondary peak is read on its falling branch") {
    const TemperingCurve* curve = curveFor(curves(), {"H13"}, "HRC");
    REQUIRE(curve);
    const auto at = curve->temperatureFor(46, 2);  // 593 degC in the table; 53 to 54 HRC from 204 to 538
    REQUIRE(at);
    CHECK(*at == Approx(593).margin(1));
}

TEST_CASE("no curve for a grade that has none, or in another unit") {
    CHECK(curveFor(curves(), {"1.4404"}, "HRC") == nullptr);
    CHECK(curveFor(curves(), {"H13"}, "HB") == nullptr);
}
