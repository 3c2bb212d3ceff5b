// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/library.h"

#include <QDir>
#include <QRegularExpression>
#include <set>

#include "base/folders.h"
#include "db/csv.h"

namespace soak {
namespace {

QStringList listOf(const QString& cell) {
    QStringList list;
    for (const QString& part : cell.split(';', Qt::SkipEmptyParts))
        if (const QString trimmed = part.trimmed(); !trimmed.isEmpty()) list << trimmed;
    return list;
}

/// Reads a table row by row into records; the first bad row ends it with its place.
template <class Record>
Result<std::vector<Record>> readRows(const QString& path, const QStringList& columns,
                                     Result<Record> (*read)(const CsvTable&, size_t)) {
    const Result<CsvTable> table = CsvTable::read(path, columns);
    if (!table) return table.error();
    std::vector<Record> records;
    for (size_t row = 0; row < table.value().size(); ++row) {
        Result<Record> record = read(table.value(), row);
        if (!record) return std::move(record).error();
        records.push_back(std::move(record).value());
    }
    return records;
}

/// The same for tables whose first column is an id that may stand only once.
template <class Record>
Result<std::vector<Record>> readKeyedRows(const QString& path, const QStringList& columns,
                                          Result<Record> (*read)(const CsvTable&, size_t)) {
    const Result<CsvTable> table = CsvTable::read(path, columns);
    if (!table) return table.error();
    std::set<QString> seen;
    for (size_t row = 0; row < table.value().size(); ++row) {
        const QString id = table.value().text(row, columns.front());
        if (id.isEmpty() || !seen.insert(id).second)
            return table.value().error(row, columns.front(), id.isEmpty() ? "no id" : "\"" + id + "\" stands twice");
    }
    return readRows(path, columns, read);
}

/// One table may be spread over several files, one for each family of alloys: "grades.csv", "grades_light.csv". Ids
/// stand once in all of them.
template <class Record>
Result<std::vector<Record>> readFamilyTables(const QString& folder, const QString& name, const QStringList& columns,
                                             Result<Record> (*read)(const CsvTable&, size_t), QString Record::*id) {
    std::vector<Record> all;
    std::set<QString> seen;
    for (const QString& file : QDir(folder).entryList({name + ".csv", name + "_*.csv"}, QDir::Files, QDir::Name)) {
        Result<std::vector<Record>> records = readKeyedRows<Record>(folder + "/" + file, columns, read);
        if (!records) return records;
        for (Record& record : records.value()) {
            if (!seen.insert(record.*id).second)
                return Error{
                    Fault::data, (file + ": \"" + record.*id + "\" stands in another file too").toStdString(), {}, {}};
            all.push_back(std::move(record));
        }
    }
    if (all.empty()) return readKeyedRows<Record>(folder + "/" + name + ".csv", columns, read);  // says what is missing
    return all;
}

/// "S31803 (near)" is a near equivalent, whose limits differ.
void sortNames(const QString& cell, Grade& grade) {
    static const QString mark = "(near)";
    for (QString name : listOf(cell)) {
        const bool near = name.endsWith(mark);
        if (near) name = name.chopped(mark.size()).trimmed();
        (near ? grade.near_names : grade.names) << name;
    }
}

/// "Others_each" -> the word that stands for it beside the symbols; a symbol stands for itself.
std::string limitKey(const QString& column) {
    if (column == "Others_each") return kOthersEach;
    if (column == "Others_total") return kOthersTotal;
    return column.toStdString();
}

Result<Grade> gradeOf(const CsvTable& table, size_t row) {
    static const QRegularExpression minimum_column("^([A-Z][a-z]?|Others_each|Others_total)_min$");
    static const QRegularExpression rule_syntax(
        R"(^([A-Za-z]+ = )?[A-Z][A-Za-z0-9.*/+() ]*(<=|>=) ?[A-Z0-9(][A-Za-z0-9.*/+() ]*$)");
    Grade grade;
    grade.id = table.text(row, "grade_id");
    sortNames(table.text(row, "names"), grade);
    grade.standard = table.text(row, "standard");
    grade.edition = table.text(row, "edition");
    grade.family = table.text(row, "family");
    grade.rules = listOf(table.text(row, "rules"));
    grade.seen = table.text(row, "seen");
    grade.note = table.text(row, "note");
    if (grade.names.isEmpty()) return table.error(row, "names", "no exact name");
    for (const QString& rule : grade.rules)
        if (!rule_syntax.match(rule).hasMatch())
            return table.error(row, "rules", "\"" + rule + "\" is not [name =] expression >= or <= expression");
    for (const QString& column : table.columns()) {
        const QRegularExpressionMatch match = minimum_column.match(column);
        if (!match.hasMatch()) continue;
        const QString element = match.captured(1), max_column = element + "_max";
        const auto low = table.number(row, column), high = table.number(row, max_column);
        if (!low) return low.error();
        if (!high) return high.error();
        if (!low.value() && !high.value()) continue;
        if (low.value() && high.value() && *low.value() > *high.value())
            return table.error(row, column,
                               "minimum " + table.text(row, column) + " above maximum " + table.text(row, max_column));
        grade.limits[limitKey(element)] = {low.value(), high.value(), table.text(row, column),
                                           table.text(row, max_column)};
    }
    const QString balance = table.columns().contains("balance") ? table.text(row, "balance") : QString();
    if (!balance.isEmpty()) grade.limits[balance.toStdString()].min_text = kBalanceText;
    return grade;
}

Result<PublishedTreatment> treatmentOf(const CsvTable& table, size_t row) {
    PublishedTreatment treatment;
    treatment.row_id = table.text(row, "row_id");
    treatment.grade_key = table.text(row, "grade_key");
    treatment.kind = table.text(row, "kind");
    const auto low = table.number(row, "t_min_C"), high = table.number(row, "t_max_C");
    if (!low) return low.error();
    if (!high) return high.error();
    treatment.low_C = low.value();
    treatment.high_C = high.value();
    if (treatment.low_C && treatment.high_C && *treatment.low_C > *treatment.high_C)
        return table.error(row, "t_min_C", "minimum above maximum");
    treatment.hold_rule = table.text(row, "hold_rule");
    treatment.quench = table.text(row, "quench");
    treatment.result = table.text(row, "result");
    treatment.source = table.text(row, "source");
    treatment.seen = table.text(row, "seen");
    treatment.note = table.text(row, "note");
    return treatment;
}

Result<Caution> cautionOf(const CsvTable& table, size_t row) {
    Caution caution{table.text(row, "row_id"),  table.text(row, "applies_to"), table.text(row, "severity"),
                    table.text(row, "text_en"), table.text(row, "defers_to"),  table.text(row, "source")};
    if (!QStringList{"caution", "warning", "danger"}.contains(caution.severity))
        return table.error(row, "severity", "\"" + caution.severity + "\" is not caution, warning or danger");
    return caution;
}

Result<ProductTolerance> toleranceOf(const CsvTable& table, size_t row) {
    const auto from = table.number(row, "range_from"), to = table.number(row, "range_to"),
               over = table.number(row, "tolerance_over_max"), under = table.number(row, "tolerance_under_min");
    for (const auto* number : {&from, &to, &over, &under})
        if (!*number) return number->error();
    if (!from.value() || !to.value() || *from.value() >= *to.value())
        return table.error(row, "range_from", "the range of limits is empty");
    return ProductTolerance{listOf(table.text(row, "standard")),
                            table.text(row, "family"),
                            table.text(row, "element"),
                            *from.value(),
                            *to.value(),
                            over.value(),
                            under.value(),
                            table.text(row, "seen"),
                            table.text(row, "note")};
}

Result<FurnaceRule> furnaceRuleOf(const CsvTable& table, size_t row) {
    const auto value = table.number(row, "value");
    if (!value) return value.error();
    return FurnaceRule{table.text(row, "row_id"),
                       table.text(row, "rule_kind"),
                       table.text(row, "key"),
                       table.text(row, "applies_to"),
                       value.value(),
                       table.text(row, "unit"),
                       table.text(row, "formula"),
                       table.text(row, "source"),
                       table.text(row, "seen"),
                       table.text(row, "note")};
}

Result<FamilyLink> familyLinkOf(const CsvTable& table, size_t row) {
    return FamilyLink{table.text(row, "evidence_family"), listOf(table.text(row, "grade_families"))};
}

}  // namespace

QString libraryFolder() { return QString::fromStdString(productPath("db/library").string()); }

Result<std::vector<Grade>> readGrades(const QString& folder) {
    return readFamilyTables<Grade>(folder, "grades",
                                   {"grade_id", "names", "standard", "edition", "family", "rules", "seen", "note"},
                                   gradeOf, &Grade::id);
}

Result<std::vector<PublishedTreatment>> readTreatments(const QString& folder) {
    return readFamilyTables<PublishedTreatment>(folder, "published_treatments",
                                                {"row_id", "grade_key", "kind", "t_min_C", "t_max_C", "hold_rule",
                                                 "quench", "result", "source", "seen", "note"},
                                                treatmentOf, &PublishedTreatment::row_id);
}

Result<std::vector<Caution>> readCautions(const QString& folder) {
    return readKeyedRows<Caution>(folder + "/cautions.csv",
                                  {"row_id", "applies_to", "severity", "text_en", "defers_to", "source"}, cautionOf);
}

Result<std::vector<ProductTolerance>> readProductTolerances(const QString& folder) {
    return readRows<ProductTolerance>(folder + "/product_tolerances.csv",
                                      {"standard", "family", "element", "range_from", "range_to", "tolerance_over_max",
                                       "tolerance_under_min", "seen", "note"},
                                      toleranceOf);
}

Result<std::vector<FurnaceRule>> readFurnaceRules(const QString& folder) {
    return readKeyedRows<FurnaceRule>(
        folder + "/furnace_rules.csv",
        {"row_id", "rule_kind", "key", "applies_to", "value", "unit", "formula", "source", "seen", "note"},
        furnaceRuleOf);
}

Result<std::vector<FamilyLink>> readFamilyMap(const QString& folder) {
    return readKeyedRows<FamilyLink>(folder + "/family_map.csv", {"evidence_family", "grade_families"}, familyLinkOf);
}

}  // namespace soak
