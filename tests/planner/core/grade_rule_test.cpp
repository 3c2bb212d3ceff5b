// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/grade_rule.h"

#include <catch2/catch.hpp>

#include "heats.h"

using namespace soak;
using Answer = RuleOutcome::Answer;

namespace {

RuleOutcome apply(const QString& rule, const QString& analysis) {
    return applyRule(rule, shop::heat("", "", "", analysis).analysis);
}

}  // namespace

// Cr 24.09, Mo 3.05, N 0.206 of the demonstration delivery: 24.09 + 3.3 * 3.05 + 16 * 0.206 = 37.451, by hand.
TEST_CASE("a sum with factors and a name") {
    const auto outcome = apply("PRE = Cr + 3.3*Mo + 16*N >= 40", "Cr 24.09, Mo 3.05, N 0.206");
    CHECK(outcome.answer == Answer::broken);
    CHECK(outcome.left == Approx(37.451));
    CHECK(outcome.right == 40);
    CHECK(apply("PREN = Cr+3.3*Mo+16*N >= 40", "Cr 25.03, Mo 3.41, N 0.241").answer == Answer::holds);
}

TEST_CASE("ratio rules, brackets and division") {
    CHECK(apply("Ti >= 5*C", "Ti 0.362, C 0.041").answer == Answer::holds);
    CHECK(apply("Ti >= 5*C", "Ti 0.312, C 0.066").answer == Answer::broken);
    CHECK(apply("Ti >= 4*(C+N)+0.15", "Ti 0.35, C 0.02, N 0.03").answer == Answer::holds);  // 0.35 = 0.35
    CHECK(apply("CEV = C+Mn/6+(Cr+Mo+V)/5+(Ni+Cu)/15 <= 0.43", "C 0.2, Mn 1.2, Cr 0.1, Mo 0, V 0, Ni 0.15, Cu 0")
              .answer == Answer::holds);                                       // 0.2 + 0.2 + 0.02 + 0.01 = 0.43
    CHECK(apply("Ti/N >= 3.5", "Ti 0.03, N 0").answer == Answer::cannot_say);  // no division by zero
}

TEST_CASE("a missing element is named, never taken as zero") {
    const auto outcome = apply("Nb >= 5*C", "C 0.038, Nb -");
    CHECK(outcome.answer == Answer::cannot_say);
    CHECK(outcome.missing == QStringList{"Nb"});
    CHECK(outcome.text.contains("Nb missing"));
}

TEST_CASE("a censored value decides only when both of its ends agree") {
    CHECK(apply("Ti >= 5*C", "Ti 0.3, C <0.01").answer == Answer::holds);
    CHECK(apply("Ti >= 5*C", "Ti 0.03, C <0.01").answer == Answer::cannot_say);
    CHECK(apply("Ti >= 5*C", "Ti <0.1, C 0.04").answer == Answer::broken);
}

TEST_CASE("what is no rule is said to be unreadable") {
    CHECK(apply("about right", "C 0.1").answer == Answer::unreadable);
    CHECK(apply("Ti >= 5*(C", "C 0.1, Ti 1").answer == Answer::unreadable);
}
