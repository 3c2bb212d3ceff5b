// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/revision.h"

#include <QFile>
#include <QJsonDocument>
#include <QTemporaryDir>

#include "db/journal.h"
#include "db/shop_file.h"
#include "db/sql.h"
#include "db/store.h"
#include "words.h"

using namespace soak;

namespace {

const QDate kDay(2025, 4, 2);
const Act kQuality{"quality manager", "2025-04-02", "reviewed with the metallurgist"};
const Act kMetallurgist{"metallurgist", "2025-04-01", "15 K more for sigma"};

Cycle cycleAt(double setpoint_C, int made_from) {
    Cycle cycle;
    cycle.name = "SA-22";
    cycle.kind = "solution-anneal";
    cycle.grades = {"1.4462"};
    cycle.setpoint_C = setpoint_C;
    cycle.revision = made_from;
    cycle.limits = {{"dissolved", "sigma", std::nullopt, std::nullopt, 20, "toughness", "common practice"}};
    return cycle;
}

Sheet sheetFrom(int revision) {
    Sheet sheet;
    sheet.heat = "D7718";
    sheet.cycle = "SA-22";
    sheet.cycle_revision = revision;
    sheet.content = "{}";
    sheet.issued_by = "quality manager";
    return sheet;
}

struct Place {
    QTemporaryDir folder;
    Store store = must(Store::create(folder.filePath("a.store")));
};

}  // namespace

TEST_CASE("a draft changes nothing at the furnace until it is approved", "[revision]") {
    Place shop;
    CHECK(must(draftCycle(shop.store, cycleAt(1050, 0), kMetallurgist)) == 1);
    CHECK_THAT(refusal(shop.store.issueSheet(sheetFrom(1), kDay)), Catch::Contains("revision 1 is a draft"));
    must(approveCycle(shop.store, "SA-22", 1, kQuality));
    CHECK(must(shop.store.issueSheet(sheetFrom(1), kDay)).revision == "A");
    CHECK(must(draftCycle(shop.store, cycleAt(1065, 1), kMetallurgist)) == 2);
    CHECK(must(shop.store.cycle("SA-22")).setpoint_C == 1050);
    CHECK_THAT(refusal(shop.store.issueSheet(sheetFrom(2), kDay)), Catch::Contains("revision 2 is a draft"));
    CHECK_THAT(refusal(shop.store.issueSheet(sheetFrom(9), kDay)), Catch::Contains("not in the store"));
    must(approveCycle(shop.store, "SA-22", 2, kQuality));
    CHECK(must(shop.store.cycle("SA-22")).setpoint_C == 1065);
    must(withdrawCycle(shop.store, "SA-22", 2, kQuality));
    CHECK(must(shop.store.cycle("SA-22")).revision == 1);
    CHECK_THAT(refusal(shop.store.issueSheet(sheetFrom(2), kDay)), Catch::Contains("withdrawn"));

    const std::vector<CycleRevision> revisions = must(cycleRevisions(shop.store, "SA-22"));
    REQUIRE(revisions.size() == 2);
    CHECK(revisions[1].state() == "withdrawn");
    REQUIRE(revisions[1].steps.size() == 3);
    CHECK(revisions[1].steps[0].who == "metallurgist");
    CHECK(revisions[1].steps[0].why == "15 K more for sigma");
    CHECK(cycleDifferences(revisions[0].cycle, revisions[1].cycle) == QStringList{"setpoint 1050 -> 1065 °C"});
    CHECK_THAT(refusal(cycleRevisions(shop.store, "SA-99")), Catch::Contains("not in the store"));
}

TEST_CASE("a frozen cycle waits for its customer", "[revision]") {
    Place shop;
    must(draftCycle(shop.store, cycleAt(1050, 0), kMetallurgist));
    CHECK_THAT(refusal(freezeCycle(shop.store, "SA-22", 1, "K", kQuality)),
               Catch::Contains("is draft and cannot be frozen"));
    must(approveCycle(shop.store, "SA-22", 1, kQuality));
    CHECK_THAT(refusal(freezeCycle(shop.store, "SA-22", 1, " ", kQuality)), Catch::Contains("name one"));
    must(freezeCycle(shop.store, "SA-22", 1, "Customer K", kQuality));
    CHECK(must(shop.store.issueSheet(sheetFrom(1), kDay)).revision == "A");
    must(draftCycle(shop.store, cycleAt(1065, 1), kMetallurgist));
    CHECK_THAT(refusal(approveCycle(shop.store, "SA-22", 2, kQuality)),
               Catch::Contains("revision 1 for Customer K is frozen"));
    CHECK_THAT(refusal(unfreezeCycle(shop.store, "SA-22", 1, {"quality manager", "", ""})),
               Catch::Contains("a reason is needed"));
    must(unfreezeCycle(shop.store, "SA-22", 1, {"quality manager", "2025-05-01", "leave of Customer K, letter 17"}));
    must(approveCycle(shop.store, "SA-22", 2, kQuality));
    CHECK(must(shop.store.cycle("SA-22")).revision == 2);
}

TEST_CASE("two stations that change one cycle see each other, and neither loses work", "[revision]") {
    Place shop;
    Store other = must(Store::open(shop.store.path()));
    must(draftCycle(shop.store, cycleAt(1050, 0), kMetallurgist));
    must(draftCycle(other, cycleAt(1060, 1), {"bay 1", "2025-04-02", ""}));
    const std::string words = refusal(draftCycle(shop.store, cycleAt(1070, 1), kMetallurgist));
    CHECK_THAT(words, Catch::Contains("revision 2 was stored meanwhile by bay 1"));
    CHECK_THAT(words, Catch::Contains("setpoint 1060 -> 1070 °C"));
    CHECK(must(cycleRevisions(other, "SA-22")).size() == 2);
    must(draftCycle(shop.store, cycleAt(1070, 2), kMetallurgist));
    CHECK_THAT(refusal(draftCycle(other, cycleAt(1000, 0), kQuality)), Catch::Contains("revision 3 was stored"));
}

TEST_CASE("the journal keeps who, when and why, and shows every attempt on it", "[journal]") {
    Place shop;
    must(draftCycle(shop.store, cycleAt(1050, 0), kMetallurgist));
    must(approveCycle(shop.store, "SA-22", 1, kQuality));
    CHECK_FALSE(approveCycle(shop.store, "SA-22", 1, kQuality));
    must(shop.store.issueSheet(sheetFrom(1), kDay));
    const std::vector<JournalEntry> entries = must(journal(shop.store));
    REQUIRE(entries.size() == 3);
    CHECK(entries[0].detail.contains("\"setpoint_C\":1050"));
    const Cycle kept = must(cycleFrom(QJsonDocument::fromJson(entries[0].detail).object()));
    CHECK(kept.setpoint_C == 1050);
    CHECK(kept.limits.size() == 1);
    CHECK(entries[1].who == "quality manager");
    CHECK(entries[1].why == "reviewed with the metallurgist");
    CHECK(entries[2].which == "2025-0001 A");
    CHECK(must(journal(shop.store, "sheet")).size() == 1);
    CHECK(must(shop.store.check()).isEmpty());

    const auto tamper = [&](const QString& sql) {
        Transaction transaction(shop.store.database(), shop.store.path(), "tampering");
        transaction.run(sql);
        return transaction.commit();
    };
    CHECK_THAT(refusal(tamper("DELETE FROM journal WHERE number = 2")),
               Catch::Contains("cannot be changed or removed"));
    CHECK_THAT(refusal(tamper("UPDATE journal SET who = 'nobody'")), Catch::Contains("cannot be changed or removed"));
    CHECK_THAT(refusal(tamper("DELETE FROM cycle_step")), Catch::Contains("cannot be changed or removed"));
    must(tamper("DROP TRIGGER journal_content_stays"));
    must(tamper("UPDATE journal SET why = 'no reason' WHERE number = 2"));
    CHECK(must(shop.store.check()) ==
          QStringList{
              "journal entry 2 (cycle SA-22 revision 1, approved) is not what was written, or one before it is gone"});
    must(tamper("UPDATE journal SET why = 'reviewed with the metallurgist' WHERE number = 2"));
    CHECK(must(shop.store.check()).isEmpty());
    must(tamper("DROP TRIGGER journal_stays"));
    must(tamper("DELETE FROM journal WHERE number = 2"));
    CHECK(must(shop.store.check()) == QStringList{"the journal has a gap: entry 1 is followed by 3"});
    // Fields run into each other must not hash alike.
    JournalEntry one{1, "ab", "c", "", "", "", "", "", ""}, two{1, "a", "bc", "", "", "", "", "", ""};
    CHECK(journalHash("", one) != journalHash("", two));
}

TEST_CASE("roles bind only when they are switched on, and then everybody", "[people]") {
    Place shop;
    const Act setup{"owner", "2025-04-02", "setting up"};
    must(draftCycle(shop.store, cycleAt(1050, 0), {}));
    CHECK_THAT(refusal(switchRoles(shop.store, true, setup)), Catch::Contains("need an administrator first"));
    CHECK_THAT(refusal(setPerson(shop.store, {"Ada", {"boss"}, true}, "long enough", setup)),
               Catch::Contains("is no role"));
    CHECK_THAT(refusal(setPerson(shop.store, {"Ada", {"approver"}, true}, "short", setup)),
               Catch::Contains("at least 8"));
    CHECK_THAT(refusal(setPerson(shop.store, {"Ada", {"approver"}, true}, "", setup)),
               Catch::Contains("needs a password"));
    must(setPerson(shop.store, {"Ada", {"administrator"}, true}, "correct horse", setup));
    must(setPerson(shop.store, {"Ben", {"inspector"}, true}, "battery staple", setup));
    must(setPerson(shop.store, {"Cem", {"approver"}, true}, "another one", setup));
    must(switchRoles(shop.store, true, setup));

    CHECK_THAT(refusal(approveCycle(shop.store, "SA-22", 1, {"Ben", "", "it is fine"})),
               Catch::Contains("Ben may not approve"));
    CHECK_THAT(refusal(approveCycle(shop.store, "SA-22", 1, {"Zoe", "", "it is fine"})),
               Catch::Contains("Zoe may not"));
    CHECK_THAT(refusal(shop.store.storeHeats({}, "f", kDay)),
               Catch::Contains("somebody who is not signed in may not enter"));
    must(approveCycle(shop.store, "SA-22", 1, {"Cem", "2025-04-02", ""}));
    CHECK_THAT(refusal(draftCycle(shop.store, cycleAt(1060, 1), {"Ada", "", ""})),
               Catch::Contains("Ada may not draft"));
    Sheet sheet = sheetFrom(1);
    sheet.issued_by = "Ben";
    CHECK_THAT(refusal(shop.store.issueSheet(sheet, kDay)),
               Catch::Contains("Ben may not approve, withdraw, freeze or issue"));
    sheet.issued_by = "Cem";
    must(shop.store.issueSheet(sheet, kDay));

    CHECK(must(signIn(shop.store, "Ben", "battery staple")).roles == QStringList{"inspector"});
    CHECK(refusal(signIn(shop.store, "Ben", "battery stapl")) == "name or password is wrong");
    CHECK(refusal(signIn(shop.store, "Nobody", "x")) == "name or password is wrong");
    CHECK_THAT(refusal(setPerson(shop.store, {"Ada", {"administrator"}, false}, "", {"Ada", "", ""})),
               Catch::Contains("the last administrator stays"));
    must(setPerson(shop.store, {"Ben", {"inspector"}, false}, "", {"Ada", "", "left"}));
    CHECK_FALSE(signIn(shop.store, "Ben", "battery staple"));
    CHECK(must(people(shop.store)).size() == 3);
    CHECK_THAT(refusal(switchRoles(shop.store, false, {"Ben", "", ""})), Catch::Contains("may not manage"));
    must(switchRoles(shop.store, false, {"Ada", "", "one man again"}));
    must(shop.store.storeHeats({}, "f", kDay));
    CHECK(must(shop.store.check()).isEmpty());
    // The file holds no password.
    QFile file(shop.store.path());
    REQUIRE(file.open(QIODevice::ReadOnly));
    CHECK_FALSE(file.readAll().contains("battery staple"));
}
