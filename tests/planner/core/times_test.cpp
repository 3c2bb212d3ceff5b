// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/times.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "base/folders.h"
#include "heats.h"
#include "planner/core/chance.h"
#include "planner/core/planner.h"
#include "planner/core/remedies.h"
#include "planner/core/verdict.h"
#include "shop.h"

using namespace soak;

namespace {

const FamilyBook& book() {
    static const FamilyBook loaded = loadFamilyBook().value();
    return loaded;
}

Limit limit(Side side, double temperature_C, double model_K, bool set = false) {
    Limit made;
    made.side = side;
    made.kind = set ? "specification" : side == Side::floor ? "dissolved" : "below_solidus";
    made.cause = set ? "specification minimum" : "made";
    made.temperature_C = temperature_C;
    made.model_K = made.uncertainty_K = model_K;
    made.set = set;
    return made;
}

/// An answer between two made limits with a band of 1040 to 1060.
WindowAnswer answerBetween(double floor_C, double ceiling_C, double model_K) {
    WindowAnswer answer;
    answer.setpoint_C = 1050;
    answer.band.setpoint_C = 1050;
    answer.band.low_C = 1040, answer.band.high_C = 1060;
    answer.floors = {limit(Side::floor, floor_C, model_K)};
    answer.ceilings = {limit(Side::ceiling, ceiling_C, model_K)};
    answer.verdict = Verdict::tight;
    return answer;
}

}  // namespace

// D of Cr in gamma iron at 1100 degC: 1.08e-3 exp(-291800/(8.314*1373.15)) = 8.5e-15 m2/s (A.W. Bowen, G.M. Leak 1970);
// r = 0.5 um, supersaturation 0.1: 2.5e-13 / (2 * 8.5e-15 * 0.1) = 147 s.
TEST_CASE("a small sphere dissolves as Whelan's relation says") {
    const PropertyRow* D = book().kinetics.diffusionOf("low-alloy", "Cr", "austenite");
    REQUIRE(D);
    CHECK(*D->at(1100) == Approx(8.5e-15).epsilon(0.02));
    CHECK(dissolution_s(0.5, *D->at(1100), 0.1) == Approx(147).epsilon(0.02));
    CHECK(dissolution_s(1.0, *D->at(1100), 0.1) == Approx(4 * 147).epsilon(0.02));
}

// A tenth of a segregation of 100 um with D = 1e-14: 2.3026 * 1e-8 / (39.478 * 1e-14) = 58 326 s.
TEST_CASE("segregation decays with the square of its spacing") {
    CHECK(homogenising_s(100, 1e-14, 0.1) == Approx(58326).epsilon(0.001));
    CHECK(homogenising_s(50, 1e-14, 0.1) == Approx(58326 / 4.0).epsilon(0.001));
}

TEST_CASE("thermal properties follow the published pieces") {
    const Metal* steel = book().kinetics.metalOf("low-alloy");
    const Metal* stainless = book().kinetics.metalOf("duplex");
    REQUIRE((steel && stainless));
    CHECK(steel->conductivity.at(20) == Approx(53.33).margin(0.01));      // 54 - 0.0333 * 20
    CHECK(steel->conductivity.at(1000) == Approx(27.3));                  // EN 1993-1-2
    CHECK(stainless->conductivity.at(1000) == Approx(27.3).margin(0.1));  // 14.6 + 0.0127 * 1000
    CHECK(steel->heat.at(1000) == Approx(650));
    CHECK(stainless->density.at(20) == Approx(7896).margin(2));
}

TEST_CASE("a thicker section and a plate take longer; vacuum is slower than a fan") {
    const auto heatUp = [](double section_mm, const QString& form, const QString& furnace) {
        WindowAnswer answer;
        answer.setpoint_C = answer.band.low_C = 1050;
        const Analysis analysis;
        LimitContext context;
        context.book = &book();
        context.analysis = &analysis;
        context.family = "austenitic";
        const auto soak = soakOf({&answer, &context, section_mm, form, furnace, {}});
        REQUIRE(soak.heat_up_min);
        return *soak.heat_up_min;
    };
    CHECK(heatUp(100, "bar", "chamber, electric") > heatUp(50, "bar", "chamber, electric"));
    CHECK(heatUp(100, "plate", "chamber, electric") > heatUp(100, "bar", "chamber, electric"));
    CHECK(heatUp(100, "bar", "vacuum, 6 bar N2 quench") > heatUp(100, "bar", "pit, fan, electric"));
    // A rule of the trade: roughly half an hour to an hour for a bar of 50 to 60 mm at 1050 degC (common practice).
    CHECK(heatUp(60, "bar", "chamber, electric") > 10);
    CHECK(heatUp(60, "bar", "chamber, electric") < 60);
}

// Two independent limits, each one standard deviation away: 0.8413^2 = 0.708.
TEST_CASE("the chance of being inside follows the margins") {
    CHECK(*chanceInside(answerBetween(1030, 1070, 10)) == Approx(0.708).margin(0.02));
    CHECK(*chanceInside(answerBetween(1000, 1100, 5)) == 1);
    CHECK(*chanceInside(answerBetween(1040, 1200, 10)) == Approx(0.5).margin(0.03));
    WindowAnswer broken = answerBetween(1000, 1100, 5);
    broken.floors.push_back(limit(Side::floor, 1045, 0, true));
    CHECK(*chanceInside(broken) == 0);
    broken.verdict = Verdict::notComputed;
    CHECK_FALSE(chanceInside(broken));
}

// One error of the chemistry that lifts floor and ceiling alike: the limits fail one at a time, never both, and each by
// 0.1587: 1 - 2 * 0.1587 = 0.683. With opposite slopes they fail together: 0.841.
TEST_CASE("an error of the analysis moves every limit at once") {
    WindowAnswer answer = answerBetween(1030, 1070, 0);
    for (auto* side : {&answer.floors, &answer.ceilings})
        for (Limit& one : *side) one.K_per_wt = {{"Cr", 100}}, one.uncertainty_K = 10;
    answer.sigma_wt = {{"Cr", 0.1}};
    CHECK(*chanceInside(answer) == Approx(0.683).margin(0.02));
    answer.ceilings[0].K_per_wt = {{"Cr", -100}};
    CHECK(*chanceInside(answer) == Approx(0.841).margin(0.02));
}

TEST_CASE("what would move a broken floor: setpoint, another furnace, chemistry; and an honest nothing") {
    WindowAnswer answer;
    answer.setpoint_C = 1050;
    answer.chemistry_wt = {{"Cr", 20}, {"Mo", 3}};
    answer.floors = {limit(Side::floor, 1070, 8)};
    answer.floors[0].K_per_wt = {{"Cr", 20}, {"Mo", 50}};
    answer.ceilings = {limit(Side::ceiling, 1200, 8)};
    const Furnace F1 = shop::furnace("F1"), F4 = shop::furnace("F4");
    answer.band = bandOrSetpoint(F1, 1050, shop::rules()).value();
    decide(answer, F1, shop::rules());
    answer.suggested_setpoint_C = suggestSetpoint(answer, F1, shop::rules(), 1050);
    decide(answer, F1, shop::rules());
    REQUIRE(answer.verdict == Verdict::outside);
    const auto remedies = remediesFor(answer, F1, {F1, F4}, {"F1"}, shop::rules());
    QStringList kinds;
    for (const Remedy& one : remedies) kinds << one.what;
    CHECK(kinds.contains("setpoint"));
    CHECK(kinds.contains("furnace"));
    CHECK(kinds.contains("chemistry"));
    for (const Remedy& one : remedies) {
        if (one.what == "chemistry") CHECK(one.text.contains("less Cr"));
        if (one.what == "furnace") CHECK(one.margin_K);
        if (one.what == "setpoint") CHECK(*one.margin_K > 0);
    }

    Limit never = limit(Side::floor, 0, 0);
    never.temperature_C.reset();
    never.impossible = true;
    answer.floors = {never};
    decide(answer, F1, shop::rules());
    const auto nothing = remediesFor(answer, F1, {F1, F4}, {"F1"}, shop::rules());
    REQUIRE(nothing.size() == 1);
    CHECK(nothing[0].what == "nothing");
}
