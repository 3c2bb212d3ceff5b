// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/demo.h"

#include <QFile>
#include <QTemporaryDir>
#include <algorithm>

#include "base/folders.h"
#include "db/shop_file.h"
#include "words.h"

using namespace soak;

namespace {

/// One demonstration store for all tests of this file; they only read it.
const Store& shop() {
    static QTemporaryDir folder;
    static const Store store = must(createDemoShop(folder.filePath("demo.store")));
    return store;
}

QStringList names(const std::vector<Cycle>& cycles) {
    QStringList list;
    for (const Cycle& cycle : cycles) list << cycle.name;
    return list;
}

const CycleLimit* limit(const Cycle& cycle, const char* kind, const char* phase = "") {
    const auto found = std::find_if(cycle.limits.begin(), cycle.limits.end(),
                                    [&](const CycleLimit& l) { return l.kind == kind && l.phase == phase; });
    return found == cycle.limits.end() ? nullptr : &*found;
}

}  // namespace

TEST_CASE("the demonstration shop comes back from its store as it was written", "[demo]") {
    const Store& store = shop();
    const Shop rules = must(store.shop());
    CHECK(rules.today == QDate(2025, 4, 2));
    CHECK(rules.band_rule == "root of squares");
    CHECK(must(store.grades()).size() == 432 + 185);
    CHECK(must(store.treatments()).size() == 367 + 199);
    CHECK(must(store.cautions()).size() == 116);
    CHECK(must(store.quenches()).size() == 5 + 4);
    CHECK(must(store.heats()).size() == 56 + 31);
    CHECK(names(must(store.cycles())) ==
          QStringList{"SA-300",  "SA-321",  "SA-22",   "SA-25",   "SA-6A",   "SA-8M",   "ST-174",  "H-410",
                      "N-91",    "T-91",    "H-42",    "T-42",    "C-18",    "H-D2",    "H-13",    "H-M2",
                      "SL-2024", "SL-2014", "SL-2219", "SL-2618", "SL-2011", "SL-7075", "SL-7050", "SL-7020",
                      "SL-61",   "SL-60",   "SL-356",  "SL-357",  "SL-450",  "SL-206",  "SL-520",  "AN-5083",
                      "AN-3003", "SS-450",  "HO-2024", "HO-7050", "AG-61",   "RC-2024"});
}

TEST_CASE("furnaces keep surveys with sign, controller unit and overdue dates", "[demo]") {
    const std::vector<Furnace> furnaces = must(shop().furnaces());
    REQUIRE(furnaces.size() == 6 + 4);
    const Furnace f1 = must(shop().furnace("F1"));
    REQUIRE(f1.survey.size() == 3);
    CHECK(f1.survey[2].temperature_C == 1120);
    CHECK(f1.survey[2].coldest_K == -11);
    CHECK(f1.survey[2].hottest_K == 10);
    CHECK(f1.offset_K == 1.7);  // reads 1.7 low: the metal is hotter than the reading
    CHECK(must(shop().furnace("F2")).offset_K == -0.4);
    CHECK(f1.quenches == QStringList{"W1", "A1"});
    CHECK(must(shop().furnace("F4")).controller_fahrenheit);
    CHECK(must(shop().furnace("F6")).survey_due == QDate(2024, 9, 28));
    CHECK_FALSE(must(shop().furnace("F6")).accuracy_tested.isValid());
    CHECK_THAT(refusal(shop().furnace("F9")), Catch::Contains("furnace F9 is not in the store; it holds F1, F2"));
}

TEST_CASE("cycles carry their limits, each with its reason and source", "[demo]") {
    for (const Cycle& cycle : must(shop().cycles())) {
        INFO(cycle.name.toStdString());
        CHECK(cycle.revision == 1);
        CHECK_FALSE(cycle.limits.empty());
        for (const CycleLimit& l : cycle.limits) {
            INFO(l.kind.toStdString());
            CHECK_FALSE(l.because.isEmpty());
            CHECK_FALSE(l.source.isEmpty());
            CHECK(l.margin_K >= 0);
        }
        for (const QString& id : cycle.furnaces) {
            const Furnace furnace = must(shop().furnace(id));
            CHECK(cycle.setpoint_C <= furnace.maximum_C);
            CHECK(cycle.setpoint_C >= furnace.minimum_C);
        }
        for (const QString& grade : cycle.grades) CHECK_FALSE(must(shop().gradeRowsNamed(grade)).empty());
    }
    const Cycle casting = must(shop().cycle("SA-6A"));
    CHECK(*limit(casting, "specification")->low == 1100);
    CHECK(limit(casting, "dissolved", "sigma")->margin_K == 20);
    CHECK(*limit(casting, "fraction", "ferrite")->high == 65);
    const Cycle stabilised = must(shop().cycle("SA-321"));
    CHECK(limit(stabilised, "fraction", "MX")->low);  // the stabiliser's carbide must stay
    CHECK_FALSE(limit(stabilised, "dissolved", "MX"));
    CHECK(limit(must(shop().cycle("N-91")), "not_yet_formed", "delta ferrite"));
    CHECK(limit(must(shop().cycle("H-M2")), "below_solidus")->margin_K == 15);
}

TEST_CASE("a certificate's words find the grade rows and the standing cycles", "[demo]") {
    CHECK(names(must(shop().cyclesFor("1.4462"))) == QStringList{"SA-22"});
    CHECK(names(must(shop().cyclesFor("X2CrNiMoN22-5-3 / 1.4462"))) == QStringList{"SA-22"});
    CHECK(names(must(shop().cyclesFor("cd3mwcun"))) == QStringList{"SA-6A"});
    CHECK(names(must(shop().cyclesFor("6A"))) == QStringList{"SA-6A"});  // another exact name of the same row
    CHECK(names(must(shop().cyclesFor("1.4903"))) == QStringList{"N-91", "T-91"});
    CHECK(must(shop().cyclesFor("S31803")).empty());  // only near to 1.4462
    CHECK(must(shop().cyclesFor("1.4539")).empty());
    CHECK(must(shop().gradeRowsNamed("1.4462")).size() == 2);
    CHECK(must(shop().gradeRowsNamed("S31803")).size() == 3);
    CHECK(must(shop().gradeRowsNamed("")).empty());
    CHECK(must(shop().treatmentsFor("en-1.4404-3")).size() == must(shop().treatmentsFor("en-1.4404")).size());
    CHECK(must(shop().treatmentsFor("en-1.44")).empty());
}

TEST_CASE("an empty store has the library and no shop", "[demo]") {
    QTemporaryDir folder;
    const Store store = must(createEmpty(folder.filePath("new.store")));
    CHECK(must(store.grades()).size() == 432 + 185);
    CHECK(must(store.furnaces()).empty());
    CHECK(must(store.heats()).empty());
    CHECK_FALSE(must(store.shop()).today.isValid());
    CHECK_THAT(refusal(createEmpty(store.path())), Catch::Contains("the file exists already"));
    CHECK_THAT(refusal(createEmpty("/nowhere/new.store")), Catch::Contains("/nowhere/new.store"));
    CHECK_FALSE(QFile::exists(store.path() + ".part"));
}

TEST_CASE("a shop file with a mistake is refused with its place", "[demo]") {
    const QString path = QString::fromStdString(productPath("db/demo/shop.json").string());
    QFile source(path);
    REQUIRE(source.open(QIODevice::ReadOnly));
    const QByteArray whole = source.readAll();
    const auto with = [&](const QByteArray& from, const QByteArray& to) {
        QTemporaryDir folder;
        QFile file(folder.filePath("shop.json"));
        REQUIRE(file.open(QIODevice::WriteOnly));
        QByteArray text = whole;
        const qsizetype at = text.indexOf(from);
        REQUIRE(at >= 0);
        file.write(text.replace(at, from.size(), to));
        file.close();
        return refusal(readShopFile(file.fileName()));
    };
    CHECK(with("\"2025-08-18\"", "\"18.08.2025\"") ==
          "shop.json: furnace F1: survey_due \"18.08.2025\" is not a date like 2025-04-02");
    CHECK(with("[600, 1150]", "[600]") == "shop.json: furnace F1: range_C must hold 2 numbers");
    CHECK(with("\"setpoint_C\": 1060", "\"setpoint_F\": 1060") == "shop.json: cycle SA-300: setpoint_C is missing");
    CHECK(with("\"low\": 40, \"high\": 60", "\"low\": 60, \"high\": 40") ==
          "shop.json: cycle SA-22: limit fraction: low must lie below high");
    CHECK_THAT(with("\"quenches\": [", "\"quenches\": [,"), Catch::StartsWith("shop.json: "));
}
