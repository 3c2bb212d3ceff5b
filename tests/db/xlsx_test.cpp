// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/xlsx.h"

#include <xlsxwriter.h>

#include <QTemporaryDir>

#include "base/folders.h"
#include "db/certificate.h"
#include "words.h"

using namespace soak;

namespace {

/// Makes a workbook with `fill` and gives its bytes.
template <class Fill>
QByteArray workbook(Fill fill) {
    const QTemporaryDir folder;
    const QByteArray path = folder.filePath("made.xlsx").toUtf8();
    lxw_workbook* book = workbook_new(path.constData());
    fill(book);
    REQUIRE(workbook_close(book) == LXW_NO_ERROR);
    return must(readFile(path));
}

lxw_format* format(lxw_workbook* book, const char* code) {
    lxw_format* made = workbook_add_format(book);
    format_set_num_format(made, code);
    return made;
}

/// A mill's sheet behind a cover: text cells with marks, number cells whose format says how many digits were printed.
QByteArray certificate() {
    return workbook([](lxw_workbook* book) {
        worksheet_write_string(workbook_add_worksheet(book, "Cover"), 2, 1, "See the next sheet", nullptr);
        lxw_worksheet* sheet = workbook_add_worksheet(book, "Analysen");
        lxw_format *three = format(book, "0.000"), *six_digits = format(book, "000000");
        worksheet_write_string(sheet, 0, 0, "Lieferant / Supplier: Werk X (invented)", nullptr);
        const char* header[] = {"Schmelze", "Werkstoff", "C", "Cr", "Ni", "N ppm", "Ti"};
        for (lxw_col_t i = 0; i < 7; ++i) worksheet_write_string(sheet, 3, i, header[i], nullptr);
        worksheet_write_number(sheet, 4, 0, 4731, six_digits);
        worksheet_write_string(sheet, 4, 1, "1.4307", nullptr);
        worksheet_write_number(sheet, 4, 2, 0.02, three);
        worksheet_write_number(sheet, 4, 3, 18.1, nullptr);
        worksheet_write_string(sheet, 4, 4, "8,05", nullptr);
        worksheet_write_number(sheet, 4, 5, 640, nullptr);
        worksheet_write_string(sheet, 4, 6, "<0,005", nullptr);
        worksheet_write_string(sheet, 6, 0, "52E104", nullptr);
        worksheet_write_string(sheet, 6, 1, "1.4301", nullptr);
        worksheet_write_number(sheet, 6, 2, 0.1 + 0.2, nullptr);
        worksheet_write_formula_num(sheet, 6, 3, "=9*2", nullptr, 18);
        worksheet_write_number(sheet, 6, 4, 8.25, format(book, "0.0"));
    });
}

}  // namespace

TEST_CASE("a workbook's cells come as a person sees them", "[xlsx]") {
    const std::vector<XlsxSheet> sheets = must(readXlsx(certificate(), "c.xlsx"));
    REQUIRE(sheets.size() == 2);
    CHECK(sheets[0].name == "Cover");
    const std::vector<CsvRow>& rows = sheets[1].rows;
    REQUIRE(rows.size() == 4);
    CHECK(rows[2].line == 5);
    CHECK(rows[2].cells == QStringList{"004731", "1.4307", "0.020", "18.1", "8,05", "640", "<0,005"});
    CHECK(rows[3].line == 7);
    // Noise of binary sums is gone, a format that hides digits does not round them away.
    CHECK(rows[3].cells == QStringList{"52E104", "1.4301", "0.3", "18", "8.25"});
}

TEST_CASE("a certificate is read from the sheet that holds one", "[xlsx]") {
    const Certificate read = must(readCertificateText(certificate(), "c.xlsx"));
    CHECK(read.file == "c.xlsx sheet Analysen");
    CHECK(read.supplier == "Werk X (invented)");
    REQUIRE(read.heats().size() == 2);
    const Heat heat = read.heats()[0];
    CHECK(heat.number == "004731");
    CHECK(heat.analysis.at("C").digit_wt == 0.001);
    CHECK(heat.analysis.at("C").raw == "0.020");
    CHECK(heat.analysis.at("N").wt == 0.064);
    CHECK(heat.analysis.at("Ni").wt == 8.05);
    CHECK(heat.analysis.at("Ti").less_than);
}

TEST_CASE("a workbook that is damaged, cut or none is refused in words", "[xlsx]") {
    const QByteArray whole = certificate();
    CHECK_THAT(refusal(readXlsx(whole.left(whole.size() / 2), "cut.xlsx")), Catch::Contains("cut short"));
    CHECK_THAT(refusal(readCertificateText("%PDF-1.4", "c.pdf")), Catch::Contains("a PDF"));
    CHECK_THAT(refusal(readCertificateText("\xD0\xCF\x11\xE0", "c.xls")), Catch::Contains("save it as .xlsx or CSV"));
    // Every byte wrong once in a while: an answer each time.
    for (qsizetype at = 0; at < whole.size(); at += 41) {
        QByteArray bad = whole;
        bad[at] = char(bad[at] ^ 0x5A);
        const auto read = readCertificateText(bad, "bad.xlsx");
        if (!read) CHECK_FALSE(read.error().message.empty());
    }
}
