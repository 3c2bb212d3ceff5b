// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/cooling_rules.h"

#include <cmath>

#include "planner/core/tables.h"

namespace soak {

double SensitisationRule::noseAt_s(double carbon_wt) const {
    if (carbon_wt <= nose_s.front().first) return nose_s.front().second;
    for (size_t i = 1; i < nose_s.size(); ++i) {
        const auto& [low, low_s] = nose_s[i - 1];
        const auto& [high, high_s] = nose_s[i];
        if (carbon_wt > high) continue;
        const double share = (carbon_wt - low) / (high - low);
        return low_s * std::pow(high_s / low_s, share);
    }
    return nose_s.back().second;
}

const DelayRule* CoolingRules::delayFor(const QString& family, double section_mm) const {
    for (const DelayRule& rule : delays)
        if (rule.families.contains(family) && section_mm > rule.from_mm && section_mm <= rule.to_mm) return &rule;
    return nullptr;
}

const SensitisationRule* CoolingRules::sensitisationOf(const QString& family) const {
    for (const SensitisationRule& rule : sensitisation)
        if (rule.families.contains(family)) return &rule;
    return nullptr;
}

Result<CoolingRules> loadCoolingRules() {
    const auto table = readTable("cooling.toml");
    if (!table) return table.error();
    CoolingRules rules;
    forEachRow(table.value(), "delay", [&](const toml::table& row) {
        rules.delays.push_back({texts(row, "families"), numberIn(row, "from_mm").value_or(0),
                                numberIn(row, "to_mm").value_or(1e9), numberIn(row, "seconds").value_or(0),
                                text(row, "source")});
    });
    forEachRow(table.value(), "crossing", [&](const toml::table& row) {
        rules.crossings.push_back({texts(row, "families"), text(row, "what"), text(row, "phase"),
                                   numberIn(row, "low_C").value_or(0), numberIn(row, "high_C").value_or(0),
                                   numberIn(row, "least_wt"), text(row, "element"), text(row, "because"),
                                   text(row, "source")});
    });
    bool bad = false;
    forEachRow(table.value(), "sensitisation", [&](const toml::table& row) {
        SensitisationRule rule{texts(row, "families"),
                               text(row, "phase"),
                               text(row, "element"),
                               numberIn(row, "least_wt").value_or(0),
                               numberIn(row, "low_C").value_or(0),
                               {},
                               text(row, "source")};
        forEachRow(row, "nose", [&](const toml::table& one) {
            rule.nose_s.push_back({numberIn(one, "C").value_or(0), numberIn(one, "seconds").value_or(0)});
        });
        bad = bad || rule.nose_s.empty();
        rules.sensitisation.push_back(std::move(rule));
    });
    if (bad) return badTable("cooling.toml", "a sensitisation row has no nose");
    return rules;
}

}  // namespace soak
