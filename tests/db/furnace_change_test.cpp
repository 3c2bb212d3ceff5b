// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/furnace_change.h"

#include <QJsonDocument>
#include <QTemporaryDir>

#include "db/demo.h"
#include "db/journal.h"
#include "db/shop_file.h"
#include "words.h"

using namespace soak;

namespace {
const Act kQuality{"quality manager", "2025-04-02", "accuracy test of today"};
}

TEST_CASE("a furnace's record is changed on what was seen, with both records kept", "[furnace]") {
    QTemporaryDir folder;
    Store office = must(createDemoShop(folder.filePath("a.store")));
    Store bay = must(Store::open(office.path()));
    Furnace f1 = must(office.furnace("F1"));
    const int seen = must(furnaceVersion(office, "F1"));
    f1.offset_K = 9;
    f1.accuracy_tested = QDate(2025, 4, 2);
    f1.accuracy_due = QDate(2025, 4, 30);
    f1.survey.push_back({1140, -11, 11});
    CHECK_THAT(refusal(changeFurnace(office, f1, seen, {"quality manager", "", " "})),
               Catch::Contains("a reason is needed"));
    CHECK(must(changeFurnace(office, f1, seen, kQuality)) == seen + 1);

    Furnace other = f1;
    other.offset_K = 1.7;
    other.survey.pop_back();
    const std::string words = refusal(changeFurnace(bay, other, seen, {"bay 1", "2025-04-02", "note"}));
    CHECK_THAT(words, Catch::Contains("it was changed meanwhile") && Catch::Contains("offset_K 9 -> 1.7"));

    const Furnace back = must(bay.furnace("F1"));
    CHECK(back.offset_K == 9);
    CHECK(back.survey.size() == 4);
    CHECK(back.quenches == must(office.furnace("F1")).quenches);
    CHECK(must(bay.furnaces()).front().id == "F1");
    const auto entries = must(journal(office, "furnace", "F1"));
    CHECK(entries.back().action == "changed");
    CHECK(entries.back().detail.contains("\"offset_K\":1.7"));
    CHECK(entries.back().detail.contains("\"offset_K\":9"));
    const QJsonObject to = QJsonDocument::fromJson(entries.back().detail).object()["to"].toObject();
    CHECK(furnaceDifferences(must(furnaceFrom(to)), back).isEmpty());
    CHECK(must(office.check()).isEmpty());
    CHECK_THAT(refusal(furnaceVersion(office, "F99")), Catch::Contains("not in the store"));
}

TEST_CASE("a record that cannot be is refused in words", "[furnace]") {
    Furnace f;
    f.id = "F9";
    f.maximum_C = 1100;
    f.uniformity_class = "2";
    f.survey = {{900, -4, 5}, {850, -7, 6}, {1000, 3, -2}};
    f.surveyed = QDate(2025, 4, 2);
    f.survey_due = QDate(2025, 1, 2);
    const QString words = furnaceFindings(f).join('\n');
    CHECK(words.contains("survey at 850 °C: temperatures must rise"));
    CHECK(words.contains("survey at 850 °C: -7 to 6 K is wider than class 2 allows, ±6 K"));
    CHECK(words.contains("survey at 1000 °C: the coldest point is hotter"));
    CHECK(words.contains("the next survey is due before the last one"));
    f.survey = {{900, -4, 5}};
    f.survey_due = QDate(2025, 7, 2);
    CHECK(furnaceFindings(f).isEmpty());
    QTemporaryDir folder;
    const Store store = must(createDemoShop(folder.filePath("a.store")));
    for (const Furnace& one : must(store.furnaces())) {
        INFO(one.id.toStdString());
        CHECK(furnaceFindings(one).join('\n') == QString());
    }
}
