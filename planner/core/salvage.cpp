// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/salvage.h"

#include "planner/core/tables.h"

namespace soak {

Result<std::vector<SalvageRule>> loadSalvageRules() {
    const auto table = readTable("salvage.toml");
    if (!table) return table.error();
    std::vector<SalvageRule> rules;
    forEachRow(table.value(), "salvage", [&](const toml::table& row) {
        rules.push_back(
            {text(row, "wrong"), texts(row, "families"), texts(row, "kinds"), text(row, "text"), text(row, "source")});
    });
    return rules;
}

QStringList salvageFor(const std::vector<SalvageRule>& rules, const QString& wrong, const QString& family,
                       const QString& kind) {
    QStringList special, general;
    for (const SalvageRule& rule : rules) {
        const bool any_family = rule.families.contains("*"), any_kind = rule.kinds.contains("*");
        if (rule.wrong != wrong || !(any_family || rule.families.contains(family)) ||
            !(any_kind || rule.kinds.contains(kind)))
            continue;
        (any_family || any_kind ? general : special) << rule.text + " (" + rule.source + ")";
    }
    return special.isEmpty() ? general : special;
}

}  // namespace soak
