// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/library.h"

#include <QDir>
#include <QFile>
#include <QTemporaryDir>
#include <algorithm>
#include <set>

#include "words.h"

using namespace soak;

namespace {

const Grade& row(const std::vector<Grade>& grades, const QString& id) {
    const auto found = std::find_if(grades.begin(), grades.end(), [&](const Grade& grade) { return grade.id == id; });
    REQUIRE(found != grades.end());
    return *found;
}

/// The library's grades.csv with one text replaced, in a folder of its own.
Result<std::vector<Grade>> gradesWith(const QByteArray& from, const QByteArray& to) {
    QTemporaryDir folder;
    QFile source(libraryFolder() + "/grades.csv"), copy(folder.filePath("grades.csv"));
    REQUIRE(source.open(QIODevice::ReadOnly));
    REQUIRE(copy.open(QIODevice::WriteOnly));
    QByteArray text = source.readAll();
    REQUIRE(text.contains(from));
    copy.write(text.replace(text.indexOf(from), from.size(), to));
    copy.close();
    return readGrades(folder.path());
}

}  // namespace

TEST_CASE("every row of the grade library is sound", "[library]") {
    const std::vector<Grade> grades = must(readGrades(libraryFolder()));
    CHECK(grades.size() == 432 + 185);
    std::set<QString> families;
    for (const FamilyLink& link : must(readFamilyMap(libraryFolder())))
        families.insert(link.grade_families.begin(), link.grade_families.end());
    // Evidence speaks for most families; these have grades and no evidence of their own yet.
    families.insert({"manganese-austenitic", "light-cast-AlSn"});
    std::set<QString> ids;
    for (const Grade& grade : grades) {
        INFO(grade.id.toStdString());
        CHECK(ids.insert(grade.id).second);
        CHECK(families.count(grade.family) == 1);
        CHECK_FALSE(grade.standard.isEmpty());
        CHECK_FALSE(grade.seen.isEmpty());
        double least_wt = 0;
        for (const auto& [element, limit] : grade.limits) {
            INFO(element);
            CHECK(limit.min_wt.value_or(0) >= 0);
            CHECK(limit.max_wt.value_or(0) <= 60);
            CHECK(limit.min_wt.value_or(0) <= limit.max_wt.value_or(100));
            least_wt += limit.min_wt.value_or(0);
        }
        CHECK(least_wt < 100);
    }
}

TEST_CASE("limits keep the digits that were printed, near names stay apart", "[library]") {
    const std::vector<Grade> grades = must(readGrades(libraryFolder()));
    const Grade& duplex = row(grades, "en-1.4462");
    CHECK(duplex.limits.at("C").max_text == "0.030");
    CHECK(*duplex.limits.at("N").min_wt == 0.10);
    CHECK(duplex.limits.count("W") == 0);
    CHECK(duplex.names.contains("1.4462"));
    CHECK_FALSE(duplex.names.join(' ').contains("S31803"));
    CHECK(duplex.near_names.contains("S31803"));
    CHECK(row(grades, "astm-a890-6a").rules == QStringList{"PREN = Cr+3.3*Mo+16*N >= 40"});
}

TEST_CASE("a wrong grade row is refused with its place", "[library]") {
    CHECK_THAT(refusal(gradesWith("17.5,19.5", "19.5,17.5")),
               Catch::Contains("grades.csv line 4, column Cr_min: minimum 19.5 above maximum 17.5"));
    CHECK_THAT(refusal(gradesWith("17.5,19.5", "17,5,19.5")), Catch::Contains("line 4"));
    CHECK_THAT(refusal(gradesWith("17.5,19.5", "abc,19.5")), Catch::Contains("\"abc\" is not a number"));
    CHECK_THAT(refusal(gradesWith("en-1.4301,", "en-1.4310,")), Catch::Contains("\"en-1.4310\" stands twice"));
    CHECK_THAT(refusal(gradesWith("Ti >= 5*C", "Ti over 5 C")), Catch::Contains("\"Ti over 5 C\" is not"));
    CHECK_THAT(refusal(gradesWith("grade_id,", "grade,")), Catch::Contains("column grade_id is missing"));
}

TEST_CASE("the other tables of the library are sound", "[library]") {
    const auto treatments = must(readTreatments(libraryFolder()));
    CHECK(treatments.size() == 367 + 199);
    for (const PublishedTreatment& row : treatments) {
        INFO(row.row_id.toStdString());
        REQUIRE(row.low_C);
        CHECK(*row.low_C > -200);
        CHECK(row.high_C.value_or(1000) < 1400);
        CHECK_FALSE(row.source.isEmpty());
    }
    const auto cautions = must(readCautions(libraryFolder()));
    CHECK(cautions.size() == 116);
    for (const Caution& caution : cautions) {
        INFO(caution.row_id.toStdString());
        CHECK_FALSE(caution.text.isEmpty());
        CHECK_FALSE(caution.defers_to.isEmpty());
        CHECK((caution.applies_to.startsWith("treatment: ") || caution.applies_to.contains(": ")));
    }
    const auto rules = must(readFurnaceRules(libraryFolder()));
    CHECK(rules.size() == 175);
    for (const FurnaceRule& rule : rules) {
        INFO(rule.row_id.toStdString());
        CHECK((rule.value || !rule.formula.isEmpty() || !rule.note.isEmpty()));
    }
}

TEST_CASE("product tolerances are found by the limit, without overlap", "[library]") {
    const auto rows = must(readProductTolerances(libraryFolder()));
    CHECK(rows.size() == 257);
    for (size_t i = 0; i < rows.size(); ++i)
        for (size_t j = i + 1; j < rows.size(); ++j) {
            if (rows[i].standards != rows[j].standards || rows[i].family != rows[j].family ||
                rows[i].element != rows[j].element)
                continue;
            INFO(rows[i].standards.join(';').toStdString() << ' ' << rows[i].element.toStdString());
            CHECK((rows[i].to_wt <= rows[j].from_wt || rows[j].to_wt <= rows[i].from_wt));
        }
}
