// SPDX-License-Identifier: GPL-3.0-or-later
#include <catch2/catch.hpp>

#include "heats.h"
#include "planner/core/cautions.h"
#include "planner/core/sheet_issue.h"
#include "planner/core/sheet_json.h"
#include "planner/core/verdict.h"
#include "shop.h"

using namespace soak;

namespace {

/// A made-up answer of F4 at 1030 °C: floor 1000.2, ceiling 1060.8, both computed.
SheetRequest request() {
    SheetRequest made;
    made.rules = shop::rules();
    made.job.furnace = shop::furnace("F4");
    made.job.furnace.quenches = {"G1"};
    made.job.heat = shop::heat("ESR-1188A", "1.2379", "bar", "C 1.53, Cr 11.82");
    made.job.heat.section_mm = 80;
    made.job.cycle.name = "H-D2";
    made.job.cycle.kind = "harden";
    made.job.cycle.quenches = {"O1", "G1"};
    made.job.cycle.soak_base_min = 30;
    made.job.cycle.soak_per_25mm_min = 60;
    made.job.cycle.soak_free_mm = 25;
    made.quenches = {{"O1", "oil", "F5", 8, 8, ""}, {"G1", "nitrogen, 6 bar", "F4", 0, 0, ""}};
    Limit floor, ceiling;
    floor.cause = "C in the matrix at least 0.45\u2009wt%";
    floor.temperature_C = 1000.2;
    ceiling.side = Side::ceiling;
    ceiling.cause = "C in the matrix at most 0.75\u2009wt%";
    ceiling.temperature_C = 1060.8;
    made.answer.floors = {floor};
    made.answer.ceilings = {ceiling};
    made.answer.setpoint_C = 1030;
    made.answer.grade_check.verdict = "passes";
    made.answer.band = bandOrSetpoint(made.job.furnace, 1030, made.rules).value();
    decide(made.answer, made.job.furnace, made.rules);
    return made;
}

}  // namespace

TEST_CASE("a sheet rounds the safe way, in the controller's unit first") {
    const SheetContent sheet = makeSheet(request());
    CHECK(sheet.setpoint.controller.value == 1886);
    CHECK(sheet.setpoint.other->value == 1030);
    // 1000.2 degC = 1832.36 degF up, 1060.8 degC = 1941.44 degF down
    CHECK(sheet.window_low->controller.value == 1833);
    CHECK(sheet.window_low->other->value == 1001);
    CHECK(sheet.window_high->controller.value == 1941);
    CHECK(sheet.window_high->other->value == 1060);
    CHECK(sheet.never_above->controller.value == 1941);
    const Band& band = request().answer.band;
    CHECK(sheet.metal_low.other->value == std::floor(band.low_C));
    CHECK(sheet.metal_high.other->value == std::ceil(band.high_C));
}

TEST_CASE("soak minutes come from the governing section; without a section the crew gets a blank and the rule") {
    SheetRequest with_section = request();
    CHECK(*makeSheet(with_section).soak_minutes == 30 + 132);  // 60 min * (80 - 25) / 25
    with_section.job.heat.section_mm.reset();
    CHECK_FALSE(makeSheet(with_section).soak_minutes);
}

TEST_CASE("the quench is one that this furnace can reach") {
    CHECK(makeSheet(request()).quench_medium == "G1, nitrogen, 6 bar");
}

TEST_CASE("what stands in the way of an issued sheet") {
    SheetRequest made = request();
    REQUIRE(made.answer.verdict == Verdict::inside);
    CHECK(obstaclesToIssue(made.answer).isEmpty());
    made.answer.grade_check.verdict = "fails";
    CHECK(obstaclesToIssue(made.answer).join(' ').contains("grade check: fails"));
    made = request();
    made.answer.verdict = Verdict::outside;
    CHECK(obstaclesToIssue(made.answer) == QStringList{"verdict outside"});
    CHECK(makeSheet(made).draft);
    CHECK(makeSheet(made).draft_reasons == QStringList{"verdict outside"});
}

TEST_CASE("cautions follow medium, furnace and treatment, dangers first, and stay few") {
    const std::vector<Caution> all = readCautions(libraryFolder()).value();
    Cycle anneal;
    anneal.kind = "solution-anneal";
    Furnace electric;
    electric.kind = "chamber, electric";
    const auto chosen = cautionsFor(all, anneal, "austenitic", electric, "W2, water", 1060, 5);
    REQUIRE(chosen.size() == 5);
    CHECK(chosen.front().severity == "danger");
    bool water = false, oil = false, general = false;
    for (const Caution& caution : chosen) {
        water = water || caution.applies_to == "medium: water quench";
        oil = oil || caution.applies_to == "medium: oil quench";
        general = general || caution.applies_to == "treatment: any";
    }
    CHECK(water);
    CHECK(general);
    CHECK_FALSE(oil);
}

TEST_CASE("cautions for aluminium: its own dangers first, magnesium before all others at the nitrate bath") {
    const std::vector<Caution> all = readCautions(libraryFolder()).value();
    Cycle solution;
    solution.kind = "solution-anneal";
    solution.grades = {"2011"};
    Furnace salt, air;
    salt.kind = "nitrate salt bath, electric";
    air.kind = "drop bottom, fan, electric";
    const auto at_salt = cautionsFor(all, solution, "light-wrought-2xxx", salt, "LW3, water", 500, 40);
    CHECK(at_salt.front().row_id == "c083");  // magnesium never goes into nitrate
    const auto in_air = cautionsFor(all, solution, "light-wrought-2xxx", air, "LW1, water", 500, 40);
    QStringList ids;
    for (const Caution& caution : in_air) ids << caution.row_id;
    CHECK_FALSE(ids.contains("c083"));
    for (const char* wanted : {"c089", "c090", "c095", "c098", "c101", "c110"}) {  // c110: leaded alloys, by grade
        INFO(wanted);
        CHECK(ids.contains(wanted));
    }
    CHECK_FALSE(ids.contains("c106"));  // castings only
    solution.grades = {"1.4307"};
    for (const Caution& caution : cautionsFor(all, solution, "austenitic", air, "W2, water", 1060, 40))
        CHECK_FALSE(caution.applies_to.contains("aluminium"));
}

TEST_CASE("a sheet's JSON changes with its contents") {
    const SheetContent sheet = makeSheet(request());
    SheetContent other = sheet;
    other.setpoint.controller.value += 5;
    CHECK(sheetJson(sheet) == sheetJson(makeSheet(request())));
    CHECK(sheetJson(sheet) != sheetJson(other));
}

TEST_CASE("a sheet comes back from its JSON as it was, and from an older program's as far as it goes") {
    SheetRequest asked = request();
    asked.job.furnace.work_zone_mm = "900 x 1200 x 800";
    SheetContent sheet = makeSheet(asked);
    REQUIRE(sheet.sketch);
    sheet.heats[0].pieces = 4;
    sheet.max_delay = Quantity{60, 0, "s"};
    sheet.deference << "ask the foreman";
    const auto back = sheetFromJson(sheetJson(sheet));
    REQUIRE(back);
    CHECK(sheetJson(back.value()) == sheetJson(sheet));
    CHECK(*back.value().heats[0].pieces == 4);
    CHECK(back.value().sketch->sensors.size() == sheet.sketch->sensors.size());
    CHECK(back.value().verdict == Verdict::inside);
    const auto older = sheetFromJson(R"({"kind":"harden","setpoint":{"controller":{"value":1886,"unit":"°F"}}})");
    REQUIRE(older);
    CHECK(older.value().setpoint.controller.value == 1886);
    CHECK(older.value().heats.empty());
    CHECK_FALSE(sheetFromJson("no sheet"));
}

TEST_CASE("the sheet of a Fahrenheit furnace speaks Fahrenheit in its sentences too") {
    const SheetContent sheet = makeSheet(request());
    CHECK(sheet.verdict_sentence.contains("\u2009°F"));
    CHECK_FALSE(sheet.verdict_sentence.contains("°C"));
    CHECK_FALSE(sheet.decision_rule.contains("\u2009K"));
}
