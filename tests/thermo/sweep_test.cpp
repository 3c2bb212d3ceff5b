// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <cmath>

#include "support.h"

using namespace soak;
using namespace soak::test;

namespace {

struct Steel {
    const char* name;
    const char* wt;
};

const Steel kSteels[] = {
    {"18-8", "C=0.04,Cr=18.2,Ni=8.6,Mn=1.4,Si=0.5,Mo=0.3,Cu=0.3,N=0.05"},
    {"18-8 with titanium", "C=0.05,Cr=17.5,Ni=9.5,Mn=1.3,Si=0.5,Ti=0.4,N=0.012"},
    {"duplex", "C=0.02,Cr=22.2,Ni=5.6,Mo=3.1,Mn=1.5,Si=0.4,N=0.17,Cu=0.2"},
    {"cold-work tool steel", "C=1.52,Cr=11.8,Mo=0.8,V=0.9,Mn=0.35,Si=0.3,Ni=0.2"},
    {"high-speed steel", "C=0.88,Cr=4.1,Mo=4.9,V=1.85,W=6.2,Si=0.3,Mn=0.3"},
    {"low-alloy", "C=0.42,Cr=1.05,Mo=0.2,Mn=0.75,Si=0.25,Ni=0.15,V=0.01,Al=0.03,N=0.008"},
    {"microalloyed", "C=0.14,Mn=1.45,Si=0.3,Nb=0.035,Ti=0.015,V=0.05,N=0.006,Al=0.035"},
    {"plain carbon", "C=0.45,Mn=0.7,Si=0.25"},
};

constexpr double kFrom_C = 560, kTo_C = 1560;

/// Sets by data key and label; the delta ferrite of a sweep counts as ferrite, for a lone state does not know its past.
std::map<std::string, int> countsOf(const State& state) {
    std::map<std::string, int> counts;
    for (const auto& phase : state.phases) ++counts[phase.label == "delta ferrite" ? "ferrite" : phase.label];
    return counts;
}

const std::string& plain(const std::string& label) {
    static const std::string ferrite = "ferrite";
    return label == "delta ferrite" ? ferrite : label;
}

/// The event of the same label and kind nearest to `near_K`, of an alloy swept 3 K to each side.
std::optional<double> eventNear(const Chemistry& chemistry, const Event& event, double near_K) {
    Alloy alloy = alloyOf(chemistry);
    const Sweep sweep = valueOf(alloy.sweep(near_K - 3, near_K + 3));
    std::optional<double> best;
    for (const Event& other : sweep.events)
        if (plain(other.label) == plain(event.label) && other.kind == event.kind &&
            (!best || std::abs(other.temperature_K - near_K) < std::abs(*best - near_K)))
            best = other.temperature_K;
    return best;
}

Chemistry with(Chemistry chemistry, const std::string& element, double change_wt) {
    chemistry.wt[element] += change_wt;
    return chemistry;
}

}  // namespace

TEST_CASE("each event is confirmed by independent states 0.05 K to either side", "[sweep]") {
    for (const Steel& steel : kSteels) {
        Alloy alloy = alloyOf(std::string(steel.wt));
        const Sweep sweep = valueOf(alloy.sweep(kelvin(kFrom_C), kelvin(kTo_C)));
        REQUIRE(sweep.events.size() >= 4);
        CHECK(std::is_sorted(sweep.events.begin(), sweep.events.end(),
                             [](const Event& a, const Event& b) { return a.temperature_K < b.temperature_K; }));
        for (const Event& event : sweep.events) {
            const double low = event.temperature_K - 0.05, high = event.temperature_K + 0.05;
            auto before = countsOf(stateOf(steel.wt, celsius(low))), after = countsOf(stateOf(steel.wt, celsius(high)));
            INFO(steel.name << ": " << event.label << " at " << celsius(event.temperature_K));
            // Every event between the two states, so that two at nearly one temperature do not disturb each other.
            for (const Event& other : sweep.events)
                if (other.temperature_K > low && other.temperature_K < high)
                    before[plain(other.label)] += other.kind == EventKind::appears ? 1 : -1;
            for (const auto& counts : {before, after})
                for (const auto& [label, n] : counts) {
                    INFO(label);
                    CHECK(before[label] == after[label]);
                }
        }
    }
}

TEST_CASE("between two states of a sweep the phases change by the events there and by nothing else", "[sweep]") {
    for (const Steel& steel : kSteels) {
        Alloy alloy = alloyOf(std::string(steel.wt));
        const Sweep sweep = valueOf(alloy.sweep(kelvin(kFrom_C), kelvin(kTo_C)));
        CHECK(sweep.states.front().temperature_K == Approx(kelvin(kFrom_C)));
        CHECK(sweep.states.back().temperature_K == Approx(kelvin(kTo_C)));
        for (size_t k = 0; k + 1 < sweep.states.size(); ++k) {
            const State &a = sweep.states[k], &b = sweep.states[k + 1];
            auto counts = countsOf(a);
            for (const Event& event : sweep.events)
                if (event.temperature_K > a.temperature_K && event.temperature_K <= b.temperature_K)
                    counts[plain(event.label)] += event.kind == EventKind::appears ? 1 : -1;
            INFO(steel.name << " between " << celsius(a.temperature_K) << " and " << celsius(b.temperature_K));
            auto reached = countsOf(b);
            for (const auto& [label, n] : counts) CHECK(reached[label] == n);
        }
    }
}

TEST_CASE("every state of a sweep is the state of a cold start", "[sweep]") {
    for (const Steel& steel : kSteels) {
        Alloy alloy = alloyOf(std::string(steel.wt));
        const Sweep sweep = valueOf(alloy.sweep(kelvin(kFrom_C), kelvin(kTo_C)));
        for (const State& state : sweep.states) {
            const State cold = stateOf(steel.wt, celsius(state.temperature_K));
            INFO(steel.name << " at " << celsius(state.temperature_K) << ": " << labelsOf(state) << " | "
                            << labelsOf(cold));
            CHECK(state.gibbs_J_per_mol == Approx(cold.gibbs_J_per_mol).margin(1e-6 * kGas * state.temperature_K));
            CHECK(countsOf(state) == countsOf(cold));
            CHECK(state.proof_J_per_mol <= 1e-6 * kGas * state.temperature_K);
        }
    }
}

TEST_CASE("events do not depend on where the sweep begins", "[sweep]") {
    for (const Steel& steel : kSteels) {
        Alloy one = alloyOf(std::string(steel.wt)), other = alloyOf(std::string(steel.wt));
        const Sweep whole = valueOf(one.sweep(kelvin(kFrom_C), kelvin(kTo_C)));
        const Sweep shifted = valueOf(other.sweep(kelvin(kFrom_C) - 7.3, kelvin(kTo_C) + 4.1));
        std::vector<const Event*> inside;
        for (const Event& event : shifted.events)
            if (event.temperature_K > kelvin(kFrom_C) && event.temperature_K < kelvin(kTo_C)) inside.push_back(&event);
        INFO(steel.name);
        REQUIRE(inside.size() == whole.events.size());
        for (size_t k = 0; k < inside.size(); ++k) {
            CHECK(inside[k]->label == whole.events[k].label);
            CHECK(inside[k]->kind == whole.events[k].kind);
            CHECK(inside[k]->temperature_K == Approx(whole.events[k].temperature_K).margin(1e-3));
        }
    }
}

TEST_CASE("the slope of each event with each element agrees with differences", "[sweep][slope]") {
    // Step: 0.01 K on the event, at most 1/500 of the content. Rounding: events are solved to 1e-7 K, or 1e-5 of
    // the step; curvature enters with its square, below 1e-4. Small, for a slope changes where another phase's boundary
    // is near. Slopes under 0.05 K/wt% are not compared.
    int compared = 0;
    for (const Steel& steel : kSteels) {
        const Chemistry chemistry = wt(steel.wt);
        Alloy alloy = alloyOf(chemistry);
        const Sweep sweep = valueOf(alloy.sweep(kelvin(kFrom_C), kelvin(kTo_C)));
        for (const Event& event : sweep.events) {
            INFO(steel.name << ": " << event.label << " at " << celsius(event.temperature_K));
            REQUIRE(event.K_per_wt.size() == chemistry.wt.size());
            for (const auto& [element, slope] : event.K_per_wt) {
                if (std::abs(slope) < 0.05) continue;
                const double step = std::min(0.01 / std::abs(slope), chemistry.wt.at(element) / 500);
                const auto high = eventNear(with(chemistry, element, step), event, event.temperature_K);
                const auto low = eventNear(with(chemistry, element, -step), event, event.temperature_K);
                INFO(element << " " << slope << " K/wt%");
                REQUIRE(high);
                REQUIRE(low);
                CHECK(slope == Approx((*high - *low) / (2 * step)).epsilon(1e-3));
                ++compared;
            }
        }
    }
    CHECK(compared > 250);
}

TEST_CASE("the temperature of a fraction is where a state has that fraction, with its slope", "[sweep][slope]") {
    struct Asked {
        const char *wt, *label;
        double fraction, from_C, to_C;
    };
    const Asked list[] = {{kSteels[2].wt, "ferrite", 0.5, 1000, 1250},
                          {kSteels[2].wt, "austenite", 0.45, 1000, 1250},
                          {kSteels[3].wt, "M7C3", 0.10, 900, 1200},
                          {kSteels[7].wt, "ferrite", 0.25, 740, 770},
                          {kSteels[4].wt, "M6C", 0.08, 1000, 1200}};
    for (const Asked& asked : list) {
        const auto solve = [&](const Chemistry& chemistry) {
            Alloy alloy = alloyOf(chemistry);
            return valueOf(
                alloy.temperatureOfFraction(asked.label, asked.fraction, kelvin(asked.from_C), kelvin(asked.to_C)));
        };
        const Chemistry chemistry = wt(asked.wt);
        const Event event = solve(chemistry);
        INFO(asked.label << " " << asked.fraction << " at " << celsius(event.temperature_K));
        CHECK(event.label == asked.label);
        CHECK(stateOf(asked.wt, celsius(event.temperature_K)).volumeFraction(asked.label) ==
              Approx(asked.fraction).margin(1e-6));
        REQUIRE(event.K_per_wt.size() == chemistry.wt.size());
        for (const auto& [element, slope] : event.K_per_wt) {
            const double step = std::min(0.1 / std::abs(slope), chemistry.wt.at(element) / 500);
            const double difference = (solve(with(chemistry, element, step)).temperature_K -
                                       solve(with(chemistry, element, -step)).temperature_K) /
                                      (2 * step);
            INFO(element);
            CHECK(slope == Approx(difference).epsilon(1e-3).margin(0.05));
        }
    }
}

TEST_CASE("the temperature of a matrix content is where the matrix holds it, with its slope", "[sweep][slope]") {
    struct Asked {
        const char *wt, *element;
        double content, from_C, to_C;
    };
    const Asked list[] = {{kSteels[3].wt, "C", 0.6, 900, 1150},
                          {kSteels[4].wt, "C", 0.5, 1000, 1230},
                          {kSteels[3].wt, "Cr", 6.0, 900, 1150},
                          {kSteels[6].wt, "Nb", 0.01, 900, 1200}};
    for (const Asked& asked : list) {
        const auto solve = [&](const Chemistry& chemistry) {
            Alloy alloy = alloyOf(chemistry);
            return valueOf(alloy.temperatureOfMatrixContent(asked.element, asked.content, kelvin(asked.from_C),
                                                            kelvin(asked.to_C)));
        };
        const Chemistry chemistry = wt(asked.wt);
        const Event event = solve(chemistry);
        INFO(asked.element << " " << asked.content << " at " << celsius(event.temperature_K));
        const auto content = stateOf(asked.wt, celsius(event.temperature_K)).matrixContent(asked.element);
        REQUIRE(content);
        CHECK(*content == Approx(asked.content).margin(1e-6));
        REQUIRE(event.K_per_wt.size() == chemistry.wt.size());
        for (const auto& [element, slope] : event.K_per_wt) {
            const double step = std::min(0.1 / std::abs(slope), chemistry.wt.at(element) / 500);
            const double difference = (solve(with(chemistry, element, step)).temperature_K -
                                       solve(with(chemistry, element, -step)).temperature_K) /
                                      (2 * step);
            INFO(element);
            CHECK(slope == Approx(difference).epsilon(1e-3).margin(0.05));
        }
    }
}

TEST_CASE("a fraction or content that is not reached is refused in words", "[sweep]") {
    Alloy alloy = alloyOf(std::string(kSteels[2].wt));
    const auto fraction = alloy.temperatureOfFraction("ferrite", 0.95, kelvin(1050), kelvin(1100));
    REQUIRE_FALSE(fraction);
    CHECK(fraction.error().fault == Fault::range);
    CHECK_THAT(fraction.error().text(), Catch::Contains("ferrite") && Catch::Contains("not reached"));
    const auto content = alloy.temperatureOfMatrixContent("Cr", 40, kelvin(1050), kelvin(1100));
    REQUIRE_FALSE(content);
    CHECK(content.error().fault == Fault::range);
    CHECK_FALSE(alloy.sweep(1300, 1300));
    CHECK_FALSE(alloy.sweep(1400, 1300));
}

TEST_CASE("pure elements change at one temperature", "[sweep]") {
    Alloy alloy = alloyOf("Fe=bal");
    const Sweep sweep = valueOf(alloy.sweep(1000, 1900));
    REQUIRE(sweep.events.size() == 6);
    for (size_t k = 0; k < 6; k += 2) {
        CHECK(sweep.events[k].temperature_K == Approx(sweep.events[k + 1].temperature_K).margin(1e-6));
        CHECK(sweep.events[k].kind != sweep.events[k + 1].kind);
    }
}

TEST_CASE("ferrite that forms from austenite on heating is delta ferrite, other ferrite is not", "[sweep][label]") {
    Alloy steel = alloyOf("C=0.1,Mn=0.5");
    const Sweep sweep = valueOf(steel.sweep(kelvin(600), kelvin(1550)));
    const auto gone = sweep.lastVanishing("ferrite"), delta = sweep.firstAppearing("delta ferrite");
    REQUIRE(gone);
    REQUIRE(delta);
    CHECK(celsius(gone->temperature_K) < 900);
    CHECK(celsius(delta->temperature_K) > 1300);
    CHECK_FALSE(sweep.firstAppearing("ferrite", kelvin(1000)));
    for (const State& state : sweep.states)
        CHECK(state.find(celsius(state.temperature_K) < 1000 ? "delta ferrite" : "ferrite") == nullptr);
    // A lone state says the same.
    CHECK(stateOf("C=0.1,Mn=0.5", 1480).find("delta ferrite") != nullptr);
    CHECK(stateOf("C=0.1,Mn=0.5", 700).find("ferrite") != nullptr);

    // A chromium steel that never becomes austenite keeps the plain name up to its melting.
    Alloy ferritic = alloyOf("Cr=18,C=0.005");
    const Sweep plainSweep = valueOf(ferritic.sweep(kelvin(900), kelvin(1550)));
    CHECK(plainSweep.presentAnywhere("ferrite"));
    CHECK_FALSE(plainSweep.presentAnywhere("delta ferrite"));

    // And so does the ferrite of a duplex steel, which comes back where sigma gives way.
    Alloy duplex = alloyOf(std::string(kSteels[2].wt));
    const Sweep mixed = valueOf(duplex.sweep(kelvin(600), kelvin(1300)));
    CHECK(mixed.presentAnywhere("ferrite"));
    CHECK_FALSE(mixed.presentAnywhere("delta ferrite"));
}

TEST_CASE("solvus and onset are read from the sweep", "[sweep]") {
    Alloy alloy = alloyOf(std::string(kSteels[2].wt));
    const Sweep sweep = valueOf(alloy.sweep(kelvin(600), kelvin(1550)));
    const auto sigma = sweep.lastVanishing("sigma");
    REQUIRE(sigma);
    CHECK(sigma->phase == "sigma");
    for (const State& state : sweep.states)
        CHECK((state.temperature_K < sigma->temperature_K || state.find("sigma") == nullptr));
    CHECK(sweep.presentAnywhere("sigma"));
    CHECK_FALSE(sweep.presentAtTop("sigma"));
    CHECK(sweep.presentAtTop("liquid"));
    CHECK_FALSE(sweep.presentAnywhere("graphite"));
    CHECK_FALSE(sweep.lastVanishing("graphite"));
    const auto solidus = sweep.firstAppearing("liquid");
    REQUIRE(solidus);
    CHECK(solidus->temperature_K > sigma->temperature_K);
}
