// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/templates.h"

#include <QDir>
#include <QFile>
#include <QRawFont>
#include <QTemporaryDir>

#include "look.h"
#include "sample.h"

using namespace soak;

namespace {

QByteArray bytesOf(const QString& path) {
    QFile file(path);
    REQUIRE(file.open(QIODevice::ReadOnly));
    return file.readAll();
}

QByteArray english() { return bytesOf(":/soakwright/templates/sheet.en.toml"); }
QByteArray layoutFile() { return bytesOf(":/soakwright/templates/layout.toml"); }

QByteArray changed(QByteArray file, const char* from, const char* to) {
    REQUIRE(file.count(from) >= 1);
    return file.replace(from, to);
}

std::string refusalOf(const QByteArray& wording) {
    const auto parsed = Wording::parse(wording, "sheet.en.toml");
    REQUIRE_FALSE(parsed);
    CHECK(parsed.error().fault == Fault::data);
    return parsed.error().text();
}

std::string layoutRefusalOf(const QByteArray& layout) {
    const auto parsed = Layout::parse(layout, "layout.toml");
    REQUIRE_FALSE(parsed);
    CHECK(parsed.error().fault == Fault::data);
    return parsed.error().text();
}

void write(const QString& path, const QByteArray& bytes) {
    QFile file(path);
    REQUIRE(file.open(QIODevice::WriteOnly));
    REQUIRE(file.write(bytes) == bytes.size());
}

bool holds(const std::string& text, const char* part) { return text.find(part) != std::string::npos; }

}  // namespace

TEST_CASE("the templates compiled in are the ones in the templates folder", "[templates]") {
    const QDir builtIn(":/soakwright/templates"), source(QString(SOAKWRIGHT_SOURCE_DIR) + "/templates");
    const QStringList files = source.entryList({"*.toml"}, QDir::Files, QDir::Name);
    REQUIRE(files.size() >= 5);
    REQUIRE(builtIn.entryList({"*.toml"}, QDir::Files, QDir::Name) == files);
    for (const QString& file : files) CHECK(bytesOf(builtIn.filePath(file)) == bytesOf(source.filePath(file)));
}

TEST_CASE("every language is complete; only English is reviewed", "[templates]") {
    const QStringList languages = builtInLanguages();
    REQUIRE(languages == QStringList{"de", "en", "pl", "pt"});
    for (const QString& language : languages) {
        const auto wording = Wording::parse(bytesOf(":/soakwright/templates/sheet." + language + ".toml"), language);
        if (!wording) FAIL(wording.error().text());
        CHECK(wording.value().isDraft() == (language != "en"));
        CHECK_FALSE(wording.value().wordOrNothing("kind", "solution-anneal").isEmpty());
        CHECK_FALSE(wording.value().wordOrNothing("rule", "root of squares").isEmpty());
    }
}

TEST_CASE("a language that nobody has reviewed says so on the sheet", "[templates]") {
    SheetOptions options;
    options.language = "pl";
    CHECK(textOf(prepared(sample::solutionAnneal(), options)).contains(QString::fromUtf8("nikt ich nie sprawdził")));
    options.language = "en";
    options.second_language = "pl";
    CHECK(textOf(prepared(sample::solutionAnneal(), options)).contains("nobody has reviewed them"));
    options.second_language = "";
    CHECK_FALSE(textOf(prepared(sample::solutionAnneal(), options)).contains("nobody has reviewed"));
}

TEST_CASE("the font has every letter of every language, and figures of one width", "[templates]") {
    const auto layout = Layout::parse(layoutFile(), "layout.toml");
    REQUIRE(layout);
    const auto typesetter = Typesetter::of(layout.value(), 1.2);
    if (!typesetter) FAIL(typesetter.error().text());
    CHECK(typesetter.value().family() == layout.value().fonts.first());
    CHECK(typesetter.value().hasTabularFigures());
    for (const bool bold : {false, true}) {
        const QRawFont font = QRawFont::fromFont(typesetter.value().font({12, bold}));
        QString letters = QString::fromUtf8("0123456789°±−–×·…≤≥§ ");
        for (const QString& language : builtInLanguages())
            letters += QString::fromUtf8(bytesOf(":/soakwright/templates/sheet." + language + ".toml"));
        for (const QChar letter : letters) {
            if (letter == '\n') continue;
            INFO(QString(letter).toStdString() << " " << int(letter.unicode()));
            CHECK(font.supportsCharacter(letter));
        }
    }
}

TEST_CASE("a broken wording is refused with the key named", "[templates]") {
    CHECK(Wording::parse(english(), "sheet.en.toml"));
    CHECK(holds(refusalOf(changed(english(), "reads {temperature}.", "reads {temprature}.")), "soak.start"));
    CHECK(holds(refusalOf(changed(english(), "reads {temperature}.", "reads {temprature}.")),
                "unknown or repeated placeholder {temprature}"));
    CHECK(holds(refusalOf(changed(english(), "load sensor {sensor} reads", "the sensor reads")),
                "soak.start: placeholder {sensor} is missing"));
    CHECK(holds(refusalOf(changed(english(), "load sensor {sensor}", "{sensor} {sensor}")), "repeated placeholder"));
    CHECK(holds(refusalOf(changed(english(), "Stop. Tag. Call.", "Stop {now.")), "wrong.action: a brace"));
    CHECK(holds(refusalOf(changed(english(), "action = \"Stop. Tag. Call.\"", "")), "wrong.action is missing"));
    CHECK(holds(refusalOf(changed(english(), "action = \"Stop. Tag. Call.\"", "action = \" \"")), "wrong.action"));
    CHECK(holds(refusalOf(changed(english(), "action = \"Stop. Tag. Call.\"", "action = 7")), "wrong.action"));
    CHECK(holds(refusalOf(changed(english(), "[wrong]", "[wrong]\nextra = \"x\"")), "wrong.extra is unknown"));
    CHECK(holds(refusalOf(changed(english(), "[wrong]", "[wrong")), "line "));
    CHECK(holds(refusalOf(changed(english(), "decimal_mark = \".\"", "decimal_mark = \"\"")), "decimal_mark"));
    CHECK(holds(refusalOf(changed(english(), "temper = \"Temper\"", "temper = \"Temper {x}\"")), "kind.temper"));
}

TEST_CASE("a layout too small to read or to write in is refused with the entry named", "[templates]") {
    CHECK(Layout::parse(layoutFile(), "layout.toml"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "digit = 16", "digit = 14")), "size_mm.digit is 14; write 15"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "body = 12", "body = 9")), "type_pt.body is 9; write 12"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "box = 10", "box = 8")), "size_mm.box is 8"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "box = 10", "")), "size_mm.box is missing"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "box = 10", "box = \"big\"")), "size_mm.box"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "box = 10", "box = 10\nbux = 3")), "size_mm.bux is unknown"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "\"wrong\", ", "")), "sections must name each"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "\"Open Sans\", \"DejaVu Sans\"", "")), "fonts"));
    CHECK(holds(layoutRefusalOf(changed(layoutFile(), "box = 10", "box = nan")), "size_mm.box"));
}

TEST_CASE("a shop's own wording and layout are used", "[templates]") {
    QTemporaryDir shop;
    write(shop.filePath("sheet.en.toml"), changed(english(), "Stop. Tag. Call.", "Stop. Tag. Ring the office."));
    write(shop.filePath("layout.toml"), changed(layoutFile(), "digit = 16", "digit = 18"));
    SheetOptions options;
    options.templates = shop.path();
    const PreparedSheet sheet = prepared(sample::solutionAnneal(), options);
    CHECK(sheet.notices.isEmpty());
    CHECK(textOf(sheet).contains("Ring the office."));
    double highest = 0;
    for (const TextMark& mark : sheet.pages[0].marks.texts)
        highest = std::max(highest, sheet.typesetter.capHeight_mm(mark.type));
    CHECK(highest == Approx(18).margin(0.05));  // the font's size is a whole number of hundredths of a millimetre
}

TEST_CASE("a shop's broken template gives a message and the built-in one is printed", "[templates]") {
    const QString wanted = textOf(prepared(sample::solutionAnneal()));
    QTemporaryDir shop;
    write(shop.filePath("sheet.en.toml"), changed(english(), "reads {temperature}.", "is hot."));
    write(shop.filePath("layout.toml"), "nonsense");
    SheetOptions options;
    options.templates = shop.path();
    const PreparedSheet sheet = prepared(sample::solutionAnneal(), options);
    CHECK(textOf(sheet) == wanted);
    REQUIRE(sheet.notices.size() == 2);
    CHECK(sheet.notices[0].contains("layout.toml"));
    CHECK(sheet.notices[1].contains("soak.start: placeholder {temperature} is missing"));
    CHECK(sheet.notices[1].contains("the built-in template is used"));

    options.templates = shop.filePath("nowhere");
    const PreparedSheet other = prepared(sample::solutionAnneal(), options);
    CHECK(textOf(other) == wanted);
    REQUIRE(other.notices.size() == 1);
    CHECK(other.notices[0].contains("there is no such folder"));
}

TEST_CASE("a language without wording is refused and the known ones are named", "[templates]") {
    for (const char* language : {"fr", "../en", ""}) {
        SheetOptions options;
        options.language = language;
        const auto sheet = prepareSheet(sample::solutionAnneal(), options);
        INFO(language);
        REQUIRE_FALSE(sheet);
        CHECK(sheet.error().fault == Fault::input);
        CHECK(holds(sheet.error().message, "de, en, pl, pt"));
    }
}

TEST_CASE("numbers carry their unit, a thin space, a true minus sign and the language's decimal mark", "[templates]") {
    const auto german = Wording::parse(bytesOf(":/soakwright/templates/sheet.de.toml"), "de");
    const auto en = Wording::parse(english(), "en");
    REQUIRE((german && en));
    const QString thin(QChar(0x2009)), minus(QChar(0x2212));
    CHECK(en.value().number(Quantity{-46, 0, "°C"}) == minus + "46" + thin + QString::fromUtf8("°C"));
    CHECK(en.value().number(Quantity{-0.2, 0, "K"}) == "0" + thin + "K");
    CHECK(en.value().number(Quantity{0.25, 2, "mm"}) == "0.25" + thin + "mm");
    CHECK(german.value().number(Quantity{0.25, 2, "mm"}) == "0,25" + thin + "mm");
    CHECK(en.value().number(TwoUnits{{1060, 0, "°C"}, Quantity{1940, 0, "°F"}}) ==
          "1060" + thin + QString::fromUtf8("°C (1940") + thin + QString::fromUtf8("°F)"));
    CHECK(en.value().word("kind", "quench-and-partition") == "Quench-and-partition");
}
