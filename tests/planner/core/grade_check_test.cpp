// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/grade_check.h"

#include <catch2/catch.hpp>

#include "heats.h"

using namespace soak;
using shop::heat;
using shop::library;
using shop::textOf;

// Heats of the invented demonstration delivery; what a careful inspector would say about each stands in its notes.

TEST_CASE("the row that decides follows the product form") {
    const QString analysis = "C 0.02, Cr 18.1, Ni 8.1";
    CHECK(mainRow(heat("", "1.4307", "bar", analysis), library())->standard == "EN 10088-3");
    CHECK(mainRow(heat("", "1.4307", "plate", analysis), library())->standard == "EN 10088-2");
    CHECK(mainRow(heat("", "X2CrNi18-9 / 1.4307", "bar", analysis), library())->standard == "EN 10088-3");
    CHECK(mainRow(heat("", "1.9999", "bar", analysis), library()) == nullptr);
}

TEST_CASE("a plain heat passes and says which rows it satisfies") {
    const auto check =
        checkGrade(heat("K40217", "1.4307", "bar",
                        "C 0.019, Si 0.42, Mn 1.62, P 0.031, S 0.004, Cr 18.12, Ni 8.06, Mo 0.31, N 0.071"),
                   library());
    CHECK(check.verdict == "passes");
    CHECK(check.satisfied.contains("en-1.4307-3"));
    CHECK(check.satisfied.contains("en-1.4307"));
    CHECK(check.suggested.isEmpty());
}

TEST_CASE("carbon above the maximum fails, close to it is said") {
    const auto above = checkGrade(
        heat("503126", "1.4307", "ring", "C 0.034, Si 0.47, Mn 1.55, P 0.033, S 0.003, Cr 18.22, Ni 8.02, N 0.094"),
        library());
    CHECK(above.verdict == "fails");
    CHECK(textOf(above).contains("C 0.034 above the maximum 0.030"));
    const auto near = checkGrade(
        heat("K40231", "1.4307", "forging", "C 0.029, Si 0.55, Mn 1.48, P 0.034, S 0.006, Cr 18.37, Ni 8.11, N 0.083"),
        library());
    CHECK(near.verdict == "passes");
    CHECK(textOf(near).contains("C 0.029 close to the maximum 0.030"));
}

TEST_CASE("the wrong steel gets its nearest grade") {
    const auto no_molybdenum =
        checkGrade(heat("503355", "1.4404", "plate",
                        "C 0.018, Si 0.45, Mn 1.66, P 0.030, S 0.002, Cr 18.09, Ni 8.09, Mo 0.31, V 0.060, W 0.022, Nb "
                        "0.011, Ti 0.004, Al 0.003, Cu 0.37, Co 0.133, N 0.068"),
                   library());
    CHECK(no_molybdenum.verdict == "fails");
    REQUIRE_FALSE(no_molybdenum.suggested.isEmpty());
    CHECK(no_molybdenum.suggested.first() == "1.4307");

    const auto with_cobalt = checkGrade(heat("S7709", "1.3343", "bar",
                                             "C 0.921, Si 0.38, Mn 0.27, P 0.022, S 0.001, Cr 4.08, Ni 0.19, Mo 4.98, "
                                             "V 1.84, W 6.31, Nb 0.011, Ti 0.004, Al 0.012, Cu 0.08, Co 4.78, N 0.030"),
                                        library());
    CHECK(with_cobalt.verdict == "fails");
    REQUIRE_FALSE(with_cobalt.suggested.isEmpty());
    CHECK(with_cobalt.suggested.first() == "1.3243");
}

TEST_CASE("slips of the pen are suggested, never repaired") {
    const Heat swapped = heat("503361", "1.4404", "tube",
                              "C 0.021, Si 0.44, Mn 1.59, P 0.029, S 0.003, Cr 16.91, Ni 10.12, Mo 0.02, V 0.056, W "
                              "0.026, Nb 2.08, Ti 0.005, Cu 0.33, N 0.048");
    const auto swap = checkGrade(swapped, library());
    CHECK(swap.verdict == "fails");
    CHECK(textOf(swap).contains("Mo 0.02 and Nb 2.08 would fit the other way round"));

    const auto slip = checkGrade(
        heat("M1131", "1.4006", "bar", "C 0.148, Si 0.31, Mn 5.8, P 0.023, S 0.011, Cr 11.62, Ni 0.41, Mo 0.09"),
        library());
    CHECK(slip.verdict == "fails");
    CHECK(textOf(slip).contains("Mn 5.8 would fit as 0.58"));
}

TEST_CASE("ratio rules are part of the grade") {
    const auto under = checkGrade(
        heat("K41562", "1.4541", "ring", "C 0.066, Si 0.52, Mn 1.39, P 0.030, S 0.004, Cr 17.36, Ni 9.29, Ti 0.312"),
        library());
    CHECK(under.verdict == "fails");
    CHECK(textOf(under).contains("Ti >= 5*C"));
    const auto pitting = checkGrade(
        heat("F2409/2", "CD3MWCuN", "casting",
             "C 0.029, Si 0.74, Mn 0.84, P 0.028, S 0.011, Cr 24.09, Ni 7.04, Mo 3.05, W 0.52, Cu 0.66, N 0.206"),
        library());
    CHECK(pitting.verdict == "fails");
    CHECK(textOf(pitting).contains("37.45 against 40"));
}

TEST_CASE("an element that decides and is missing leaves the check open") {
    const auto nitrogen = checkGrade(
        heat("D7731", "1.4462", "plate", "C 0.019, Si 0.47, Mn 1.36, P 0.023, S 0.001, Cr 22.44, Ni 5.58, Mo 3.14, N"),
        library());
    CHECK(nitrogen.verdict == "not checked");
    CHECK(textOf(nitrogen).contains("N missing"));
    const auto niobium =
        checkGrade(heat("P3310", "1.4542", "bar",
                        "C 0.038, Si 0.34, Mn 0.66, P 0.022, S 0.002, Cr 15.51, Ni 4.62, Mo 0.19, Cu 3.31, Nb -"),
                   library());
    CHECK(niobium.verdict == "not checked");
}

TEST_CASE("one standard is passed and the near equivalent is not") {
    const auto lean =
        checkGrade(heat("D7722", "1.4462", "forging",
                        "C 0.021, Si 0.78, Mn 0.98, P 0.026, S 0.001, Cr 22.91, Ni 4.62, Mo 3.32, N 0.112"),
                   library());
    CHECK(lean.verdict == "passes");
    // S32205 asks for N 0.14 (grade library, ASTM A182 F60)
    const QString words =
        textOf(checkGrade(heat("D7722", "1.4462", "plate",
                               "C 0.021, Si 0.78, Mn 0.98, P 0.026, S 0.001, Cr 22.91, Ni 4.62, Mo 3.32, N 0.112"),
                          library()));
    CHECK(words.contains("near equivalent S32205 (ASTM A240) not satisfied"));
    const auto cast = checkGrade(
        heat("F2415/2", "1.4408", "casting", "C 0.071, Si 1.38, Mn 0.88, P 0.030, S 0.012, Cr 19.12, Ni 9.71, Mo 2.46"),
        library());
    CHECK(cast.verdict == "fails");
    CHECK(textOf(cast).contains("near equivalent CF8M (ASTM A351) satisfied"));
}

TEST_CASE("censored values are compared only where they can be") {
    const auto far_below = checkGrade(
        heat("", "1.4301", "bar", "C <0.01, Si 0.4, Mn 1.2, P 0.03, S 0.005, Cr 18.4, Ni 8.3, N 0.05"), library());
    CHECK(far_below.verdict == "passes");
    const auto straddling = checkGrade(
        heat("", "1.4307", "bar", "C <0.05, Si 0.4, Mn 1.2, P 0.03, S 0.005, Cr 18.4, Ni 8.3, N 0.05"), library());
    CHECK(straddling.verdict == "not checked");
    CHECK(textOf(straddling).contains("C <0.05 cannot be compared"));
}

TEST_CASE("a grade that the library does not know") {
    const auto check = checkGrade(
        heat("", "QX-7", "bar", "C 0.02, Si 0.4, Mn 1.5, P 0.03, S 0.004, Cr 18.1, Ni 8.1, N 0.05"), library());
    CHECK(check.verdict == "not checked");
    CHECK(textOf(check).contains("QX-7"));
    CHECK(check.suggested.contains("1.4307"));
}

TEST_CASE("an element outside the grade's table: a note for a trace, a failure for an addition") {
    const QString plain = "C 0.171, Si 0.26, Mn 0.64, P 0.010, S 0.010, Cr 1.69, Ni 1.58, Mo 0.30, Cu 0.17";
    const auto traced = checkGrade(heat("H6619", "1.6587", "forging", plain + ", Nb 0.034"), library());
    CHECK(traced.verdict == "passes");
    CHECK(textOf(traced).contains("Nb 0.034 is not in the grade's table"));
    CHECK(checkGrade(heat("", "1.6587", "forging", plain + ", W 1.2"), library()).verdict == "fails");
}
