// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/certificate.h"

#include <QFileInfo>
#include <QRegularExpression>
#include <algorithm>
#include <map>

#include "db/certificate_columns.h"
#include "db/csv.h"
#include "db/xlsx.h"

namespace soak {
namespace {

// An analysis may exceed 100 % by the rounding and scatter of its parts, not by more (common practice).
constexpr double kHighestSum_wt = 100.5;

void hold(CertificateRow& row, const QString& column, const QString& why) {
    if (!row.held.isEmpty()) return;
    row.held = QString("line %1").arg(row.line) + (column.isEmpty() ? ": " : ", column " + column + ": ") + why;
}

void note(CertificateRow& row, const QString& column, const QString& raw, const QString& read, const QString& text,
          bool refuses = false) {
    row.findings.push_back({row.heat.number, row.line, column, raw, read, text, refuses});
    if (refuses) hold(row, column, "\"" + raw + "\": " + text);
}

/// What the whole file does (a decimal comma, a column in ppm) is no finding in each of its cells.
void readElement(CertificateRow& row, const QString& element, const QString& column, const QString& raw,
                 AmountUnit unit, bool comma_is_usual) {
    CellReading cell = readCell(raw, unit);
    if (cell.kind == CellKind::balance) return;
    const bool as_usual = cell.kind == CellKind::number && !cell.unit_in_cell && (comma_is_usual || !raw.contains(','));
    if (!as_usual)
        note(row, column, raw, amountText(cell.content), cell.content.remark, cell.kind == CellKind::refused);
    row.heat.analysis[element.toStdString()] = std::move(cell.content);
}

/// "110", or "88,9 x 18": the smallest measure decides how fast a piece heats and cools.
void readSection(CertificateRow& row, const QString& column, const QString& raw) {
    static const QRegularExpression by(R"(\s*[xX\x{00D7}*]\s*)");
    if (raw.trimmed().isEmpty()) return note(row, column, raw, {}, "empty: soak time and quench need the section");
    const QStringList parts = raw.trimmed().split(by);
    for (QString part : parts) {
        bool ok = false;
        const double size_mm = part.remove("mm").replace(',', '.').trimmed().toDouble(&ok);
        if (!ok || size_mm <= 0) {
            row.heat.section_mm.reset();
            return note(row, column, raw, {}, "not a section in mm: soak time and quench need it");
        }
        row.heat.section_mm = std::min(row.heat.section_mm.value_or(size_mm), size_mm);
    }
    if (parts.size() > 1)
        note(row, column, raw, QString("%1 mm").arg(*row.heat.section_mm), "the smallest measure is taken");
}

/// "Rundstahl / bar" -> bar: the planner's words where one of them stands there, else as written.
QString formOf(const QString& raw) {
    static const QStringList known = {"bar", "forging", "plate", "tube", "ring", "casting", "sheet", "strip", "wire"};
    for (const QString& part : raw.split('/'))
        if (known.contains(part.trimmed().toLower())) return part.trimmed().toLower();
    return raw.trimmed();
}

void readKind(CertificateRow& row, const QString& column, const QString& raw) {
    static const QStringList ladle = {"", "l", "ladle", "heat", "cast", "schmelze", "schmelzenanalyse"};
    static const QStringList product = {"p", "product", "check", "st\u00fcck", "st\u00fcckanalyse"};
    const QString word = raw.trimmed().toLower();
    if (product.contains(word)) row.heat.analysis_kind = "product";
    if (!ladle.contains(word) && !product.contains(word))
        note(row, column, raw, {}, "neither ladle nor product analysis", true);
}

/// The usual reason for a sum far above 100 % is one lost decimal point: the largest content is the suspect.
void checkSum(CertificateRow& row) {
    double sum = 0;
    const Content* largest = nullptr;
    QString suspect;
    for (const auto& [element, content] : row.heat.analysis) {
        if (!content.wt || content.less_than) continue;
        sum += *content.wt;
        if (largest && *content.wt <= *largest->wt) continue;
        largest = &content;
        suspect = QString::fromStdString(element);
    }
    if (sum <= kHighestSum_wt || !largest) return;
    QString text = QString("the analysis adds up to %1 wt%").arg(sum, 0, 'f', 1);
    for (const double factor : {10.0, 100.0, 1000.0})
        if (sum - *largest->wt * (1 - 1 / factor) <= kHighestSum_wt) {
            text += QString("; a decimal point lost? %1 would fit").arg(*largest->wt / factor);
            break;
        }
    note(row, suspect, largest->raw, amountText(*largest), text, true);
}

/// A row with more cells than the header has names was cut where it should not be: every cell may be the wrong one.
bool checkWidth(CertificateRow& row, const QStringList& cells, const CertificateColumns& columns) {
    const qsizetype named = columns.names.size();
    for (qsizetype i = named; i < cells.size(); ++i)
        if (!cells[i].trimmed().isEmpty()) {
            hold(
                row, {},
                QString("%1 cells under a header of %2: a decimal comma without quotes?").arg(cells.size()).arg(named));
            return false;
        }
    if (cells.size() < named)
        note(row, {}, {}, {}, QString("the row ends after %1 of %2 cells").arg(cells.size()).arg(named));
    return true;
}

CertificateRow readRow(const CsvRow& csv, const CertificateColumns& columns, const QString& file, bool comma_is_usual) {
    CertificateRow row;
    row.line = csv.line;
    const auto cell = [&](qsizetype i) { return i >= 0 && i < csv.cells.size() ? csv.cells[i] : QString(); };
    const auto text = [&](const char* meaning) { return cell(columns.indexOf(meaning)).trimmed(); };
    row.heat.number = text("heat");
    row.heat.source = QString("%1 line %2").arg(file).arg(csv.line);
    row.heat.analysis_kind = "ladle";
    if (!checkWidth(row, csv.cells, columns)) return row;
    row.heat.grade = text("grade");
    row.heat.product_form = formOf(text("form"));
    row.heat.melt_route = text("route");
    if (row.heat.number.isEmpty()) hold(row, columns.names[columns.indexOf("heat")], "the heat number is missing");
    for (qsizetype i = 0; i < columns.names.size(); ++i) {
        const QString& meaning = columns.taken_for[i];
        if (meaning == "kind") readKind(row, columns.names[i], cell(i));
        if (meaning == "section") readSection(row, columns.names[i], cell(i));
        if (columns.isElement(i))
            readElement(row, meaning, columns.names[i], cell(i), columns.units[size_t(i)], comma_is_usual);
    }
    const bool has_value = std::any_of(row.heat.analysis.begin(), row.heat.analysis.end(),
                                       [](const auto& content) { return content.second.wt.has_value(); });
    if (!has_value) hold(row, {}, "the row has no analysis");
    if (row.usable()) checkSum(row);
    return row;
}

/// A row with a number under an element is no repeated header: spares understanding every cell of every row.
bool mayBeHeader(const QStringList& cells, const CertificateColumns& columns) {
    for (qsizetype i = 0; i < columns.names.size() && i < cells.size(); ++i)
        if (columns.isElement(i) && !cells[i].isEmpty() && cells[i].front().isDigit()) return false;
    return true;
}

/// The word for a line that is no analysis, or nothing when it is one.
QString otherKind(const QStringList& cells, CertificateColumns& columns, const ColumnChoices& choices) {
    static const QRegularExpression limits(R"(^(min|max|mini|maxi|minimum|maximum|soll|limits?|spec)\b)",
                                           QRegularExpression::CaseInsensitiveOption);
    static const QRegularExpression total(R"(^(summe|total|sum|subtotal|average|mean|mittel(wert)?)\b)",
                                          QRegularExpression::CaseInsensitiveOption);
    const auto cell = [&](const char* meaning) { return cells.value(columns.indexOf(meaning)).trimmed(); };
    if (mayBeHeader(cells, columns))
        if (std::optional<CertificateColumns> repeated = columnsOf(cells, choices)) {
            columns = std::move(*repeated);
            return "header";
        }
    QString first;
    for (const QString& text : cells)
        if (first.isEmpty()) first = text.trimmed();
    if (limits.match(first).hasMatch()) return "limits";
    if (total.match(first).hasMatch()) return "total";
    if (cell("heat").isEmpty() && takeUnits(cells, columns)) return "units";
    int contents = 0;
    for (qsizetype i = 0; i < columns.names.size() && i < cells.size(); ++i)
        contents += columns.isElement(i) && !cells[i].trimmed().isEmpty();
    if (contents > 0) return {};
    // A row about one heat without any content is an analysis that lacks all of it, not a line of text.
    int described = 0;
    for (const char* meaning : {"heat", "grade", "form", "section", "kind"}) described += !cell(meaning).isEmpty();
    return described >= 3 ? QString() : "text";
}

bool sameChemistry(const Analysis& a, const Analysis& b) {
    return std::equal(a.begin(), a.end(), b.begin(), b.end(), [](const auto& left, const auto& right) {
        return left.first == right.first && left.second.wt == right.second.wt &&
               left.second.less_than == right.second.less_than;
    });
}

/// "C 0.024 here and 0.042 in line 63"
QString differences(const CertificateRow& here, const CertificateRow& there) {
    QStringList words;
    const auto written = [](const Analysis& analysis, const std::string& element) {
        const auto found = analysis.find(element);
        const QString raw = found == analysis.end() ? QString() : found->second.raw.trimmed();
        return raw.isEmpty() ? QString("empty") : raw;
    };
    for (const auto& [element, content] : here.heat.analysis) {
        const auto other = there.heat.analysis.find(element);
        if (other != there.heat.analysis.end() && other->second.wt == content.wt &&
            other->second.less_than == content.less_than)
            continue;
        words << QString("%1 %2 here and %3 in line %4")
                     .arg(QString::fromStdString(element), written(here.heat.analysis, element),
                          written(there.heat.analysis, element))
                     .arg(there.line);
    }
    return words.join(", ");
}

/// Two rows of one number and one kind with different chemistry or grade: a person must choose, so both are held.
void holdConflicts(std::vector<CertificateRow>& rows) {
    std::map<std::pair<QString, QString>, std::vector<CertificateRow*>> by_number;
    for (CertificateRow& row : rows)
        if (row.usable()) by_number[{row.heat.number, row.heat.analysis_kind}].push_back(&row);
    for (auto& [key, same] : by_number)
        for (CertificateRow* row : same)
            for (const CertificateRow* other : same) {
                if (row == other) continue;
                const bool same_grade = row->heat.grade == other->heat.grade;
                if (same_grade && sameChemistry(row->heat.analysis, other->heat.analysis)) continue;
                const QString what = same_grade ? "chemistry: " + differences(*row, *other)
                                                : QString("grades: %1 here and %2 in line %3")
                                                      .arg(row->heat.grade, other->heat.grade)
                                                      .arg(other->line);
                const QString why = "this heat number stands twice with different " + what + ". A person must choose";
                row->findings.push_back({row->heat.number, row->line, {}, {}, {}, why, true});
                hold(*row, {}, why);
            }
}

/// Adds a further row of a heat: another kind of analysis stands beside the first, the same one is another product.
void join(Heat& heat, const CertificateRow& row) {
    if (row.heat.analysis_kind != heat.analysis_kind) {
        const bool is_new = std::none_of(heat.other_analyses.begin(), heat.other_analyses.end(),
                                         [&](const auto& other) { return other.kind == row.heat.analysis_kind; });
        if (is_new) heat.other_analyses.push_back({row.heat.analysis_kind, row.heat.analysis, row.heat.source});
        return;
    }
    heat.other_products.push_back({row.heat.product_form, row.heat.section_mm, row.heat.source});
}

/// Cells of one row that tell the same are one line; what holds the row is said by `held`.
void addFindings(DeliveryItem& item, const CertificateRow& row) {
    std::map<QString, int> alike;
    for (const CellFinding& finding : row.findings) ++alike[finding.text];
    for (const CellFinding& finding : row.findings) {
        int& count = alike[finding.text];
        if (count == 0 || (finding.refuses && row.held.endsWith(finding.text))) continue;
        item.findings << findingText(finding) +
                             (count > 1 ? QString("; %1 more cells of this row alike").arg(count - 1) : QString());
        count = 0;
    }
}

/// The ladle analysis is the heat's own, wherever it stands in the file.
void preferLadle(Heat& heat) {
    if (heat.analysis_kind == "ladle") return;
    for (OtherAnalysis& other : heat.other_analyses)
        if (other.kind == "ladle") {
            std::swap(other.kind, heat.analysis_kind);
            std::swap(other.analysis, heat.analysis);
            std::swap(other.source, heat.source);
            return;
        }
}

/// One way to see the file as a table.
struct Table {
    QString name;
    std::vector<CsvRow> lines;
    bool comma_is_usual = true;  ///< a decimal comma is this file's way, no oddity of one cell
};

/// A workbook's sheets, or a text cut at each separator that certificates use.
Result<std::vector<Table>> tablesOf(const QByteArray& bytes, const QString& name) {
    std::vector<Table> tables;
    if (isZip(bytes)) {
        Result<std::vector<XlsxSheet>> sheets = readXlsx(bytes, name);
        if (!sheets) return sheets.error();
        const bool several = sheets.value().size() > 1;
        for (XlsxSheet& sheet : sheets.value())
            tables.push_back({several ? name + " sheet " + sheet.name : name, std::move(sheet.rows), true});
        return tables;
    }
    const char* foreign = bytes.startsWith("%PDF") ? "a PDF: ask the mill for a table, or type it in"
                          : bytes.startsWith("\xD0\xCF\x11\xE0")
                              ? "an old or encrypted workbook: save it as .xlsx or CSV"
                              : nullptr;
    if (foreign) return Error{Fault::input, std::string("this is ") + foreign, {}, {name.toStdString()}};
    const QString text = decodeText(bytes);
    for (const QChar separator : {QChar(';'), QChar(','), QChar('\t')})
        tables.push_back({name, parseCsv(text, separator), separator != ','});
    return tables;
}

/// What stands behind a label such as "Lieferant / Supplier" in the lines above the table.
QString labelled(const std::vector<CsvRow>& lines, size_t header, const QStringList& labels) {
    static const QRegularExpression marks(R"([.:\s]+$)");
    for (size_t i = 0; i < header; ++i)
        for (qsizetype k = 0; k < lines[i].cells.size(); ++k) {
            const QString cell = lines[i].cells[k], label = cell.section(':', 0, 0);
            const QStringList parts = label.split('/');
            const bool found = std::any_of(parts.begin(), parts.end(), [&](const QString& part) {
                return labels.contains(part.trimmed().toLower().remove(marks));
            });
            if (!found) continue;
            if (const QString behind = cell.section(':', 1).trimmed(); !behind.isEmpty()) return behind;
            for (qsizetype next = k + 1; next < lines[i].cells.size(); ++next)
                if (const QString value = lines[i].cells[next].trimmed(); !value.isEmpty()) return value;
        }
    return {};
}

// The labels of EN 10168 in words, English and German.
QString supplierIn(const std::vector<CsvRow>& lines, size_t header) {
    return labelled(lines, header,
                    {"supplier", "lieferant", "works", "mill", "manufacturer", "hersteller", "herstellerwerk", "a01"});
}

void readHead(Certificate& certificate, const std::vector<CsvRow>& lines, size_t header) {
    certificate.supplier = supplierIn(lines, header);
    certificate.supplier =
        labelled(lines, header,
                 {"supplier", "lieferant", "works", "mill", "manufacturer", "hersteller", "herstellerwerk", "a01"});
    certificate.number =
        labelled(lines, header, {"certificate no", "certificate number", "zeugnis-nr", "zeugnisnummer", "a03"});
    certificate.date = labelled(lines, header, {"date", "datum"});
}

Certificate readTable(const Table& table, size_t header, CertificateColumns columns, const ColumnChoices& choices) {
    Certificate certificate;
    certificate.file = table.name;
    certificate.columns = columns.names;
    certificate.taken_for = columns.taken_for;
    certificate.units = columns.units;
    readHead(certificate, table.lines, header);
    for (size_t i = 0; i < table.lines.size(); ++i) {
        const CsvRow& line = table.lines[i];
        if (line.isBlank()) continue;
        const QString what = i < header ? "text" : i == header ? "header" : otherKind(line.cells, columns, choices);
        // A repeated header may be another one: the columns that are shown keep the units of their own.
        if (columns.names == certificate.columns) certificate.units = columns.units;
        if (what.isEmpty())
            certificate.rows.push_back(readRow(line, columns, table.name, table.comma_is_usual));
        else
            certificate.others.push_back({line.line, what, line.cells.join(' ').simplified()});
    }
    holdConflicts(certificate.rows);
    return certificate;
}

}  // namespace

QString findingText(const CellFinding& finding) {
    QString text = QString("line %1").arg(finding.line);
    if (!finding.column.isEmpty()) text += ", column " + finding.column;
    text += ": ";
    if (!finding.raw.isEmpty()) text += "\"" + finding.raw + "\" ";
    if (!finding.read.isEmpty()) return text + "read as " + finding.read + " (" + finding.text + ")";
    return text + finding.text;
}

std::vector<DeliveryItem> Certificate::delivery() const {
    std::vector<DeliveryItem> items;
    std::map<QString, size_t> item_of;
    for (const CertificateRow& row : rows) {
        const auto known = row.usable() ? item_of.find(row.heat.number) : item_of.end();
        const bool joins = known != item_of.end();
        if (!joins && row.usable()) item_of[row.heat.number] = items.size();
        if (!joins) items.push_back({row.heat, row.held, {}});
        DeliveryItem& item = joins ? items[known->second] : items.back();
        if (joins && row.heat.analysis_kind == item.heat.analysis_kind)
            item.findings << QString("line %1: the same cast again, a second product (%2)")
                                 .arg(row.line)
                                 .arg(row.heat.product_form.isEmpty() ? "form not given" : row.heat.product_form);
        if (joins) join(item.heat, row);
        addFindings(item, row);
    }
    for (DeliveryItem& item : items) preferLadle(item.heat);
    return items;
}

std::vector<Heat> Certificate::heats() const {
    std::vector<Heat> heats;
    for (DeliveryItem& item : delivery())
        if (item.held.isEmpty()) heats.push_back(std::move(item.heat));
    return heats;
}

std::vector<CellFinding> Certificate::findings() const {
    std::vector<CellFinding> all;
    for (const CertificateRow& row : rows) all.insert(all.end(), row.findings.begin(), row.findings.end());
    return all;
}

Result<Certificate> readCertificateText(const QByteArray& bytes, const QString& name, const ColumnChoices& choices) {
    const Result<std::vector<Table>> tables = tablesOf(bytes, name);
    if (!tables) return tables.error();
    for (const Table& table : tables.value())
        for (size_t header = 0; header < table.lines.size(); ++header)
            if (std::optional<CertificateColumns> columns = columnsOf(table.lines[header].cells, choices))
                return readTable(table, header, std::move(*columns), choices);
    return Error{Fault::input,
                 "no header row found: a heat column (heat, cast, Schmelze) and at least three elements are needed",
                 {},
                 {name.toStdString()}};
}

Result<Certificate> readCertificate(const QString& path, const ColumnChoices& choices) {
    const Result<QByteArray> bytes = readFile(path);
    if (!bytes) return bytes.error();
    return readCertificateText(bytes.value(), QFileInfo(path).fileName(), choices);
}

QString certificateSupplier(const QByteArray& bytes, const QString& name) {
    constexpr size_t kLongestHead = 40;  // lines; a table's own cells are no head
    const Result<std::vector<Table>> tables = tablesOf(bytes, name);
    if (!tables) return {};
    for (const Table& table : tables.value())
        if (const QString found = supplierIn(table.lines, std::min(table.lines.size(), kLongestHead)); !found.isEmpty())
            return found;
    return {};
}

Result<std::vector<CsvRow>> certificateCells(const QByteArray& bytes, const QString& name) {
    const Result<std::vector<Table>> tables = tablesOf(bytes, name);
    if (!tables) return tables.error();
    const auto widest = [](const Table& table) {
        qsizetype most = 0;
        for (const CsvRow& line : table.lines) most = std::max(most, line.cells.size());
        return most;
    };
    const auto best = std::max_element(tables.value().begin(), tables.value().end(),
                                       [&](const Table& a, const Table& b) { return widest(a) < widest(b); });
    return best == tables.value().end() ? std::vector<CsvRow>() : best->lines;
}

}  // namespace soak
