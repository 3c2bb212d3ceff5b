// SPDX-License-Identifier: GPL-3.0-or-later
#include <QFile>
#include <QSqlQuery>
#include <QTemporaryDir>

#include "db/store.h"
#include "words.h"

using namespace soak;

namespace {

const QDate kDay(2025, 4, 2);

Store storeWithSheet(const QString& path) {
    Store store = must(Store::create(path));
    Heat heat;
    heat.number = "004731";
    must(store.storeHeats({heat}, "f", kDay));
    Sheet sheet;
    sheet.heat = "004731";
    sheet.content = "{\"setpoint_C\": 1030}";
    must(store.issueSheet(sheet, kDay));
    return store;
}

}  // namespace

TEST_CASE("a sound store has no findings, a changed sheet is found", "[care]") {
    QTemporaryDir folder;
    const Store store = storeWithSheet(folder.filePath("a.store"));
    CHECK(must(store.check()).isEmpty());
    QSqlQuery query(store.database());
    REQUIRE(query.exec("DROP TRIGGER sheet_content_stays"));
    REQUIRE(query.exec("UPDATE sheet SET content = '{\"setpoint_C\": 1130}'"));
    CHECK(must(store.check()) == QStringList{"sheet 2025-0001 A is not what was issued: its hash differs"});
    CHECK_THAT(refusal(store.backup(folder.filePath("b.store"))), Catch::Contains("its hash differs"));
    CHECK_FALSE(QFile::exists(folder.filePath("b.store")));
}

TEST_CASE("a backup opens elsewhere and can be restored", "[care]") {
    QTemporaryDir folder;
    const QString backup = folder.filePath("backup.store"), again = folder.filePath("again.store");
    {
        const Store store = storeWithSheet(folder.filePath("a.store"));
        must(store.backup(backup));
        CHECK_THAT(refusal(store.backup(backup)), Catch::Contains("exists already"));
        CHECK_THAT(refusal(store.backup("/nowhere/b.store")), Catch::Contains("/nowhere/b.store"));
    }
    CHECK_THAT(refusal(Store::restore(backup, folder.filePath("a.store"))), Catch::Contains("exists already"));
    must(Store::restore(backup, again));
    Store restored = must(Store::open(again));
    CHECK(must(restored.heat("004731")).number == "004731");
    CHECK(must(restored.sheet("2025-0001")).content == "{\"setpoint_C\": 1030}");
    Sheet next;
    next.content = "{}";
    CHECK(must(restored.issueSheet(next, kDay)).number == "2025-0002");  // numbers go on where they were
    CHECK_THAT(refusal(Store::restore(folder.filePath("none"), folder.filePath("x"))), Catch::Contains("no such file"));
}
