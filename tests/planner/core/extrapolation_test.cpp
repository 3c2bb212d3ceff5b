// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <catch2/catch.hpp>

#include "base/folders.h"
#include "planner/core/coverage.h"

using namespace soak;

TEST_CASE("what the data set answers by extrapolation is named") {
    DataSetFacts set;
    set.name = "ferrous";
    set.gaps = {"no assessed binary Mo-Si", "end-member by default: M7C3 V:C"};
    SetUse use;
    use.most_wt = {{"Ni", 50}};
    CHECK(extrapolations({{"C", 0.4}, {"Mo", 1.3}, {"Si", 1}}, set, use).isEmpty());  // little of either
    CHECK(extrapolations({{"Mo", 6}, {"Cr", 20}}, set, use).isEmpty());               // an assessed pair
    const QStringList pair = extrapolations({{"Mo", 2.2}, {"Si", 4}}, set, use);
    REQUIRE(pair.size() == 1);
    CHECK(pair[0].startsWith("Mo with Si: no assessed binary"));
    const QStringList much = extrapolations({{"Ni", 60}}, set, use);
    REQUIRE(much.size() == 1);
    CHECK(much[0].contains("holds up to 50 %"));
}

TEST_CASE("a binary of guesses alone counts as not assessed, one that was fitted does not") {
    const auto data = loadDataSet(productPath("thermo/data/ferrous"));
    REQUIRE(data);
    const auto& gaps = facts(*data.value()).gaps;
    const auto listed = [&](const char* gap) { return std::find(gaps.begin(), gaps.end(), gap) != gaps.end(); };
    CHECK(listed("no assessed binary Mo-Si"));
    CHECK_FALSE(listed("no assessed binary Fe-Nb"));
    CHECK_FALSE(listed("no assessed binary Cr-Ni"));
}
