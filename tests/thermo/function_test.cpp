// SPDX-License-Identifier: GPL-3.0-or-later
#include "function.h"

#include <catch2/catch.hpp>
#include <cmath>

using namespace soak;

namespace {

double valueOf(const std::string& text, double T) {
    const auto function = readFunction({{298.15, text}}, {});
    REQUIRE(function);
    return function.value().valueAt(T);
}

std::string refusalOf(const std::string& text, const std::map<std::string, Function>& known = {}) {
    const auto function = readFunction({{298.15, text}}, known);
    REQUIRE_FALSE(function);
    CHECK(function.error().fault == Fault::data);
    return function.error().message;
}

}  // namespace

TEST_CASE("a value text is the sum of its terms", "[function]") {
    const double T = 1234.5;
    CHECK(valueOf("12.5", T) == Approx(12.5));
    CHECK(valueOf("-12.5 + 3*T", T) == Approx(-12.5 + 3 * T));
    CHECK(valueOf("- 2e3*T*ln(T) + .5*T^2", T) == Approx(-2e3 * T * std::log(T) + 0.5 * T * T));
    CHECK(valueOf("1e-6*T^3 + 1e-9*T^4 - 1e-18*T^6 + 1e-21*T^7", T) ==
          Approx(1e-6 * std::pow(T, 3) + 1e-9 * std::pow(T, 4) - 1e-18 * std::pow(T, 6) + 1e-21 * std::pow(T, 7)));
    CHECK(valueOf("77359*T^-1 + 5e6*T^-2 + 7e9*T^-3 + 2.29603e31*T^-9", T) ==
          Approx(77359 / T + 5e6 / (T * T) + 7e9 / std::pow(T, 3) + 2.29603e31 / std::pow(T, 9)));
    CHECK(valueOf("8*ln(T)", T) == Approx(8 * std::log(T)));
    CHECK(valueOf("2*3*T*T", T) == Approx(6 * T * T));
}

TEST_CASE("each range holds from its start to the next, and the outer ones go on", "[function]") {
    const auto function = readFunction({{298.15, "1"}, {700, "2"}, {1000, "3"}}, {});
    REQUIRE(function);
    const Function& f = function.value();
    CHECK(f.valueAt(250) == 1);
    CHECK(f.valueAt(699.999) == 1);
    CHECK(f.valueAt(700) == 2);
    CHECK(f.valueAt(999.999) == 2);
    CHECK(f.valueAt(1000) == 3);
    CHECK(f.valueAt(9000) == 3);
}

TEST_CASE("a sum of named functions breaks where any of them breaks", "[function]") {
    std::map<std::string, Function> known;
    known["Fe_bcc"] = readFunction({{298.15, "10 + T"}, {1811, "20 + T"}}, {}).value();
    known["C_graphite"] = readFunction({{298.15, "100*T"}}, {}).value();
    const auto sum = readFunction({{298.15, "2*Fe_bcc - 1.5*C_graphite + 7"}, {1500, "Fe_bcc"}}, known);
    REQUIRE(sum);
    CHECK(sum.value().valueAt(400) == Approx(2 * 410 - 1.5 * 100 * 400 + 7));
    CHECK(sum.value().valueAt(1600) == Approx(10 + 1600));
    CHECK(sum.value().valueAt(1900) == Approx(20 + 1900));
    CHECK(sum.value().pieces.size() == 3);
}

TEST_CASE("the names in a value text are found", "[function]") {
    const auto names = namesIn("2*Fe_bcc - C_graphite + 3*T");
    REQUIRE(names);
    CHECK(names.value() == std::vector<std::string>{"Fe_bcc", "C_graphite"});
}

TEST_CASE("what is not a sum of terms is refused with the text that is wrong", "[function]") {
    CHECK_THAT(refusalOf(""), Catch::Contains("empty"));
    CHECK_THAT(refusalOf("3 4"), Catch::Contains("+ or -"));
    CHECK_THAT(refusalOf("3*"), Catch::Contains("ends"));
    CHECK_THAT(refusalOf("(T)"), Catch::Contains("neither"));
    CHECK_THAT(refusalOf("T^x"), Catch::Contains("whole number"));
    CHECK_THAT(refusalOf("T^5"), Catch::Contains("basis"));
    CHECK_THAT(refusalOf("T^2*ln(T)"), Catch::Contains("basis"));
    CHECK_THAT(refusalOf("ln(P)"), Catch::Contains("ln(T)"));
    CHECK_THAT(refusalOf("ln(T)*ln(T)"), Catch::Contains("twice"));
    CHECK_THAT(refusalOf("7*Fe_bcc"), Catch::Contains("Fe_bcc"));
    const std::map<std::string, Function> known{{"A", readFunction({{298.15, "1"}}, {}).value()}};
    CHECK_THAT(refusalOf("A*A", known), Catch::Contains("multiplied"));
    CHECK_THAT(refusalOf("T*A", known), Catch::Contains("multiplied by T"));
}

TEST_CASE("the basis and its slope belong together", "[function]") {
    for (double T : {310.0, 900.0, 1811.0, 5500.0}) {
        const double h = 1e-4 * T;  // truncation h^2 T^-2 n^3 / 6 <= 2e-6 for n = -9: the margin below
        const Powers above = basisAt(T + h), below = basisAt(T - h), slope = basisSlopeAt(T);
        for (size_t k = 0; k < kPowers; ++k) {
            const double difference = (above[k] - below[k]) / (2 * h);
            CHECK(slope[k] == Approx(difference).epsilon(3e-6).margin(1e-40));
        }
    }
}
