// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/verdict.h"

#include <catch2/catch.hpp>

#include "planner/core/band.h"
#include "shop.h"

using namespace soak;

namespace {

Limit at(Side side, double temperature_C, bool set, double uncertainty_K = 0) {
    Limit limit;
    limit.side = side;
    limit.cause = set ? (side == Side::floor ? "specification minimum" : "furnace maximum") : "sigma dissolved";
    limit.temperature_C = temperature_C;
    limit.set = set;
    limit.uncertainty_K = uncertainty_K;
    return limit;
}

WindowAnswer answerWith(std::vector<Limit> floors, std::vector<Limit> ceilings, double setpoint_C,
                        const Furnace& furnace, const ShopRules& rules) {
    WindowAnswer answer;
    answer.floors = std::move(floors);
    answer.ceilings = std::move(ceilings);
    answer.setpoint_C = setpoint_C;
    answer.band = bandOrSetpoint(furnace, setpoint_C, rules).value();
    decide(answer, furnace, rules);
    return answer;
}

const Furnace kF1 = shop::furnace("F1");
const ShopRules kRoot = shop::rules(), kAdded = shop::rules("added up");

}  // namespace

// The shop's worked example: coldest metal 1095.3 added up, 1107.0 root of squares, against a minimum of 1100.
TEST_CASE("the band rule alone can turn the verdict") {
    const auto floors = std::vector{at(Side::floor, 1100, true)};
    const auto added = answerWith(floors, {}, 1120, kF1, kAdded), root = answerWith(floors, {}, 1120, kF1, kRoot);
    CHECK(added.verdict == Verdict::outside);
    CHECK(*added.margin_K == Approx(-4.7).margin(0.05));
    CHECK(root.verdict == Verdict::inside);
    CHECK(*root.margin_K == Approx(7.0).margin(0.05));
    CHECK(added.band.rule == "added up");
}

TEST_CASE("tight: 5 K for limits that are set, the larger of 10 K and the uncertainty for computed ones") {
    const double coldest = bandAt(kF1, 1120, kRoot).value().low_C;
    const auto verdictFor = [&](Limit floor) { return answerWith({floor}, {}, 1120, kF1, kRoot).verdict; };
    CHECK(verdictFor(at(Side::floor, coldest - 4.9, true)) == Verdict::tight);
    CHECK(verdictFor(at(Side::floor, coldest - 5.1, true)) == Verdict::inside);
    CHECK(verdictFor(at(Side::floor, coldest - 9.9, false)) == Verdict::tight);
    CHECK(verdictFor(at(Side::floor, coldest - 10.1, false)) == Verdict::inside);
    CHECK(verdictFor(at(Side::floor, coldest - 10.1, false, 30)) == Verdict::tight);
    CHECK(verdictFor(at(Side::floor, coldest + 0.1, false)) == Verdict::outside);
}

TEST_CASE("a lower floor with a large uncertainty can be what makes it tight") {
    const auto answer =
        answerWith({at(Side::floor, 1040, true), at(Side::floor, 1030, false, 60)}, {}, 1060, kF1, kRoot);
    CHECK(answer.verdict == Verdict::tight);
    CHECK(*answer.low_C == 1040);
    CHECK(answer.reason.contains("sigma dissolved"));
}

TEST_CASE("crossing limits leave no window and are both named") {
    const auto answer = answerWith({at(Side::floor, 1160, false)}, {at(Side::ceiling, 1150, true)}, 1120, kF1, kRoot);
    CHECK(answer.verdict == Verdict::noWindow);
    CHECK_FALSE(answer.low_C);
    CHECK(answer.reason.contains("sigma dissolved"));
    CHECK(answer.reason.contains("furnace maximum"));
    CHECK(answer.reason.contains("cross by 10\u2009K"));
}

TEST_CASE("the change that would open it is the smallest against its own content") {
    Limit floor = at(Side::floor, 1110, false), ceiling = at(Side::ceiling, 1100, false);
    floor.K_per_wt = {{"Mo", 50}, {"N", -500}};
    ceiling.K_per_wt = {{"Mo", 0}, {"N", 100}};
    WindowAnswer answer;
    answer.floors = {floor};
    answer.ceilings = {ceiling};
    answer.chemistry_wt = {{"Mo", 3.5}, {"N", 0.2}};
    answer.band = bandOrSetpoint(kF1, 1100, kRoot).value();
    decide(answer, kF1, kRoot);
    // Mo: 10 K / 50 = 0.20 of 3.5, 6 %; N: 10 K / 600 = 0.0167 of 0.2, 8 %.
    CHECK(answer.reason.contains("0.20\u2009% less Mo"));
}

TEST_CASE("a limit that is not computed or cannot be met decides alone") {
    Limit unknown = at(Side::floor, 0, false);
    unknown.temperature_C.reset();
    unknown.computed = false;
    unknown.remark = "N missing";
    const auto not_computed = answerWith({unknown, at(Side::floor, 1040, true)}, {}, 1120, kF1, kRoot);
    CHECK(not_computed.verdict == Verdict::notComputed);
    CHECK(not_computed.reason.contains("N missing"));
    CHECK_FALSE(not_computed.margin_K);

    Limit impossible = at(Side::ceiling, 0, false);
    impossible.temperature_C.reset();
    impossible.impossible = true;
    impossible.remark = "no temperature removes it";
    const auto none = answerWith({}, {impossible}, 1120, kF1, kRoot);
    CHECK(none.verdict == Verdict::noWindow);
    CHECK(none.reason.contains("no temperature removes it"));
}

TEST_CASE("the suggestion is the nearest setpoint on the controller's step where nothing is tight") {
    const auto answer = answerWith({at(Side::floor, 1050, true)}, {at(Side::ceiling, 1140, true)}, 1060, kF1, kRoot);
    CHECK(answer.verdict == Verdict::outside);
    const auto suggested = suggestSetpoint(answer, kF1, kRoot, 1060);
    REQUIRE(suggested);
    CHECK(std::fmod(*suggested, 5) == Approx(0).margin(1e-9));
    const auto there = bandAt(kF1, *suggested, kRoot).value(), before = bandAt(kF1, *suggested - 5, kRoot).value();
    CHECK(there.low_C >= 1055);
    CHECK(before.low_C < 1055);
}

TEST_CASE("where everything is tight the suggestion has the largest smaller margin") {
    // The band of F1 at 1100 is some 29 K wide; a window of 32 K leaves 1.5 K on either side.
    const auto answer = answerWith({at(Side::floor, 1085, true)}, {at(Side::ceiling, 1117, true)}, 1120, kF1, kRoot);
    const auto suggested = suggestSetpoint(answer, kF1, kRoot, 1120);
    REQUIRE(suggested);
    CHECK(*suggested == Approx(1100));
}

TEST_CASE("no suggestion where the window is narrower than the band") {
    const auto answer = answerWith({at(Side::floor, 1090, true)}, {at(Side::ceiling, 1110, true)}, 1100, kF1, kRoot);
    CHECK(answer.verdict == Verdict::outside);
    CHECK_FALSE(suggestSetpoint(answer, kF1, kRoot, 1100));
}

TEST_CASE("a controller in °F gets its own steps") {
    const Furnace f4 = shop::furnace("F4");
    const auto answer = answerWith({at(Side::floor, 1040, true)}, {at(Side::ceiling, 1100, true)}, 1030, f4, kRoot);
    const auto suggested = suggestSetpoint(answer, f4, kRoot, 1030);
    REQUIRE(suggested);
    CHECK(std::fmod(*suggested * 1.8 + 32 + 1e-6, 5) == Approx(0).margin(1e-5));
}

TEST_CASE("shown temperatures: floors up, ceilings down") {
    CHECK(shownTemperature(at(Side::floor, 1040.2, false)) == "1041\u2009°C");
    CHECK(shownTemperature(at(Side::ceiling, 1040.8, false)) == "1040\u2009°C");
    CHECK(shownTemperature(at(Side::floor, 1040.0000001, false)) == "1040\u2009°C");
}
