// SPDX-License-Identifier: GPL-3.0-or-later
// The aluminium bay: what a metallurgist would expect of each heat, with the published basis. Rows la... are those of
// db/library/published_treatments_light.csv, where the sources stand.
#include <set>

#include "db/content.h"

#include "quillmere.h"

using namespace soak;
using quillmere::ask;
using quillmere::limitOf;

namespace {

/// A computed limit without its margin: the temperature of the metal's own event.
double event_C(const WindowAnswer& answer, const QString& words) {
    const Limit* limit = limitOf(answer, words);
    REQUIRE(limit);
    INFO(limit->cause.toStdString() << ": " << limit->remark.toStdString());
    REQUIRE(limit->temperature_C);
    return *limit->temperature_C + (limit->side == Side::floor ? -limit->margin_K : limit->margin_K);
}
double windowWidth_K(const WindowAnswer& answer) { return answer.high_C.value() - answer.low_C.value(); }
double bandWidth_K(const WindowAnswer& answer) { return answer.band.high_C - answer.band.low_C; }

}  // namespace

TEST_CASE("light: every heat of the bay is answered with the light data, without a path of its own") {
    const auto delivery = quillmere::delivery("db/demo/light_heats.csv");
    CHECK(delivery.size() >= 20);
    auto question = triageFrom(*quillmere::works().store, delivery, {});
    REQUIRE(question);
    const auto rows = triage(question.value(), *quillmere::works().shelf);
    std::set<QString> heats;
    for (const TriageRow& row : rows) {
        INFO(row.heat.toStdString() << ": " << row.reason.toStdString());
        heats.insert(row.heat);
        CHECK_FALSE(row.reason.isEmpty());
        REQUIRE(row.answer);
        CHECK(row.answer->data_set == "light");
        CHECK(row.answer->data_version.size() == 12);
    }
    CHECK(heats.size() == delivery.size());
}

TEST_CASE("light: 2024 rich in copper and magnesium keeps S to the eutectic, and says how much") {
    // la224: eutectic of 2024 at 502 °C, not removed by homogenising; Al-Cu-Mg eutectic with S and theta at 507 °C.
    const WindowAnswer rich = ask("A2403", "SL-2024", "L1");
    CHECK(rich.verdict == Verdict::noWindow);
    CHECK(rich.reason.contains("cannot be dissolved at any temperature: excess S"));
    CHECK(event_C(rich, "solidus") == Approx(505).margin(10));
    const WindowAnswer lean = ask("A2401", "SL-2024", "L1");
    CHECK(lean.low_C.value() < 500);
    CHECK(windowWidth_K(lean) > bandWidth_K(lean));
}

TEST_CASE("light: a 2014 forging whose window is narrower than a class 1 furnace") {
    // 2014 is solution treated at 496 to 507 °C and melts at its theta-silicon eutectic near 507 to 510 (ASM Handbook
    // vol. 2); the window between theta and the solidus is 10 to 15 K at best.
    const WindowAnswer answer = ask("A2411", "SL-2014", "L1");
    CHECK(windowWidth_K(answer) < bandWidth_K(answer));
    CHECK(answer.verdict == Verdict::outside);
    CHECK(answer.reason.contains("No setpoint in L1 keeps all of the metal inside"));
}

TEST_CASE("light: 7075 with too much copper fails its grade and has no room between S and the solidus") {
    // la249: S eutectic of 7050 at 488 °C; la253: solidus of homogenised 7075 and 7049 billets 525 to 548 °C,
    // "copper-rich alloy needed two steps".
    const WindowAnswer copper = ask("A7503", "SL-7075", "L1");
    CHECK(copper.grade_check.verdict == "fails");
    CHECK(windowWidth_K(copper) < bandWidth_K(copper));
    CHECK(event_C(copper, "S dissolved") > 470);
    const WindowAnswer plain = ask("A7501", "SL-7075", "L1");
    CHECK(plain.grade_check.verdict == "passes");
    CHECK(event_C(plain, "solidus") == Approx(525).margin(15));
    CHECK(event_C(plain, "solidus") - event_C(copper, "solidus") > 20);
    CHECK(windowWidth_K(plain) > 3 * bandWidth_K(plain));
}

TEST_CASE("light: 6082 with more Mg2Si than aluminium can hold says how much is in excess") {
    // 1.85 wt% Mg2Si is the most that aluminium dissolves, at 595 °C (H.W.L. Phillips 1961), less beside free silicon;
    // Mg 1.17 and Si 1.26 make 1.85 % of it.
    const WindowAnswer excess = ask("A6202", "SL-61", "L1");
    CHECK(excess.verdict == Verdict::noWindow);
    CHECK(excess.reason.contains("cannot be dissolved at any temperature: excess Mg2Si"));
    const WindowAnswer plain = ask("A6201", "SL-61", "L1");
    CHECK((plain.verdict == Verdict::inside || plain.verdict == Verdict::tight));
}

TEST_CASE("light: 6061 is dissolved within the published range and far from melting") {
    // la020: 516 to 579 °C; la242: solidus 582 °C; Mg2Si of 1.5 wt% dissolves near 560 °C (H.W.L. Phillips 1961).
    const WindowAnswer answer = ask("A6101", "SL-61", "L1");
    const double dissolved_C = event_C(answer, "Mg2Si dissolved");
    CHECK(dissolved_C > 516);
    CHECK(dissolved_C < 579);
    CHECK(event_C(answer, "solidus") == Approx(582).margin(15));
    CHECK(answer.grade_check.verdict == "passes");
}

TEST_CASE("light: A356 keeps its magnesium in solution below the Mg2Si-silicon eutectic") {
    // la264: Mg2Si-silicon eutectic 555 to 560 °C; la076: 535 to 545 °C, 6 to 12 h.
    const WindowAnswer answer = ask("C3561", "SL-356", "L1");
    CHECK(event_C(answer, "solidus") == Approx(557).margin(15));
    CHECK(answer.low_C.value() < 535);
    CHECK(answer.high_C.value() > 545);
    // More magnesium needs more temperature and melts no later.
    const WindowAnswer more = ask("C3571", "SL-357", "L1");
    CHECK(event_C(more, "Mg2Si dissolved") > event_C(answer, "Mg2Si dissolved") + 50);
    CHECK(event_C(more, "solidus") < event_C(answer, "solidus"));
}

TEST_CASE("light: lead and bismuth are kept, named, and stay out of the equilibrium") {
    // They do not mix with aluminium (T.B. Massalski, Binary Alloy Phase Diagrams, 1990).
    const WindowAnswer answer = ask("A2441", "SL-2011", "L1");
    CHECK(answer.left_out.join(' ').contains("Pb 0.41"));
    CHECK(answer.left_out.join(' ').contains("Bi 0.44"));
    CHECK(answer.grade_check.verdict == "passes");
    CHECK(answer.low_C);
}

TEST_CASE("light: tin at the boundaries is beyond the data: refused with the reason, never a number") {
    const WindowAnswer answer = ask("C4503", "SL-450", "L1");
    CHECK(answer.verdict == Verdict::notComputed);
    CHECK(answer.reason.contains("Sn 0.41 % is not in the data set \"light\""));
    CHECK(answer.grade_check.verdict == "fails");
    CHECK_FALSE(answer.suggested_setpoint_C);
}

TEST_CASE("light: a dash for magnesium is no zero") {
    const WindowAnswer answer = ask("A6103", "SL-61", "L1");
    CHECK(answer.verdict == Verdict::notComputed);
    CHECK(answer.reason.contains("Mg missing"));
    CHECK(answer.grade_check.verdict == "not checked");
}

TEST_CASE("light: 520.0 may be heated within 5 K only, and the gas furnace holds 6") {
    // la081: 425 to 435 °C; la267: melting starts at the beta eutectic, 449 to 450 °C.
    const WindowAnswer answer = ask("C5201", "SL-520", "L2");
    CHECK(bandWidth_K(answer) > 10);
    CHECK(answer.verdict == Verdict::outside);
    CHECK(event_C(answer, "beta dissolved") < 425);
}

TEST_CASE("light: 5083 is annealed above the beta film") {
    // la187: 335 to 355 °C; beta on boundaries between 65 and 200 °C.
    const WindowAnswer answer = ask("A5301", "AN-5083", "L2");
    CHECK(answer.verdict == Verdict::inside);
    CHECK(event_C(answer, "beta dissolved") == Approx(240).margin(25));
}

TEST_CASE("light: a steel's chemistry under an aluminium grade is refused") {
    auto job = jobFrom(*quillmere::works().store, "A6101", "SL-61", "L1");
    REQUIRE(job);
    job.value().heat.analysis = {};
    for (const auto& [element, text] : {std::pair{"Fe", "71.2"},
                                        {"Cr", "18.1"},
                                        {"Ni", "8.1"},
                                        {"Si", "0.5"},
                                        {"Mg", "0.9"},
                                        {"Cu", "0.2"},
                                        {"Mn", "1.2"},
                                        {"Ti", "0.1"},
                                        {"Zn", "0.1"}})
        job.value().heat.analysis[element] = readContent(text);
    ReportCache cache;
    const auto answer = judge(job.value(), *quillmere::works().shelf, cache);
    REQUIRE(answer);
    CHECK(answer.value().verdict == Verdict::notComputed);
    CHECK(answer.value().reason.contains("an alloy of Fe"));
    CHECK(answer.value().grade_check.verdict == "fails");
}

TEST_CASE("light: Al-Si-Cu castings with 0.04 and 0.45 Mg: the ceilings differ by tens of kelvin") {
    // la260, la261: Q melts at 505 °C in the casting rich in magnesium, Al2Cu at 540 °C in the one that is nearly
    // without (J. Gauthier, F.H. Samuel et al., J. Mater. Sci. 33 (1998) 2283-2297). Without a hold the traces of
    // magnesium in the last liquid bring the lean one down as well; a hold at a lower step gives it its room back.
    const double rich_C = event_C(ask("C4502", "SL-450", "L1"), "segregated solidus");
    CHECK(rich_C == Approx(505).margin(6));
    const WindowAnswer lean = ask("C4501", "SS-450", "L1");
    const double lean_C = event_C(lean, "first melting after the lower step");
    CHECK(lean_C == Approx(540).margin(15));
    CHECK(lean_C - rich_C > 20);
    CHECK(event_C(ask("C4501", "SL-450", "L1"), "segregated solidus") > rich_C + 4);
    CHECK(limitOf(lean, "first melting after")->remark.contains("after 6.0"));
}

TEST_CASE("light: cast slabs melt at their eutectics until they are homogenised, and dispersoids stay") {
    // la224: 502 °C for 2024; la251: 477 °C for unhomogenised 7xxx with copper.
    const WindowAnswer slab = ask("A2402", "HO-2024", "L1");
    CHECK(event_C(slab, "segregated solidus") == Approx(502).margin(12));
    CHECK(slab.reason.contains("segregated solidus"));
    const WindowAnswer zinc = ask("A7511", "HO-7050", "L1");
    CHECK(event_C(zinc, "segregated solidus") == Approx(477).margin(10));
    CHECK(event_C(zinc, "segregated solidus") < event_C(ask("A7511", "SL-7050", "L1"), "solidus") - 20);
    for (const auto& [answer, phase] : {std::pair{&slab, "Al20Cu2Mn3"}, {&zinc, "Al3Zr"}}) {
        const Limit* kept = limitOf(*answer, phase);
        REQUIRE(kept);
        CHECK_FALSE(kept->impossible);
    }
}

TEST_CASE("light: A206 goes to its upper step only after the lower one") {
    // la058: 511 to 515 °C for 2 h, then 527 °C; one step at 527 would melt the cast metal.
    const WindowAnswer answer = ask("C2061", "SL-206", "L1");
    const Limit* stepped = limitOf(answer, "first melting after the lower step");
    REQUIRE(stepped);
    REQUIRE(stepped->temperature_C);
    CHECK(*stepped->temperature_C > 527);
    CHECK(stepped->remark.contains("the cast metal begins to melt at 51"));
}

TEST_CASE("light: the quench delay of the table against the manipulator that was timed") {
    // AMS 2770 (la303): 15 s over 2.29 mm; LW2 took 22 s, LW1 8 s.
    const WindowAnswer slow = ask("A7501", "SL-7075", "L2"), quick = ask("A7501", "SL-7075", "L1");
    CHECK(slow.cooling.set_s.value() == 15);
    CHECK(slow.cooling.too_slow);
    CHECK_FALSE(quick.cooling.too_slow);
    // C-curve of 7075-T6: a plate of 38 mm loses some of its strength even in cold water, and more in warm.
    CHECK(quick.remarks.join(' ').contains("quench of 7075 in LW1: quench factor"));
    CHECK(slow.remarks.join(' ').contains("quench of 7075 in LW2: quench factor"));
}

TEST_CASE("light: artificial ageing and the re-solution of clad sheet are judged like any other cycle") {
    CHECK(ask("A6101", "AG-61", "L4").verdict == Verdict::inside);
    const WindowAnswer again = ask("A2401", "RC-2024", "L1");
    CHECK((again.verdict == Verdict::inside || again.verdict == Verdict::tight));
    CHECK(ask("A2403", "RC-2024", "L1").verdict == Verdict::noWindow);
}
