// SPDX-License-Identifier: GPL-3.0-or-later
// Published rows against computed ones. A miss is printed with its difference and fails nothing: it is a statement
// about the data. What fails is a row that can no longer be computed, or one that moved from the recorded baseline.
#include <QProcess>
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <cstdio>
#include <nlohmann/json.hpp>
#include <set>

#include "base/folders.h"
#include "db/csv.h"
#include "planner/core/evidence.h"
#include "planner/core/evidence_compute.h"
#include "planner/core/families.h"

using namespace soak;

namespace {

const std::vector<EvidenceRow>& computedRows() {
    static const std::vector<EvidenceRow> rows = [] {
        auto read = readEvidence();
        REQUIRE(read);
        std::vector<EvidenceRow> all = std::move(read).value();
        REQUIRE(computeEvidence(all));
        return all;
    }();
    return rows;
}

const EvidenceRow& row(const QString& id) {
    const auto& rows = computedRows();
    const auto at = std::find_if(rows.begin(), rows.end(), [&](const EvidenceRow& one) { return one.id == id; });
    REQUIRE(at != rows.end());
    return *at;
}

/// Rows of one kind that were computed, calibration rows left out.
int computedOf(const QString& family, const QString& kind, const QString& phase = {}) {
    return static_cast<int>(std::count_if(computedRows().begin(), computedRows().end(), [&](const EvidenceRow& one) {
        return one.computed && one.weight != EvidenceClass::calibration && (family.isEmpty() || one.family == family) &&
               one.kind == kind && (phase.isEmpty() || one.phase == phase);
    }));
}

/// What a value may move from the baseline: 0.2 K or vol%, else 2 %; a guard of the physics, not a tolerance of nature.
double allowedMove(const QString& unit, double value) {
    return unit == "degC" || unit == "vol%" ? 0.2 : 0.02 * std::abs(value);
}

void printMisses() {
    std::printf("published rows farther from the computed value than twice their scatter:\n");
    for (const EvidenceRow& one : computedRows())
        if (one.isJudged() && !one.isHit())
            std::printf("  %-6s %-24s %-18s %-28s %10.3f %10.3f %+9.3f %s\n", qPrintable(one.id),
                        qPrintable(one.family), qPrintable(one.kind), qPrintable(one.phase), *one.value, *one.computed,
                        *one.difference(), qPrintable(one.unit));
}

}  // namespace

TEST_CASE("more than 60 published rows that no data were fitted to are computed", "[published]") {
    int computed = 0, judged = 0, hits = 0, firm = 0;
    for (const EvidenceRow& one : computedRows()) {
        INFO(one.id.toStdString());
        CHECK(one.computed.has_value() == one.reason.isEmpty());  // a value or a reason, never both or neither
        CHECK_FALSE(one.source.isEmpty());
        if (one.weight == EvidenceClass::calibration || !one.computed) continue;
        ++computed;
        firm += one.weight == EvidenceClass::firm ? 1 : 0;
        judged += one.isJudged() ? 1 : 0;
        hits += one.isHit() ? 1 : 0;
    }
    std::printf("published rows: %d computed without calibration rows (%d firm), %d state a scatter, %d of these hit\n",
                computed, firm, judged, hits);
    printMisses();
    CHECK(computed >= 60);
    CHECK(judged >= 60);
}

TEST_CASE("the evidence that the shop leans on is computed", "[published]") {
    std::set<QString> liquidus_grades;  // alloys of the trade: at least three elements named
    for (const EvidenceRow& one : computedRows())
        if (one.kind == "liquidus" && one.computed && one.id.startsWith("eq") && one.composition.count('=') > 3)
            liquidus_grades.insert(one.composition);
    CHECK(liquidus_grades.size() >= 5);
    for (const EvidenceRow& one : computedRows())
        if (one.kind == "solidus") {
            INFO(one.id.toStdString() + " " + one.reason.toStdString());
            CHECK(one.computed.has_value());
        }
    CHECK(computedOf("austenitic stainless", "solvus", "M23C6") == 4);        // against carbon, 0.02 to 0.08 wt%
    CHECK(computedOf("duplex stainless", "phase_fraction", "ferrite") == 5);  // 1000 to 1200 degC
    CHECK(computedOf("microalloyed", "solubility_product", "MX") >= 10);      // NbC, NbN, TiC, TiN, VC
    CHECK(row("eq174").computed);                                             // TiN in delta ferrite
    CHECK(row("eq145").computed);                                             // NbC
    CHECK(computedOf("Fe-C", "invariant_T") == 5);
    CHECK(computedOf("Fe-C", "invariant_x") == 5);
    for (const char* system : {"Fe-Cr", "Fe-V", "Fe-Ti", "Fe-Al", "Fe-Si"})
        CHECK(computedOf(system, "gamma_loop") >= 1);
    CHECK(row("eq071").computed);  // sigma in Fe-Cr
}

TEST_CASE("no computed value has moved from the recorded baseline", "[published]") {
    const auto table = CsvTable::read(QString::fromStdString(productPath("tests/published/baseline.csv").string()),
                                      {"row_id", "computed", "unit", "made_by"});
    REQUIRE(table);
    REQUIRE(table.value().size() >= 60);
    for (size_t line = 0; line < table.value().size(); ++line) {
        const QString id = table.value().text(line, "row_id"), unit = table.value().text(line, "unit");
        const double recorded = table.value().text(line, "computed").toDouble();
        const EvidenceRow& one = row(id);
        INFO(id.toStdString() + " " + one.reason.toStdString());
        REQUIRE(one.computed);
        CHECK(*one.computed == Approx(recorded).margin(allowedMove(unit, recorded)).epsilon(0));
    }
}

TEST_CASE("a row without a computed value says why") {
    CHECK(row("eq066").reason == "P is not in the data set");
    CHECK(row("eq085").reason == "ordered B2 is not modelled");
    CHECK(row("eq194").reason == "MnS is not modelled");
    CHECK(row("eq190").reason.contains("activities"));
    CHECK(row("cr054").reason.contains("not a matter of equilibrium"));
    CHECK(row("eq318").remark.contains("B left out"));
}

TEST_CASE("products of contents are read from the note") {
    const auto product = solubilityProduct("value of the line log [Nb][C+6/7 N]^0.87 = 4.55 - 9350/T");
    REQUIRE(product.size() == 2);
    CHECK(product[0].power == 1);
    CHECK(product[1].power == 0.87);
    REQUIRE(product[1].sum.size() == 2);
    CHECK(product[1].sum[1].first == "N");
    CHECK(product[1].sum[1].second == Approx(6.0 / 7));
    CHECK(solubilityProduct("log K(AlN = Al + N) in liquid iron").empty());
}

TEST_CASE("rows used for calibration and unsure rows never count as firm") {
    CHECK(row("eq142").weight == EvidenceClass::calibration);
    CHECK(row("eq211").weight == EvidenceClass::unsure);  // says so in its note
    CHECK(row("eq172").weight == EvidenceClass::unsure);  // calculated
    CHECK(row("eq227").weight == EvidenceClass::firm);
}

// By hand: differences 1, 3 and -4: mean 0, sum of squares 26, deviation sqrt(13).
TEST_CASE("a group has mean, deviation and the worst difference, and leaves rows without value out") {
    std::vector<EvidenceRow> rows(4);
    const double off[] = {1, 3, -4};
    for (size_t n = 0; n < 3; ++n) {
        rows[n].value = 100;
        rows[n].computed = 100 + off[n];
        rows[n].scatter = 1.5;
    }
    const auto group = evidenceGroups(rows).at(0);
    CHECK(group.count == 3);
    CHECK(group.not_computed == 1);
    CHECK(group.mean == Approx(0).margin(1e-9));
    CHECK(group.deviation == Approx(std::sqrt(13)));
    CHECK(group.worst == -4);
    CHECK(group.isLittle());
    CHECK(rows[1].isHit());        // 3 is twice the scatter
    CHECK_FALSE(rows[2].isHit());  // 4 is more
}

TEST_CASE("the planner's table of bias and scatter is the one that these rows make") {
    const auto table = modelScatterTable(computedRows());
    REQUIRE(table);
    CHECK(table.value().contains("soakwright evidence --write"));
    const auto book = loadFamilyBook();
    REQUIRE(book);
    const ModelScatter used = book.value().scatterOf("austenitic", "dissolved", "M23C6");
    double mean = 0;
    for (const char* id : {"eq211", "eq212", "eq213", "eq214"}) mean += *row(id).difference() / 4;
    CHECK(used.mean == Approx(mean).margin(0.3));  // 0.2 K of the baseline and the rounding to 0.1 K
    CHECK(used.rows == 0);                         // all four are marked unsure: little evidence
}

TEST_CASE("soakwright evidence answers for one family and kind, as text and for programs") {
    const auto run = [](const QStringList& arguments) {
        QProcess process;
        process.start(SOAKWRIGHT_COMMAND, QStringList{"evidence"} + arguments);
        REQUIRE(process.waitForFinished(120000));
        return std::pair{process.exitCode(), QString::fromUtf8(process.readAllStandardOutput())};
    };
    const auto [status, out] = run({"--family", "austenitic stainless", "--kind", "solvus", "--json"});
    REQUIRE(status == 0);
    const auto json = nlohmann::json::parse(out.toStdString());
    REQUIRE(json["rows"].size() == 5);
    for (const auto& one : json["rows"]) {
        CHECK(one["difference"].get<double>() ==
              Approx(one["computed"].get<double>() - one["value"].get<double>()).margin(1e-9));
        CHECK_FALSE(one["source"].get<std::string>().empty());
    }
    REQUIRE(json["groups"].size() == 2);
    CHECK(json["groups"][0]["weight"] == "unsure");
    CHECK(json["groups"][0]["count"] == 4);
    CHECK(json["groups"][1]["weight"] == "calibration");

    const auto [text_status, text] = run({"--family", "Fe-Cr", "--kind", "gamma_loop"});
    CHECK(text_status == 0);
    CHECK(text.contains("Firm rows"));
    CHECK(text.contains("little evidence"));
    CHECK_FALSE(text.contains("Calibration rows"));
    CHECK(run({"--kind", "solubility of cheese"}).first == 2);
    CHECK(run({"--kind", "solvus", "--baseline", "x.csv"}).first == 2);
}
