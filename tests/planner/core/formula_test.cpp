// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/formula.h"

#include <catch2/catch.hpp>

#include "planner/core/relations.h"

using namespace soak;

namespace {

const RelationBook& book() {
    static const RelationBook loaded = loadRelations().value();
    return loaded;
}

double valueOf(const QString& text, const Formula::Values& values = {}) {
    const auto formula = Formula::parse(text);
    REQUIRE(formula);
    const auto value = formula.value().value(values);
    REQUIRE(value);
    return *value;
}

}  // namespace

TEST_CASE("powers bind tighter than signs and run from right to left") {
    CHECK(valueOf("-2**2") == -4);
    CHECK(valueOf("2**-1") == 0.5);
    CHECK(valueOf("2**3**2") == 512);
    CHECK(valueOf("8-3-2") == 3);
    CHECK(valueOf("2*3/4*2") == 3);
    CHECK(valueOf("1e-3*2.5E+2") == Approx(0.25));
    CHECK(valueOf("exp(ln(3))+log10(100)") == Approx(5));
}

TEST_CASE("an absent element is 0, and what has no number has no value") {
    CHECK(valueOf("910-203*C**0.5", {{"C", 0.4}}) == Approx(781.6107));
    CHECK(valueOf("Ni+2") == 2);
    CHECK_FALSE(Formula::parse("1/C").value().value({}));
    CHECK_FALSE(Formula::parse("ln(C)").value().value({{"C", -1}}));
}

TEST_CASE("what cannot be read says where") {
    const auto bad = Formula::parse("5*(C+2");
    REQUIRE_FALSE(bad);
    CHECK(bad.error().message.find("character") != std::string::npos);
    CHECK_FALSE(Formula::parse(""));
    CHECK_FALSE(Formula::parse("2 3"));
}

TEST_CASE("conditions: decided only with every value there") {
    const auto rule = Condition::parse("Ni + Mn < 1.0");
    REQUIRE(rule);
    CHECK(*rule.value().holds({{"Ni", 0.14}, {"Mn", 0.44}}));
    CHECK_FALSE(*rule.value().holds({{"Ni", 0.4}, {"Mn", 0.6}}));  // 1.0 is not below 1.0
    CHECK_FALSE(rule.value().holds({{"Ni", 0.4}}));
    CHECK(rule.value().unknown({{"Ni", 0.4}}) == QStringList{"Mn"});
    CHECK_FALSE(Condition::parse("Ni + Mn"));
}

// Each published relation carries an example worked from its own text: "4140: C=0.4 Si=0.25 -> 799.087 degC".
TEST_CASE("every published relation gives its worked example") {
    CHECK(book().relations.size() >= 140);
    for (const auto& [id, relation] : book().relations) {
        INFO(id.toStdString() << ": " << relation.worked_example.toStdString());
        const QStringList sides = relation.worked_example.split("->");
        REQUIRE(sides.size() == 2);
        Formula::Values values;
        for (const QString& word : sides[0].section(':', -1).split(' ', Qt::SkipEmptyParts)) {
            const QStringList pair = word.split('=');
            if (pair.size() == 2) values[pair[0]] = pair[1].toDouble();
        }
        const double expected = sides[1].trimmed().section(' ', 0, 0).toDouble();
        const auto value = relation.formula.value(values);
        REQUIRE(value);
        CHECK(*value == Approx(expected).epsilon(1e-4));
    }
}

TEST_CASE("ranges are read from the published words, sums are not") {
    const auto range = rangesIn("C 0.1-0.5 Si<1 Mn<=2 and Mn+Ni+Cr+Mo<5");
    CHECK(range.size() == 3);
    CHECK(*range.at("C").low_wt == 0.1);
    CHECK(*range.at("Mn").high_wt == 2);
    CHECK(range.count("Mo") == 0);
    CHECK(outOfRange(range, {{"C", 0.9}, {"Si", 0.2}}) == "C 0.90 is above 0.50");
    CHECK(outOfRange(range, {{"C", 0.3}}).isEmpty());
}

TEST_CASE("opinions out of their range are shown and count nothing") {
    const Formula::Values steel{{"C", 0.4}, {"Si", 0.25}, {"Mn", 0.85}, {"Cr", 0.95}, {"Mo", 0.2}};
    const auto on_4140 = book().opinionsOn("Ac3", "low-alloy", steel);
    REQUIRE(on_4140.size() >= 5);
    for (const Opinion& one : on_4140) {
        CHECK(one.in_range);
        CHECK_FALSE(one.source.isEmpty());
    }
    CHECK(*medianOf(on_4140) == Approx(793).margin(1));  // 780 to 799 as worked in the table
    auto rich = steel;
    rich["Cr"] = 5;
    const auto on_rich = book().opinionsOn("Ac3", "low-alloy", rich);
    for (const Opinion& one : on_rich) CHECK_FALSE(one.in_range);
    CHECK_FALSE(medianOf(on_rich));
    CHECK(book().opinionsOn("Ac3", "austenitic", steel).empty());
}
