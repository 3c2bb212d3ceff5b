// SPDX-License-Identifier: GPL-3.0-or-later
// Aluminium grades go through the same check: what differs is in the library's rows.
#include <catch2/catch.hpp>

#include "base/folders.h"
#include "heats.h"
#include "planner/core/coverage.h"
#include "planner/core/grade_check.h"

using namespace soak;
using shop::heat;
using shop::library;
using shop::textOf;

namespace {

const QString k6061 = "Si 0.62, Fe 0.24, Cu 0.26, Mn 0.07, Mg 0.94, Cr 0.11, Zn 0.04, Ti 0.02";

}  // namespace

TEST_CASE("an aluminium heat passes its grade by the digits of the library") {
    const auto check = checkGrade(heat("A6101", "6061", "extrusion", k6061), library());
    INFO(textOf(check).toStdString());
    CHECK(check.verdict == "passes");
    CHECK(check.satisfied.contains("aa-6061"));
    CHECK(checkGrade(heat("A6101", "EN AW-6061", "extrusion", k6061), library()).verdict == "passes");
    CHECK(mainRow(heat("", "EN AC-42100", "casting", ""), library())->family == "light-cast-AlSiMg");
}

TEST_CASE("elements that the grade does not name are held to its others, each and in total") {
    const auto sum =
        checkGrade(heat("", "6061", "extrusion", k6061 + ", Pb 0.04, Sn 0.05, Bi 0.04, V 0.05"), library());
    CHECK(sum.verdict == "fails");
    CHECK(textOf(sum).contains("add up to 0.18 %, above the maximum 0.15 %"));
    const auto each = checkGrade(heat("", "6061", "extrusion", k6061 + ", Sn 0.08"), library());
    CHECK(each.verdict == "fails");
    CHECK(textOf(each).contains("Sn 0.08 above the maximum 0.05 % for each element"));
    CHECK(checkGrade(heat("", "6061", "extrusion", k6061 + ", Sn <0.08"), library()).verdict == "passes");
    // A rule names an element as much as a limit does: zirconium of 2014A is held to Ti + Zr, not to the others.
    const QString k2014a = "Si 0.7, Fe 0.3, Cu 4.4, Mn 0.8, Mg 0.5, Cr 0.02, Ni 0.03, Zn 0.1, Ti 0.03, Zr 0.12";
    CHECK(checkGrade(heat("", "2014A", "forging", k2014a), library()).verdict == "passes");
    CHECK(checkGrade(heat("", "2014A", "forging", QString(k2014a).replace("Zr 0.12", "Zr 0.19")), library()).verdict ==
          "fails");
}

TEST_CASE("the certificate's own others columns count") {
    Heat stated = heat("", "6061", "extrusion", k6061);
    stated.analysis[kOthersEach] = readContent("0.07");
    CHECK(checkGrade(stated, library()).verdict == "fails");
    stated.analysis[kOthersEach] = readContent("<0.03");
    stated.analysis[kOthersTotal] = readContent("0.22");
    CHECK(checkGrade(stated, library()).verdict == "fails");
    stated.analysis[kOthersTotal] = readContent("<0.10");
    CHECK(checkGrade(stated, library()).verdict == "passes");
}

TEST_CASE("a written or measured base metal is no excess, and decides which grades are near") {
    CHECK(checkGrade(heat("", "6061", "extrusion", k6061 + ", Al 97.6"), library()).verdict == "passes");
    const auto wrong =
        checkGrade(heat("", "6061", "extrusion", "Fe 71, Cr 18, Ni 9, Mn 1.2, Si 0.5, Mg 0.9"), library());
    CHECK(wrong.verdict == "fails");
    CHECK(textOf(wrong).contains("the heat is an alloy of Fe, the grade one of Al"));
    const auto near =
        checkGrade(heat("", "6061", "extrusion", QString(k6061).replace("Si 0.62", "Si 0.35")), library());
    CHECK(near.verdict == "fails");
    for (const QString& grade : near.suggested) CHECK_FALSE(grade.startsWith("1."));  // no steel
    CHECK(baseMetal(heat("", "", "", "Al 93.1, Si 6.2").analysis) == "Al");
    CHECK(baseMetal(heat("", "", "", "Si 6.2").analysis).empty());
}

TEST_CASE("a chemistry that the data do not cover is refused with the reason") {
    const FamilyBook book = loadFamilyBook().value();
    const auto light = loadDataSet(productPath("thermo/data/light")).value();
    const auto why = [&](const QString& analysis) {
        return whyNotCovered(heat("", "", "", analysis).analysis, facts(*light), book.uses.at("light")).toStdString();
    };
    CHECK(why(k6061).empty());
    CHECK(why(k6061 + ", Al 97.6, Pb 0.4, Bi 0.4, V 0.1, Be 0.05, B 0.002").empty());
    CHECK_THAT(why("Cu 4, Ag 0.6"), Catch::Contains("Ag 0.6 % is not in the data set \"light\""));
    CHECK_THAT(why("Cu 4, Li 1.4"), Catch::Contains("Li 1.4 %"));
    CHECK_THAT(why("Sn 6.2, Cu 1"), Catch::Contains("Sn 6.2 %"));
    CHECK_THAT(why("Fe 71, Cr 18"), Catch::Contains("an alloy of Fe"));
    CHECK_THAT(why("Si 9, Fe 4.1"), Catch::Contains("holds up to 3 %"));
    CHECK(why("Cu 4, Ag <0.5").empty());
}
