// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/families.h"

#include <algorithm>

#include "planner/core/tables.h"

namespace soak {
namespace {

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
    kind.basis = text(row, "basis");
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
        return badTable("families.toml", "family \"" + wrong + "\" is there twice, or lacks data_set or kind");
    return Done{};
}

/// Treatments that several families share. A family's own rows in families.toml stand first.
Result<Done> readTreatmentKinds(FamilyBook& book) {
    const auto table = readTable("treatments.toml");
    if (!table) return table.error();
    QString wrong;
    forEachRow(table.value(), "treatment", [&](const toml::table& row) {
        const FamilyKind kind = kindFrom(row);
        for (const QString& name : texts(row, "families")) {
            const auto family =
                std::find_if(book.families.begin(), book.families.end(), [&](Family& one) { return one.name == name; });
            if (family == book.families.end())
                wrong = "family \"" + name + "\" of treatment " + kind.name + " is not in families.toml";
            else if (family->find(kind.name))
                wrong = "treatment " + kind.name + " is there twice for family \"" + name + "\"";
            else
                family->kinds.push_back(kind);
        }
    });
    if (!wrong.isEmpty()) return badTable("treatments.toml", wrong.toStdString());
    return Done{};
}

Result<Done> readParticles(FamilyBook& book) {
    const auto table = readTable("particles.toml");
    if (!table) return table.error();
    forEachRow(table.value(), "particle", [&](const toml::table& row) {
        book.particles.push_back(
            {text(row, "phase"), texts(row, "families"), numberIn(row, "radius_um").value_or(0), text(row, "source")});
    });
    for (const ParticleSize& one : book.particles)
        if (one.radius_um <= 0)
            return badTable("particles.toml", "radius_um of " + one.phase.toStdString() + " must be above 0");
    return Done{};
}

Result<Done> readSegregation(FamilyBook& book) {
    const auto table = readTable("segregation.toml");
    if (!table) return table.error();
    for (const auto& [set, row] : table.value())
        if (const auto* fields = row.as_table()) {
            Segregation& one = book.segregation[QString::fromStdString(std::string(set.str()))];
            one.freezing.fast = words(*fields, "fast");
            one.freezing.last_liquid = numberIn(*fields, "last_liquid").value_or(one.freezing.last_liquid);
            one.source = text(*fields, "source");
        }
    return Done{};
}

Result<Done> readBooks(FamilyBook& book) {
    auto relations = loadRelations();
    if (!relations) return std::move(relations).error();
    book.relations = std::move(relations).value();
    auto cooling = loadCoolingRules();
    if (!cooling) return std::move(cooling).error();
    book.cooling = std::move(cooling).value();
    auto kinetics = loadKinetics();
    if (!kinetics) return std::move(kinetics).error();
    book.kinetics = std::move(kinetics).value();
    auto notes = loadSheetNotes();
    if (!notes) return std::move(notes).error();
    book.sheet_notes = std::move(notes).value();
    auto quench = loadQuenchBook();
    if (!quench) return std::move(quench).error();
    book.quench = std::move(quench).value();
    auto tempering = loadTemperingCurves();
    if (!tempering) return std::move(tempering).error();
    book.tempering = std::move(tempering).value();
    auto salvage = loadSalvageRules();
    if (!salvage) return std::move(salvage).error();
    book.salvage = std::move(salvage).value();
    return Done{};
}

Result<Done> readScatter(FamilyBook& book) {
    const auto table = readTable("model_scatter.toml");
    if (!table) return table.error();
    book.unknown_scatter_K = numberIn(table.value(), "unknown_scatter_K").value_or(0);
    book.least_scatter_K = numberIn(table.value(), "least_scatter_K").value_or(0);
    if (book.unknown_scatter_K <= 0) return badTable("model_scatter.toml", "unknown_scatter_K must be above 0");
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
    if (!book.laboratory.count("*")) return badTable("laboratory.toml", "the row \"*\" is missing");
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
            return badTable("sweep.toml",
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

const ParticleSize* FamilyBook::particleOf(const QString& family, const QString& phase) const {
    for (const QString& wanted : {family, QString("*")})
        for (const ParticleSize& one : particles)
            if (one.phase == phase && one.families.contains(wanted)) return &one;
    return nullptr;
}

Result<FamilyBook> loadFamilyBook() {
    FamilyBook book;
    for (const auto read : {readFamilies, readTreatmentKinds, readScatter, readLaboratory, readUses, readParticles,
                            readSegregation, readBooks})
        if (auto done = read(book); !done) return std::move(done).error();
    return book;
}

}  // namespace soak
