// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/store.h"
#include "db/revision.h"

#include <signal.h>
#include <sys/wait.h>
#include <unistd.h>

#include <QFile>
#include <QSqlQuery>
#include <QTemporaryDir>

#include "db/schema.h"
#include "db/sql.h"
#include "words.h"

using namespace soak;

namespace {

const QDate kDay(2025, 4, 2);

struct Place {
    QTemporaryDir folder;
    QString path = folder.filePath("test.store");
};

Heat heatNamed(const QString& number) {
    Heat heat;
    heat.number = number;
    heat.grade = "1.4462";
    heat.analysis_kind = "ladle";
    heat.section_mm = 110;
    heat.analysis["C"] = {"0,017", 0.017, false, 0.001, "decimal comma"};
    heat.analysis["Nb"] = {"<0.01", 0.01, true, 0.01, ""};
    heat.analysis["N"] = {"", std::nullopt, false, 0, "empty: no value"};
    return heat;
}

void write(const QString& path, const QByteArray& bytes) {
    QFile file(path);
    REQUIRE(file.open(QIODevice::WriteOnly));
    file.write(bytes);
}

/// Another process that opens the store, begins a transaction, stores one heat in it and waits to be killed.
class Writer {
public:
    explicit Writer(const QString& path) {
        int ready[2] = {0, 0};
        REQUIRE(pipe(ready) == 0);
        process_ = fork();
        if (process_ == 0) {
            Result<Store> store = Store::open(path);
            if (!store) _exit(1);
            Transaction transaction(store.value().database(), path, "waiting");
            transaction.run("INSERT INTO import (source, day, heats) VALUES ('half', '2025-04-02', 1)");
            const bool told = transaction.ok() && ::write(ready[1], "x", 1) == 1;
            while (told) pause();
            _exit(1);
        }
        char answer = 0;
        close(ready[1]);
        REQUIRE(read(ready[0], &answer, 1) == 1);
        close(ready[0]);
    }
    ~Writer() {
        ::kill(process_, SIGKILL);
        waitpid(process_, nullptr, 0);
    }

private:
    pid_t process_ = 0;
};

}  // namespace

TEST_CASE("heats come back exactly as they went in", "[store]") {
    Place place;
    std::vector<Heat> heats;
    for (const char* number : {"004731", "52E104", "F2407/1", "T-21-0463", "D 7740", "1e5", "0", "Ä'\"; --"})
        heats.push_back(heatNamed(QString::fromUtf8(number)));
    heats[0].other_analyses.push_back({"product", {{"C", {"0.018", 0.018, false, 0.001, ""}}}, "f line 3"});
    heats[0].other_products.push_back({"plate", std::nullopt, "f line 9"});
    heats[1].section_mm.reset();
    heats[1].analysis.clear();
    {
        Store store = must(Store::create(place.path));
        CHECK(must(store.storeHeats(heats, "f", kDay)) == 8);
    }
    const Store store = must(Store::open(place.path, Access::read));
    const std::vector<Heat> back = must(store.heats());
    REQUIRE(back.size() == heats.size());
    for (size_t i = 0; i < heats.size(); ++i) CHECK(back[i].number == heats[i].number);
    const Heat first = must(store.heat("004731"));
    CHECK(first.analysis.at("C").raw == "0,017");
    CHECK(*first.analysis.at("C").wt == 0.017);
    CHECK(first.analysis.at("C").digit_wt == 0.001);
    CHECK(first.analysis.at("C").remark == "decimal comma");
    CHECK(first.analysis.at("Nb").less_than);
    CHECK_FALSE(first.analysis.at("N").wt);
    REQUIRE(first.other_analyses.size() == 1);
    CHECK(first.other_analyses[0].kind == "product");
    CHECK(*first.other_analyses[0].analysis.at("C").wt == 0.018);
    REQUIRE(first.other_products.size() == 1);
    CHECK_FALSE(first.other_products[0].section_mm);
    CHECK(must(store.heat("52E104")).analysis.empty());
    CHECK(must(store.heat("52E104")).analysis_kind == "ladle");
    CHECK_FALSE(must(store.heat("52E104")).section_mm);
    CHECK_THAT(refusal(store.heat("4731")), Catch::Contains("Did you mean 004731?"));
    CHECK(refusal(store.heat("X")) == "heat X is not in the store");
}

TEST_CASE("a delivery is stored whole or not at all", "[store]") {
    Place place;
    Store store = must(Store::create(place.path));
    must(store.storeHeats({heatNamed("A")}, "first", kDay));
    CHECK_THAT(refusal(store.storeHeats({heatNamed("B"), heatNamed("A")}, "second", kDay)),
               Catch::StartsWith("heat A: this number is stored already"));
    CHECK_THAT(refusal(store.storeHeats({heatNamed("C"), heatNamed("C")}, "third", kDay)),
               Catch::StartsWith("heat C: this number is stored already"));
    CHECK_THAT(refusal(store.storeHeats({heatNamed("D"), heatNamed(" ")}, "fourth", kDay)),
               Catch::Contains("a heat without a number"));
    CHECK(must(store.heats()).size() == 1);
    CHECK(must(store.storeHeats({heatNamed("B")}, "fifth", kDay)) == 1);
}

TEST_CASE("sheets are numbered by the store, revised, and never changed", "[store]") {
    Place place;
    Store store = must(Store::create(place.path));
    Cycle cycle;
    cycle.name = "SA-6A";
    must(store.storeCycles({cycle}));
    must(approveCycle(store, "SA-6A", 1, {"quality manager", "2025-04-01", ""}));
    Sheet draft;
    draft.heat = "F2407/1";
    draft.cycle = "SA-6A";
    draft.furnace = "F1";
    draft.content = QByteArray("{\"setpoint_C\": 1120, \"note\": \"\xC2\xB0\"}");
    draft.issued_by = "metallurgist";
    const Sheet first = must(store.issueSheet(draft, kDay));
    CHECK(first.number == "2025-0001");
    CHECK(first.revision == "A");
    CHECK(first.hash == sheetHash("2025-0001", "A", draft.content));
    CHECK(must(store.issueSheet(draft, kDay)).number == "2025-0002");
    CHECK(must(store.issueSheet(draft, QDate(2026, 1, 1))).number == "2026-0001");

    Sheet change = draft;
    change.number = "2025-0001";
    change.content = "{\"setpoint_C\": 1135}";
    const Sheet second = must(store.issueSheet(change, kDay));
    CHECK(second.number == "2025-0001");
    CHECK(second.revision == "B");
    CHECK(second.replaces == "2025-0001 A");
    CHECK(second.hash != first.hash);
    CHECK(must(store.sheet("2025-0001")).revision == "B");
    const Sheet old = must(store.sheet("2025-0001", "A"));
    CHECK(old.status == "superseded");
    CHECK(old.content == draft.content);
    CHECK(old.issued == kDay);
    CHECK(must(store.sheets()).size() == 4);
    for (int i = 0; i < 30; ++i) must(store.issueSheet(change, kDay));
    CHECK(must(store.sheet("2025-0001")).revision == "AF");

    change.number = "2025-0999";
    CHECK_THAT(refusal(store.issueSheet(change, kDay)), Catch::Contains("there is no sheet 2025-0999"));
    change.content = "no json";
    CHECK_THAT(refusal(store.issueSheet(change, kDay)), Catch::Contains("one JSON object"));
    CHECK_THAT(refusal(store.issueSheet(draft, QDate())), Catch::Contains("date"));
    CHECK(must(store.issueSheet(draft, kDay)).number == "2025-0003");  // a refused one used up no number

    for (const char* sql : {"DELETE FROM sheet", "UPDATE sheet SET content = '{}'", "UPDATE sheet SET hash = ''"}) {
        Transaction transaction(store.database(), store.path(), "tampering");
        transaction.run(sql);
        CHECK_THAT(refusal(transaction.commit()), Catch::Contains("an issued record cannot be changed"));
    }
}

TEST_CASE("a cycle stored again is its next revision", "[store]") {
    Place place;
    Store store = must(Store::create(place.path));
    Cycle cycle;
    cycle.name = "SA-22";
    cycle.grades = {"1.4462", "F51"};
    cycle.setpoint_C = 1050;
    cycle.limits = {{"dissolved", "sigma", std::nullopt, std::nullopt, 20, "toughness", "common practice"}};
    must(store.storeCycles({cycle}));
    cycle.setpoint_C = 1060;
    cycle.grades = {"1.4462"};
    cycle.limits.push_back({"fraction", "ferrite", 40, 60, 0, "both phases", "common practice"});
    must(store.storeCycles({cycle}));
    REQUIRE(must(store.cycles()).size() == 1);
    const Cycle standing = must(store.cycle("SA-22"));
    CHECK(standing.revision == 2);
    CHECK(standing.setpoint_C == 1060);
    CHECK(standing.grades == QStringList{"1.4462"});
    REQUIRE(standing.limits.size() == 2);
    CHECK_FALSE(standing.limits[0].low);
    CHECK(*standing.limits[1].high == 60);
}

TEST_CASE("the shop's rules are kept and checked", "[store]") {
    Place place;
    Store store = must(Store::create(place.path));
    CHECK(must(store.shop()).band_rule == "root of squares");
    must(store.setShop({"Works", "added up", 4, 12, kDay}));
    CHECK(must(store.shop()).band_rule == "added up");
    CHECK(must(store.shop()).tight_computed_K == 12);
    CHECK_THAT(refusal(store.setShop({"Works", "by feel", 4, 12, kDay})), Catch::Contains("not \"by feel\""));
    CHECK(must(store.shop()).band_rule == "added up");
}

TEST_CASE("what is not a store is refused and left as it is", "[store]") {
    Place place;
    CHECK_THAT(refusal(Store::open(place.path)), Catch::Contains("no such file"));
    CHECK_FALSE(QFile::exists(place.path));
    CHECK_THAT(refusal(Store::open(place.folder.path())), Catch::Contains("not a file"));
    write(place.path, "heat,grade\nA,304\n");
    CHECK_THAT(refusal(Store::open(place.path)), Catch::Contains("the file is not a store"));
    CHECK_THAT(refusal(Store::create(place.path)), Catch::Contains("exists already"));
    write(place.path, "");
    CHECK_THAT(refusal(Store::open(place.path)), Catch::Contains("the file is not a store"));

    QFile::remove(place.path);
    {
        QSqlDatabase other = QSqlDatabase::addDatabase("QSQLITE", "other");
        other.setDatabaseName(place.path);
        REQUIRE(other.open());
        REQUIRE(QSqlQuery(other).exec("CREATE TABLE recipe (name TEXT)"));
        other.close();
    }
    QSqlDatabase::removeDatabase("other");
    QFile file(place.path);
    REQUIRE(file.open(QIODevice::ReadOnly));
    const QByteArray before = file.readAll();
    file.close();
    CHECK_THAT(refusal(Store::open(place.path)), Catch::Contains("belongs to another program"));
    REQUIRE(file.open(QIODevice::ReadOnly));
    CHECK(file.readAll() == before);
}

TEST_CASE("a newer store is refused, an older one brought up to date with its data", "[store]") {
    Place place;
    {
        Store store = must(Store::create(place.path));
        must(store.storeHeats({heatNamed("A")}, "f", kDay));
        REQUIRE(QSqlQuery(store.database()).exec("PRAGMA user_version = 999"));
    }
    CHECK_THAT(refusal(Store::open(place.path)), Catch::Contains("newer program (version 999"));
    CHECK_THAT(refusal(Store::open(place.path, Access::read)), Catch::Contains("newer program"));

    for (int version = 1; version <= latestSchemaVersion(); ++version) {
        INFO("from version " << version);
        Place old;
        {
            QSqlDatabase database = QSqlDatabase::addDatabase("QSQLITE", "old");
            database.setDatabaseName(old.path);
            REQUIRE(database.open());
            must(migrate(database, old.path, version));
            QSqlQuery query(database);
            REQUIRE(query.exec("INSERT INTO import (id, source, day, heats) VALUES (1, 'f', '2025-04-02', 1)"));
            REQUIRE(
                query.exec("INSERT INTO heat (number, grade, product_form, melt_route, source, import) "
                           "VALUES ('004731', '1.2379', 'bar', '', 'f line 2', 1)"));
            for (const int revision : {1, 2})
                REQUIRE(query.exec(QString("INSERT INTO cycle (name, revision, position, kind, setpoint_C, soak_rule, "
                                           "soak_base_min, soak_per_25mm_min, soak_free_mm, cooling, note) VALUES "
                                           "('H-D2', %1, 0, 'harden', %2, '', 0, 0, 0, '', '')")
                                       .arg(revision)
                                       .arg(1000 + revision)));
            REQUIRE(query.exec("INSERT INTO sheet VALUES ('2025-0001', 'A', '', '004731', 'H-D2', 2, 'F4', '{}', '" +
                               sheetHash("2025-0001", "A", "{}") + "', 'me', '2025-04-02', 'issued')"));
        }
        QSqlDatabase::removeDatabase("old");
        if (version < latestSchemaVersion())
            CHECK_THAT(refusal(Store::open(old.path, Access::read)), Catch::Contains("older program"));
        const Store store = must(Store::open(old.path));
        CHECK(must(schemaVersion(store.database(), old.path)) == latestSchemaVersion());
        CHECK(must(store.heat("004731")).product_form == "bar");
        CHECK(must(store.cycle("H-D2")).setpoint_C == 1002);
        CHECK(must(store.sheet("2025-0001")).content == "{}");
        // What an earlier program worked with goes on: approved where states were unknown.
        CHECK(must(cycleRevisions(store, "H-D2"))[1].state() == (version < 3 ? "approved" : "draft"));
        CHECK(must(store.check()).isEmpty());
    }
}

TEST_CASE("a store opened for reading is never written", "[store]") {
    Place place;
    must(Store::create(place.path));
    Store store = must(Store::open(place.path, Access::read));
    CHECK_THAT(refusal(store.storeHeats({heatNamed("A")}, "f", kDay)), Catch::Contains("it is read-only"));
    CHECK(must(store.heats()).empty());
}

TEST_CASE("a store that another process writes to says so, and can be read meanwhile", "[store]") {
    Place place;
    Store store = must(Store::create(place.path));
    must(store.storeHeats({heatNamed("A")}, "f", kDay));
    {
        const Writer other(place.path);
        CHECK(must(store.heats()).size() == 1);
        CHECK_THAT(refusal(store.storeHeats({heatNamed("B")}, "f", kDay)),
                   Catch::Contains("another program is writing") && Catch::Contains(place.path.toStdString()));
    }
    // The other process was killed in the middle: its half is gone, the store is sound and free.
    CHECK(must(store.storeHeats({heatNamed("B")}, "f", kDay)) == 1);
    Rows rows(store.database(), place.path, "checking", "SELECT count(*) FROM import WHERE source = 'half'");
    REQUIRE(rows.next());
    CHECK(rows.integer(0) == 0);
    Rows check(store.database(), place.path, "checking", "PRAGMA integrity_check");
    REQUIRE(check.next());
    CHECK(check.text(0) == "ok");
}

TEST_CASE("a full store keeps what it had", "[store]") {
    Place place;
    Store store = must(Store::create(place.path));
    must(store.storeHeats({heatNamed("A")}, "f", kDay));
    {
        QSqlQuery query(store.database());
        REQUIRE(query.exec("PRAGMA max_page_count = 1"));  // SQLite takes the present size as the limit
    }
    std::vector<Heat> many;
    for (int i = 0; i < 5000; ++i) many.push_back(heatNamed(QString("N%1").arg(i)));
    CHECK_THAT(refusal(store.storeHeats(many, "f", kDay)), Catch::Contains("the disk is full"));
    REQUIRE(must(store.heats()).size() == 1);
    CHECK(must(Store::open(place.path).value().heats()).size() == 1);
}

TEST_CASE("a damaged store is not mistaken for an empty one", "[store]") {
    Place place;
    {
        Store store = must(Store::create(place.path));
        std::vector<Heat> many;
        for (int i = 0; i < 500; ++i) many.push_back(heatNamed(QString("N%1").arg(i)));
        must(store.storeHeats(many, "f", kDay));
    }
    QFile file(place.path);
    REQUIRE(file.open(QIODevice::ReadWrite));
    file.seek(4096);
    file.write(QByteArray(int(file.size()) - 4096, '\x55'));
    file.close();
    const Result<Store> store = Store::open(place.path);
    const std::string words = store ? refusal(store.value().heats()) : refusal(store);
    CHECK_THAT(words, Catch::Contains("the file is damaged") && Catch::Contains("restore the last backup"));
}

TEST_CASE("ten thousand heats are stored and read in one go", "[store]") {
    Place place;
    Store store = must(Store::create(place.path));
    std::vector<Heat> many;
    for (int i = 0; i < 10000; ++i) {
        many.push_back(heatNamed(QString("%1").arg(i, 6, 10, QChar('0'))));
        for (const char* element : {"Si", "Mn", "P", "S", "Cr", "Ni", "Mo", "V", "W", "Ti", "Al", "Cu", "Co"})
            many.back().analysis[element] = {"0.5", 0.5, false, 0.1, ""};
    }
    CHECK(must(store.storeHeats(many, "f", kDay)) == 10000);
    const std::vector<Heat> back = must(store.heats());
    REQUIRE(back.size() == 10000);
    CHECK(back.back().number == "009999");
    CHECK(back.back().analysis.size() == 16);
}

TEST_CASE("two stores of one thread do not disturb each other", "[store]") {
    Place one, two;
    Store a = must(Store::create(one.path)), b = must(Store::create(two.path));
    must(a.storeHeats({heatNamed("A")}, "f", kDay));
    b = std::move(a);
    CHECK(b.path() == one.path);
    CHECK(must(b.heats()).size() == 1);
}
