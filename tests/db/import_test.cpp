// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/import.h"

#include <QSqlQuery>
#include <QTemporaryDir>
#include <algorithm>
#include <ctime>

#include "base/folders.h"
#include "db/csv.h"
#include "db/demo.h"
#include "db/store.h"
#include "words.h"

using namespace soak;

namespace {

const QDate kDay(2025, 4, 2);

QByteArray millFile() {
    return must(readFile(QString::fromStdString(productPath("db/demo/cert-export.csv").string())));
}

int count(const Store& store, const QString& table) {
    QSqlQuery query(store.database());
    REQUIRE((query.exec("SELECT count(*) FROM " + table) && query.next()));
    return query.value(0).toInt();
}

/// All that an import may change, as numbers.
std::vector<int> census(const Store& store) {
    std::vector<int> rows;
    for (const char* table : {"heat", "analysis", "content", "product"}) rows.push_back(count(store, table));
    return rows;
}

const CellFinding* find(const std::vector<CellFinding>& findings, const QString& heat, const QString& words) {
    const auto at = std::find_if(findings.begin(), findings.end(), [&](const CellFinding& finding) {
        return finding.heat == heat && finding.text.contains(words);
    });
    return at == findings.end() ? nullptr : &*at;
}

}  // namespace

TEST_CASE("a mill's certificate beside what was typed: four cells differ, and one number is offered", "[import]") {
    QTemporaryDir folder;
    Store store = must(createDemoShop(folder.filePath("a.store")));
    const std::vector<int> before = census(store);
    const ImportPlan plan = must(planImport(store, millFile(), "cert-export.csv"));
    CHECK(census(store) == before);
    CHECK(plan.supplier == "Lieferwerk D (erfunden / invented)");
    CHECK(plan.certificate.number == "D-2291/0447 Rev. 1");
    CHECK(plan.heats == 15);
    CHECK(plan.analyses == 30);
    CHECK(plan.held() == 0);
    QStringList differ;
    for (const CellFinding& finding : plan.findings)
        if (!finding.stored.isEmpty() && !finding.column.isEmpty() && finding.raw != finding.heat)
            differ << finding.heat + " " + finding.column;
    differ.sort();
    // D7731 N was empty: nothing stored to show, so it is named by its words.
    CHECK(differ == QStringList{"D7745 Mo", "D7745 N2", "D8820 Cr"});
    const CellFinding* missing = find(plan.findings, "D7731", "no value");
    REQUIRE(missing);
    CHECK(missing->column == "N2");
    CHECK(missing->read == "0.1590 wt%");
    CHECK_THAT(find(plan.findings, "D 7740", "is it D7740")->text.toStdString(),
               Catch::Contains("which the store has"));
    CHECK_THAT(find(plan.findings, "D8820", "held row")->text.toStdString(), Catch::Contains("heats.csv line 26"));

    const ImportRecord record = must(store.storeImport(plan, kDay, "inspector"));
    CHECK(must(store.heat("D7745")).analysis.at("N").raw == "0.186");  // what was typed stays
    CHECK(must(store.heat("D7745")).other_analyses.size() == 2);
    CHECK(must(store.heat("D 7740")).analysis.at("N").raw == "1740");
    CHECK(must(store.importFile(record.id)) == millFile());
    const ImportPlan again = must(planImport(store, millFile(), "cert-export.csv"));
    CHECK(again.unchanged.size() == 15);
    CHECK(again.new_heats.empty());
    CHECK(again.additions.empty());
    CHECK(find(again.findings, "", "this very file was imported already"));

    CHECK(must(store.undoImport(record.id)).undone);
    CHECK(census(store) == before);
    CHECK(must(store.importFile(record.id)) == millFile());
    CHECK_THAT(refusal(store.undoImport(record.id)), Catch::Contains("undone already"));
    CHECK(must(store.check()).isEmpty());
}

TEST_CASE("held rows are kept with their readings until a person decides", "[import]") {
    QTemporaryDir folder;
    const Store store = must(createDemoShop(folder.filePath("a.store")));
    const std::vector<HeldRow> held = must(store.heldRows());
    const auto row = std::find_if(held.begin(), held.end(), [](const HeldRow& one) { return one.heat == "D8820"; });
    REQUIRE(row != held.end());
    CHECK(row->analysis.at("Cr").raw == "252.0");
    CHECK_THAT(row->why.toStdString(), Catch::Contains("adds up to"));
    CHECK(row->line == 26);
}

TEST_CASE("an import that something rests on is not taken back", "[import]") {
    QTemporaryDir folder;
    Store store = must(createDemoShop(folder.filePath("a.store")));
    Sheet sheet;
    sheet.heat = "D7718";
    sheet.content = "{}";
    const ImportRecord second = must(store.storeImport(must(planImport(store, millFile(), "m.csv")), kDay, ""));
    CHECK_THAT(refusal(store.undoImport(1)), Catch::Contains("something was added to heat"));
    must(store.undoImport(second.id));
    must(store.issueSheet(sheet, kDay));
    CHECK_THAT(refusal(store.undoImport(1)), Catch::Contains("sheet 2025-0001 for heat D7718"));
    CHECK_THAT(refusal(store.undoImport(77)), Catch::Contains("there is no import 77"));
}

TEST_CASE("a supplier's columns are remembered and decide", "[import]") {
    QTemporaryDir folder;
    Store store = must(Store::create(folder.filePath("a.store")));
    const QByteArray file = "Supplier;Werk Y\nPosten;Chrom;Nickel;Stickstoff\nA1;18,1;8,2;450\n";
    CHECK_THAT(refusal(planImport(store, file, "y.csv")), Catch::Contains("no header row"));
    ImportOptions options;
    options.choices = {{"Posten", *columnChoiceOf("heat")},
                       {"Chrom", *columnChoiceOf("Cr")},
                       {"Nickel", *columnChoiceOf("ni")},
                       {"Stickstoff", *columnChoiceOf("N ppm")}};
    const ImportPlan plan = must(planImport(store, file, "y.csv", options));
    REQUIRE(plan.new_heats.size() == 1);
    CHECK(plan.new_heats[0].analysis.at("N").wt == 0.045);
    must(store.rememberColumns(plan.supplier, options.choices));
    CHECK(must(planImport(store, file, "y.csv")).new_heats.size() == 1);
    CHECK_FALSE(planImport(store, QByteArray(file).replace("Werk Y", "Werk Z"), "z.csv"));
    must(store.rememberColumns("Werk Y", {{"Nickel", *columnChoiceOf("")}}));
    CHECK(must(planImport(store, file, "y.csv")).new_heats[0].analysis.count("Ni") == 0);
    CHECK_FALSE(columnChoiceOf("colour"));
    CHECK_THAT(refusal(store.rememberColumns(" ", {})), Catch::Contains("name one"));
}

TEST_CASE("ten thousand heats are imported in seconds, and a stopped import stores nothing", "[import]") {
    QTemporaryDir folder;
    Store store = must(Store::create(folder.filePath("a.store")));
    QByteArray file = "heat;grade;C;Si;Mn;P;S;Cr;Ni;Mo;V;W;Nb;Ti;Al;Cu;Co;N\n";
    for (int i = 0; i < 10000; ++i)
        file +=
            QString("%1;1.4462;0,019;0,47;1,36;0,023;<0,001;22,%2;5,58;3,14;0,09;0,04;0,01;0,01;0,01;0,2;0,1;0,16\n")
                .arg(i, 6, 10, QChar('0'))
                .arg(i % 100, 2, 10, QChar('0'))
                .toUtf8();
    const std::clock_t start = std::clock();  // processor time: a busy machine must not fail this
    const ImportPlan plan = must(planImport(store, file, "many.csv"));
    int calls = 0;
    CHECK_THAT(refusal(store.storeImport(plan, kDay, "", [&](int done, int) { return ++calls < 3 && done > 0; })),
               Catch::Contains("nothing of it was stored"));
    CHECK(calls == 3);
    CHECK(must(store.heats()).empty());
    CHECK(must(store.imports()).empty());
    const ImportRecord record = must(store.storeImport(plan, kDay, ""));
    CHECK(record.heats == 10000);
    const double seconds = double(std::clock() - start) / CLOCKS_PER_SEC;
    INFO("10 000 heats with 160 000 contents: " << seconds << " s");
    if (qEnvironmentVariableIsEmpty("SOAKWRIGHT_SLOW")) CHECK(seconds < 10);
    CHECK(must(store.heats()).size() == 10000);
}
