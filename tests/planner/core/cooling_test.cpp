// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/cooling.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "heats.h"
#include "made_sweep.h"
#include "planner/core/conduction.h"
#include "shop.h"

using namespace soak;

namespace {

const FamilyBook& book() {
    static const FamilyBook loaded = loadFamilyBook().value();
    return loaded;
}

/// Metal with properties that do not change, to compare with exact solutions.
Metal plainMetal() {
    const auto constant = [](double value) {
        PropertyRow row;
        row.form = Formula::parse("value1").value();
        row.value1 = value;
        return Property{{row}};
    };
    return {{"*"}, "plain", constant(25), constant(500), constant(8000), 0.8, "made up"};
}

CoolingAnswer coolingFrom(double coldest_C, double section_mm, const std::vector<CycleLimit>& limits = {},
                          double transfer_s = 20) {
    static const Sweep sweep = shop::sweepOf({{"austenite", 0, 2000}, {"sigma", 650, 960}, {"liquid", 1400, 2000}});
    AlloyReport report{sweep};
    const Analysis analysis = shop::heat("", "", "", "C 0.02, Cr 22.0, N 0.17").analysis;
    LimitContext context;
    context.report = &report;
    context.analysis = &analysis;
    context.book = &book();
    context.family = "duplex";
    CycleLimit dissolved;
    dissolved.kind = "dissolved";
    dissolved.phase = "sigma";
    dissolved.margin_K = 20;
    const auto floors = evaluate(dissolved, context);
    Quench quench;
    quench.id = "W1";
    quench.transfer_max_s = transfer_s;
    const std::vector<Quench> quenches{quench};
    return coolingOf({&floors, &limits, &context, coldest_C, section_mm, "bar", &quenches});
}

}  // namespace

// Slab cooled by convection, Biot number h L / k = 1: the series solution gives for Fo = 1 a middle temperature of
// C1 exp(-z1^2) with z1 = 0.8603, C1 = 1.1191: 0.534 of the starting difference, and 0.652 of that outside
// (H.S. Carslaw, J.C. Jaeger 1959; tables of J.P. Holman, Heat Transfer; from memory).
TEST_CASE("a plate cools as the exact series says", "[published]") {
    const Metal metal = plainMetal();
    const double half_m = 0.05, diffusivity = 25.0 / (500 * 8000), h = 25 / half_m;
    Conduction plate(metal, 100, false, 1000);
    const double end_s = half_m * half_m / diffusivity;  // Fo = 1
    for (int i = 0; i < 2000; ++i) plate.advance(end_s / 2000, {0, h, 0});
    CHECK(plate.middle_C() == Approx(534).margin(4));
    CHECK(plate.outside_C() / plate.middle_C() == Approx(std::cos(0.8603)).margin(0.01));
}

// Round bar, Biot h R / k = 1: z1 = 1.2558, C1 = 1.2071; at Fo = 0.5 the middle is at 0.548 (same tables).
TEST_CASE("a round bar cools as the exact series says", "[published]") {
    const Metal metal = plainMetal();
    const double radius_m = 0.05, diffusivity = 25.0 / (500 * 8000), h = 25 / radius_m;
    Conduction bar(metal, 100, true, 1000);
    const double end_s = 0.5 * radius_m * radius_m / diffusivity;
    for (int i = 0; i < 2000; ++i) bar.advance(end_s / 2000, {0, h, 0});
    CHECK(bar.middle_C() == Approx(1000 * 1.2071 * std::exp(-1.2558 * 1.2558 * 0.5)).margin(6));
}

TEST_CASE("the budget ends where the outside falls to what comes back, and grows with the section") {
    const auto thin = coolingFrom(1040, 20), thick = coolingFrom(1040, 120);
    REQUIRE((thin.budget_s && thick.budget_s));
    CHECK(thin.phase == "sigma");
    CHECK(*thin.begins_C == Approx(960));  // the margin of the floor is no delay
    CHECK(*thin.budget_s > 5);
    CHECK(*thick.budget_s > *thin.budget_s);
    CHECK(*coolingFrom(1080, 20).budget_s > *thin.budget_s);
    CHECK(*coolingFrom(950, 20).budget_s == 0);  // the coldest metal is below it already
}

TEST_CASE("a set delay counts where it is shorter, and a slow way to the quench is said") {
    CycleLimit delay;
    delay.kind = "quench_delay";
    delay.high = 8;
    delay.source = "shop rule";
    const auto answer = coolingFrom(1080, 120, {delay});
    CHECK(*answer.allowed_s == 8);
    CHECK(answer.too_slow);
    CHECK(answer.sentence.contains("too slow"));
    delay.high.reset();  // from data/cooling.toml: duplex 60 s
    CHECK(*coolingFrom(1080, 120, {delay}).set_s == 60);
    CHECK_FALSE(coolingFrom(1080, 120, {}, 0).too_slow);
}

TEST_CASE("ranges to cross: sigma up to its solvus, 475 only with enough chromium") {
    const auto answer = coolingFrom(1040, 60);
    bool sigma = false, low_range = false;
    for (const Crossing& one : answer.crossings) {
        if (one.what == "sigma") sigma = one.computed && std::abs(one.high_C - 960) < 0.5;
        if (one.what.startsWith("475")) low_range = true;
    }
    CHECK(sigma);
    CHECK(low_range);
}

TEST_CASE("less carbon gives more time before the boundary is sensitised") {
    const SensitisationRule* rule = book().cooling.sensitisationOf("austenitic");
    REQUIRE(rule);
    CHECK(rule->noseAt_s(0.08) < rule->noseAt_s(0.055));
    CHECK(rule->noseAt_s(0.055) < rule->noseAt_s(0.03));
    CHECK(rule->noseAt_s(0.13) == rule->noseAt_s(0.08));  // beyond the table the nearest
}
