// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/xlsx.h"

#include <zip.h>

#include <QRegularExpression>
#include <QXmlStreamReader>
#include <map>
#include <memory>
#include <optional>

namespace soak {
namespace {

constexpr zip_uint64_t kMostBytes = 256u << 20;  // a small file may unpack to anything
constexpr qsizetype kMostCells = 5'000'000, kMostColumns = 16'384;

Error refuse(const QString& name, const QString& message) {
    return {Fault::input, message.toStdString(), {}, {name.toStdString()}};
}

/// The parts of the package. Unpacking stops at kMostBytes in all.
class Package {
public:
    static std::optional<Package> open(const QByteArray& bytes) {
        zip_error_t error;
        zip_source_t* source = zip_source_buffer_create(bytes.constData(), zip_uint64_t(bytes.size()), 0, &error);
        zip_t* archive = source ? zip_open_from_source(source, ZIP_RDONLY, &error) : nullptr;
        if (archive) return Package(archive);
        zip_source_free(source);
        return {};
    }
    /// Nothing when there is no such part, or it is damaged, encrypted or too large.
    std::optional<QByteArray> part(const QString& name) {
        zip_stat_t about;
        const QByteArray path = name.toUtf8();
        if (zip_stat(archive_.get(), path.constData(), 0, &about) != 0) return {};
        if (!(about.valid & ZIP_STAT_SIZE) || about.size > kMostBytes - unpacked_) return {};
        // Deflate packs 1032 to 1 at best: a header that promises more is lying (RFC 1951).
        if (!(about.valid & ZIP_STAT_COMP_SIZE) || about.size > 1100 * (about.comp_size + 1)) return {};
        unpacked_ += about.size;
        const std::unique_ptr<zip_file_t, int (*)(zip_file_t*)> file(zip_fopen_index(archive_.get(), about.index, 0),
                                                                     zip_fclose);
        QByteArray bytes(qsizetype(about.size), '\0');
        if (!file || zip_fread(file.get(), bytes.data(), about.size) != zip_int64_t(about.size)) return {};
        return bytes;
    }

private:
    explicit Package(zip_t* archive) : archive_(archive, zip_discard) {}
    std::unique_ptr<zip_t, void (*)(zip_t*)> archive_;
    zip_uint64_t unpacked_ = 0;
};

/// Text of all <t> below the present element; phonetic guides (rPh) are not part of it. Counts instead of recursing:
/// a damaged file may nest as deep as it is long.
QString richText(QXmlStreamReader& xml) {
    QString text;
    for (int depth = 1; depth > 0 && !xml.atEnd();) {
        xml.readNext();
        if (xml.isEndElement()) --depth;
        if (!xml.isStartElement()) continue;
        if (xml.name() == u"t")
            text += xml.readElementText(QXmlStreamReader::SkipChildElements);
        else if (xml.name() == u"rPh")
            xml.skipCurrentElement();
        else
            ++depth;
    }
    return text;
}

QStringList sharedTexts(const QByteArray& part) {
    QXmlStreamReader xml(part);
    QStringList texts;
    xml.readNextStartElement();
    while (xml.readNextStartElement()) texts << richText(xml);
    return texts;
}

/// What a number format says about digits: how many decimals, and whole digits filled with zeros. Formats with anything
/// else in them (dates, exponents, colours) leave the number as it is stored.
struct Digits {
    int decimals = -1, whole = 0;
};

Digits digitsOf(const QString& code) {
    static const QRegularExpression plain(R"(^#?(0+)(\.(0+))?(_[^;])*(;.*)?$)");
    const QRegularExpressionMatch match = plain.match(QString(code).remove("#,##"));
    if (!match.hasMatch()) return {};
    return {int(match.capturedLength(3)), int(match.capturedLength(1))};
}

/// For each cell style (xf) its digits.
std::vector<Digits> cellFormats(const QByteArray& part) {
    // Built-in formats: ECMA-376 part 1, 18.8.30 (numFmt).
    std::map<int, QString> codes = {{1, "0"}, {2, "0.00"}, {3, "#,##0"}, {4, "#,##0.00"}};
    std::vector<Digits> formats;
    QXmlStreamReader xml(part);
    bool in_cell_xfs = false;
    while (!xml.atEnd()) {
        xml.readNext();
        if (xml.name() == u"cellXfs") in_cell_xfs = xml.isStartElement();
        if (!xml.isStartElement()) continue;
        if (xml.name() == u"numFmt")
            codes[xml.attributes().value("numFmtId").toInt()] = xml.attributes().value("formatCode").toString();
        if (in_cell_xfs && xml.name() == u"xf") {
            const auto code = codes.find(xml.attributes().value("numFmtId").toInt());
            formats.push_back(code == codes.end() ? Digits{} : digitsOf(code->second));
        }
    }
    return formats;
}

/// Workbooks store 0.018 as 1.7999999999999999E-2: fifteen digits are what was typed (ECMA-376 part 1, 18.3.1.96 keeps
/// a double). Sums of floating point numbers lose their noise in the same way.
QString numberText(const QString& stored, const Digits& digits) {
    bool is_number = false;
    const double value = stored.toDouble(&is_number);
    if (!is_number) return stored;
    const QString shortest = QString::number(value, 'g', 15);
    if (digits.decimals < 0 || value < 0) return shortest.contains('e') ? QString::number(value, 'f', 15) : shortest;
    // A format that hides digits must not round a chemistry: the longer form wins.
    QString shown = QString::number(value, 'f', digits.decimals);
    if (shown.toDouble() != shortest.toDouble() && !shortest.contains('e')) shown = shortest;
    const qsizetype point = shown.indexOf('.');
    const qsizetype whole = point < 0 ? shown.size() : point;
    return QString(std::max<qsizetype>(0, digits.whole - whole), '0') + shown;
}

/// "AB12" -> 27. Nothing when there are no letters.
std::optional<qsizetype> columnOf(QStringView reference) {
    qsizetype column = 0, letters = 0;
    for (; letters < reference.size() && letters < 4 && reference[letters] >= 'A' && reference[letters] <= 'Z';
         ++letters)
        column = column * 26 + (reference[letters].unicode() - 'A' + 1);
    return letters > 0 ? std::optional(column - 1) : std::nullopt;
}

struct Book {
    QStringList shared;
    std::vector<Digits> formats;
    qsizetype cells = 0;  ///< read so far, gaps included
};

QString cellText(QXmlStreamReader& xml, const Book& book) {
    const QXmlStreamAttributes attributes = xml.attributes();
    const QString type = attributes.value("t").toString();
    const auto style = size_t(attributes.value("s").toUInt());
    QString value;
    while (xml.readNextStartElement()) {
        if (xml.name() == u"v")
            value = xml.readElementText(QXmlStreamReader::SkipChildElements);
        else if (xml.name() == u"is")
            value = richText(xml);
        else
            xml.skipCurrentElement();
    }
    if (type == "s") return book.shared.value(value.toLongLong());
    if (!type.isEmpty() && type != "n") return value;
    return numberText(value, style < book.formats.size() ? book.formats[style] : Digits{});
}

std::optional<QString> readRow(QXmlStreamReader& xml, Book& book, CsvRow& row) {
    while (xml.readNextStartElement()) {
        if (xml.name() != u"c") {
            xml.skipCurrentElement();
            continue;
        }
        const qsizetype column = columnOf(xml.attributes().value("r")).value_or(row.cells.size());
        if (column >= kMostColumns) return "a cell lies beyond column XFD";
        while (row.cells.size() < column) row.cells << QString();
        const QString text = cellText(xml, book);
        if (column < row.cells.size())
            row.cells[column] = text;
        else
            row.cells << text;
    }
    book.cells += row.cells.size() + 1;
    return book.cells > kMostCells ? std::optional<QString>("the sheets have more than five million cells")
                                   : std::nullopt;
}

/// Fills the rows of one sheet; returns what is wrong with it, if anything.
std::optional<QString> readSheet(const QByteArray& part, Book& book, XlsxSheet& sheet) {
    QXmlStreamReader xml(part);
    int line = 0;
    while (!xml.atEnd()) {
        xml.readNext();
        if (!xml.isStartElement() || xml.name() != u"row") continue;
        bool numbered = false;
        const int own = xml.attributes().value("r").toInt(&numbered);
        line = numbered && own > line ? own : line + 1;
        CsvRow row{line, {}};
        if (auto wrong = readRow(xml, book, row)) return wrong;
        sheet.rows.push_back(std::move(row));
    }
    if (xml.hasError()) return "sheet \"" + sheet.name + "\" is damaged: " + xml.errorString();
    return {};
}

/// Relationship id -> path of the part.
std::map<QString, QString> relations(const QByteArray& part) {
    std::map<QString, QString> targets;
    QXmlStreamReader xml(part);
    while (!xml.atEnd()) {
        xml.readNext();
        if (!xml.isStartElement() || xml.name() != u"Relationship") continue;
        const QString target = xml.attributes().value("Target").toString();
        targets[xml.attributes().value("Id").toString()] = target.startsWith('/') ? target.mid(1) : "xl/" + target;
    }
    return targets;
}

/// Name and relationship id of every sheet.
std::vector<std::pair<QString, QString>> sheetList(const QByteArray& part) {
    std::vector<std::pair<QString, QString>> sheets;
    QXmlStreamReader xml(part);
    while (!xml.atEnd()) {
        xml.readNext();
        if (!xml.isStartElement() || xml.name() != u"sheet") continue;
        QString id;
        for (const QXmlStreamAttribute& attribute : xml.attributes())
            if (attribute.name() == u"id") id = attribute.value().toString();
        sheets.emplace_back(xml.attributes().value("name").toString(), id);
    }
    return sheets;
}

}  // namespace

bool isZip(const QByteArray& bytes) { return bytes.startsWith("PK\x03\x04"); }

Result<std::vector<XlsxSheet>> readXlsx(const QByteArray& bytes, const QString& name) {
    std::optional<Package> package = Package::open(bytes);
    if (!package) return refuse(name, "the workbook cannot be unpacked: it is damaged or cut short");
    const auto workbook = package->part("xl/workbook.xml"), links = package->part("xl/_rels/workbook.xml.rels");
    if (!workbook || !links) return refuse(name, "a zip file, but no workbook that can be read (an .xlsx file)");
    Book book;
    if (const auto part = package->part("xl/sharedStrings.xml")) book.shared = sharedTexts(*part);
    if (const auto part = package->part("xl/styles.xml")) book.formats = cellFormats(*part);
    const std::map<QString, QString> paths = relations(*links);
    std::vector<XlsxSheet> sheets;
    for (const auto& [title, id] : sheetList(*workbook)) {
        const auto path = paths.find(id);
        const auto part = path == paths.end() ? std::nullopt : package->part(path->second);
        if (!part) return refuse(name, "sheet \"" + title + "\" is missing, damaged, or larger than 256 MB");
        XlsxSheet sheet{title, {}};
        if (const auto wrong = readSheet(*part, book, sheet)) return refuse(name, *wrong);
        sheets.push_back(std::move(sheet));
    }
    return sheets;
}

}  // namespace soak
