// SPDX-License-Identifier: GPL-3.0-or-later
// Published rows -> bias and scatter of the planner's limits, in the form of data/model_scatter.toml.
#include <algorithm>
#include <cmath>
#include <map>
#include <set>

#include "base/folders.h"
#include "db/csv.h"
#include "planner/core/evidence.h"
#include "planner/core/families.h"

namespace soak {
namespace {

constexpr int kEnough = 5;  // firm rows; below it the unsure ones are taken in, and the answer says "little evidence"
const QString kEvery = "*";

using Rows = std::vector<const EvidenceRow*>;

/// The limits that a row speaks for: "dissolved(M23C6)".
QStringList limitsOf(const EvidenceRow& row) {
    if (row.kind == "solidus") return {"below_solidus"};
    if (row.kind == "first_melting") return {"below_segregated_solidus", "below_stepped_solidus"};
    if (row.kind == "Ae1") return {"above_ae1", "below_ae1"};
    if (row.kind == "Ae3") return {"above_ae3"};
    if (row.kind == "delta_limit") return {"not_yet_formed(delta ferrite)"};
    if (row.kind == "solvus") return {"dissolved(" + row.phase + ")"};
    if (row.kind == "phase_fraction")
        return {row.phase == "ferrite" || row.phase == "MX" ? "fraction(" + row.phase + ")" : "fraction(carbide)"};
    return {};
}

Result<std::map<QString, QStringList>> gradeFamilies() {
    const QString file = QString::fromStdString(productPath("db/library/family_map.csv").string());
    const auto table = CsvTable::read(file, {"evidence_family", "grade_families"});
    if (!table) return table.error();
    std::map<QString, QStringList> map;
    for (size_t line = 0; line < table.value().size(); ++line)
        map[table.value().text(line, "evidence_family")] =
            table.value().text(line, "grade_families").split(';', Qt::SkipEmptyParts);
    return map;
}

/// Firm rows where there are enough of them; else the unsure ones beside them.
Rows speaking(const Rows& all) {
    Rows firm;
    std::copy_if(all.begin(), all.end(), std::back_inserter(firm),
                 [](const EvidenceRow* row) { return row->weight == EvidenceClass::firm; });
    return static_cast<int>(firm.size()) >= kEnough ? firm : all;
}

QString quoted(const QString& text) { return "\"" + text + "\""; }

QString entry(const QStringList& families, const QString& limit, const Rows& all) {
    const Rows rows = speaking(all);
    const EvidenceGroup group = summarise(rows);
    double own = 0;
    int firm = 0;
    QStringList ids, names;
    for (const EvidenceRow* row : rows) {
        own = std::max(own, row->scatter);
        firm += row->weight == EvidenceClass::firm ? 1 : 0;
        ids << row->id;
    }
    for (const QString& family : families) names << quoted(family);
    // Two rows or fewer do not show a scatter: then that of the published values stands.
    const double scatter = group.count > 2 ? group.deviation : std::max(group.deviation, own);
    QString text = "\n[[row]]\nfamilies = [" + names.join(", ") + "]\nkind = " + quoted(limit) + "\n";
    text += QString("mean = %1\nscatter = %2\n").arg(group.mean, 0, 'f', 1).arg(scatter, 0, 'f', 1);
    if (group.unit == "vol%" || rows.front()->unit == "vol%") text += "unit = \"vol%\"\n";
    text += QString("rows = %1\n").arg(firm);
    return text + "source = " +
           quoted(
               QString("published rows: %1 firm, %2 unsure: %3").arg(firm).arg(group.count - firm).arg(ids.join(" "))) +
           "\n";
}

QString head(const FamilyBook& book) {
    return QString(
               "# Computed minus published, by family and kind of limit (with its phase where that matters).\n"
               "# Made by: soakwright evidence --write planner/core/data/model_scatter.toml   Do not edit: change\n"
               "# tests/published or the data and run it again.\n"
               "#   mean, scatter   K, or vol% where unit says so; one standard deviation (of two rows or fewer: at\n"
               "#                   least the half width that the literature allows)\n"
               "#   rows            firm published values; below 5 the unsure ones are taken in beside them and the\n"
               "#                   answer says \"little evidence\". Rows that data were fitted to never count.\n"
               "# The uncertainty takes the scatter and, where the mean lies to the unsafe side of the limit, the mean "
               "as "
               "well.\n"
               "unknown_scatter_K = %1\n"
               "least_scatter_K = %2   # for fewer than 5 rows: their own scatter says little\n")
        .arg(book.unknown_scatter_K)
        .arg(book.least_scatter_K);
}

}  // namespace

Result<QString> modelScatterTable(const std::vector<EvidenceRow>& rows) {
    const auto book = loadFamilyBook();
    if (!book) return book.error();
    const auto map = gradeFamilies();
    if (!map) return map.error();
    std::map<QString, std::map<QString, Rows>> by_limit;  // limit -> grade family -> rows
    for (const EvidenceRow& row : rows) {
        const auto families = map.value().find(row.family);  // binaries speak for the data, not for a grade family
        const bool speaks = row.weight == EvidenceClass::firm || row.weight == EvidenceClass::unsure;
        if (!speaks || !row.difference() || families == map.value().end()) continue;
        if (families->second.contains(kEvery)) continue;
        const QStringList speaks_for = families->second + QStringList{everyFamilyOf(row.dataSet())};
        for (const QString& limit : limitsOf(row))
            for (const QString& family : speaks_for) by_limit[limit][family].push_back(&row);
    }
    QString text = head(book.value());
    for (const auto& [limit, families] : by_limit) {
        std::map<Rows, QStringList> same;  // families with the same rows share an entry
        for (const auto& [family, members] : families) same[members] << family;
        for (const auto& [family, members] : families)
            if (const QStringList& names = same[members]; names.front() == family) text += entry(names, limit, members);
    }
    return text;
}

}  // namespace soak
