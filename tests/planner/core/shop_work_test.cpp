// SPDX-License-Identifier: GPL-3.0-or-later
// What surrounds the window: a grade's whole range, mixed loads, the run's record, look-back, trend.
#include <QJsonDocument>
#include <QJsonObject>
#include <QTemporaryDir>
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

#include "heats.h"
#include "planner/core/grade_study.h"
#include "planner/core/look_back.h"
#include "planner/core/mixed_load.h"
#include "planner/core/run_review.h"
#include "planner/core/trend.h"
#include "planner/core/verdict.h"
#include "shop.h"

using namespace soak;

namespace {

Limit limit(Side side, double temperature_C, const QString& cause, double uncertainty_K = 0) {
    Limit made;
    made.side = side;
    made.cause = cause;
    made.temperature_C = temperature_C;
    made.model_K = made.uncertainty_K = uncertainty_K;
    made.set = uncertainty_K == 0;
    return made;
}

LoadItem item(const QString& heat, double floor_C, double ceiling_C, const QString& cooling = "W2") {
    LoadItem made;
    made.heat = heat;
    made.cycle = "C";
    made.cooling = cooling;
    made.answer.setpoint_C = (floor_C + ceiling_C) / 2;
    made.answer.floors = {limit(Side::floor, floor_C, "floor of " + heat)};
    made.answer.ceilings = {limit(Side::ceiling, ceiling_C, "ceiling of " + heat)};
    made.answer.verdict = Verdict::inside;
    return made;
}

/// F1 of the shop with a narrow survey, so that the numbers below are easy to follow.
Furnace plainFurnace() {
    Furnace furnace = shop::furnace("F1");
    furnace.survey = {{1000, -5, 5}};
    furnace.instrument_K = furnace.swing_K = furnace.offset_K = 0;
    return furnace;
}

QDateTime at(const char* clock) { return clockTime(clock, QDate(2025, 4, 2)).value(); }

/// A plan at 1060 with a window of 1040 to 1120 in the plain furnace: 60 minutes, 45 s to the quench.
struct Plan {
    WindowAnswer answer;
    Job job;
    Shelf shelf;
    Plan() {
        shelf = makeShelf({}, {}, shop::rules()).value();
        job.furnace = plainFurnace();
        answer.family = "duplex";
        answer.kind = "solution-anneal";
        answer.setpoint_C = 1060;
        answer.band = bandOrSetpoint(job.furnace, 1060, shop::rules()).value();
        answer.floors = {limit(Side::floor, 1040, "sigma dissolved", 10)};
        answer.ceilings = {limit(Side::ceiling, 1120, "ferrite at most 60 vol%", 10)};
        Limit solidus = limit(Side::ceiling, 1300, "solidus", 10);
        solidus.kind = "below_solidus";
        answer.ceilings.push_back(solidus);
        answer.low_C = 1040, answer.high_C = 1120;
        answer.soak.rule_min = 60;
        answer.cooling.allowed_s = 45;
    }
    RunReview review(const RunRecord& record) const { return reviewRun(answer, job, record, shelf).value(); }
};

/// Furnace at `control_C` from 10:05, load sensor there at 11:20, door at `door`.
RunRecord record(double control_C, const char* door) {
    RunRecord made;
    for (const char* clock : {"10:05", "10:40", "11:20", "11:50", "12:20"}) {
        made.readings.push_back({at(clock), "CT", control_C});
        const bool late = at(clock) >= at("11:20");
        made.readings.push_back({at(clock), "LT1", late ? control_C : control_C - 120});
    }
    made.door_open = at(door);
    made.under_quench = made.door_open->addSecs(30);
    return made;
}

Sheet sheetFor(const QString& number, const QString& furnace, const QDate& issued, double low_C, double high_C,
               double metal_low_C, double metal_high_C, bool fahrenheit = false) {
    const auto both = [&](double value_C) {
        const QJsonObject in_C{{"value", value_C}, {"unit", "°C"}}, in_F{{"value", value_C * 1.8 + 32}, {"unit", "°F"}};
        return fahrenheit ? QJsonObject{{"controller", in_F}, {"other", in_C}} : QJsonObject{{"controller", in_C}};
    };
    Sheet sheet;
    sheet.number = number;
    sheet.revision = "A";
    sheet.furnace = furnace;
    sheet.heat = "H-" + number;
    sheet.issued = issued;
    sheet.issued_by = "metallurgist";
    sheet.content = QJsonDocument(QJsonObject{{"metal_low", both(metal_low_C)},
                                              {"metal_high", both(metal_high_C)},
                                              {"window_low", both(low_C)},
                                              {"window_high", both(high_C)}})
                        .toJson();
    return sheet;
}

}  // namespace

// A made-up grade of two elements: heats work where A + B < 1. The largest box under that line has half of the square.
TEST_CASE("tightened limits: a box in which everything drawn works, of fair size") {
    const Box whole{{"A", {0, 1}}, {"B", {0, 1}}};
    std::mt19937_64 random(7);
    std::uniform_real_distribution<double> even(0, 1);
    std::vector<StudySample> samples(600);
    for (StudySample& one : samples) {
        one.wt = {{"A", even(random)}, {"B", even(random)}};
        one.verdict = one.wt["A"] + one.wt["B"] < 1 ? Verdict::inside : Verdict::outside;
    }
    const auto box = largestBox(whole, samples, 0.99);
    REQUIRE(box);
    const auto [a_low, a_high] = box->at("A");
    const auto [b_low, b_high] = box->at("B");
    CHECK((a_high - a_low) * (b_high - b_low) > 0.15);  // 0.25 is the largest there is
    CHECK(a_low < 0.1);                                 // faces that cost nothing are put back
    // The box was chosen on these samples, so that none of them fails flatters it: new ones decide, as in the command.
    int works = 0;
    for (int i = 0; i < 4000; ++i) {
        const double a = a_low + (a_high - a_low) * even(random), b = b_low + (b_high - b_low) * even(random);
        works += a + b < 1;
    }
    CHECK(works > 3800);
    // Nothing works: no box. Everything works: the whole.
    for (StudySample& one : samples) one.verdict = Verdict::outside;
    CHECK_FALSE(largestBox(whole, samples, 0.99));
    for (StudySample& one : samples) one.verdict = Verdict::tight;
    CHECK(*largestBox(whole, samples, 0.99) == whole);
}

// 0.99^299 = 0.0495: 299 draws without a failure show at least 99 % with 95 % confidence.
TEST_CASE("confidence of a verification by the exact binomial") {
    CHECK(binomialConfidence(299, 0, 0.01) == Approx(0.9505).margin(0.0005));
    CHECK(binomialConfidence(100, 0, 0.01) == Approx(1 - std::pow(0.99, 100)));
    CHECK(binomialConfidence(299, 3, 0.01) < 0.5);
}

TEST_CASE("mixed load: the fewest charges, and who keeps whom apart") {
    const Furnace furnace = plainFurnace();
    const std::vector<LoadItem> items{item("A", 1000, 1060), item("B", 1030, 1090), item("C", 1090, 1140),
                                      item("D", 1010, 1120), item("E", 1050, 1060)};
    const auto plan = planLoads(items, furnace, shop::rules());
    REQUIRE(plan.groups.size() == 2);
    CHECK(plan.groups[0].items.size() + plan.groups[1].items.size() == 4);
    for (const LoadGroup& group : plan.groups) {
        CHECK(group.setpoint_C >= group.low_C);
        CHECK(group.setpoint_C <= group.high_C);
        CHECK(group.margin_K >= 0);
    }
    REQUIRE(plan.why_apart.size() == 1);
    CHECK(plan.why_apart[0].contains("C: floor of C"));
    // E's window of 10 K is narrower than the band.
    REQUIRE(plan.left_out.size() == 1);
    CHECK(plan.left_out[0].first == 4);
    CHECK(plan.left_out[0].second.contains("no setpoint"));
}

TEST_CASE("mixed load: uncertainty counts, and different cooling never shares a charge") {
    const Furnace furnace = plainFurnace();
    auto sure = item("A", 1000, 1060), unsure = item("B", 1040, 1100);
    CHECK(planLoads({sure, unsure}, furnace, shop::rules()).groups.size() == 2);  // 1045+ and 1055- with 8 K of band
    sure = item("A", 1000, 1070), unsure = item("B", 1030, 1100);
    CHECK(planLoads({sure, unsure}, furnace, shop::rules()).groups.size() == 1);
    unsure.answer.floors[0] = limit(Side::floor, 1030, "floor of B", 30);
    CHECK(planLoads({sure, unsure}, furnace, shop::rules()).groups.size() == 2);
    const auto apart = planLoads({item("A", 1000, 1070), item("B", 1000, 1070, "A1")}, furnace, shop::rules());
    CHECK(apart.groups.size() == 2);
    CHECK(apart.why_apart.join(' ').contains("different cooling"));
}

// Acceptance scenario 20 of the trade: furnace at 1060 at 10:05, load in tolerance at 11:20, 10:05 written.
TEST_CASE("run record: the soak counts from the load sensor, not from what was written") {
    const Plan plan;
    auto run = record(1060, "12:25");
    run.soak_start_written = at("10:05");
    const auto review = plan.review(run);
    CHECK(*review.soak_start == at("11:20"));
    CHECK(*review.soak_min == 65);
    CHECK(*review.written_min == 140);
    CHECK_FALSE(review.fits);
    REQUIRE(review.findings.size() == 1);
    CHECK(review.findings[0].contains("75\u2009min too early"));
    CHECK(review.salvage[0].contains("stop, tag, call"));
    run.soak_start_written = at("11:20");
    CHECK(plan.review(run).fits);
    CHECK(plan.review(run).sentence.contains("65"));
}

TEST_CASE("run record: a short soak, a slow quench, a hot furnace, and what may be done") {
    const Plan plan;
    const auto short_soak = plan.review(record(1060, "12:00"));
    CHECK(*short_soak.soak_min == 40);
    CHECK(short_soak.sentence.contains("20\u2009min short of the 60\u2009min"));
    auto slow = record(1060, "12:25");
    slow.under_quench = slow.door_open->addSecs(50);
    CHECK(plan.review(slow).findings[0].contains("took 50\u2009s, allowed were 45\u2009s"));
    const auto hot = plan.review(record(1115, "12:25"));
    CHECK(*hot.ceiling_margin_K < 0);
    CHECK(hot.ceiling_cause.startsWith("ferrite"));
    CHECK(hot.salvage.join(' ').contains("phase balance comes back"));
    const auto burnt = plan.review(record(1300, "12:25"));
    CHECK(burnt.salvage.join(' ').contains("scrap"));
    const auto cold = plan.review(record(1030, "12:25"));
    CHECK(cold.sentence.contains("never reached"));
    CHECK_FALSE(cold.soak_min);
}

TEST_CASE("run record: what cannot be, and what is not there") {
    const Plan plan;
    auto backwards = record(1060, "12:25");
    backwards.under_quench = at("12:20");
    CHECK(plan.review(backwards).findings.join(' ').contains("clock is wrong"));
    auto wrong_unit = record(1060, "12:25");
    wrong_unit.readings[0].read_C = 1940;
    CHECK(plan.review(wrong_unit).findings.join(' ').contains("unit is wrong"));
    RunRecord none;
    CHECK_FALSE(reviewRun(plan.answer, plan.job, none, plan.shelf));

    QTemporaryDir folder;
    QFile log(folder.filePath("log.csv"));
    REQUIRE(log.open(QIODevice::WriteOnly));
    log.write("time,sensor,read_C\n10:05,CT,1060\n2025-04-02T11:20:30,LT1,1051.5\n");
    log.close();
    const auto readings = readLog(log.fileName(), QDate(2025, 4, 2));
    REQUIRE(readings);
    CHECK(readings.value()[1].read_C == 1051.5);
    REQUIRE(log.open(QIODevice::WriteOnly));
    log.write("time,sensor,read_C\nquarter past,CT,1060\n");
    log.close();
    const auto bad = readLog(log.fileName(), QDate(2025, 4, 2));
    REQUIRE_FALSE(bad);
    CHECK(bad.error().text().find("line 2") != std::string::npos);
}

// Reads 9 low: the metal was 9 hotter than the sheets said.
TEST_CASE("look-back: lost loads first, the ceiling side of them first, within the days that count") {
    const std::vector<Sheet> sheets{
        sheetFor("1", "F1", QDate(2025, 3, 20), 1040, 1100, 1050, 1095),        // 5 to the ceiling: lost by 4
        sheetFor("2", "F1", QDate(2025, 3, 21), 1040, 1150, 1042, 1080),        // better on the floor now
        sheetFor("3", "F1", QDate(2025, 3, 22), 1040, 1090, 1050, 1088, true),  // in °F; lost by 7
        sheetFor("4", "F2", QDate(2025, 3, 22), 1040, 1090, 1050, 1088),        // another furnace
        sheetFor("5", "F1", QDate(2025, 1, 5), 1040, 1090, 1050, 1088)};        // before the last good check
    const auto loads = lookBack(sheets, {"F1", 9, 0, QDate(2025, 3, 17), QDate(2025, 4, 2)});
    REQUIRE(loads);
    REQUIRE(loads.value().size() == 3);
    CHECK(loads.value()[0].sheet == "3 A");
    CHECK(*loads.value()[0].ceiling_margin_K == Approx(-7));
    CHECK(loads.value()[0].lost);
    CHECK(loads.value()[1].sheet == "1 A");
    CHECK(loads.value()[2].sheet == "2 A");
    CHECK_FALSE(loads.value()[2].lost);
    CHECK(*loads.value()[2].floor_margin_K == Approx(11));
    // What the plan had known already does not count again; reading high costs the floor.
    const auto known = lookBack(sheets, {"F1", 9, 9, QDate(2025, 3, 17), QDate(2025, 4, 2)});
    CHECK_FALSE(known.value()[0].lost);
    const auto cold = lookBack(sheets, {"F1", -9, 0, QDate(2025, 3, 17), QDate(2025, 4, 2)});
    CHECK(cold.value()[0].sheet == "2 A");
    CHECK_FALSE(cold.value()[0].ceiling_side);
    Sheet torn = sheets[0];
    torn.content = "{";
    CHECK_FALSE(lookBack({torn}, {"F1", 9, 0, {}, {}}));
}

// Individuals chart by hand: 10 12 11 13 12 14: mean 12, moving ranges 2 1 2 1 2, mean 1.6, limits 12 +- 4.256.
TEST_CASE("trend: control limits by hand, points beyond them and runs are alarms") {
    const auto chartOf = [](const std::vector<double>& values) {
        std::vector<TrendPoint> points;
        for (size_t i = 0; i < values.size(); ++i)
            points.push_back({QDate(2025, 1, 1).addDays(static_cast<int>(i)), QString::number(i), values[i]});
        return makeChart("Northmill", "1.4462", "Cu", "wt%", points, 6);
    };
    const auto steady = chartOf({10, 12, 11, 13, 12, 14});
    CHECK(steady.mean == Approx(12));
    CHECK(steady.upper == Approx(16.256));
    CHECK(steady.alarms.empty());
    const auto jump = chartOf({10, 12, 11, 13, 12, 14, 12, 17});
    REQUIRE(jump.alarms.size() == 1);
    CHECK(jump.alarms[0] == 7);
    CHECK(jump.sentence.contains("left its usual range"));
    const auto drift = chartOf({10, 12, 11, 13, 12, 14, 13, 13.5, 13, 14, 13.2, 13.1, 13.3, 13.6});
    CHECK_FALSE(drift.alarms.empty());
    CHECK(drift.sentence.contains("drifted"));
    CHECK(chartOf({10, 12, 11}).upper == chartOf({10, 12, 11}).mean);  // too few for limits
}
