// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/limits.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "heats.h"
#include "made_sweep.h"
#include "planner/core/retained_austenite.h"
#include "shop.h"

using namespace soak;

namespace {

const FamilyBook& book() {
    static const FamilyBook loaded = loadFamilyBook().value();
    return loaded;
}

/// One limit put to a hand-made sweep.
std::vector<Limit> put(const CycleLimit& limit, const Sweep& sweep, const QString& analysis = "C 0.05, Cr 18.0",
                       const QStringList& missing = {}) {
    AlloyReport report{sweep};
    const Analysis read = shop::heat("", "", "", analysis).analysis;
    LimitContext context;
    context.report = &report;
    context.analysis = &read;
    context.book = &book();
    context.family = "duplex";
    context.missing = missing;
    context.furnace = shop::furnace("F1");
    context.reference_C = 1050;
    return evaluate(limit, context);
}

CycleLimit limit(const QString& kind, const QString& phase = {}, double margin_K = 0) {
    CycleLimit made;
    made.kind = kind;
    made.phase = phase;
    made.margin_K = margin_K;
    return made;
}

}  // namespace

TEST_CASE("a phase that dissolves sets a floor, with its margin into the safe side") {
    const auto made =
        put(limit("dissolved", "sigma", 20), shop::sweepOf({{"austenite", 0, 2000}, {"sigma", 650, 940}}));
    REQUIRE(made.size() == 1);
    CHECK(made[0].side == Side::floor);
    CHECK(*made[0].temperature_C == Approx(960));
    CHECK(made[0].cause == "sigma dissolved + 20\u2009K");
    CHECK(made[0].K_per_wt.at("C") == 100);
}

TEST_CASE("of two stretches of a phase the upper one counts") {
    const auto made = put(limit("dissolved", "sigma"),
                          shop::sweepOf({{"austenite", 0, 2000}, {"sigma", 610, 700}, {"sigma", 800, 905}}));
    CHECK(*made[0].temperature_C == Approx(905));
}

TEST_CASE("a phase that is never there does not bind; one that never goes makes the limit impossible") {
    const auto absent = put(limit("dissolved", "chi"), shop::sweepOf({{"austenite", 0, 2000}}));
    CHECK_FALSE(absent[0].temperature_C);
    CHECK(absent[0].computed);
    const auto stays = put(limit("dissolved", "MX"), shop::sweepOf({{"austenite", 0, 2000}, {"MX", 0, 2000}}));
    CHECK(stays[0].impossible);
    CHECK(stays[0].remark.contains("no temperature removes it"));
}

TEST_CASE("delta ferrite: a ceiling where it forms, impossible where it never leaves") {
    const Sweep leaves = shop::sweepOf(
        {{"ferrite", 0, 870}, {"austenite", 800, 1450}, {"delta ferrite", 1180, 1500}, {"liquid", 1440, 2000}});
    const auto ceiling = put(limit("not_yet_formed", "delta ferrite", 20), leaves);
    CHECK(ceiling[0].side == Side::ceiling);
    CHECK(*ceiling[0].temperature_C == Approx(1160));
    CHECK(ceiling[0].cause == "delta ferrite not yet formed \u2212 20\u2009K");

    const Sweep stays = shop::sweepOf(
        {{"ferrite", 0, 1100}, {"austenite", 800, 1450}, {"delta ferrite", 1090, 1500}, {"liquid", 1440, 2000}});
    const auto impossible = put(limit("not_yet_formed", "delta ferrite"), stays);
    CHECK(impossible[0].impossible);
    CHECK(impossible[0].remark.contains("no temperature removes it"));
}

TEST_CASE("Ae1, Ae3 and solidus") {
    const Sweep sweep =
        shop::sweepOf({{"ferrite", 0, 785}, {"cementite", 0, 735}, {"austenite", 725, 1490}, {"liquid", 1425, 2000}});
    CHECK(*put(limit("above_ae1", "", 10), sweep)[0].temperature_C == Approx(735));
    CHECK(*put(limit("below_ae1", "", 10), sweep)[0].temperature_C == Approx(715));
    CHECK(put(limit("below_ae1"), sweep)[0].side == Side::ceiling);
    CHECK(*put(limit("above_ae3", "", 30), sweep)[0].temperature_C == Approx(815));
    CHECK(*put(limit("below_solidus", "", 40), sweep)[0].temperature_C == Approx(1385));
    // Ferrite that lasts into melting is no Ae3, although it is gone in the liquid.
    const auto lasting = put(limit("above_ae3"),
                             shop::sweepOf({{"ferrite", 0, 1460}, {"austenite", 725, 1470}, {"liquid", 1425, 2000}}));
    CHECK(lasting[0].impossible);
}

TEST_CASE("limits set by people") {
    CycleLimit specification = limit("specification");
    specification.low = 1025;
    specification.high = 1055;
    const auto made = put(specification, {});
    REQUIRE(made.size() == 2);
    CHECK(made[0].cause == "specification minimum 1025\u2009°C");
    CHECK(made[0].set);
    CHECK(made[1].side == Side::ceiling);
    const auto furnace = put(limit("furnace"), {});
    REQUIRE(furnace.size() == 2);
    CHECK(*furnace[0].temperature_C == 600);
    CHECK(*furnace[1].temperature_C == 1150);
}

TEST_CASE("what is missing or unknown is not computed, and says why") {
    const Sweep sweep = shop::sweepOf({{"austenite", 0, 2000}, {"sigma", 650, 940}});
    const auto missing = put(limit("dissolved", "sigma"), sweep, "C 0.05, Cr 18.0", {"N"});
    CHECK_FALSE(missing[0].computed);
    CHECK(missing[0].remark == "N missing");
    const auto unknown = put(limit("colour", "red"), sweep);
    CHECK_FALSE(unknown[0].computed);
    CHECK(unknown[0].remark.contains("colour"));
    // A set limit needs no chemistry.
    CycleLimit specification = limit("specification");
    specification.low = 1040;
    CHECK(put(specification, sweep, "C 0.05", {"N"})[0].computed);
}

// Uncertainty by hand: dT/dC 100, dT/dCr -5 K per wt%; digits 0.01 and 0.1: (100 * 0.01)^2/12 + (5 * 0.1)^2/12 =
// 0.10417; laboratory (data/laboratory.toml): C 0.001 + 0.015 * 0.05 = 0.00175 -> 0.175 K; Cr 0.01 + 0.005 * 18 = 0.1
// -> 0.5 K.
TEST_CASE("certificate rounding and laboratory scatter go through the sensitivities") {
    const auto made = put(limit("dissolved", "sigma"), shop::sweepOf({{"austenite", 0, 2000}, {"sigma", 650, 940}}));
    CHECK(made[0].certificate_K == Approx(std::sqrt(0.10416667)));
    CHECK(made[0].laboratory_K == Approx(std::hypot(0.175, 0.5)));
    // data/model_scatter.toml: sigma of duplex is computed too high, on the safe side of a floor: the mean counts
    // nothing
    const ModelScatter row = book().scatterOf("duplex", "dissolved", "sigma");
    CHECK(row.mean > 0);
    CHECK(made[0].model_K == Approx(row.scatter));
    CHECK(made[0].uncertainty_K == Approx(std::sqrt(0.10416667 + 0.175 * 0.175 + 0.25 + row.scatter * row.scatter)));
}

TEST_CASE("a mean that lies to the unsafe side counts, one on the safe side does not") {
    ModelScatter row = book().scatterOf("austenitic", "dissolved", "M23C6");
    CHECK(row.mean < -20);  // computed too low: unsafe for a floor
    const Sweep sweep = shop::sweepOf({{"austenite", 0, 2000}, {"M23C6", 650, 900}});
    AlloyReport report{sweep};
    const Analysis analysis = shop::heat("", "", "", "C 0.05, Cr 18.0").analysis;
    LimitContext context;
    context.report = &report;
    context.analysis = &analysis;
    context.book = &book();
    context.family = "austenitic";
    CHECK(evaluate(limit("dissolved", "M23C6"), context)[0].model_K == Approx(std::hypot(row.mean, 15)));
    CHECK(book().scatterOf("austenitic", "dissolved", "chi").scatter == book().unknown_scatter_K);
}

TEST_CASE("a less-than value takes its unsafe end") {
    const Sweep sweep = shop::sweepOf({{"austenite", 0, 2000}, {"sigma", 650, 940}, {"liquid", 1400, 2000}});
    // Floor: dT/dC = +100, so the bound is unsafe and stays; dT/dCr = -5, so none at all is unsafe: 5 * 0.4 = 2 K
    // higher.
    CHECK(*put(limit("dissolved", "sigma"), sweep, "C <0.05, Cr 18.0")[0].temperature_C == Approx(940));
    CHECK(*put(limit("dissolved", "sigma"), sweep, "C 0.05, Cr <0.4")[0].temperature_C == Approx(942));
    // Ceiling: the other way round; solidus 1400 loses 100 * 0.05 = 5 K when there is no carbon.
    CHECK(*put(limit("below_solidus"), sweep, "C <0.05, Cr 18.0")[0].temperature_C == Approx(1395));
    CHECK(*put(limit("below_solidus"), sweep, "C 0.05, Cr <0.4")[0].temperature_C == Approx(1400));
}

// Capdevila et al. 2002 for 4140 (C 0.4, Si 0.25, Mn 0.85, Cr 0.95, Mo 0.2): 332.4 degC, worked by hand from the
// equation. Koistinen and Marburger 1959 with Ms 340: exp(-0.011 * 320) = 2.96 % at 20 degC.
TEST_CASE("martensite start and retained austenite") {
    CHECK(martensiteStart_C({{"C", 0.4}, {"Si", 0.25}, {"Mn", 0.85}, {"Cr", 0.95}, {"Mo", 0.2}}) ==
          Approx(332.4).margin(0.05));
    State state;
    const double carbon = (764.2 - 273.15 - 340) / 302.6;
    state.phases.push_back({"austenite", "austenite", 1, 1, 1, {{"C", carbon}}, {}});
    CHECK(retainedAustenite_vol(state, 20) == Approx(2.96).margin(0.01));
    CHECK(retainedAustenite_vol(state, 400) == Approx(100));  // above Ms nothing transforms
    CHECK(retainedAustenite_vol(State{}, 20) == 0);
}

TEST_CASE("groups of labels") {
    CHECK(labelsOf("carbide").contains("M7C3"));
    CHECK(labelsOf("ferrite") == labelsOf("delta ferrite"));
    CHECK(labelsOf("sigma") == QStringList{"sigma"});
}
