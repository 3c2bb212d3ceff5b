// SPDX-License-Identifier: GPL-3.0-or-later
// The tables of treatments and limits: what they must hold, and the kinds of limit on hand-made sweeps.
#include <catch2/catch.hpp>

#include "heats.h"
#include "made_sweep.h"
#include "planner/core/limits.h"
#include "shop.h"

using namespace soak;

namespace {

const FamilyBook& book() {
    static const FamilyBook loaded = loadFamilyBook().value();
    return loaded;
}

std::vector<Limit> put(const CycleLimit& limit, const Sweep& sweep, const QString& analysis, const QString& family,
                       double reference_C = 1050) {
    AlloyReport report{sweep};
    const Analysis read = shop::heat("", "", "", analysis).analysis;
    LimitContext context;
    context.report = &report;
    context.analysis = &read;
    context.book = &book();
    context.family = family;
    context.reference_C = reference_C;
    return evaluate(limit, context);
}

CycleLimit limit(const QString& kind, const QString& phase, std::optional<double> low, std::optional<double> high) {
    CycleLimit made;
    made.kind = kind;
    made.phase = phase;
    made.low = low;
    made.high = high;
    return made;
}

const Sweep& steel() {
    static const Sweep made =
        shop::sweepOf({{"ferrite", 0, 790}, {"austenite", 730, 1490}, {"cementite", 0, 740}, {"liquid", 1430, 2000}});
    return made;
}

}  // namespace

TEST_CASE("every family of steel has the treatments that its shop runs, each with limits and a source") {
    const std::map<QString, QStringList> runs{
        {"austenitic", {"solution-anneal", "homogenise", "stress-relieve", "post-weld"}},
        {"austenitic-stabilised", {"solution-anneal", "stress-relieve"}},
        {"superaustenitic", {"solution-anneal", "homogenise"}},
        {"duplex", {"solution-anneal", "homogenise", "post-weld"}},
        {"cast-duplex", {"solution-anneal", "homogenise"}},
        {"ferritic", {"subcritical"}},
        {"manganese-austenitic", {"solution-anneal"}},
        {"precipitation-hardening", {"solution-anneal", "age", "homogenise", "stress-relieve"}},
        {"low-alloy",
         {"harden", "temper", "normalise", "full-anneal", "isothermal-anneal", "spheroidise", "subcritical",
          "stress-relieve", "post-weld"}},
        {"case-hardening", {"harden", "normalise", "carburise", "isothermal-anneal"}},
        {"bearing", {"harden", "temper", "spheroidise", "normalise"}},
        {"tool-cold", {"harden", "temper", "full-anneal", "spheroidise", "stress-relieve"}},
        {"tool-hot", {"harden", "temper", "full-anneal", "homogenise"}},
        {"high-speed", {"harden", "temper", "full-anneal"}},
        {"martensitic-stainless", {"harden", "temper", "normalise", "full-anneal", "subcritical"}},
        {"creep-9-12Cr", {"normalise", "temper", "post-weld"}}};
    for (const auto& [name, kinds] : runs) {
        const Family* family = book().find(name);
        INFO(name.toStdString());
        REQUIRE(family);
        for (const QString& kind : kinds) {
            INFO(kind.toStdString());
            const FamilyKind* found = family->find(kind);
            REQUIRE(found);
            CHECK(found->reference_C > 0);
            CHECK_FALSE(found->limits.empty());
            for (const CycleLimit& one : found->limits) {
                CHECK_FALSE(one.because.isEmpty());
                CHECK_FALSE(one.source.isEmpty());
            }
        }
    }
}

TEST_CASE("every kind of limit in the tables is a kind that is known") {
    for (const Family& family : book().families)
        for (const FamilyKind& kind : family.kinds)
            for (const CycleLimit& one : kind.limits)
                for (const Limit& made : put(one, steel(), "C 0.4, Cr 1.0", family.name)) {
                    INFO(family.name.toStdString() << " " << kind.name.toStdString() << " " << one.kind.toStdString());
                    CHECK_FALSE(made.remark.contains("this kind of limit is not judged"));
                }
}

// BPVC VIII-2 (2010) Table 6.11.A for 9Cr-1Mo-V weld metal: 800 degC below 1.0 % Ni + Mn, 790 degC from there on.
TEST_CASE("a ceiling by Ni + Mn holds for the heat that it speaks of; an unknown chemistry takes the lower one") {
    const auto low = limit("specification_if", "Ni + Mn < 1.0", {}, 800);
    const auto high = limit("specification_if", "Ni + Mn >= 1.0", {}, 790);
    const auto unknown = limit("specification_if", "unknown Ni, Mn", {}, 775);
    const QString lean = "Ni 0.14, Mn 0.44", rich = "Ni 0.46, Mn 0.63";
    REQUIRE(put(low, steel(), lean, "creep-9-12Cr").size() == 1);
    CHECK(*put(low, steel(), lean, "creep-9-12Cr")[0].temperature_C == 800);
    CHECK(put(high, steel(), lean, "creep-9-12Cr").empty());
    CHECK(put(low, steel(), rich, "creep-9-12Cr").empty());
    CHECK(put(high, steel(), rich, "creep-9-12Cr")[0].cause == "specification maximum 790\u2009°C for Ni + Mn >= 1.0");
    CHECK(put(unknown, steel(), lean, "creep-9-12Cr").empty());
    CHECK(put(unknown, steel(), "C 0.1", "creep-9-12Cr").size() == 1);
    CHECK(put(high, steel(), "C 0.1", "creep-9-12Cr").size() == 1);  // cannot be decided: the safe side
    CHECK_FALSE(put(limit("specification_if", "Ni plus Mn", {}, 800), steel(), lean, "creep-9-12Cr")[0].computed);
}

TEST_CASE("a range to avoid is a floor from above and a ceiling from below") {
    const auto range = limit("avoid", "", 440, 540);
    const auto above = put(range, steel(), "C 0.1", "martensitic-stainless", 650);
    CHECK(above[0].side == Side::floor);
    CHECK(*above[0].temperature_C == 540);
    const auto below = put(range, steel(), "C 0.1", "martensitic-stainless", 300);
    CHECK(below[0].side == Side::ceiling);
    CHECK(*below[0].temperature_C == 440);
    // With a phase the upper end is computed.
    const Sweep sensitive = shop::sweepOf({{"austenite", 0, 2000}, {"M23C6", 0, 860}});
    const auto relief = limit("avoid", "M23C6", 425, {});
    CHECK(*put(relief, sensitive, "C 0.05", "austenitic", 400)[0].temperature_C == 425);
    CHECK(*put(relief, sensitive, "C 0.05", "austenitic", 900)[0].temperature_C == Approx(860));
}

TEST_CASE("a negative margin reads as so far below") {
    auto near = limit("above_ae1", "", {}, {});
    near.margin_K = -100;
    const auto made = put(near, steel(), "C 0.4", "low-alloy", 700);
    CHECK(*made[0].temperature_C == Approx(630));
    CHECK(made[0].cause == "Ae1 \u2212 100\u2009K");
}

// M. Hillert, Acta Metall. 13 (1965) 227: R = 4 r / (9 f). AlN of 0.03 um (data/particles.toml) holds a mean grain of
// 40 um across with 100 * 4 * 0.03 / (9 * 20) = 0.0667 vol%.
TEST_CASE("grain pinning asks for the amount that Hillert's limit needs") {
    Sweep fine = shop::sweepOf({{"austenite", 700, 2000}, {"AlN", 0, 2000}});
    for (State& state : fine.states)
        for (PhaseAmount& phase : state.phases)
            if (phase.label == "AlN") phase.volume_fraction = 0.001;
    const auto held = put(limit("grain_pinned", "AlN", {}, 40), fine, "C 0.18", "case-hardening", 930);
    REQUIRE(held.size() == 1);
    CHECK(held[0].cause == "grain of 40\u2009µm held by at least 0.07\u2009vol% of AlN");
    CHECK_FALSE(held[0].temperature_C);  // 0.1 vol% at every temperature
    CHECK(held[0].computed);
    const auto never = put(limit("grain_pinned", "AlN", {}, 10), fine, "C 0.18", "case-hardening", 930);
    CHECK(never[0].impossible);
    CHECK_FALSE(put(limit("grain_pinned", "chi", {}, 40), fine, "C 0.18", "case-hardening", 930)[0].computed);
}

TEST_CASE("tempered hardness bounds the temper from both sides by the published curve") {
    const auto made = put(limit("tempered_hardness", "4140", 285, 331), steel(), "C 0.4", "low-alloy", 600);
    REQUIRE(made.size() == 2);
    CHECK(made[0].side == Side::floor);
    CHECK(made[1].side == Side::ceiling);
    CHECK(*made[0].temperature_C < *made[1].temperature_C);
    CHECK(*made[0].temperature_C > 540);  // 341 HB at 540 after 2 h, softer wants more
    CHECK(made[0].uncertainty_K > 0);
    CHECK(made[0].remark.contains("rule of thumb"));
    CHECK_FALSE(put(limit("tempered_hardness", "9999", 285, {}), steel(), "C 0.4", "low-alloy")[0].computed);
}

TEST_CASE("published Ac1 and Ac3 stand beside the computed values") {
    const QString analysis = "C 0.4, Si 0.25, Mn 0.85, Cr 0.95, Mo 0.2, S 0.01, P 0.015";
    const auto ae1 = put(limit("above_ae1", "", {}, {}), steel(), analysis, "low-alloy", 850);
    REQUIRE(ae1[0].opinions.size() >= 5);
    CHECK(ae1[0].opinions[0].quantity == "Ac1");
    CHECK(ae1[0].disagreement.isEmpty());  // 737 and 730
    const Sweep odd = shop::sweepOf({{"ferrite", 0, 990}, {"austenite", 930, 1490}, {"liquid", 1430, 2000}});
    const auto ae3 = put(limit("above_ae3", "", {}, {}), odd, analysis, "low-alloy", 850);
    CHECK(ae3[0].disagreement.contains("have it measured"));
}
