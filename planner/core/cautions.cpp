// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/cautions.h"

#include <algorithm>
#include <tuple>

namespace soak {
namespace {

/// When a subject of the cautions table applies: every text that is not empty must be met. Words of one text are
/// alternatives; furnace and medium are searched for them, a family must begin with one, a kind must be one.
struct SubjectRow {
    const char *applies_to, *medium = "", *furnace = "", *family = "", *kind = "", *not_furnace = "";
    double from_C = 0;
};
const SubjectRow kSubjects[] = {
    {"medium: water quench", "water"},
    {"medium: oil quench", "oil"},
    {"medium: polymer quench", "polymer"},
    {"atmosphere: nitrogen or argon", "nitrogen|argon"},
    {"medium: vacuum furnace", "", "vacuum"},
    {"atmosphere: endothermic", "", "endothermic"},
    {"atmosphere: flammable", "", "endothermic"},
    {"medium: gas-fired furnace", "", "gas", "", "", "vacuum"},
    {"medium: electric furnace", "", "electric"},
    {"medium: salt bath", "", "salt"},
    {"treatment: solution-anneal stainless", "", "",
     "austenitic|superaustenitic|heat-resistant-austenitic|cast-austenitic|duplex|lean-duplex|superduplex|cast-duplex|"
     "ferritic|martensitic-stainless|precipitation-hardening",
     "solution-anneal"},
    {"treatment: solution-anneal high-temperature", "", "", "", "solution-anneal", "", 1100},
    {"treatment: harden", "", "", "", "harden"},
    {"treatment: harden high-speed steel", "", "", "high-speed", "harden"},
    {"treatment: anneal or normalise", "", "", "", "normalise|full-anneal"},
    {"medium: nitrate salt bath, aluminium", "", "nitrate", "light-"},
    {"treatment: aluminium solution", "", "", "light-", "solution-anneal|homogenise|re-solution"},
    {"treatment: aluminium quench", "water|polymer", "", "light-", "solution-anneal"},
    {"treatment: aluminium castings", "", "", "light-cast-", "solution-anneal|homogenise|re-solution"},
    {"treatment: aluminium ageing", "", "", "light-", "age"},
};

QStringList words(const char* text) { return QString(text).split('|', Qt::SkipEmptyParts); }

/// Whether one of the words is met; no words at all are met by everything.
template <class Met>
bool anyOf(const char* text, Met met) {
    const QStringList all = words(text);
    return all.isEmpty() || std::any_of(all.begin(), all.end(), met);
}

/// The words of Caution::applies_to that this job brings with it.
QStringList subjectsOf(const Cycle& cycle, const QString& family, const Furnace& furnace, const QString& medium,
                       double setpoint_C) {
    QStringList subjects;
    for (const SubjectRow& row : kSubjects) {
        const auto in = [](const QString& text) {
            return [&text](const QString& word) { return text.contains(word, Qt::CaseInsensitive); };
        };
        const bool excluded = *row.not_furnace && anyOf(row.not_furnace, in(furnace.kind));
        if (!excluded && anyOf(row.medium, in(medium)) && anyOf(row.furnace, in(furnace.kind)) &&
            anyOf(row.family, [&](const QString& word) { return family.startsWith(word); }) &&
            anyOf(row.kind, [&](const QString& word) { return cycle.kind == word; }) && setpoint_C >= row.from_C)
            subjects << row.applies_to;
    }
    return subjects;
}

/// "alloy: leaded aluminium (2007 2011 6262)" speaks of the grades in its brackets.
bool speaksOfGrade(const Caution& caution, const Cycle& cycle) {
    if (!caution.applies_to.startsWith("alloy: ")) return false;
    const QStringList named = caution.applies_to.section('(', 1).section(')', 0, 0).split(' ', Qt::SkipEmptyParts);
    return std::any_of(named.begin(), named.end(), [&](const QString& name) {
        return cycle.grades.contains(name) || cycle.grades.contains(name + ".0");
    });
}

/// Whether the caution belongs to one family of metals rather than to any that meets the medium.
bool speaksOfMetal(const Caution& caution) {
    return caution.applies_to.startsWith("alloy: ") ||
           std::any_of(std::begin(kSubjects), std::end(kSubjects),
                       [&](const SubjectRow& row) { return *row.family && caution.applies_to == row.applies_to; });
}

int rankOf(const QString& severity) { return severity == "danger" ? 0 : severity == "warning" ? 1 : 2; }

}  // namespace

std::vector<Caution> cautionsFor(const std::vector<Caution>& all, const Cycle& cycle, const QString& family,
                                 const Furnace& furnace, const QString& quench_medium, double setpoint_C,
                                 std::size_t most) {
    const QStringList subjects = subjectsOf(cycle, family, furnace, quench_medium, setpoint_C);
    std::vector<Caution> special, general;
    for (const Caution& caution : all) {
        if (subjects.contains(caution.applies_to) || speaksOfGrade(caution, cycle)) special.push_back(caution);
        if (caution.applies_to == "treatment: any") general.push_back(caution);
    }
    // Of equal danger what speaks of this very metal comes first, in the table's order: the worst stands on top there.
    // Of the others the shorter line comes first: it is the one that is read.
    const auto worse = [](const Caution& a, const Caution& b) {
        const auto key = [](const Caution& one) {
            const bool of_metal = speaksOfMetal(one);
            return std::tuple(rankOf(one.severity), !of_metal, of_metal ? 0 : one.text.size());
        };
        return key(a) < key(b);
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
