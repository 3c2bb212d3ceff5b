// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/evidence_targets.h"

#include <algorithm>
#include <catch2/catch.hpp>

using namespace soak;

namespace {

EvidenceRow row(const char* id, const char* family, const char* kind, double published, double computed,
                EvidenceClass weight = EvidenceClass::firm, double scatter = 5) {
    EvidenceRow made;
    made.id = id;
    made.family = family;
    made.kind = made.quantity = kind;
    made.unit = "degC";
    made.value = published;
    made.computed = computed;
    made.weight = weight;
    made.scatter = scatter;
    return made;
}

const EvidenceTarget& targetOf(const std::vector<EvidenceTarget>& all, const char* id) {
    const auto at = std::find_if(all.begin(), all.end(), [&](const EvidenceTarget& one) { return one.id == id; });
    REQUIRE(at != all.end());
    return *at;
}

}  // namespace

TEST_CASE("a target counts firm rows of its group only, and names the rows that miss it") {
    const auto targets = evidenceTargets(
        {row("lt1", "trade alloy", "solidus", 580, 582), row("lt2", "trade alloy", "solidus", 580, 604),
         row("lt3", "trade alloy", "solidus", 580, 604, EvidenceClass::firm, 30),
         row("lt4", "trade alloy", "solidus", 580, 680, EvidenceClass::calibration),
         row("lt5", "trade alloy", "solidus", 580, 680, EvidenceClass::unsure),
         row("eq6", "trade alloy", "solidus", 580, 680), row("lt7", "Al-Cu", "solidus", 580, 680),
         row("lt8", "Al-Cu", "invariant_T", 548, 549), row("lt9", "trade alloy", "invariant_T", 548, 649)});
    REQUIRE(targets);
    const EvidenceTarget& solidus = targetOf(targets.value(), "tl3");
    CHECK(solidus.reached.count == 3);
    CHECK(solidus.missed == QStringList{"lt2"});  // lt3 lies within its own scatter
    CHECK_FALSE(solidus.isMet());
    CHECK(solidus.isLittle());
    const EvidenceTarget& invariant = targetOf(targets.value(), "tl1");
    CHECK(invariant.reached.count == 1);  // binaries and ternaries, no grades
    CHECK(invariant.isMet());
    CHECK_FALSE(targetOf(targets.value(), "tl4").isMet());  // no row is no success
}
