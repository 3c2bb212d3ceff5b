// SPDX-License-Identifier: GPL-3.0-or-later
#include <QFile>
#include <QPdfWriter>
#include <QProcess>
#include <QStandardPaths>
#include <QTemporaryDir>

#include "look.h"
#include "planner/sheet/code.h"
#include "planner/sheet/packet.h"
#include "sample.h"

using namespace soak;

namespace {

QByteArray bytesOf(const QString& path) {
    QFile file(path);
    REQUIRE(file.open(QIODevice::ReadOnly));
    return file.readAll();
}

/// One module's value as a camera sees it: the picture's dot at its centre.
bool isDark(const QImage& image, const CodeMark& code, int row, int column, double dots_per_mm) {
    const double module = code.at.width() / (code.modules + 8);
    const QPointF centre = code.at.topLeft() + QPointF(column + 4.5, row + 4.5) * module;
    return qGray(image.pixel((centre * dots_per_mm).toPoint())) < 128;
}

}  // namespace

TEST_CASE("every kind of sheet is written as PDF and PNG to be looked at", "[render]") {
    struct Sample {
        const char* name;
        SheetContent content;
        Paper paper;
        const char* language;
        const char* second;
    };
    const std::vector<Sample> samples = {{"a4", sample::solutionAnneal(), Paper::a4, "en", ""},
                                         {"letter", sample::solutionAnneal(), Paper::letter, "en", ""},
                                         {"german", sample::solutionAnneal(), Paper::a4, "de", ""},
                                         {"english-polish", sample::solutionAnneal(), Paper::a4, "en", "pl"},
                                         {"portuguese", sample::harden(), Paper::a4, "pt", ""},
                                         {"draft", sample::draft(), Paper::a4, "en", ""},
                                         {"fahrenheit", sample::harden(), Paper::letter, "en", ""},
                                         {"overlong", sample::overlong(), Paper::a4, "en", ""}};
    for (const Sample& one : samples) {
        SheetOptions options;
        options.paper = one.paper;
        options.language = one.language;
        options.second_language = one.second;
        options.record_page = options.second_language == "pl";
        const QString stem = QString(SHEET_SAMPLES) + "/" + one.name;
        const auto written = renderPdf(one.content, options, stem + ".pdf");
        if (!written) FAIL(written.error().text());
        const PreparedSheet sheet = prepared(one.content, options);
        for (size_t page = 0; page < sheet.pages.size(); ++page)
            CHECK(pageImage(sheet, page, 100).save(QString("%1-%2.png").arg(stem).arg(page + 1)));
    }
}

TEST_CASE("the PDF has the paper's size, its pages and its own embedded font", "[render]") {
    QTemporaryDir folder;
    for (const auto& [paper, box] :
         {std::pair(Paper::a4, "/MediaBox [0 0 595"), std::pair(Paper::letter, "/MediaBox [0 0 612")}) {
        SheetOptions options;
        options.paper = paper;
        REQUIRE(renderPdf(sample::solutionAnneal(), options, folder.filePath("sheet.pdf")));
        const QByteArray pdf = bytesOf(folder.filePath("sheet.pdf"));
        CHECK(pdf.startsWith("%PDF-"));
        CHECK(pdf.contains(box));
        CHECK(pdf.contains("/Count 1"));
        CHECK(pdf.count("/FontFile2 ") == 2);  // regular and bold, nothing borrowed from another family
        CHECK(pdf.count("/FontDescriptor ") == 2);
    }
}

TEST_CASE("a PDF that cannot be written leaves what was there and says why", "[render]") {
    QTemporaryDir folder;
    const QString path = folder.filePath("sheet.pdf");
    REQUIRE(renderPdf(sample::solutionAnneal(), {}, path));
    const QByteArray before = bytesOf(path);
    SheetContent refused = sample::solutionAnneal();
    refused.revision.clear();
    CHECK_FALSE(renderPdf(refused, {}, path));
    CHECK(bytesOf(path) == before);
    const auto nowhere = renderPdf(sample::solutionAnneal(), {}, folder.filePath("no/such/folder/sheet.pdf"));
    REQUIRE_FALSE(nowhere);
    CHECK(nowhere.error().message.find("no/such/folder") != std::string::npos);
}

TEST_CASE("a page is the same on a device that keeps its own margins and resolution", "[render]") {
    const PreparedSheet sheet = prepared(sample::overlong());
    QTemporaryDir folder;
    QPdfWriter writer(folder.filePath("printer.pdf"));
    writer.setResolution(300);
    writer.setPageMargins(QMarginsF(20, 20, 20, 20), QPageLayout::Millimeter);
    writer.setPageOrientation(QPageLayout::Landscape);
    REQUIRE(printSheet(sheet, writer));
    CHECK(writer.pageLayout().orientation() == QPageLayout::Portrait);
    CHECK(writer.pageLayout().paintRect(QPageLayout::Millimeter).width() == Approx(210).margin(0.2));  // A4, ISO 216
}

TEST_CASE("the notices of a refused template reach the caller of the PDF", "[render]") {
    QTemporaryDir folder;
    QFile broken(folder.filePath("layout.toml"));
    REQUIRE(broken.open(QIODevice::WriteOnly));
    broken.write("fonts = 3");
    broken.close();
    SheetOptions options;
    options.templates = folder.path();
    QStringList notices;
    REQUIRE(renderPdf(sample::solutionAnneal(), options, folder.filePath("sheet.pdf"), &notices));
    CHECK(notices.size() == 1);
}

TEST_CASE("the QR code on paper holds the sheet's identity", "[render]") {
    const SheetContent content = sample::solutionAnneal();
    const PreparedSheet sheet = prepared(content);
    REQUIRE(sheet.pages[0].marks.codes.size() == 1);
    const CodeMark& onPage = sheet.pages[0].marks.codes[0];
    const auto encoded = codeOf(content.qr_payload, onPage.at);
    REQUIRE(encoded);
    REQUIRE(onPage.modules == encoded.value().modules);
    CHECK(onPage.at.width() / (onPage.modules + 8) >= 0.4);  // mm a module: what a telephone reads at arm's length

    const double dots_per_mm = 150 / 25.4;
    const QImage image = pageImage(sheet, 0, 150);
    int wrong = 0;
    for (int row = 0; row < onPage.modules; ++row)
        for (int column = 0; column < onPage.modules; ++column)
            wrong += isDark(image, onPage, row, column, dots_per_mm) !=
                     encoded.value().dark.testBit(row * onPage.modules + column);
    CHECK(wrong == 0);
}

TEST_CASE("a scanner reads the QR code back from the page, and from a bad copy of it", "[render]") {
    const QString scanner = QStandardPaths::findExecutable("zbarimg");
    if (scanner.isEmpty()) {
        WARN("zbarimg is not installed (Debian package zbar-tools): the code was compared dot by dot only");
        return;
    }
    const SheetContent content = sample::solutionAnneal();
    QTemporaryDir folder;
    const QImage page = pageImage(prepared(content), 0, 150);
    const QImage copy = page.convertToFormat(QImage::Format_Mono, Qt::ThresholdDither);
    for (const QImage& image : {page, copy}) {
        const QString path = folder.filePath("page.png");
        REQUIRE(image.save(path));
        QProcess process;
        process.start(scanner, {"--raw", "--quiet", "-Sdisable", "-Sqrcode.enable", path});
        REQUIRE(process.waitForFinished());
        CHECK(QString::fromUtf8(process.readAllStandardOutput()).trimmed() == content.qr_payload);
    }
}

TEST_CASE("an identity too long for a QR code is refused", "[render]") {
    SheetContent content = sample::solutionAnneal();
    content.qr_payload = QString(4000, 'x');
    const auto sheet = prepareSheet(content, {});
    REQUIRE_FALSE(sheet);
    CHECK(sheet.error().message.find("does not fit a QR code") != std::string::npos);
}

TEST_CASE("a job packet holds the sheet, its record page and what it rests on", "[render]") {
    Heat heat;
    heat.number = "K40217";
    heat.grade = "1.4307";
    heat.source = "heats.csv line 2";
    Content carbon;
    carbon.raw = "0,019";
    carbon.wt = 0.019;
    carbon.digit_wt = 0.001;
    heat.analysis["C"] = carbon;
    const SheetContent content = sample::solutionAnneal();
    const QString text = packetText(content, heat);
    for (const QString& words : {QString("2025-0412 rev B"), QString("0,019"), QString("heats.csv line 2"),
                                 QString("delta ferrite begins"), content.decision_rule, content.qr_payload})
        CHECK(text.contains(words.toHtmlEscaped()));
    CHECK(packetText(content, {}).contains("no longer holds"));
    const QString path = QString(SHEET_SAMPLES) + "/packet.pdf";
    const auto written = renderPacket(content, heat, {}, path);
    REQUIRE(written);
    CHECK(bytesOf(path).contains("/Count 3"));  // sheet, record, text
}
