// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/content.h"

#include "words.h"

using namespace soak;

namespace {

struct Case {
    const char* raw;
    AmountUnit unit;
    CellKind kind;
    double wt, digit_wt;
};

}  // namespace

TEST_CASE("a cell with a number is read in wt% and keeps its raw text", "[content]") {
    const Case cases[] = {
        {"0.048", AmountUnit::percent, CellKind::number, 0.048, 0.001},
        {"0,048", AmountUnit::percent, CellKind::number, 0.048, 0.001},
        {" 0,31 ", AmountUnit::percent, CellKind::number, 0.31, 0.01},
        {".5", AmountUnit::percent, CellKind::number, 0.5, 0.1},
        {"18", AmountUnit::percent, CellKind::number, 18, 1},
        {"0.82%", AmountUnit::percent, CellKind::number, 0.82, 0.01},
        {"0.82 wt.%", AmountUnit::percent, CellKind::number, 0.82, 0.01},
        {"1740 ppm", AmountUnit::percent, CellKind::number, 0.174, 0.0001},
        {"45 PPM", AmountUnit::percent, CellKind::number, 0.0045, 0.0001},
        {"1740", AmountUnit::ppm, CellKind::number, 0.174, 0.0001},
        {"0.174 %", AmountUnit::ppm, CellKind::number, 0.174, 0.001},
        {"35", AmountUnit::thousandth, CellKind::number, 0.035, 0.001},
        {"1,740", AmountUnit::percent, CellKind::number, 1.74, 0.001},
        {"<0.010", AmountUnit::percent, CellKind::censored, 0.01, 0.001},
        {"<0,01", AmountUnit::percent, CellKind::censored, 0.01, 0.01},
        {"< 1", AmountUnit::thousandth, CellKind::censored, 0.001, 0.001},
        {"\u2264 20 ppm", AmountUnit::percent, CellKind::censored, 0.002, 0.0001},
    };
    for (const Case& c : cases) {
        INFO(c.raw);
        const CellReading cell = readCell(c.raw, c.unit);
        CHECK(cell.kind == c.kind);
        REQUIRE(cell.content.wt);
        CHECK(*cell.content.wt == c.wt);  // the nearest double, not one next to it
        CHECK(cell.content.digit_wt == Approx(c.digit_wt));
        CHECK(cell.content.less_than == (c.kind == CellKind::censored));
        CHECK(cell.content.raw == QString(c.raw));
    }
}

TEST_CASE("a cell without a number never becomes one", "[content]") {
    for (const char* raw : {"nnw.", "n.n.", "n.d.", "N.N.", "trace", "Spuren", "not detected"}) {
        INFO(raw);
        const CellReading cell = readCell(raw);
        CHECK(cell.kind == CellKind::not_detected);
        CHECK(cell.content.less_than);
        CHECK_FALSE(cell.content.wt);
        CHECK_FALSE(cell.content.remark.isEmpty());
    }
    for (const char* raw : {"", "  ", "-", "\u2013", "--", "n.b."}) {
        INFO(raw);
        const CellReading cell = readCell(raw);
        CHECK(cell.kind == CellKind::missing);
        CHECK_FALSE(cell.content.less_than);
        CHECK_FALSE(cell.content.wt);
    }
    CHECK(readCell("Rest").kind == CellKind::balance);
}

TEST_CASE("what can be read two ways or not at all is refused with a reason", "[content]") {
    const std::pair<const char*, const char*> cases[] = {
        {"0.O21", "0.021 meant?"},       {"0,o21", "0.021 meant?"},
        {"-0.001", "instrument's zero"}, {"\u22120,002", "instrument's zero"},
        {"1.2.3", "not a number"},       {"5.2E+105", "spreadsheet"},
        {"0.017*", "not a number"},      {"1.740,5", "not a number"},
        {">0.1", "not a number"},        {"<-0.01", "instrument's zero"},
        {"nan", "not a number"},         {"inf", "not a number"},
        {"0x10", "not a number"},
    };
    for (const auto& [raw, reason] : cases) {
        INFO(raw);
        const CellReading cell = readCell(raw);
        CHECK(cell.kind == CellKind::refused);
        CHECK_FALSE(cell.content.wt);
        CHECK_THAT(cell.content.remark.toStdString(), Catch::Contains(reason));
        CHECK(cell.content.raw == QString(raw));
    }
    CHECK_THAT(readContent("1,740 ppm").remark.toStdString(), Catch::Contains("1.740 or 1740 ppm"));
    CHECK_THAT(readContent("1.740", AmountUnit::ppm).remark.toStdString(), Catch::Contains("1.740 or 1740 ppm"));
}

TEST_CASE("an amount is shown with the digits that were printed", "[content]") {
    CHECK(amountText(readContent("0,010")) == "0.010 wt%");
    CHECK(amountText(readContent("1740 ppm")) == "0.1740 wt%");
    CHECK(amountText(readContent("<0.005")) == "< 0.005 wt%");
    CHECK(amountText(readContent("-")).isEmpty());
}
