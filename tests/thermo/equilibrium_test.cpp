// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <cmath>

#include "support.h"

using namespace soak;
using namespace soak::test;

namespace {

PhaseChoice only(const std::string& wanted) {
    PhaseChoice choice;
    for (const auto& phase : facts(*ferrous()).phases)
        if (phase != wanted) choice.without.push_back(phase);
    return choice;
}

/// wt% of an element in the first (largest) set with this label.
double inSet(const State& state, const std::string& label, const std::string& element) {
    const PhaseAmount* set = state.find(label);
    REQUIRE(set);
    return set->wt.at(element);
}

}  // namespace

TEST_CASE("a state holds together: fractions, compositions, potentials", "[equilibrium]") {
    const std::string steel = "C=0.9,Cr=4.2,Mo=5,V=1.9,W=6.3,Si=0.3,Mn=0.3,Co=0.5,Ni=0.3";
    for (double at_C : {700.0, 1000.0, 1200.0, 1350.0}) {
        const State state = stateOf(steel, at_C);
        INFO(at_C << " " << labelsOf(state));
        double mole = 0, mass = 0, volume = 0;
        std::map<std::string, double> held;
        for (const auto& phase : state.phases) {
            mole += phase.mole_fraction;
            mass += phase.mass_fraction;
            volume += phase.volume_fraction;
            double sum = 0;
            for (const auto& [element, content] : phase.wt) {
                sum += content;
                held[element] += phase.mass_fraction * content;
            }
            CHECK(sum == Approx(100).epsilon(1e-12));
            std::map<char, double> sublattice;
            for (const auto& [key, y] : phase.site_fraction) {
                CHECK(y > 0);
                sublattice[key[0]] += y;
            }
            for (const auto& [s, total] : sublattice) CHECK(total == Approx(1).epsilon(1e-12));
        }
        CHECK(mole == Approx(1).epsilon(1e-12));
        CHECK(mass == Approx(1).epsilon(1e-12));
        CHECK(volume == Approx(1).epsilon(1e-12));
        for (const auto& [element, content] : wt(steel).wt) CHECK(held.at(element) == Approx(content).epsilon(1e-9));
        CHECK(std::is_sorted(state.phases.begin(), state.phases.end(),
                             [](const auto& x, const auto& y) { return x.mole_fraction > y.mole_fraction; }));
        // G = sum x mu: the plane passes through the alloy.
        double moles = 0, plane = 0;
        for (const ElementData& e : ferrous()->elements)
            if (held.count(e.symbol)) moles += held.at(e.symbol) / e.mass;
        for (const ElementData& e : ferrous()->elements)
            if (held.count(e.symbol))
                plane += held.at(e.symbol) / e.mass / moles * state.chemical_potential_J_per_mol.at(e.symbol);
        CHECK(plane == Approx(state.gibbs_J_per_mol).margin(1e-4));
        CHECK(state.proof_J_per_mol <= 1e-6 * kGas * state.temperature_K);
    }
}

TEST_CASE("one element alone is one phase, whose energy is its potential", "[equilibrium]") {
    const std::map<std::string, std::string> at1000{{"Fe", "austenite"}, {"Cr", "Cr-rich ferrite"}, {"Ni", "austenite"},
                                                    {"Cu", "copper"},    {"Mo", "ferrite"},         {"Al", "liquid"},
                                                    {"Co", "austenite"}, {"W", "ferrite"},          {"V", "ferrite"}};
    for (const auto& [element, label] : at1000) {
        const State state = stateOf(element + "=bal", 1000);
        INFO(element << " " << labelsOf(state));
        REQUIRE(state.phases.size() == 1);
        if (element == "Fe" || element == "Ni" || element == "Cu" || element == "Al" || element == "Co")
            CHECK(state.phases[0].label == label);
        else
            CHECK(state.phases[0].name == "ferrite");  // bcc; by its label delta ferrite where it forms on heating
        CHECK(state.phases[0].mole_fraction == Approx(1));
        CHECK(state.chemical_potential_J_per_mol.at(element) == Approx(state.gibbs_J_per_mol).margin(1e-6));
    }
}

TEST_CASE("carbon and nitrogen alone need a phase that may hold them", "[equilibrium]") {
    CHECK(labelsOf(stateOf("C=bal", 1000, {{"graphite"}, {}})) == "graphite");
    CHECK(labelsOf(stateOf("N=bal", 1000, {{"nitrogen_gas"}, {}})) == "nitrogen gas");
}

TEST_CASE("iron and carbon: cementite without graphite, graphite when it is let in", "[equilibrium]") {
    const State metastable = stateOf("C=1.2", 700), stable = stateOf("C=1.2", 700, {{"graphite"}, {}});
    CHECK(labelsOf(metastable) == "ferrite cementite");
    CHECK(labelsOf(stable) == "ferrite graphite");
    CHECK(stable.gibbs_J_per_mol < metastable.gibbs_J_per_mol);
    // The lever rule between Fe3C (25 at%, 6.69 wt% C) and ferrite.
    CHECK(inSet(metastable, "cementite", "C") == Approx(6.69).margin(0.005));
    const double carbon = inSet(metastable, "ferrite", "C");
    CHECK(metastable.massFraction("cementite") ==
          Approx((1.2 - carbon) / (inSet(metastable, "cementite", "C") - carbon)).epsilon(1e-6));
    CHECK(labelsOf(stateOf("C=0.4", 760)) == "austenite ferrite");
    CHECK(labelsOf(stateOf("C=0.4", 900)) == "austenite");
    CHECK(labelsOf(stateOf("C=1.2", 780)) == "austenite cementite");
    CHECK(labelsOf(stateOf("C=3.5", 1200)) == "liquid austenite");
}

TEST_CASE("austenite keeps one carbonitride or two, by what forms them", "[equilibrium]") {
    const State one = stateOf("C=0.05,Cr=18,Ni=10,Ti=0.4,N=0.03", 1050);
    CHECK(labelsOf(one) == "austenite MX");
    const State two = stateOf("C=0.08,Mn=1.5,Nb=0.08,Ti=0.05,N=0.008", 1050);
    REQUIRE(labelsOf(two) == "austenite MX MX");
    // One is niobium carbide, the other titanium nitride.
    CHECK(two.phases[1].name == "austenite");
    CHECK(two.phases[1].wt.at("Nb") > 50);
    CHECK(two.phases[2].wt.at("Ti") > 50);
    CHECK(two.phases[2].wt.at("N") > two.phases[2].wt.at("C"));
    // Both touch the plane that the austenite touches, so leaving the gap's sets out would cost energy.
    CHECK(two.proof_J_per_mol < 1e-6 * kGas * two.temperature_K);
}

TEST_CASE("ferrite parts into iron-rich and chromium-rich below 500 C", "[equilibrium]") {
    const State state = stateOf("Cr=30", 475);
    REQUIRE(labelsOf(state) == "ferrite Cr-rich ferrite");
    CHECK(state.phases[0].name == state.phases[1].name);
    CHECK(inSet(state, "Cr-rich ferrite", "Cr") > 80);
    CHECK(inSet(state, "ferrite", "Cr") < 20);
    CHECK(labelsOf(stateOf("Cr=5", 475)) == "ferrite");
    // The gap closes on heating where sigma is kept out.
    CHECK(labelsOf(stateOf("Cr=30", 800, {{}, {"sigma"}})) == "ferrite");
}

TEST_CASE("copper leaves ferrite as particles of its own", "[equilibrium]") {
    const State state = stateOf("C=0.05,Cu=4,Mn=0.5", 600);
    CHECK(setsOf(state, "copper") == 1);
    CHECK(setsOf(state, "ferrite") == 1);
    CHECK(setsOf(state, "austenite") == 0);  // the same phase by its data key, another by its label
    CHECK(state.find("copper")->name == "austenite");
    CHECK(inSet(state, "copper", "Cu") > 80);
}

TEST_CASE("undercooled iron-copper melt parts into two liquids", "[equilibrium]") {
    const State state = stateOf("Cu=50", 1300, only("liquid"));
    REQUIRE(labelsOf(state) == "liquid liquid");
    CHECK(std::abs(state.phases[0].wt.at("Cu") - state.phases[1].wt.at("Cu")) > 30);
    CHECK(labelsOf(stateOf("Cu=50", 1550, only("liquid"))) == "liquid");
    CHECK(labelsOf(stateOf("Cu=50", 1550)) == "liquid");
}

TEST_CASE("traces down to 1e-9 are kept exactly and change nothing else", "[equilibrium]") {
    const std::string base = "C=0.05,Cr=18,Ni=10";
    const State clean = stateOf(base, 700);
    for (double trace : {1e-4, 1e-6, 2e-7}) {  // wt%; 2e-7 wt% of Nb is 1.2e-9 mole
        Chemistry chemistry = wt(base);
        chemistry.wt["Nb"] = trace;
        chemistry.wt["W"] = 2 * trace;
        Alloy alloy = alloyOf(chemistry);
        const State state = valueOf(alloy.stateAt(kelvin(700)));
        double niobium = 0, tungsten = 0;
        for (const auto& phase : state.phases) {
            niobium += phase.mass_fraction * phase.wt.at("Nb");
            tungsten += phase.mass_fraction * phase.wt.at("W");
        }
        CHECK(niobium == Approx(trace).epsilon(1e-6));
        CHECK(tungsten == Approx(2 * trace).epsilon(1e-6));
        if (trace > 1e-5) continue;  // so little forms no phase of its own
        REQUIRE(labelsOf(state) == labelsOf(clean));
        for (size_t k = 0; k < clean.phases.size(); ++k)
            CHECK(state.phases[k].mole_fraction == Approx(clean.phases[k].mole_fraction).margin(1e-6));
    }
}

TEST_CASE("an element below 1e-9 mole is left out", "[equilibrium]") {
    Chemistry chemistry = wt("C=0.05,Cr=18,Ni=10");
    chemistry.wt["Nb"] = 1e-8;  // 6e-11 mole
    Alloy alloy = alloyOf(chemistry);
    CHECK(valueOf(alloy.stateAt(1300)).chemical_potential_J_per_mol.count("Nb") == 0);
}

TEST_CASE("no more phases than elements", "[equilibrium]") {
    for (const char* steel : {"C=0.4", "Cr=46", "Cu=50", "C=1,Cr=5", "C=0.02,Cr=22,Ni=5.5,Mo=3,N=0.17"})
        for (double at_C = 450; at_C < 1600; at_C += 37) {
            const State state = stateOf(steel, at_C);
            INFO(steel << " " << at_C << " " << labelsOf(state));
            CHECK(state.phases.size() <= state.chemical_potential_J_per_mol.size());
        }
}

TEST_CASE("a warm start gives the cold state, upwards and downwards", "[equilibrium]") {
    const std::string steels[] = {"C=0.02,Cr=22,Ni=5.5,Mo=3,N=0.17,Mn=1.5,Si=0.5",
                                  "C=1.5,Cr=12,Mo=0.8,V=0.9,Mn=0.3,Si=0.3",
                                  "C=0.18,Mn=1.4,Si=0.3,Nb=0.03,Ti=0.015,N=0.006,Al=0.03"};
    for (const std::string& steel : steels) {
        Alloy warm = alloyOf(steel);
        std::vector<double> path;
        for (double at_C = 560; at_C <= 1540; at_C += 14) path.push_back(at_C);
        path.insert(path.end(), path.rbegin(), path.rend());
        for (double at_C : path) {
            const State state = valueOf(warm.stateAt(kelvin(at_C))), cold = stateOf(steel, at_C);
            INFO(steel << " at " << at_C << ": " << labelsOf(state) << " | " << labelsOf(cold));
            CHECK(state.gibbs_J_per_mol == Approx(cold.gibbs_J_per_mol).margin(1e-6 * kGas * kelvin(at_C)));
            CHECK(labelsOf(state) == labelsOf(cold));
        }
    }
}

TEST_CASE("an alloy of a boundary's own composition stands on the boundary", "[equilibrium]") {
    // What the austenite of a two-phase state holds is, as an alloy, all austenite with the same potentials.
    const State both = stateOf("C=0.02,Cr=22,Ni=5.5,Mo=3,N=0.17,Mn=1.5,Si=0.5", 1050);
    REQUIRE(labelsOf(both) == "austenite ferrite");
    for (const auto& phase : both.phases) {
        Chemistry alone;
        for (const auto& [element, content] : phase.wt)
            if (element != "Fe") alone.wt[element] = content;
        Alloy alloy = alloyOf(alone);
        const State state = valueOf(alloy.stateAt(kelvin(1050)));
        CHECK(state.moleFraction(phase.label) == Approx(1).margin(1e-5));
        for (const auto& [element, potential] : both.chemical_potential_J_per_mol)
            CHECK(state.chemical_potential_J_per_mol.at(element) == Approx(potential).margin(0.02));
    }
}

TEST_CASE("nitrogen gas takes part only when asked for", "[equilibrium]") {
    CHECK(labelsOf(stateOf("N=0.2", 1200)) == "austenite");
    const State state = stateOf("N=0.2", 1200, {{"nitrogen_gas"}, {}});
    CHECK(labelsOf(state) == "austenite nitrogen gas");
    CHECK(inSet(state, "nitrogen gas", "N") == Approx(100));
    // At 1 atm the potential of N is that of half a mole of N2 gas.
    const auto system = ferrous()->elements[static_cast<size_t>(ferrous()->elementIndex("N"))];
    CHECK(state.chemical_potential_J_per_mol.at("N") == Approx(system.reference.valueAt(kelvin(1200))).margin(1e-3));
}

TEST_CASE("phases can be left out, and wrong requests are refused in words", "[equilibrium]") {
    CHECK(setsOf(stateOf("Cr=46", 650), "sigma") == 1);
    CHECK(setsOf(stateOf("Cr=46", 650, {{}, {"sigma"}}), "sigma") == 0);

    const auto refusal = [](const std::string& chemistry, const PhaseChoice& choice) {
        const auto alloy = Alloy::make(ferrous(), wt(chemistry), choice);
        REQUIRE_FALSE(alloy);
        CHECK(alloy.error().fault == Fault::input);
        return alloy.error().message;
    };
    PhaseChoice nothing;
    nothing.without = facts(*ferrous()).phases;
    CHECK_THAT(refusal("C=1", nothing), Catch::Contains("no phase is left"));
    CHECK_THAT(refusal("C=1", {{}, {"austenyte"}}), Catch::Contains("austenyte"));
    CHECK_THAT(refusal("C=1", {{"gas"}, {}}), Catch::Contains("gas"));
    CHECK_THAT(refusal("Xx=1", {}), Catch::Contains("Xx"));
    CHECK_THAT(refusal("C=-1", {}), Catch::Contains("between 0 and 100"));
    CHECK_THAT(refusal("C=60,Cr=50", {}), Catch::Contains("110"));
    CHECK_THAT(refusal("Fe=60", {}), Catch::Contains("balance"));
    CHECK_THAT(refusal("C=1,Zr=bal", {}), Catch::Contains("Zr"));

    Alloy alloy = alloyOf("C=0.4");
    for (double T : {20.0, 299.0, 6001.0, -1.0, std::nan("")}) {
        const auto state = alloy.stateAt(T);
        REQUIRE_FALSE(state);
        CHECK(state.error().fault == Fault::range);
    }
}

TEST_CASE("phases that cannot hold the alloy between them are an error that can be repeated", "[equilibrium]") {
    PhaseChoice choice = only("cementite");
    Alloy alloy = alloyOf("C=0.4", choice);
    const auto state = alloy.stateAt(kelvin(700));
    REQUIRE_FALSE(state);
    CHECK(state.error().fault == Fault::noConvergence);
    CHECK_THAT(state.error().repeat, Catch::Contains("soakwright state --wt \"C=0.4") && Catch::Contains("--at 700"));
}

TEST_CASE("the Curie temperature is crossed without a jump", "[equilibrium]") {
    Alloy alloy = alloyOf("Cr=3");
    double last = 0;
    for (double T = 1000; T < 1050; T += 0.5) {
        const State state = valueOf(alloy.stateAt(T));
        REQUIRE(labelsOf(state) == "ferrite");
        if (last != 0) CHECK(std::abs(state.gibbs_J_per_mol - last + 0.5 * 62) < 0.5 * 10);  // -S is near -62 J/(mol K)
        last = state.gibbs_J_per_mol;
    }
}
