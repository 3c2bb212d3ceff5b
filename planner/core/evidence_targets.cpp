// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/evidence_targets.h"

#include <algorithm>
#include <cmath>

#include "base/folders.h"
#include "db/csv.h"

namespace soak {
namespace {

/// "*", "trade alloy;stainless", or "* but trade alloy".
bool speaksOf(const QString& families, const QString& family) {
    const QStringList halves = families.split(" but ");
    const auto holds = [&](const QString& list) { return list == "*" || list.split(';').contains(family); };
    return holds(halves[0]) && (halves.size() < 2 || !holds(halves[1]));
}

}  // namespace

Result<std::vector<EvidenceTarget>> evidenceTargets(const std::vector<EvidenceRow>& rows) {
    const QString file = QString::fromStdString(productPath("tests/published/targets.csv").string());
    const auto table = CsvTable::read(
        file, {"target_id", "what", "rows", "families", "kinds", "phases", "unit", "deviation", "worst"});
    if (!table) return table.error();
    std::vector<EvidenceTarget> targets;
    for (std::size_t line = 0; line < table.value().size(); ++line) {
        const auto cell = [&](const char* column) { return table.value().text(line, column); };
        EvidenceTarget target{cell("target_id"),
                              cell("what"),
                              cell("unit"),
                              cell("deviation").toDouble(),
                              cell("worst").toDouble(),
                              {},
                              0,
                              0,
                              0,
                              {}};
        if (target.deviation <= 0 || target.worst <= 0)
            return table.value().error(line, "deviation", "a target needs a deviation and a worst above 0");
        std::vector<const EvidenceRow*> members;
        for (const EvidenceRow& row : rows) {
            if (row.unit != target.unit || !row.difference()) continue;
            if (!row.id.startsWith(cell("rows")) || !cell("kinds").split(';').contains(row.kind)) continue;
            if (!speaksOf(cell("families"), row.family) || !speaksOf(cell("phases"), row.phase)) continue;
            if (row.weight == EvidenceClass::unsure && row.isJudged()) {
                ++target.unsure;
                target.unsure_hits += row.isHit() ? 1 : 0;
            }
            if (row.weight != EvidenceClass::firm) continue;
            members.push_back(&row);
            target.own_scatter += row.scatter;
            if (std::abs(*row.difference()) > std::max(target.worst, row.scatter)) target.missed << row.id;
        }
        if (!members.empty()) target.own_scatter /= static_cast<double>(members.size());
        target.reached = summarise(members);
        targets.push_back(std::move(target));
    }
    return targets;
}

}  // namespace soak
