// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/certificate.h"

#include <algorithm>
#include <map>

#include "base/folders.h"
#include "db/csv.h"
#include "words.h"

using namespace soak;

namespace {

QString demo(const char* file) { return QString::fromStdString((productPath("db/demo") / file).string()); }

Certificate fromText(const QByteArray& text) { return must(readCertificateText(text, "test.csv")); }

const Heat& heat(const std::vector<Heat>& heats, const QString& number) {
    const auto found = std::find_if(heats.begin(), heats.end(), [&](const Heat& h) { return h.number == number; });
    if (found == heats.end()) FAIL("no heat " + number.toStdString());
    return *found;
}

double wt(const Analysis& analysis, const char* element) {
    const auto found = analysis.find(element);
    if (found == analysis.end() || !found->second.wt) FAIL("no value for " << element);
    return *found->second.wt;
}

}  // namespace

TEST_CASE("every row of the demonstration delivery is answered as expected", "[certificate]") {
    const CsvTable expected =
        must(CsvTable::read(TEST_DATA_DIR "/delivery_expected.csv", {"line", "heat", "outcome", "says"}));
    const Certificate certificate = must(readCertificate(demo("heats.csv")));
    REQUIRE(certificate.rows.size() == expected.size());
    std::map<int, const DeliveryItem*> item_at;  // by the line that an item began with
    const std::vector<DeliveryItem> delivery = certificate.delivery();
    for (const DeliveryItem& item : delivery) item_at[item.heat.source.section(' ', -1).toInt()] = &item;
    CHECK(delivery.size() == 61);

    const DeliveryItem* cast = nullptr;
    for (size_t i = 0; i < expected.size(); ++i) {
        const QString number = expected.text(i, "heat"), outcome = expected.text(i, "outcome"),
                      says = expected.text(i, "says");
        INFO(number.toStdString() << ", line " << expected.text(i, "line").toStdString());
        const CertificateRow& row = certificate.rows[i];
        CHECK(row.heat.number == number);
        CHECK(row.line == expected.text(i, "line").toInt());
        if (number == "D7718" && outcome == "usable") cast = item_at.at(row.line);
        const DeliveryItem* item = outcome == "second product" ? cast : item_at.at(row.line);
        REQUIRE(item);
        CHECK(item->held.isEmpty() == (outcome != "held"));
        if (outcome == "held") CHECK_THAT(item->held.toStdString(), Catch::StartsWith(says.toStdString()));
        if (outcome != "held") CHECK_THAT(item->findings.join('\n').toStdString(), Catch::Contains(says.toStdString()));
        if (outcome == "usable" && says.isEmpty()) CHECK(item->findings.isEmpty());
    }
}

TEST_CASE("the delivery's heats carry what was written", "[certificate]") {
    const std::vector<Heat> heats = must(readCertificate(demo("heats.csv"))).heats();
    CHECK(heats.size() == 56);
    CHECK(heat(heats, "004731").grade == "1.2379");
    CHECK(heat(heats, "52E104").analysis.at("N").raw == "45 ppm");
    CHECK(wt(heat(heats, "52E104").analysis, "N") == 0.0045);
    CHECK(heat(heats, "F2407/1").product_form == "casting");
    CHECK_FALSE(heat(heats, "F2411/4").section_mm);
    CHECK_FALSE(heat(heats, "D7731").analysis.at("N").wt);
    CHECK(heat(heats, "503240").analysis.at("Cr").raw == "18,19");
    CHECK(heat(heats, "503118").analysis.at("Nb").less_than);
    const Heat& cast = heat(heats, "D7718");
    REQUIRE(cast.other_products.size() == 1);
    CHECK(cast.other_products[0].form == "plate");
    CHECK(*cast.other_products[0].section_mm == 40);
    CHECK(*cast.section_mm == 110);
    CHECK(std::none_of(heats.begin(), heats.end(), [](const Heat& h) {
        return std::any_of(h.analysis.begin(), h.analysis.end(),
                           [](const auto& content) { return content.second.wt.value_or(0) < 0; });
    }));
}

TEST_CASE("a mill's export gives 15 heats and 30 analyses, none from other rows", "[certificate]") {
    const Certificate certificate = must(readCertificate(demo("cert-export.csv")));
    CHECK(certificate.rows.size() == 30);
    CHECK(std::all_of(certificate.rows.begin(), certificate.rows.end(), [](const auto& row) { return row.usable(); }));
    std::map<QString, int> others;
    for (const OtherLine& line : certificate.others) ++others[line.what];
    CHECK(others == std::map<QString, int>{{"header", 2}, {"units", 2}, {"limits", 2}, {"total", 1}, {"text", 8}});

    const std::vector<Heat> heats = certificate.heats();
    CHECK(heats.size() == 15);
    for (const Heat& h : heats) {
        INFO(h.number.toStdString());
        CHECK(h.analysis_kind == "ladle");
        REQUIRE(h.other_analyses.size() == 1);
        CHECK(h.other_analyses[0].kind == "product");
        CHECK(h.other_products.empty());
        CHECK(h.analysis.count("Fe") == 0);  // the balance is no content
    }
    const Heat& first = heat(heats, "D7718");
    CHECK(first.grade == "X2CrNiMoN22-5-3 / 1.4462");
    CHECK(first.product_form == "bar");
    CHECK(wt(first.analysis, "P") == 0.024);  // column in thousandths
    CHECK(wt(first.analysis, "N") == 0.172);  // column in ppm
    CHECK(wt(first.analysis, "B") == 0.0022);
    CHECK(wt(first.analysis, "O") == 0.0028);
    CHECK(wt(first.analysis, "Al") == 0.011);
    CHECK(wt(first.other_analyses[0].analysis, "Cr") == 22.27);
    const Heat& censored = heat(heats, "D7751");
    CHECK(censored.analysis.at("S").less_than);
    CHECK(wt(censored.analysis, "S") == 0.001);
    CHECK(censored.analysis.at("Ti").less_than);
    CHECK_FALSE(censored.analysis.at("Ti").wt);
    CHECK(*heat(heats, "D 7740").section_mm == 18);
    CHECK_FALSE(heat(heats, "D8825").other_analyses[0].analysis.at("C").wt);
    CHECK(wt(heat(heats, "D8825").analysis, "C") == 0.018);
}

TEST_CASE("exactly four typed cells differ from the mill's export", "[certificate]") {
    const std::vector<Heat> typed = must(readCertificate(demo("heats.csv"))).heats();
    const Certificate file = must(readCertificate(demo("heats.csv")));
    QStringList differ;
    for (const Heat& mill : must(readCertificate(demo("cert-export.csv"))).heats()) {
        const QString number = QString(mill.number).remove(' ');
        for (const CertificateRow& row : file.rows) {
            if (row.heat.number != number || differ.contains(number + " seen")) continue;
            for (const auto& [element, content] : row.heat.analysis)
                if (content.wt != mill.analysis.at(element).wt)
                    differ << number + " " + QString::fromStdString(element);
            break;
        }
    }
    CHECK(differ == QStringList{"D7731 N", "D7745 Mo", "D7745 N", "D8820 Cr"});
}

TEST_CASE("headers are understood in any case, with old names and units", "[certificate]") {
    const Certificate c =
        fromText("Cast;STEEL GRADE;cb;CR;N ppm;al tot;Al sol.;Mn [%]\nA1;304;0,02;18;450;0,01;0,005;1,2\n");
    CHECK(c.taken_for == QStringList{"heat", "grade", "Nb", "Cr", "N", "Al", "", "Mn"});
    const std::vector<Heat> heats = c.heats();
    REQUIRE(heats.size() == 1);
    CHECK(wt(heats[0].analysis, "Nb") == 0.02);
    CHECK(wt(heats[0].analysis, "N") == 0.045);
    CHECK(wt(heats[0].analysis, "Al") == 0.01);
}

TEST_CASE("a product row stands beside the ladle row whichever comes first", "[certificate]") {
    const std::vector<Heat> heats = fromText("heat,analysis,C,Cr,Ni\nA,P,0.02,18.1,8\nA,L,0.03,18,8.1\n").heats();
    REQUIRE(heats.size() == 1);
    CHECK(heats[0].analysis_kind == "ladle");
    CHECK(wt(heats[0].analysis, "C") == 0.03);
    CHECK(wt(heats[0].other_analyses.at(0).analysis, "C") == 0.02);
}

TEST_CASE("rows that cannot be used are held with the reason, the others go on", "[certificate]") {
    const Certificate c = fromText(
        "heat,grade,analysis,C,Cr,Ni\n"
        "A,304,L,0,05,18,8\n"   // a decimal comma without quotes
        ",304,L,0.05,18,8\n"    // no number
        "B,304,X,0.05,18,8\n"   // neither ladle nor product
        "C,304,L,0.05,60,50\n"  // 110 %
        "D,304,L,0.05,18,8\n"
        "E,304,L,0.05\n"         // ends early
        "D,316,L,0.05,18,8\n");  // same number, another grade
    const std::vector<DeliveryItem> items = c.delivery();
    REQUIRE(items.size() == 7);
    CHECK_THAT(items[0].held.toStdString(), Catch::Contains("line 2: 7 cells under a header of 6"));
    CHECK_THAT(items[1].held.toStdString(), Catch::Contains("line 3, column heat: the heat number is missing"));
    CHECK_THAT(items[2].held.toStdString(), Catch::Contains("neither ladle nor product"));
    CHECK_THAT(items[3].held.toStdString(), Catch::Contains("column Cr: \"60\": the analysis adds up to 110.0"));
    CHECK_THAT(items[4].held.toStdString(), Catch::Contains("different grades: 304 here and 316 in line 8"));
    CHECK(items[5].held.isEmpty());
    CHECK_THAT(items[5].findings.join('\n').toStdString(), Catch::Contains("the row ends after 4 of 6 cells"));
    CHECK_FALSE(items[6].held.isEmpty());
    CHECK(c.heats().size() == 1);
}

TEST_CASE("a row that names a heat and has no analysis is held, not dropped", "[certificate]") {
    const Certificate c = fromText("heat,grade,product,C,Cr,Ni\nA,304,bar,,,\nB,304,bar,0.05,18,8\nsee page 2,,,,,\n");
    REQUIRE(c.rows.size() == 2);
    CHECK(c.rows[0].held == "line 2: the row has no analysis");
    CHECK(c.rows[1].usable());
    CHECK(c.others.back().what == "text");
}

TEST_CASE("sums up to 100.5 % pass, and a bound is not added", "[certificate]") {
    CHECK(fromText("heat,C,Cr,Ni,Fe\nA,0.5,20,10,70\n").heats().size() == 1);
    CHECK(fromText("heat,C,Cr,Ni,Fe\nA,0.6,20,10,70\n").heats().empty());
    CHECK(fromText("heat,C,Cr,Ni,Fe\nA,<0.6,20,10,70\n").heats().size() == 1);
}

TEST_CASE("a file that is no certificate is refused, a broken one never crashes", "[certificate]") {
    CHECK_THAT(refusal(readCertificateText("a,b,c\n1,2,3\n", "x.csv")),
               Catch::StartsWith("x.csv: no header row found"));
    CHECK_THAT(refusal(readCertificateText("", "x.csv")), Catch::Contains("no header row"));
    CHECK_THAT(refusal(readCertificate("/nowhere/x.csv")), Catch::Contains("/nowhere/x.csv cannot be read"));
    // Cut and damaged at every place: the reader must answer something each time.
    const QByteArray whole = must(readFile(demo("cert-export.csv")));
    for (qsizetype cut = 0; cut < whole.size(); cut += 97) {
        QByteArray bytes = whole.left(cut);
        if (cut % 2) bytes.append("\";;\xFF\0\"", 6);
        const Result<Certificate> read = readCertificateText(bytes, "cut.csv");
        if (!read) continue;
        CHECK(read.value().heats().size() <= 15);
        for (const CertificateRow& row : read.value().rows) CHECK(row.line > 0);
    }
}
