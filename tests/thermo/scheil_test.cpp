// SPDX-License-Identifier: GPL-3.0-or-later
#include "scheil.h"

#include <cmath>

#include "support.h"

using namespace soak;
using namespace soak::test;

namespace {

Alloy lightAlloy(const std::string& chemistry) {
    static const auto data = loadDataSet(productPath("thermo/data/light"));
    REQUIRE(data);
    return valueOf(Alloy::make(data.value(), wt(chemistry)));
}

}  // namespace

// M.C. Flemings, Solidification Processing, McGraw-Hill 1974, ch. 5, and W. Kurz, D.J. Fisher, Fundamentals of
// Solidification: Al-4.5 wt% Cu with constant partition k = 0.172 and the eutectic at 33.2 wt% Cu, 548 degC, leaves
// (33.2/4.5)^(-1/(1-0.172)) = 9.0 % of eutectic liquid (from memory). In the assessed diagram k is nearer 0.11 to 0.13
// in the dilute liquid and rises towards the eutectic: (33.2/4.5)^(-1/(1-0.11)) = 10.6 % is the other bound.
TEST_CASE("Al-4.5Cu: nine to ten percent of eutectic are left at 548 degC by Gulliver and Scheil",
          "[published][Al][Cu]") {
    FreezingChoice choice;
    choice.last_liquid = 0.001;
    choice.most_per_step = 0.05;
    const Alloy alloy = lightAlloy("Cu=4.5;Al=bal");
    const auto path = valueOf(freeze(alloy, 1100, choice));
    CHECK(path.invariant);
    CHECK(celsius(path.end_K) == Approx(548).margin(1));
    const auto& before = path.steps[path.steps.size() - 2];
    CHECK(100 * before.liquid > 8.9);
    CHECK(100 * before.liquid < 10.7);
    CHECK(before.liquid_wt.at("Cu") == Approx(33.2).margin(1));
}

TEST_CASE("a melt freezes falling in temperature and liquid, richer in what the solid refuses") {
    const Alloy alloy = alloyOf("C=0.05,Cr=19,Ni=10,Mo=2.4,Si=1.2,Mn=0.9,N=0.05");
    FreezingChoice choice;
    choice.fast = {"C", "N"};
    const auto path = valueOf(freeze(alloy, 1900, choice));
    REQUIRE(path.steps.size() > 10);
    for (size_t i = 1; i < path.steps.size(); ++i) {
        CHECK(path.steps[i].temperature_K < path.steps[i - 1].temperature_K);
        CHECK(path.steps[i].liquid <= path.steps[i - 1].liquid);
    }
    CHECK(path.steps.back().liquid_wt.at("Mo") > 2.4);
    // Segregated metal melts earlier than the same metal in equilibrium.
    Alloy again = alloyOf("C=0.05,Cr=19,Ni=10,Mo=2.4,Si=1.2,Mn=0.9,N=0.05");
    const auto sweep = valueOf(again.sweep(1500, 1780));
    const auto solidus = sweep.firstAppearing("liquid");
    REQUIRE(solidus);
    CHECK(path.end_K < solidus->temperature_K);
}

TEST_CASE("with every element fast the path is the lever rule: it ends at the equilibrium solidus") {
    Alloy alloy = alloyOf("C=0.2,Mn=1.0,Si=0.3");
    FreezingChoice choice;
    choice.fast = {"C", "Mn", "Si"};
    choice.last_liquid = 0.002;
    choice.most_per_step = 0.03;
    const auto path = valueOf(freeze(alloy, 1850, choice));
    const auto sweep = valueOf(alloy.sweep(1650, 1820));
    const auto solidus = sweep.firstAppearing("liquid");
    REQUIRE(solidus);
    // The partition of a step is taken for all of the solid, so the peritectic is passed a few kelvin off.
    CHECK(path.end_K == Approx(solidus->temperature_K).margin(8));
}

// The slopes are carried back by the enrichment of the last liquid: of the same sign as a difference between two paths
// and within a factor of four of it, no better.
TEST_CASE("the slope of the segregated solidus has the sign and the size of a difference") {
    FreezingChoice choice;
    choice.fast = {"C", "N"};
    choice.most_per_step = 0.04;
    const std::string base = "C=0.05,Cr=19,Ni=10,Si=1.2,Mn=0.9,Mo=";
    const auto low = valueOf(freeze(alloyOf(base + "2.3"), 1900, choice));
    const auto high = valueOf(freeze(alloyOf(base + "2.5"), 1900, choice));
    const auto middle = valueOf(freeze(alloyOf(base + "2.4"), 1900, choice));
    REQUIRE(middle.K_per_wt.count("Mo"));
    const double ratio = middle.K_per_wt.at("Mo") / ((high.end_K - low.end_K) / 0.2);
    CHECK(ratio > 0.25);
    CHECK(ratio < 4);
}

// J. Mater. Sci. 33 (1998) 2283-2297: in cast Al-6.5Si-3.5Cu, magnesium from 0.04 to 0.45 % drops the temperature of
// first melting from about 540 to about 505 degC. The published 540 belongs to metal whose last eutectic was partly
// dissolved; by Gulliver and Scheil both end at an eutectic with theta, lower with magnesium.
TEST_CASE("Al-6.5Si-3.5Cu: magnesium lowers the last liquid", "[published][Al][Cu][Mg][Si]") {
    FreezingChoice choice;
    choice.last_liquid = 0.001;
    const auto lean = valueOf(freeze(lightAlloy("Si=6.5,Cu=3.5,Mg=0.04,Al=bal"), 1000, choice));
    const auto rich = valueOf(freeze(lightAlloy("Si=6.5,Cu=3.5,Mg=0.45,Al=bal"), 1000, choice));
    CHECK(celsius(lean.end_K) < 545);
    CHECK(celsius(rich.end_K) < 520);
    CHECK(celsius(rich.end_K) > 495);
    CHECK(rich.end_K < lean.end_K);
}
