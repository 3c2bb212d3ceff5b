// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/cautions.h"

#include <algorithm>

namespace soak {
namespace {

bool mentions(const QString& text, const char* word) { return text.contains(word, Qt::CaseInsensitive); }

/// The words of Caution::applies_to that this job brings with it.
QStringList subjectsOf(const Cycle& cycle, const QString& family, const Furnace& furnace, const QString& medium,
                       double setpoint_C) {
    QStringList subjects;
    const bool stainless = mentions(family, "austenitic") || mentions(family, "duplex") ||
                           mentions(family, "stainless") || mentions(family, "ferritic") ||
                           mentions(family, "precipitation");
    const auto add = [&](bool applies, const char* subject) {
        if (applies) subjects << subject;
    };
    add(mentions(medium, "water"), "medium: water quench");
    add(mentions(medium, "oil"), "medium: oil quench");
    add(mentions(medium, "polymer"), "medium: polymer quench");
    add(mentions(medium, "nitrogen") || mentions(medium, "argon"), "atmosphere: nitrogen or argon");
    add(mentions(furnace.kind, "vacuum"), "medium: vacuum furnace");
    add(mentions(furnace.kind, "endothermic"), "atmosphere: endothermic");
    add(mentions(furnace.kind, "endothermic"), "atmosphere: flammable");
    add(mentions(furnace.kind, "gas") && !mentions(furnace.kind, "vacuum"), "medium: gas-fired furnace");
    add(mentions(furnace.kind, "electric"), "medium: electric furnace");
    add(mentions(furnace.kind, "salt"), "medium: salt bath");
    add(cycle.kind == "solution-anneal" && stainless, "treatment: solution-anneal stainless");
    add(cycle.kind == "solution-anneal" && setpoint_C >= 1100, "treatment: solution-anneal high-temperature");
    add(cycle.kind == "harden", "treatment: harden");
    add(cycle.kind == "harden" && family == "high-speed", "treatment: harden high-speed steel");
    add(cycle.kind == "normalise" || cycle.kind == "full-anneal", "treatment: anneal or normalise");
    return subjects;
}

int rankOf(const QString& severity) { return severity == "danger" ? 0 : severity == "warning" ? 1 : 2; }

}  // namespace

std::vector<Caution> cautionsFor(const std::vector<Caution>& all, const Cycle& cycle, const QString& family,
                                 const Furnace& furnace, const QString& quench_medium, double setpoint_C,
                                 std::size_t most) {
    const QStringList subjects = subjectsOf(cycle, family, furnace, quench_medium, setpoint_C);
    std::vector<Caution> special, general;
    for (const Caution& caution : all) {
        if (subjects.contains(caution.applies_to)) special.push_back(caution);
        if (caution.applies_to == "treatment: any") general.push_back(caution);
    }
    // Of equal danger the shorter line comes first: it is the one that is read.
    const auto worse = [](const Caution& a, const Caution& b) {
        return std::pair(rankOf(a.severity), a.text.size()) < std::pair(rankOf(b.severity), b.text.size());
    };
    std::stable_sort(special.begin(), special.end(), worse);
    // The table's own order holds for the general ones: over-temperature protection stands first.
    std::stable_sort(general.begin(), general.end(),
                     [](const Caution& a, const Caution& b) { return rankOf(a.severity) < rankOf(b.severity); });
    // One place is kept for what holds at every furnace.
    std::vector<Caution> chosen;
    for (const Caution& caution : special)
        if (chosen.size() + 1 < most) chosen.push_back(caution);
    for (const Caution& caution : general)
        if (chosen.size() < most) chosen.push_back(caution);
    std::stable_sort(chosen.begin(), chosen.end(), worse);
    return chosen;
}

}  // namespace soak
