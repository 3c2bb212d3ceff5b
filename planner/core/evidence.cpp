// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/evidence.h"

#include <algorithm>
#include <atomic>
#include <cmath>
#include <map>
#include <thread>
#include <tuple>

#include "base/folders.h"
#include "db/csv.h"
#include "planner/core/evidence_compute.h"

namespace soak {
namespace {

constexpr int kEnough = 5;  // rows below which a mean and a deviation say little

QString published(const char* file) { return QString::fromStdString((productPath("tests/published") / file).string()); }

/// Ae1, Ae3 and Acm of steels and of Fe-C go by the phase that the row names.
QString kindOf(const QString& quantity, const QString& phase) {
    if (quantity != "transformation") return quantity;
    if (phase == "austenite") return "Ae1";
    if (phase == "ferrite") return "Ae3";
    return phase == "cementite" ? "Acm" : quantity;
}

const QStringList kColumns{"row_id",  "family", "composition_wt", "quantity", "phase",  "at_C",
                           "element", "value",  "unit",           "scatter",  "source", "note"};

/// What published and own rows have in common.
EvidenceRow rowFrom(const CsvTable& table, size_t line) {
    const auto cell = [&](const char* column) { return table.text(line, column); };
    EvidenceRow row;
    row.id = cell("row_id");
    row.family = cell("family");
    row.composition = cell("composition_wt");
    row.quantity = cell("quantity");
    row.phase = cell("phase");
    row.element = cell("element");
    row.unit = cell("unit");
    row.source = cell("source");
    row.note = cell("note");
    row.value_text = cell("value");
    row.scatter = cell("scatter").toDouble();
    bool is_number = false;
    if (const double at = cell("at_C").toDouble(&is_number); is_number) row.at_C = at;
    if (const double value = row.value_text.toDouble(&is_number); is_number) row.value = value;
    row.kind = kindOf(row.quantity, row.phase);
    return row;
}

Result<Done> readEquilibria(const char* file, bool calibration, std::vector<EvidenceRow>& rows) {
    const auto table = CsvTable::read(published(file), kColumns + QStringList{"how", "seen"});
    if (!table) return table.error();
    for (size_t line = 0; line < table.value().size(); ++line) {
        EvidenceRow row = rowFrom(table.value(), line);
        row.how = table.value().text(line, "how");
        row.seen = table.value().text(line, "seen");
        const bool unsure = row.note.contains("unsure") || row.how == "calculated";
        row.weight = calibration ? EvidenceClass::calibration : unsure ? EvidenceClass::unsure : EvidenceClass::firm;
        rows.push_back(std::move(row));
    }
    return Done{};
}

/// Temperatures and hardness of named steels; Ac1 and Ac3 are set beside the computed Ae1 and Ae3.
Result<Done> readExamples(std::vector<EvidenceRow>& rows) {
    const auto table = CsvTable::read(published("critical_examples.csv"),
                                      {"row_id", "steel", "composition_wt", "quantity", "heating_or_austenitising",
                                       "value", "unit", "source", "seen", "note"});
    if (!table) return table.error();
    for (size_t line = 0; line < table.value().size(); ++line) {
        const auto cell = [&](const char* column) { return table.value().text(line, column); };
        EvidenceRow row;
        row.id = cell("row_id");
        row.family = "steels heated or quenched";
        row.composition = cell("composition_wt");
        row.quantity = row.kind = cell("quantity");
        row.unit = cell("unit");
        row.how = "handbook";
        row.source = cell("source");
        row.seen = cell("seen");
        row.note = cell("steel") + ", " + cell("heating_or_austenitising") + "; " + cell("note");
        row.value_text = cell("value");
        bool is_number = false;
        if (const double value = row.value_text.toDouble(&is_number); is_number) row.value = value;
        row.weight = row.note.contains("unsure") ? EvidenceClass::unsure : EvidenceClass::firm;
        rows.push_back(std::move(row));
    }
    return Done{};
}

}  // namespace

QString word(EvidenceClass weight) {
    switch (weight) {
        case EvidenceClass::firm:
            return "firm";
        case EvidenceClass::unsure:
            return "unsure";
        case EvidenceClass::calibration:
            return "calibration";
        case EvidenceClass::shop:
            return "own";
    }
    return {};
}

QString EvidenceRow::dataSet() const {
    return id.startsWith("lt") || composition.contains("Al=bal") ? "light" : "ferrous";
}

std::optional<double> EvidenceRow::difference() const {
    if (!computed || !value) return std::nullopt;
    return *computed - *value;
}

bool EvidenceRow::isJudged() const { return difference() && scatter > 0; }

bool EvidenceRow::isHit() const { return isJudged() && std::abs(*difference()) <= 2 * scatter; }

Result<std::vector<EvidenceRow>> readEvidence() {
    std::vector<EvidenceRow> rows;
    for (const auto& [file, calibration] :
         {std::pair{"equilibrium_checks.csv", false}, {"light_checks.csv", false}, {"calibration_rows.csv", true}})
        if (auto done = readEquilibria(file, calibration, rows); !done) return std::move(done).error();
    if (auto done = readExamples(rows); !done) return std::move(done).error();
    return rows;
}

Result<std::vector<EvidenceRow>> readShopEvidence(const QString& path, bool weigh_in) {
    const auto table = CsvTable::read(path, kColumns);
    if (!table) return table.error();
    std::vector<EvidenceRow> rows;
    QStringList ids;
    for (size_t line = 0; line < table.value().size(); ++line) {
        EvidenceRow row = rowFrom(table.value(), line);
        if (row.id.isEmpty() || ids.contains(row.id))
            return table.value().error(line, "row_id", "every row needs an id of its own");
        if (!row.value) return table.value().error(line, "value", "\"" + row.value_text + "\" is no number");
        if (row.scatter <= 0)
            return table.value().error(line, "scatter", "state the half width that the measurement allows");
        if (row.source.isEmpty())
            return table.value().error(line, "source", "state who measured it, how and when: report number, date");
        ids << row.id;
        row.how = "measured";
        row.seen = "own";
        row.weight = weigh_in ? EvidenceClass::firm : EvidenceClass::shop;
        rows.push_back(std::move(row));
    }
    return rows;
}

Result<Done> computeEvidence(std::vector<EvidenceRow>& rows) {
    std::map<QString, std::shared_ptr<const DataSet>> sets;
    for (const EvidenceRow& row : rows) {
        if (sets.count(row.dataSet())) continue;
        auto set = loadDataSet(productPath("thermo/data") / row.dataSet().toStdString());
        if (!set) return std::move(set).error();
        sets[row.dataSet()] = std::move(set).value();
    }

    std::atomic<size_t> next{0};
    const auto work = [&] {
        for (size_t at = next++; at < rows.size(); at = next++) {
            EvidenceRow& row = rows[at];
            const auto& data = sets.at(row.dataSet());
            if (auto computed = computeRow(row, data, row.remark))
                row.computed = computed.value();
            else
                row.reason = QString::fromStdString(std::move(computed).error().text());
        }
    };
    std::vector<std::thread> workers;
    for (unsigned n = 1; n < std::max(1U, std::thread::hardware_concurrency()); ++n) workers.emplace_back(work);
    work();
    for (std::thread& worker : workers) worker.join();
    return Done{};
}

bool EvidenceGroup::isLittle() const { return weight == EvidenceClass::firm && count < kEnough; }

EvidenceGroup summarise(const std::vector<const EvidenceRow*>& rows) {
    EvidenceGroup group;
    std::vector<double> differences;
    for (const EvidenceRow* row : rows) {
        const auto off = row->difference();
        if (!off) {
            ++group.not_computed;
            continue;
        }
        differences.push_back(*off);
        group.mean += *off;
        if (group.worst_id.isEmpty() || std::abs(*off) > std::abs(group.worst)) {
            group.worst = *off;
            group.worst_id = row->id;
        }
    }
    group.count = static_cast<int>(differences.size());
    if (group.count == 0) return group;
    group.mean /= group.count;
    double squares = 0;
    for (const double off : differences) squares += (off - group.mean) * (off - group.mean);
    if (group.count > 1) group.deviation = std::sqrt(squares / (group.count - 1));
    return group;
}

std::vector<EvidenceGroup> evidenceGroups(const std::vector<EvidenceRow>& rows) {
    std::map<std::tuple<EvidenceClass, QString, QString, QString>, std::vector<const EvidenceRow*>> sorted;
    for (const EvidenceRow& row : rows) sorted[{row.weight, row.family, row.kind, row.unit}].push_back(&row);
    std::vector<EvidenceGroup> groups;
    for (const auto& [key, members] : sorted) {
        EvidenceGroup group = summarise(members);
        std::tie(group.weight, group.family, group.kind, group.unit) = key;
        groups.push_back(group);
    }
    return groups;
}

}  // namespace soak
