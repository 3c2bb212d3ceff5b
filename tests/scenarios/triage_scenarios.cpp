// SPDX-License-Identifier: GPL-3.0-or-later
#include <set>

#include "quillmere.h"

using namespace soak;

namespace {

TriageQuestion question(int threads) {
    auto made = triageFrom(*quillmere::works().store, quillmere::delivery("db/demo/heats.csv"), {});
    REQUIRE(made);
    made.value().threads = threads;
    return std::move(made).value();
}

const std::vector<TriageRow>& answers() {
    static const std::vector<TriageRow> rows = triage(question(2), *quillmere::works().shelf);
    return rows;
}

const TriageRow& rowOf(const QString& heat) {
    for (const TriageRow& row : answers())
        if (row.heat == heat) return row;
    FAIL("no row for " << heat.toStdString());
    return answers().front();
}

QString all(const TriageRow& row) { return row.reason + " " + row.findings.join(' '); }

}  // namespace

// The delivery's oddities are intended; its notes say what a careful tool should do with each.
TEST_CASE("7: every row of the delivery is answered, refused ones with line, column and reason", "[delivery]") {
    std::set<QString> heats;
    for (const TriageRow& row : answers()) {
        heats.insert(row.heat);
        CHECK_FALSE(row.reason.isEmpty());
    }
    CHECK(heats.size() == 60);
    CHECK(needsDecision(answers()));

    CHECK(all(rowOf("D8820")).contains("line 26"));
    CHECK(all(rowOf("D8820")).contains("264.7"));  // the sum, about 265 %
    CHECK(all(rowOf("T-21-0463")).contains("column C"));
    CHECK(all(rowOf("T-21-0463")).contains("0.021"));
    CHECK(all(rowOf("K40390")).contains("column Ti"));
    CHECK(all(rowOf("K41017")).contains("twice"));
    CHECK(all(rowOf("D7731")).contains("N missing"));
    CHECK(all(rowOf("P3310")).contains("Nb missing"));
    CHECK(all(rowOf("F2411/4")).contains("section"));
    CHECK(all(rowOf("503355")).contains("nearest grade: 1.4307"));
    CHECK(all(rowOf("S7709")).contains("nearest grade: 1.3243"));
    CHECK(all(rowOf("503361")).contains("swapped columns"));
    CHECK(all(rowOf("M1131")).contains("Mn 5.8 would fit as 0.58"));
    CHECK(all(rowOf("503240")).contains("decimal comma"));
    CHECK(all(rowOf("D7740")).contains("0.1740 wt%"));
    CHECK(rowOf("52E104").heat == "52E104");
    CHECK(rowOf("004731").heat == "004731");
    for (const char* held : {"D8820", "T-21-0463", "K40390", "K41017", "D7731", "P3310"})
        CHECK(rowOf(held).verdict == Verdict::notComputed);
}

TEST_CASE("triage: worst first, and every kind of cycle is judged", "[delivery]") {
    double last = -1e9;
    for (const TriageRow& row : answers()) {
        const bool has_margin =
            row.verdict == Verdict::inside || row.verdict == Verdict::tight || row.verdict == Verdict::outside;
        REQUIRE(row.margin_K.has_value() == has_margin);
        if (!has_margin) {
            CHECK(last == -1e9);  // none of these after the first margin
            continue;
        }
        CHECK(*row.margin_K >= last);
        last = *row.margin_K;
    }
    for (const TriageRow& row : answers()) CHECK_FALSE(row.reason.contains("judged"));
}

TEST_CASE("triage does not depend on the number of threads, counts its progress and can be cancelled") {
    TriageQuestion few = question(1);
    few.delivery.erase(few.delivery.begin() + 6, few.delivery.end());
    std::atomic<int> steps{0};
    const auto one = triage(few, *quillmere::works().shelf, [&](int, int total) {
        ++steps;
        CHECK(total == 6);
    });
    CHECK(steps == 6);
    few.threads = 4;
    const auto four = triage(few, *quillmere::works().shelf);
    REQUIRE(one.size() == four.size());
    for (std::size_t i = 0; i < one.size(); ++i) {
        CHECK(one[i].heat == four[i].heat);
        CHECK(one[i].reason == four[i].reason);
        CHECK(one[i].margin_K == four[i].margin_K);
    }
    const std::atomic<bool> stop{true};
    for (const TriageRow& row : triage(few, *quillmere::works().shelf, {}, &stop)) {
        CHECK(row.verdict == Verdict::notComputed);
        CHECK(row.reason.contains("cancelled"));
    }
}
