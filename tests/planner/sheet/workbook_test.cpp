// SPDX-License-Identifier: GPL-3.0-or-later
// The workbooks: what stands in their cells, that the formulas are live, and that a spreadsheet program agrees.
#include <catch2/catch.hpp>

#include <QDir>
#include <QFile>
#include <QProcess>
#include <QRegularExpression>
#include <QStandardPaths>
#include <QTemporaryDir>
#include <QXmlStreamReader>
#include <map>

#include "look.h"
#include "planner/core/verdict.h"
#include "planner/sheet/workbook.h"
#include "sample.h"

using namespace soak;

namespace {

struct BookCell {
    QString formula, value;
};
using BookCells = std::map<QString, BookCell>;

QByteArray partOf(const QString& book, const QString& part) {
    QProcess unzip;
    unzip.start("unzip", {"-p", book, part});
    REQUIRE(unzip.waitForFinished());
    return unzip.readAllStandardOutput();
}

QStringList sharedTexts(const QString& book) {
    QStringList texts;
    QXmlStreamReader xml(partOf(book, "xl/sharedStrings.xml"));
    while (!xml.atEnd())
        if (xml.readNextStartElement() || !xml.atEnd())
            if (xml.isStartElement() && xml.name() == QString("t")) texts << xml.readElementText();
    return texts;
}

BookCells cellsOf(const QString& book, int sheet) {
    const QStringList texts = sharedTexts(book);
    BookCells cells;
    QString at, kind;
    QXmlStreamReader xml(partOf(book, QString("xl/worksheets/sheet%1.xml").arg(sheet)));
    while (!xml.atEnd()) {
        if (xml.readNext() != QXmlStreamReader::StartElement) continue;
        if (xml.name() == QString("c")) {
            at = xml.attributes().value("r").toString();
            kind = xml.attributes().value("t").toString();
        } else if (xml.name() == QString("f") && !at.isEmpty()) {
            cells[at].formula = xml.readElementText();
        } else if (xml.name() == QString("v") && !at.isEmpty()) {
            const QString value = xml.readElementText();
            cells[at].value = kind == "s" ? texts.value(value.toInt()) : value;
        }
    }
    REQUIRE_FALSE(xml.hasError());
    return cells;
}

Limit limit(Side side, const QString& cause, double at_C, double uncertainty_K) {
    Limit made;
    made.side = side;
    made.cause = cause;
    made.source = "invented";
    made.temperature_C = at_C;
    made.uncertainty_K = uncertainty_K;
    made.set = uncertainty_K == 0;
    return made;
}

/// The metal sees 11 K on each side of the setpoint; verdict and margin by core.
TriageRow rowAt(const QString& heat, double setpoint_C) {
    WindowAnswer answer;
    answer.setpoint_C = answer.band.setpoint_C = setpoint_C;
    answer.band.low_C = setpoint_C - 11;
    answer.band.high_C = setpoint_C + 11;
    answer.band.rule = "added up";
    answer.floors = {limit(Side::floor, "specification minimum 1040 °C", 1040, 0),
                     limit(Side::floor, "M23C6 dissolved + 20 K", 905.25, 14)};
    answer.ceilings = {limit(Side::ceiling, "delta ferrite begins", 1110.5, 12)};
    decide(answer, {}, {});
    TriageRow row;
    row.heat = heat;
    row.grade = "1.4307";
    row.cycle = "SA-300";
    row.furnace = "F2";
    row.setpoint_C = setpoint_C;
    row.verdict = answer.verdict;
    row.margin_K = answer.margin_K;
    row.reason = answer.reason;
    row.grade_verdict = "passes";
    row.answer = std::move(answer);
    return row;
}

std::vector<TriageRow> delivery() {
    TriageRow held;
    held.heat = "0007";  // must stay text
    held.verdict = Verdict::notComputed;
    held.reason = "Not computed: the row is held: line 4";
    return {held, rowAt("K1", 1100), rowAt("K2", 1053), rowAt("K3", 1070)};
}

ShopRules rules() {
    ShopRules made;
    made.today = QDate(2025, 4, 2);
    made.band_rule = "added up";
    return made;
}

struct Written {
    QTemporaryDir folder;
    QString path = folder.filePath("book.xlsx");
};

/// Every sheet of a workbook as text after a spreadsheet program has recalculated all of it; empty without one.
QString recalculated(const QString& book) {
    const QString program = QStandardPaths::findExecutable("soffice");
    if (program.isEmpty()) return {};
    QTemporaryDir home;
    REQUIRE(QDir(home.path()).mkpath("user"));
    QFile settings(home.filePath("user/registrymodifications.xcu"));
    REQUIRE(settings.open(QIODevice::WriteOnly));
    settings.write(R"(<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry" xmlns:xs="http://www.w3.org/2001/XMLSchema"
 xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance">
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse">
<value>0</value></prop></item></oor:items>)");
    settings.close();
    QProcess office;
    office.start(program, {"-env:UserInstallation=file://" + home.path(), "--headless", "--convert-to",
                           "csv:Text - txt - csv (StarCalc):9,34,76,1,,0,false,true,false,false,false,-1", "--outdir",
                           home.filePath("out"), book});
    REQUIRE(office.waitForFinished(300000));
    INFO(office.readAllStandardError().toStdString());
    QString all;
    for (const QFileInfo& file : QDir(home.filePath("out")).entryInfoList({"*.csv"}, QDir::Files)) {
        QFile sheet(file.filePath());
        REQUIRE(sheet.open(QIODevice::ReadOnly));
        all += QString::fromUtf8(sheet.readAll());
    }
    REQUIRE_FALSE(all.isEmpty());
    return all;
}

}  // namespace

TEST_CASE("a triage workbook holds every row, with the computed value beside each formula", "[workbook]") {
    const Written book;
    const auto rows = delivery();
    const auto written = writeTriageWorkbook(rows, rules(), book.path);
    REQUIRE(written);
    const BookCells triage = cellsOf(book.path, 1);
    CHECK(triage.at("B5").value == "0007");
    CHECK(triage.at("J5").value == "not computed");
    CHECK(triage.at("J5").formula.isEmpty());
    for (int i = 1; i < int(rows.size()); ++i) {
        const QString line = QString::number(5 + i);
        const TriageRow& row = rows[size_t(i)];
        CHECK(triage.at("B" + line).value == row.heat);
        CHECK(triage.at("F" + line).value.toDouble() == row.setpoint_C);
        CHECK(triage.at("F" + line).formula.isEmpty());  // the cell to try another setpoint in
        CHECK(triage.at("G" + line).value.toDouble() == row.answer->band.low_C);
        CHECK(triage.at("G" + line).formula == "F" + line + "+S" + line);
        CHECK(triage.at("I" + line).value.toDouble() == Approx(*row.margin_K));
        CHECK(triage.at("I" + line).formula.contains("MINIFS"));
        CHECK(triage.at("J" + line).value == word(row.verdict));
        CHECK(triage.at("J" + line).formula.startsWith("IF("));
    }
    CHECK(triage.at("J6").value == "outside");
    CHECK(triage.at("J7").value == "tight");
    CHECK(triage.at("J8").value == "inside");
    const BookCells limits = cellsOf(book.path, 2);
    CHECK(limits.at("F6").value.toDouble() == 905.25);
    CHECK(limits.at("H6").value.toDouble() == 14);  // one standard uncertainty, more than the shop's 10 K
    CHECK(limits.at("I7").value.toDouble() == Approx(1110.5 - 1111));
}

TEST_CASE("a triage workbook can be filtered, is marked by verdict and has charts", "[workbook]") {
    const Written book;
    REQUIRE(writeTriageWorkbook(delivery(), rules(), book.path));
    const QByteArray triage = partOf(book.path, "xl/worksheets/sheet1.xml");
    CHECK(triage.contains("<autoFilter ref=\"A4:T8\"/>"));
    CHECK(triage.contains("conditionalFormatting sqref=\"J5:J8\""));
    CHECK(triage.contains("dataBar"));
    CHECK(triage.contains("state=\"frozen\""));
    for (const char* chart : {"xl/charts/chart1.xml", "xl/charts/chart2.xml"})
        CHECK(!partOf(book.path, chart).isEmpty());
    CHECK(partOf(book.path, "xl/charts/chart2.xml").contains("Triage!$I$5:$I$8"));
}

TEST_CASE("a spreadsheet program recalculates the triage to what core says", "[workbook]") {
    const Written book;
    auto rows = delivery();
    for (TriageRow& row : rows) {  // what is stored beside the formulas is wrong here, so only a recalculation is right
        if (row.margin_K) row.margin_K = 999;
        if (row.answer) row.verdict = Verdict::noWindow;
    }
    REQUIRE(writeTriageWorkbook(rows, rules(), book.path));
    const QString text = recalculated(book.path);
    if (text.isEmpty()) {
        WARN("no spreadsheet program here: formulas not recalculated");
        return;
    }
    CHECK_FALSE(text.contains("Err:"));
    CHECK_FALSE(text.contains("#NAME"));
    CHECK_FALSE(text.contains("#VALUE"));
    CHECK_FALSE(text.contains("999"));
    const QStringList lines = text.split('\n');
    for (const TriageRow& row : delivery()) {
        if (!row.answer) continue;
        const QStringList found = lines.filter(QRegularExpression("^\\d+\t" + row.heat + "\t1.4307\t"));
        REQUIRE(found.size() == 1);
        const QStringList cells = found.front().split('\t');
        CHECK(cells[8].toDouble() == Approx(*row.margin_K).margin(0.06));
        CHECK(cells[9] == word(row.verdict));
    }
    CHECK(lines.filter(QRegularExpression("^(inside|tight|outside|not computed)\t1\\b")).size() == 4);
}

TEST_CASE("the sheet's workbook follows its setpoint, in the controller's unit", "[workbook]") {
    for (const SheetContent& content : {sample::solutionAnneal(), sample::harden()}) {
        const Written book;
        SheetOptions options;
        options.second_language = "de";
        REQUIRE(writeSheetWorkbook(content, options, book.path));
        const BookCells cells = cellsOf(book.path, 1);
        QStringList values, formulas;
        for (const auto& [at, cell] : cells) {
            values << cell.value;
            if (!cell.formula.isEmpty()) formulas << cell.formula;
        }
        CHECK(values.contains(QString::number(content.setpoint.controller.value)));
        CHECK(values.contains(QString::number(content.metal_low.controller.value)));
        CHECK(values.filter("Sheet 2025-0412 rev B").size() == 1);
        CHECK(values.filter("Sollwert").size() > 0);
        CHECK(formulas.filter(QRegularExpression("^B\\d+[+-]\\d+$")).size() == 2);  // coldest and hottest metal
        CHECK(formulas.filter("MOD(").size() == (content.max_delay ? 2 : 1));       // soak end, quench delay
        const QString text = recalculated(book.path);
        CHECK_FALSE(text.contains("Err:"));
        CHECK_FALSE(text.contains("#NAME"));
    }
}

TEST_CASE("a draft's workbook says so and has no number", "[workbook]") {
    const Written book;
    REQUIRE(writeSheetWorkbook(sample::draft(), {}, book.path));
    const QByteArray texts = partOf(book.path, "xl/sharedStrings.xml");
    CHECK(texts.contains("Draft, no number"));
    CHECK(texts.contains("survey of F6 overdue"));
    CHECK_FALSE(texts.contains("2025-0412"));
}

TEST_CASE("a workbook that cannot be written is an error that names it, and nothing is left behind", "[workbook]") {
    const QTemporaryDir folder;
    const QString path = folder.filePath("no/such/folder/book.xlsx");
    const auto written = writeTriageWorkbook(delivery(), rules(), path);
    REQUIRE_FALSE(written);
    CHECK(written.error().fault == Fault::store);
    CHECK(written.error().text().find("book.xlsx") != std::string::npos);
    CHECK(QDir(folder.path()).isEmpty());
}
