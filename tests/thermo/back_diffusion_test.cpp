// SPDX-License-Identifier: GPL-3.0-or-later
#include "back_diffusion.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "base/folders.h"
#include "base/units.h"

using namespace soak;

TEST_CASE("a cosine of segregation falls to 1/e in spacing squared over 4 pi^2 D", "[diffusion]") {
    // Shewmon's relaxation time: 30 um and 3.5e-14 m2/s give 651 s.
    const double D = 3.5e-14, spacing = 30e-6, relaxation_s = spacing * spacing / (4 * M_PI * M_PI * D);
    CHECK(relaxation_s == Approx(651).margin(1));
    CHECK(segregationLeft(D * relaxation_s, spacing) == Approx(std::exp(-1)));
    CHECK(segregationLeft(0, spacing) == 1);
}

TEST_CASE("a hold raises first melting from the eutectic to the solidus, and never beyond", "[diffusion]") {
    // Al-4.5Cu: eutectic 548.2 degC at 33.2 wt% Cu (J.L. Murray, Int. Met. Rev. 30 (1985) 211); solubility at most 5.65
    // wt%.
    const auto data = loadDataSet(productPath("thermo/data/light")).value();
    auto alloy = Alloy::make(data, {{{"Cu", 4.5}}, "Al"}, {});
    REQUIRE(alloy);
    const std::map<std::string, double> last{{"Cu", 33.2}};
    const auto melting_C = [&](double left) {
        const auto found = meltingAfterHold(alloy.value(), last, {{"Cu", left}}, kelvin(480), kelvin(640));
        REQUIRE(found);
        return celsius(found.value().temperature_K);
    };
    CHECK(melting_C(1) == Approx(548.2).margin(1));
    CHECK(melting_C(0.5) == Approx(548.2).margin(1));  // theta is still there
    const auto sweep = alloy.value().sweep(kelvin(480), kelvin(640));
    const double solidus_C = celsius(sweep.value().firstAppearing("liquid")->temperature_K);
    CHECK(melting_C(0) == Approx(solidus_C).margin(0.1));
    double before = 0;
    for (const double left : {0.1, 0.03, 0.02, 0.01, 0.003, 0.0}) {
        CHECK(melting_C(left) >= before - 0.05);
        CHECK(melting_C(left) <= solidus_C + 0.05);
        before = melting_C(left);
    }
    // An element that is not named keeps its segregation.
    const auto kept = meltingAfterHold(alloy.value(), last, {}, kelvin(480), kelvin(640));
    REQUIRE(kept);
    CHECK(kept.value().local.wt.at("Cu") == Approx(33.2));
    CHECK_FALSE(meltingAfterHold(alloy.value(), last, {}, kelvin(480), kelvin(500)));
}
