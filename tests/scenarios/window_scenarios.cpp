// SPDX-License-Identifier: GPL-3.0-or-later
// Each case says what a metallurgist expects and on what ground; where the computed answer differs, it is recorded as
// it is.
#include "planner/core/sheet_issue.h"
#include "planner/core/verdict.h"
#include "quillmere.h"

using namespace soak;
using quillmere::ask;
using quillmere::limitOf;

// A plain low-carbon 18-8 anneal is set by the specification, not by physics: 0.019 % C leaves M23C6 near 800 to 900
// degC (carbon line of 18-8 in the ASM Specialty Handbook Stainless Steels, 1994: about 0.02 to 0.03 % C dissolve at
// 900 degC).
TEST_CASE("1: K40217, SA-300 in F2 is inside; the specification binds, the carbide lies far below") {
    const auto answer = ask("K40217", "SA-300", "F2");
    CHECK(answer.verdict == Verdict::inside);
    CHECK(answer.grade_check.verdict == "passes");
    REQUIRE(answer.floors.front().temperature_C);
    CHECK(answer.floors.front().cause == "specification minimum 1040\u2009°C");
    const Limit* carbide = limitOf(answer, "M23C6 dissolved");
    REQUIRE(carbide);
    // Expected 850 to 900 without the margin of 20 K. The data compute about 800: they lie some 54 K below one
    // published line and agree with another (data/model_scatter.toml), and the uncertainty carries that.
    CHECK(*carbide->temperature_C - carbide->margin_K > 750);
    CHECK(*carbide->temperature_C - carbide->margin_K < 900);
    CHECK(carbide->uncertainty_K > 50);
    CHECK(answer.reason.contains("specification minimum"));
}

// At 0.13 % C the M23C6 solvus of a cast 19-11-2 lies above 1070 degC (carbon solubility in 18-8: 7.771 - 6272/T, log10
// ppm, K. Natesan, T.F. Kassner 1973 as quoted by Padilha and Rios 2002: 1300 ppm dissolve at 1076 degC).
TEST_CASE(
    "2: F2418/1, SA-8M: the cold corner lies below the carbide; a higher setpoint is proposed, the grade still fails") {
    const auto added = ask("F2418/1", "SA-8M", "F1", "added up"), root = ask("F2418/1", "SA-8M", "F1");
    CHECK(std::floor(added.band.low_C) == 1056);
    CHECK(std::round(root.band.low_C) == 1068);
    CHECK(added.verdict == Verdict::outside);
    CHECK(root.verdict == Verdict::outside);
    const Limit* carbide = limitOf(root, "M23C6 dissolved");
    REQUIRE(carbide);
    CHECK(*carbide->temperature_C - carbide->margin_K > 1070);
    CHECK(root.grade_check.verdict == "fails");
    CHECK(root.reason.contains("grade check fails"));

    const auto electric = ask("F2418/1", "SA-8M", "F2");
    REQUIRE(electric.suggested_setpoint_C);
    CHECK(*electric.suggested_setpoint_C > 1080);

    const auto lean = ask("F2415/1", "SA-8M", "F1");  // C 0.045
    CHECK(lean.verdict == Verdict::inside);
    CHECK(lean.grade_check.verdict == "passes");
}

// Cr, Mo and W feed sigma: F.C. Hull, Weld. J. 52 (1973) 104s, equivalents 1, 1.76 and 0.97.
TEST_CASE("3: F2407/3 has the higher sigma floor of the two castings, driven by chromium, molybdenum and tungsten") {
    const auto rich = ask("F2407/3", "SA-6A", "F1"), lean = ask("F2407/1", "SA-6A", "F1");
    const Limit *rich_sigma = limitOf(rich, "sigma dissolved"), *lean_sigma = limitOf(lean, "sigma dissolved");
    REQUIRE((rich_sigma && lean_sigma));
    CHECK(*rich_sigma->temperature_C > *lean_sigma->temperature_C + 10);
    for (const char* element : {"Cr", "Mo", "W"}) {
        CHECK(rich_sigma->K_per_wt.at(element) > 0);
        CHECK(rich_sigma->drivers.contains(element));
    }
    // Expected besides: Si up and N down as reasons (Hull gives Si 1.58). The data give the sigma solvus almost no
    // dependence on Si and N; recorded here as it is, for whoever improves them.
    CHECK(rich.verdict != Verdict::inside);
    CHECK(lean.verdict != Verdict::inside);  // tight: the sigma solvus is known to 50 K only
    // Expected: tight or outside in F1, better in F2. Computed: the ferrite of this heat passes 65 vol% below its sigma
    // floor, so that no furnace helps. The specification's 1100 degC lies just above the sigma floor and is named
    // first.
    CHECK(rich.verdict == Verdict::noWindow);
    CHECK(*rich_sigma->temperature_C == Approx(1094).margin(15));
    CHECK(rich.reason.contains("1100"));
    CHECK(rich.reason.contains("ferrite"));
}

// The worked example of the shop's page.
TEST_CASE("4: added up or root of squares: the verdict against the 1100 minimum flips and the rule is named") {
    const auto added = ask("F2407/1", "SA-6A", "F1", "added up"), root = ask("F2407/1", "SA-6A", "F1");
    CHECK(added.band.low_C == Approx(1095.3).margin(0.05));
    CHECK(root.band.low_C == Approx(1107.0).margin(0.05));
    CHECK(added.verdict == Verdict::outside);
    CHECK((root.verdict == Verdict::inside || root.verdict == Verdict::tight));
    CHECK(added.reason.contains("specification minimum 1100"));
    CHECK(added.band.rule == "added up");
    CHECK(root.band.rule == "root of squares");
}

// Nitrogen decides the phase balance of duplex: more than ten points of ferrite across its range (trade knowledge).
TEST_CASE("5: D7731 without nitrogen is not computed; what-ifs are marked as such") {
    const auto answer = ask("D7731", "SA-22", "F2");
    CHECK(answer.verdict == Verdict::notComputed);
    CHECK(answer.reason.contains("N missing"));
    CHECK_FALSE(answer.margin_K);
    CHECK_FALSE(answer.suggested_setpoint_C);
    int what_ifs = 0;
    for (const QString& remark : answer.remarks)
        what_ifs += remark.startsWith("what if N were") && remark.contains("no verdict");
    CHECK(what_ifs == 2);
    CHECK(answer.grade_check.verdict == "not checked");
}

// Low C with high Cr and Si keeps delta ferrite at every temperature: Kaltenhauser's ferrite factor (Metals Eng. Quart.
// 11 (1971) 41) is Cr + 6 Si + 8 Ti + 4 Mo + 2 Al - 40 (C + N) - 2 Mn - 4 Ni = 14.4, above 13.5 where martensite is not
// full.
TEST_CASE("11: M1126 keeps ferrite, M1120 hardens inside") {
    const auto typical = ask("M1120", "H-410", "F2");
    CHECK(typical.verdict == Verdict::inside);
    const auto rich = ask("M1126", "H-410", "F2");
    CHECK(rich.verdict != Verdict::inside);
    CHECK(rich.verdict != Verdict::tight);
}

TEST_CASE(
    "14: S7709 is another steel: the grade fails, 1.3243 is suggested, no sheet is issued; the window is apart from "
    "that") {
    const auto answer = ask("S7709", "H-M2", "F4");
    CHECK(answer.grade_check.verdict == "fails");
    REQUIRE_FALSE(answer.grade_check.suggested.isEmpty());
    CHECK(answer.grade_check.suggested.first() == "1.3243");
    CHECK((answer.verdict == Verdict::inside || answer.verdict == Verdict::tight));
    CHECK(obstaclesToIssue(answer).join(' ').contains("grade check: fails"));
    auto job = jobFrom(*quillmere::works().store, "S7709", "H-M2", "F4");
    REQUIRE(job);
    const auto issued =
        issueSheet(*quillmere::works().store, answer, job.value(), quillmere::works().shelf->rules, "metallurgist");
    REQUIRE_FALSE(issued);
    CHECK(issued.error().fault == Fault::input);
}

TEST_CASE("16: 1886 typed as °C for F4 is refused; the sheet of 1030 °C shows 1886 °F first and ±8 K as 14 °F") {
    auto job = jobFrom(*quillmere::works().store, "ESR-1188A", "H-D2", "F4");
    REQUIRE(job);
    job.value().setpoint_C = 1886;
    ReportCache cache;
    const auto refused = judge(job.value(), *quillmere::works().shelf, cache);
    REQUIRE_FALSE(refused);
    CHECK(QString::fromStdString(refused.error().text()).contains("did you mean 1886\u2009°F"));

    const auto answer = ask("ESR-1188A", "H-D2", "F4");
    job.value().setpoint_C.reset();
    const auto sheet = draftSheet(*quillmere::works().store, answer, job.value(), quillmere::works().shelf->rules);
    REQUIRE(sheet);
    CHECK(sheet.value().setpoint.controller.value == 1886);
    CHECK(sheet.value().setpoint.controller.unit == "°F");
    CHECK(sheet.value().setpoint.other->value == 1030);
    CHECK(sheet.value().setpoint.other->unit == "°C");
    CHECK(sheet.value().margin->controller.value == std::floor(*answer.margin_K * 1.8 + 0.01));
}

TEST_CASE("17: F6 is overdue: no sheet is issued, a draft has a watermark and no number") {
    const auto answer = ask("K40217", "SA-300", "F6");
    CHECK_FALSE(answer.band.may_issue);
    auto job = jobFrom(*quillmere::works().store, "K40217", "SA-300", "F6");
    REQUIRE(job);
    const auto& rules = quillmere::works().shelf->rules;
    const auto issued = issueSheet(*quillmere::works().store, answer, job.value(), rules, "metallurgist");
    REQUIRE_FALSE(issued);
    CHECK(QString::fromStdString(issued.error().text()).contains("overdue since 2024-09-28"));
    const auto draft = draftSheet(*quillmere::works().store, answer, job.value(), rules);
    REQUIRE(draft);
    CHECK(draft.value().draft);
    CHECK(draft.value().number.isEmpty());
    CHECK(draft.value().draft_reasons.join(' ').contains("overdue since 2024-09-28"));
}

TEST_CASE("26: elements outside the equilibrium are kept, checked and listed") {
    auto job = jobFrom(*quillmere::works().store, "K40217", "SA-300", "F2");
    REQUIRE(job);
    for (const auto& [element, raw] : {std::pair{"B", "0.0022"}, {"Sn", "0.006"}, {"As", "0.004"}, {"O", "0.0028"}})
        job.value().heat.analysis[element] = readContent(raw);
    ReportCache cache;
    const auto answer = judge(job.value(), *quillmere::works().shelf, cache);
    REQUIRE(answer);
    for (const char* kept : {"B 0.0022", "Sn 0.006", "As 0.004", "O 0.0028", "P 0.031", "S 0.004"})
        CHECK(answer.value().left_out.contains(kept));
    // The equilibrium is the same with and without them.
    const auto without = ask("K40217", "SA-300", "F2");
    CHECK(*answer.value().low_C == *without.low_C);
    CHECK(*answer.value().margin_K == *without.margin_K);
    const auto sheet =
        draftSheet(*quillmere::works().store, answer.value(), job.value(), quillmere::works().shelf->rules);
    REQUIRE(sheet);
    CHECK(sheet.value().left_out.join(' ').contains("Sn 0.006"));
}

TEST_CASE("dragging the setpoint moves the band and the verdict, never the limits") {
    const auto at_1060 = ask("K40217", "SA-300", "F2");
    auto furnace = quillmere::works().store->furnace("F2");
    REQUIRE(furnace);
    const auto at_1040 = atSetpoint(at_1060, furnace.value(), quillmere::works().shelf->rules, 1040);
    REQUIRE(at_1040);
    CHECK(at_1040.value().verdict == Verdict::outside);
    CHECK(*at_1040.value().low_C == *at_1060.low_C);
    const auto asked = ask("K40217", "SA-300", "F2", "root of squares", 1040);
    CHECK(at_1040.value().reason == asked.reason);
    CHECK_FALSE(atSetpoint(at_1060, furnace.value(), quillmere::works().shelf->rules, 1940));
}
