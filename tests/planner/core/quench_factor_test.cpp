// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/quench_factor.h"

#include <catch2/catch.hpp>
#include <cmath>

using namespace soak;

namespace {

const QuenchBook& book() {
    static const QuenchBook loaded = loadQuenchBook().value();
    return loaded;
}

/// Shortest critical time and where it stands.
std::pair<double, double> noseOf(const CCurve& curve) {
    double best_s = 1e300, at_C = 0;
    for (double T_C = curve.from_C; T_C <= curve.to_C; T_C += 0.5)
        if (const double t = curve.criticalTime_s(T_C); t < best_s) best_s = t, at_C = T_C;
    return {best_s, at_C};
}

const Metal& aluminium() {
    static const KineticBook kinetics = loadKinetics().value();
    return *kinetics.metalOf("light-wrought-7xxx");
}

}  // namespace

TEST_CASE("the noses of the published C-curves come out where their tables put them") {
    // From the constants as printed, computed on their own beside the table: 0.36 s at 340, 0.16 s at 338, 0.89 s at
    // 376 °C.
    struct Nose {
        const char* grade;
        double seconds, at_C;
    };
    for (const Nose& one : {Nose{"7010", 0.36, 340}, {"7075", 0.16, 338}, {"2024", 0.89, 376}, {"6061", 0.31, 338}}) {
        const CCurve* curve = book().curveOf({one.grade});
        REQUIRE(curve);
        const auto [seconds, at_C] = noseOf(*curve);
        INFO(one.grade << ": " << seconds << " s at " << at_C);
        CHECK(seconds == Approx(one.seconds).margin(0.011));  // two printed digits
        CHECK(at_C == Approx(one.at_C).margin(2));
    }
    CHECK(book().curveOf({"2017"}) == nullptr);  // its constants are known to be wrong
    CHECK(book().curveOf({"1.4307"}) == nullptr);
    CHECK(book().curveOf({"7075"})->strengthKept(10) == Approx(0.951).margin(0.001));  // exp(-0.0501)
}

TEST_CASE("the film follows the medium and its temperature") {
    CHECK(book().filmOf("water, 12 m3, pumped, 15-32 °C")->convection_W_per_m2K == Approx(12000));
    const double warm = book().filmOf("water, 10 m3, 65-95 °C")->convection_W_per_m2K;
    CHECK(warm < 7000);
    CHECK(warm > 1000);
    CHECK_FALSE(book().filmOf("quench oil, 60-80 °C"));
}

TEST_CASE("a slower way and a slower quench cost strength") {
    // W.L. Fink, L.A. Willey, Trans. AIME 175 (1948) 414: 7075-T6 keeps its strength above 450 K/s from 400 to 290 °C
    // and loses it fast below 100 K/s.
    const CCurve& curve = *book().curveOf({"7075"});
    const Surroundings air{20, 10, 0.15}, cold = *book().filmOf("water, 15-32 °C"),
                                          hot = *book().filmOf("water, 80-100 °C");
    const QuenchCost sheet = quenchCost(curve, aluminium(), 1.6, false, 470, 5, air, cold);
    CHECK(sheet.kept > 0.98);
    const QuenchCost plate = quenchCost(curve, aluminium(), 50, false, 470, 8, air, cold);
    CHECK(plate.kept < sheet.kept);
    CHECK(quenchCost(curve, aluminium(), 50, false, 470, 8, air, hot).kept < plate.kept);
    // Thin metal cools on the way: half a minute in still air brings 1 mm into the curve.
    const QuenchCost late = quenchCost(curve, aluminium(), 1, false, 470, 40, air, cold);
    CHECK(late.factor_on_the_way > 1);
    CHECK(late.kept < sheet.kept);
}

TEST_CASE("aluminium has its density: metal of 38 mm takes minutes in air, not seconds") {
    CHECK(aluminium().density.at(400) == Approx(2700));
    CHECK(aluminium().heat.at(400) == Approx(0.41 * 400 + 903));
}
