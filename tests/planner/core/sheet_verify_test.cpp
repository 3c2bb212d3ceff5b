// SPDX-License-Identifier: GPL-3.0-or-later
#include <QTemporaryDir>
#include <catch2/catch.hpp>

#include "db/revision.h"
#include "planner/core/sheet_json.h"
#include "planner/core/sheet_verify.h"

using namespace soak;

namespace {

/// A sheet is issued from an approved cycle only.
void approveItsCycle(Store& store) {
    if (store.cycle("SA-6A")) return;
    Cycle cycle;
    cycle.name = "SA-6A";
    REQUIRE(store.storeCycles({cycle}));
    REQUIRE(approveCycle(store, "SA-6A", 1, {"Q. Manager", "2025-04-01", "reviewed"}));
}

Sheet issueIn(Store& store, const QString& number = {}) {
    approveItsCycle(store);
    Sheet sheet;
    sheet.number = number;
    sheet.heat = "F2407/1";
    sheet.cycle = "SA-6A";
    sheet.furnace = "F2";
    sheet.content = "{}";
    sheet.issued_by = "A. Planner";
    auto issued = store.issueSheet(sheet, QDate(2025, 4, 2));
    REQUIRE(issued);
    return issued.value();
}

Standing standingOf(const QString& path, const Sheet& sheet, const std::optional<CopyAge>& copy = {}) {
    const auto code = readSheetCode(sheetCode(sheet));
    REQUIRE(code);
    return verifySheet(Store::open(path, Access::read), code.value(), copy).standing;
}

}  // namespace

TEST_CASE("a sheet is current until its next revision is issued") {
    const QTemporaryDir folder;
    const QString path = folder.filePath("shop.soak");
    auto store = Store::create(path);
    REQUIRE(store);
    const Sheet a = issueIn(store.value());
    CHECK(standingOf(path, a) == Standing::current);
    const Sheet b = issueIn(store.value(), a.number);
    CHECK(standingOf(path, a) == Standing::superseded);
    CHECK(standingOf(path, b) == Standing::current);
    const auto told = verifySheet(store, readSheetCode(sheetCode(a)).value());
    CHECK(told.sentence.contains("superseded by rev B"));
}

TEST_CASE("a bay's copy never says a plain yes, but it does say superseded") {
    const QTemporaryDir folder;
    const QString path = folder.filePath("shop.soak"), copied = folder.filePath("bay.soak");
    auto store = Store::create(path);
    REQUIRE(store);
    const Sheet a = issueIn(store.value());
    const Sheet b = issueIn(store.value(), a.number);
    REQUIRE(store.value().backup(copied));
    const QDateTime taken(QDate(2025, 4, 2), QTime(6, 30));
    const CopyAge age{taken, taken.addSecs(95 * 60)};
    CHECK(standingOf(copied, a, age) == Standing::superseded);
    CHECK(standingOf(copied, b, age) == Standing::cannotConfirm);
    const auto told = verifySheet(Store::open(copied, Access::read), readSheetCode(sheetCode(b)).value(), age);
    CHECK(told.sentence.contains("last contact 2025-04-02 06:30"));
    CHECK(told.sentence.contains("95\u2009min ago"));
}

TEST_CASE("what the store does not hold, or holds with another content, is never confirmed") {
    const QTemporaryDir folder;
    const QString path = folder.filePath("shop.soak");
    auto store = Store::create(path);
    REQUIRE(store);
    Sheet sheet = issueIn(store.value());
    sheet.hash = QString(64, 'a');
    CHECK(standingOf(path, sheet) == Standing::different);
    sheet.number = "2025-0099";
    CHECK(standingOf(path, sheet) == Standing::cannotConfirm);
    CHECK(standingOf(folder.filePath("nowhere.soak"), sheet) == Standing::cannotConfirm);
}

TEST_CASE("a code is read as a scanner gives it, and anything else is refused") {
    const auto code = readSheetCode(" soakwright:2025-0412:b:9F2C\r\n");
    REQUIRE(code);
    CHECK(code.value().number == "2025-0412");
    CHECK(code.value().revision == "B");
    CHECK(code.value().hash == "9f2c");
    for (const char* wrong : {"", "soakwright", "soakwright:1:A", "https://example.org", "soakwright::A:9f"})
        CHECK_FALSE(readSheetCode(wrong));
}
