// SPDX-License-Identifier: GPL-3.0-or-later
// The words of the published rows: names of phases and products of contents.
#include <QRegularExpression>
#include <algorithm>
#include <array>
#include <map>

#include "planner/core/evidence_compute.h"

namespace soak {
namespace {

// Labels that are told apart from the matrix phase whose data key they share.
constexpr std::array<const char*, 4> kOwnWord{"MX", "copper", "zinc-rich aluminium", "Cr-rich ferrite"};

// Published word -> data key and label; every other word must be a data key itself.
const std::map<QString, PhaseWord> kWords{{"delta ferrite", {"ferrite", ""}},
                                          {"ferrite (Mo)", {"ferrite", "*", "Mo"}},
                                          {"bcc", {"ferrite", "*"}},
                                          {"(W)", {"ferrite", "*", "W"}},
                                          {"W", {"ferrite", "*", "W"}},
                                          {"Mo", {"ferrite", "*", "Mo"}},
                                          {"Nb", {"ferrite", "*", "Nb"}},
                                          {"V", {"ferrite", "*", "V"}},
                                          {"Cr", {"ferrite", "*", "Cr"}},
                                          {"(Ti) bcc", {"ferrite", "*", "Ti"}},
                                          {"fcc", {"austenite", ""}},
                                          {"gamma-Mn (fcc)", {"austenite", ""}},
                                          {"hcp", {"hexagonal", "*"}},
                                          {"M2C", {"hexagonal", "M2C"}},
                                          {"Nb2C", {"hexagonal", "M2C"}},
                                          {"V2C", {"hexagonal", "M2C"}},
                                          {"Cr3C2", {"M3C2", ""}},
                                          {"Laves", {"laves", ""}},
                                          {"MX", {"austenite", "MX"}},
                                          {"copper", {"austenite", "copper"}},
                                          {"Cr-rich ferrite", {"ferrite", "Cr-rich ferrite"}}};

ProductFactor factorFrom(const QString& inside, const QString& power) {
    ProductFactor factor;
    if (!power.isEmpty()) factor.power = power.toDouble();
    for (const QString& part : inside.split('+')) {
        static const QRegularExpression form(R"(^\s*(?:(\d+)/(\d+)\s*)?([A-Z][a-z]?)\s*$)");
        const auto found = form.match(part);
        if (!found.hasMatch()) return {};
        const double weight =
            found.captured(1).isEmpty() ? 1 : found.captured(1).toDouble() / found.captured(2).toDouble();
        factor.sum.emplace_back(found.captured(3).toStdString(), weight);
    }
    return factor;
}

}  // namespace

bool PhaseWord::matches(const std::string& name, const std::string& its_label) const {
    if (name != key) return false;
    if (label == "*") return true;
    if (!label.empty()) return its_label == label;
    return std::find(kOwnWord.begin(), kOwnWord.end(), its_label) == kOwnWord.end();
}

bool PhaseWord::matches(const PhaseAmount& phase) const {
    if (!matches(phase.name, phase.label)) return false;
    return main.empty() || main == std::max_element(phase.wt.begin(), phase.wt.end(), [](const auto& a, const auto& b) {
                                       return a.second < b.second;
                                   })->first;
}

std::optional<PhaseWord> phaseWord(const QString& text, const DataSetFacts& facts) {
    const QString word = text.trimmed();
    const auto known = kWords.find(word);
    const PhaseWord phase = known == kWords.end() ? PhaseWord{word.toStdString(), ""} : known->second;
    const bool there = std::find(facts.phases.begin(), facts.phases.end(), phase.key) != facts.phases.end();
    return there ? std::optional(phase) : std::nullopt;
}

std::vector<ProductFactor> solubilityProduct(const QString& note) {
    static const QRegularExpression whole(R"(log\s*((?:\[[^\]]+\](?:\^[0-9.]+)?)+))");
    static const QRegularExpression one(R"(\[([^\]]+)\](?:\^([0-9.]+))?)");
    std::vector<ProductFactor> product;
    auto found = one.globalMatch(whole.match(note).captured(1));
    while (found.hasNext()) {
        const auto part = found.next();
        product.push_back(factorFrom(part.captured(1), part.captured(2)));
        if (product.back().sum.empty()) return {};
    }
    return product;
}

}  // namespace soak
