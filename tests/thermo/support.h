// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <catch2/catch.hpp>
#include <memory>
#include <random>
#include <sstream>
#include <string>
#include <vector>

#include "alloy.h"
#include "base/folders.h"
#include "base/units.h"
#include "data_set.h"
#include "system.h"

namespace soak::test {

using Random = std::mt19937_64;

inline double uniform(Random& random, double low, double high) {
    return std::uniform_real_distribution<double>(low, high)(random);
}

/// The ferrous set, loaded once.
inline std::shared_ptr<const DataSet> ferrous() {
    static const auto data = loadDataSet(productPath("thermo/data/ferrous"));
    REQUIRE(data);
    return data.value();
}

inline std::vector<std::string> split(const std::string& text, char at) {
    std::vector<std::string> parts;
    std::istringstream in(text);
    for (std::string part; std::getline(in, part, at);) parts.push_back(part);
    return parts;
}

/// "C=0.05,Cr=18" or "C=0.05;Cr=18;Fe=bal", wt%.
inline Chemistry wt(std::string text) {
    for (char& c : text)
        if (c == ';') c = ',';
    Chemistry chemistry;
    for (const auto& part : split(text, ',')) {
        const auto cut = part.find('=');
        if (part.substr(cut + 1) == "bal")
            chemistry.balance = part.substr(0, cut);
        else
            chemistry.wt[part.substr(0, cut)] = std::stod(part.substr(cut + 1));
    }
    return chemistry;
}

inline Alloy alloyOf(const Chemistry& chemistry, const PhaseChoice& choice = {}) {
    auto alloy = Alloy::make(ferrous(), chemistry, choice);
    if (!alloy) FAIL(alloy.error().text());
    return std::move(alloy).value();
}
inline Alloy alloyOf(const std::string& chemistry, const PhaseChoice& choice = {}) {
    return alloyOf(wt(chemistry), choice);
}

template <class T>
T valueOf(Result<T> result) {
    if (!result) FAIL(result.error().text() << "  " << result.error().repeat);
    return std::move(result).value();
}

/// The equilibrium from a cold start at a temperature in °C.
inline State stateOf(const std::string& chemistry, double at_C, const PhaseChoice& choice = {}) {
    Alloy alloy = alloyOf(chemistry, choice);
    return valueOf(alloy.stateAt(kelvin(at_C)));
}

/// "austenite MX M23C6": the labels, largest amount first; a label that two sets carry stands twice.
inline std::string labelsOf(const State& state) {
    std::string list;
    for (const auto& phase : state.phases) list += (list.empty() ? "" : " ") + phase.label;
    return list;
}

inline int setsOf(const State& state, const std::string& label) {
    int count = 0;
    for (const auto& phase : state.phases) count += phase.label == label;
    return count;
}

}  // namespace soak::test
