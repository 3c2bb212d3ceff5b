// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/families.h"

#include <toml++/toml.h>
#include <algorithm>

#include "base/folders.h"

namespace soak {
namespace {

Error bad(const std::string& file, const std::string& message) {
    return {Fault::data, "planner/core/data/" + file + ": " + message, {}, {}};
}

Result<toml::table> readTable(const std::string& file) {
    const auto path = productPath("planner/core/data") / file;
    try {
        return toml::parse_file(path.string());
    } catch (const toml::parse_error& error) {
        return bad(file, std::string(error.description()) + " (line " + std::to_string(error.source().begin.line) +
                             "); restore the file from the distribution");
    }
}

QString text(const toml::table& row, std::string_view key) {
    return QString::fromStdString(row[key].value_or(std::string()));
}
std::optional<double> numberIn(const toml::table& row, std::string_view key) { return row[key].value<double>(); }

QStringList texts(const toml::table& row, std::string_view key) {
    QStringList all;
    if (const auto* list = row[key].as_array())
        for (const auto& item : *list) all << QString::fromStdString(item.value_or(std::string()));
    return all;
}
std::vector<std::string> words(const toml::table& row, std::string_view key) {
    std::vector<std::string> all;
    for (const QString& word : texts(row, key)) all.push_back(word.toStdString());
    return all;
}

/// Calls `use` for every table in the array `key`.
template <class Use>
void forEachRow(const toml::table& table, std::string_view key, Use use) {
    if (const auto* rows = table[key].as_array())
        for (const auto& row : *rows)
            if (const auto* fields = row.as_table()) use(*fields);
}

CycleLimit limitFrom(const toml::table& row) {
    CycleLimit limit;
    limit.kind = text(row, "kind");
    limit.phase = text(row, "phase");
    limit.low = numberIn(row, "low");
    limit.high = numberIn(row, "high");
    limit.margin_K = numberIn(row, "margin_K").value_or(0);
    limit.because = text(row, "because");
    limit.source = text(row, "source");
    return limit;
}

FamilyKind kindFrom(const toml::table& row) {
    FamilyKind kind;
    kind.name = text(row, "name");
    kind.reference_C = numberIn(row, "reference_C").value_or(0);
    forEachRow(row, "limits", [&](const toml::table& limit) { kind.limits.push_back(limitFrom(limit)); });
    return kind;
}

Result<Done> readFamilies(FamilyBook& book) {
    const auto table = readTable("families.toml");
    if (!table) return table.error();
    std::string wrong;
    forEachRow(table.value(), "family", [&](const toml::table& row) {
        Family family;
        family.data_set = text(row, "data_set");
        family.phases = {words(row, "with"), words(row, "without")};
        family.phase_rule = text(row, "phase_rule");
        family.needs = texts(row, "needs");
        forEachRow(row, "kind", [&](const toml::table& kind) { family.kinds.push_back(kindFrom(kind)); });
        for (const QString& name : texts(row, "names")) {
            if (book.find(name) || family.data_set.isEmpty() || family.kinds.empty()) wrong = name.toStdString();
            family.name = name;
            book.families.push_back(family);
        }
    });
    if (!wrong.empty())
        return bad("families.toml", "family \"" + wrong + "\" is there twice, or lacks data_set or kind");
    return Done{};
}

Result<Done> readScatter(FamilyBook& book) {
    const auto table = readTable("model_scatter.toml");
    if (!table) return table.error();
    book.unknown_scatter_K = numberIn(table.value(), "unknown_scatter_K").value_or(0);
    book.least_scatter_K = numberIn(table.value(), "least_scatter_K").value_or(0);
    if (book.unknown_scatter_K <= 0) return bad("model_scatter.toml", "unknown_scatter_K must be above 0");
    forEachRow(table.value(), "row", [&](const toml::table& row) {
        ModelScatter scatter;
        scatter.mean = numberIn(row, "mean").value_or(0);
        scatter.scatter = numberIn(row, "scatter").value_or(book.unknown_scatter_K);
        scatter.in_volume_percent = text(row, "unit") == "vol%";
        scatter.rows = static_cast<int>(row["rows"].value_or(int64_t{0}));
        scatter.source = text(row, "source");
        for (const QString& family : texts(row, "families")) book.scatter[{family, text(row, "kind")}] = scatter;
    });
    return Done{};
}

Result<Done> readLaboratory(FamilyBook& book) {
    const auto table = readTable("laboratory.toml");
    if (!table) return table.error();
    for (const auto& [element, row] : table.value())
        if (const auto* fields = row.as_table())
            book.laboratory[std::string(element.str())] = {numberIn(*fields, "floor_wt").value_or(0),
                                                           numberIn(*fields, "relative").value_or(0)};
    if (!book.laboratory.count("*")) return bad("laboratory.toml", "the row \"*\" is missing");
    return Done{};
}

std::map<std::string, double> amounts(const toml::table& row, std::string_view key) {
    std::map<std::string, double> all;
    if (const auto* list = row[key].as_table())
        for (const auto& [element, wt] : *list) all[std::string(element.str())] = wt.value_or(0.0);
    return all;
}

Result<Done> readUses(FamilyBook& book) {
    const auto table = readTable("sweep.toml");
    if (!table) return table.error();
    for (const auto& [set, row] : table.value())
        if (const auto* fields = row.as_table())
            book.uses[QString::fromStdString(std::string(set.str()))] = {
                numberIn(*fields, "from_C").value_or(0), numberIn(*fields, "to_C").value_or(0),
                amounts(*fields, "left_out_wt"), amounts(*fields, "most_wt")};
    for (const auto& [set, use] : book.uses)
        if (use.from_C >= use.to_C || !use.left_out_wt.count("*"))
            return bad("sweep.toml",
                       "\"" + set.toStdString() + "\" lacks from_C below to_C, or left_out_wt with \"*\"");
    return Done{};
}

}  // namespace

const FamilyKind* Family::find(const QString& kind) const {
    const auto at = std::find_if(kinds.begin(), kinds.end(), [&](const FamilyKind& one) { return one.name == kind; });
    return at == kinds.end() ? nullptr : &*at;
}

QString everyFamilyOf(const QString& data_set) { return "* " + data_set; }

const Family* FamilyBook::find(const QString& name) const {
    const auto at = std::find_if(families.begin(), families.end(), [&](const Family& one) { return one.name == name; });
    return at == families.end() ? nullptr : &*at;
}

ModelScatter FamilyBook::scatterOf(const QString& family, const QString& kind, const QString& phase) const {
    const QString exact = phase.isEmpty() ? kind : kind + "(" + phase + ")";
    const Family* known = find(family);
    const QString every = everyFamilyOf(known ? known->data_set : QString());
    for (const auto& key : {std::pair{family, exact}, {family, kind}, {every, exact}, {every, kind}}) {
        const auto at = scatter.find(key);
        if (at == scatter.end()) continue;
        ModelScatter row = at->second;
        if (row.rows < 5 && !row.in_volume_percent) row.scatter = std::max(row.scatter, least_scatter_K);
        return row;
    }
    return {0, unknown_scatter_K, false, 0, "no published value of this kind for this family"};
}

double FamilyBook::laboratory_wt(const std::string& element, double content_wt) const {
    const auto known = laboratory.find(element);
    const auto& row = known == laboratory.end() ? laboratory.at("*") : known->second;
    return row.floor_wt + row.relative * content_wt;
}

Result<FamilyBook> loadFamilyBook() {
    FamilyBook book;
    for (const auto read : {readFamilies, readScatter, readLaboratory, readUses})
        if (auto done = read(book); !done) return std::move(done).error();
    return book;
}

}  // namespace soak
