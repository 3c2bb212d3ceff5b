// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/relations.h"

#include <QRegularExpression>
#include <algorithm>

#include "base/folders.h"
#include "db/csv.h"
#include "planner/core/tables.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

/// "11.5 degC", "about 20 degC (90 % within)": the first number.
std::optional<double> firstNumber(const QString& text) {
    static const QRegularExpression number("[0-9]+(\\.[0-9]+)?");
    const auto match = number.match(text);
    return match.hasMatch() ? std::optional(match.captured().toDouble()) : std::nullopt;
}

Result<Done> readFormulas(RelationBook& book) {
    const auto table = CsvTable::read(
        QString::fromStdString(tablePath("critical_formulas.csv").string()),
        {"formula_id", "quantity", "expression", "unit", "validity", "scatter", "source", "seen", "worked_example"});
    if (!table) return table.error();
    const CsvTable& rows = table.value();
    for (size_t row = 0; row < rows.size(); ++row) {
        auto formula = Formula::parse(rows.text(row, "expression"));
        if (!formula) return rows.error(row, "expression", QString::fromStdString(formula.error().message));
        Relation relation;
        relation.id = rows.text(row, "formula_id");
        relation.quantity = rows.text(row, "quantity");
        relation.unit = rows.text(row, "unit");
        relation.source = rows.text(row, "source");
        relation.seen = rows.text(row, "seen");
        relation.worked_example = rows.text(row, "worked_example");
        relation.formula = std::move(formula).value();
        relation.range = rangesIn(rows.text(row, "validity"));
        relation.scatter = firstNumber(rows.text(row, "scatter"));
        book.relations[relation.id] = std::move(relation);
    }
    return Done{};
}

Result<Done> readOpinions(RelationBook& book) {
    const auto table = readTable("opinions.toml");
    if (!table) return table.error();
    QString unknown;
    forEachRow(table.value(), "opinion", [&](const toml::table& row) {
        OpinionRule rule{text(row, "quantity"), texts(row, "families"), {}, rangesIn(text(row, "range"))};
        forEachRow(row, "relations", [&](const toml::table& one) {
            const QString id = text(one, "id");
            if (!book.relations.count(id)) unknown = id;
            rule.relations.push_back({id, text(one, "name")});
        });
        book.rules.push_back(std::move(rule));
    });
    if (unknown.isEmpty()) return Done{};
    return badTable("opinions.toml", "critical_formulas.csv has no row \"" + unknown.toStdString() + "\"");
}

}  // namespace

std::map<QString, Relation::Range> rangesIn(const QString& validity) {
    // After a blank or at the start only: the "Mo<5" of "Mn+Ni+Cr+Mo<5" is no range of Mo.
    static const QRegularExpression range(
        "(?:^|[\\s;,])([A-Z][a-z]?)\\s*(?:(?:<=|<)\\s*([0-9.]+)|\\s([0-9.]+)-([0-9.]+))");
    std::map<QString, Relation::Range> ranges;
    for (auto found = range.globalMatch(validity); found.hasNext();) {
        const auto match = found.next();
        Relation::Range& one = ranges[match.captured(1)];
        if (!match.captured(2).isEmpty())
            one.high_wt = match.captured(2).toDouble();
        else
            one = {match.captured(3).toDouble(), match.captured(4).toDouble()};
    }
    return ranges;
}

QString outOfRange(const std::map<QString, Relation::Range>& range, const Formula::Values& wt) {
    QStringList outside;
    for (const auto& [element, limits] : range) {
        const auto at = wt.find(element);
        const double amount = at == wt.end() ? 0 : at->second;
        const auto say = [&, name = element](const char* side, double bound) {
            outside << QString("%1 %2 is %3 %4").arg(name, number(amount, 2), side, number(bound, 2));
        };
        if (limits.low_wt && amount < *limits.low_wt) say("below", *limits.low_wt);
        if (limits.high_wt && amount > *limits.high_wt) say("above", *limits.high_wt);
    }
    return listed(outside);
}

std::vector<Opinion> RelationBook::opinionsOn(const QString& quantity, const QString& family,
                                              const Formula::Values& wt) const {
    std::vector<Opinion> opinions;
    for (const OpinionRule& rule : rules) {
        if (rule.quantity != quantity || !rule.families.contains(family)) continue;
        for (const auto& [id, name] : rule.relations) {
            const Relation& relation = relations.at(id);
            const auto value = relation.formula.value(wt);
            if (!value) continue;
            auto range = rule.range;
            for (const auto& [element, limits] : relation.range) range[element] = limits;
            const QString outside = outOfRange(range, wt);
            opinions.push_back({quantity, name, *value, relation.scatter, outside.isEmpty(), outside,
                                relation.source + (relation.seen == "memory" ? " (from memory)" : "")});
        }
    }
    return opinions;
}

Formula::Values amountsOf(const Analysis& analysis) {
    Formula::Values wt;
    for (const auto& [element, content] : analysis)
        if (content.wt) wt[QString::fromStdString(element)] = *content.wt;
    return wt;
}

std::optional<double> medianOf(const std::vector<Opinion>& opinions) {
    std::vector<double> values;
    for (const Opinion& one : opinions)
        if (one.in_range) values.push_back(one.value);
    if (values.empty()) return std::nullopt;
    std::sort(values.begin(), values.end());
    const size_t half = values.size() / 2;
    return values.size() % 2 ? values[half] : (values[half - 1] + values[half]) / 2;
}

Result<RelationBook> loadRelations() {
    RelationBook book;
    if (auto done = readFormulas(book); !done) return std::move(done).error();
    if (auto done = readOpinions(book); !done) return std::move(done).error();
    return book;
}

}  // namespace soak
