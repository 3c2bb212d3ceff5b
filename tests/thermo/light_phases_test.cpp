// SPDX-License-Identifier: GPL-3.0-or-later
// What the phases of aluminium grades are known never to be, and what they are known to keep at treatment temperatures.
#include <catch2/catch.hpp>
#include <fstream>
#include <sstream>

#include "alloy.h"
#include "base/folders.h"
#include "base/units.h"

using namespace soak;

namespace {

std::shared_ptr<const DataSet> light() {
    static const auto data = loadDataSet(productPath("thermo/data/light")).value();
    return data;
}

Chemistry chemistryOf(const std::string& list) {
    Chemistry chemistry;
    chemistry.balance = "Al";
    std::istringstream parts(list);
    for (std::string part; std::getline(parts, part, ';');)
        chemistry.wt[part.substr(0, part.find('='))] = std::stod(part.substr(part.find('=') + 1));
    return chemistry;
}

State stateOf(const std::string& list, double at_C) {
    auto alloy = Alloy::make(light(), chemistryOf(list), {});
    REQUIRE(alloy);
    const auto state = alloy.value().stateAt(kelvin(at_C));
    REQUIRE(state);
    return state.value();
}

bool holds(const State& state, const std::string& phase) {
    for (const PhaseAmount& one : state.phases)
        if (one.name == phase) return true;
    return false;
}

}  // namespace

TEST_CASE("phases that a grade never shows do not form in it", "[light]") {
    std::ifstream file(std::string(TEST_DATA_DIR) + "/light_must_not_form.csv");
    std::string line;
    REQUIRE(std::getline(file, line));
    int rows = 0;
    while (std::getline(file, line)) {
        std::istringstream cells(line);
        std::string grade, composition, phases;
        std::getline(cells, grade, ',');
        std::getline(cells, composition, ',');
        std::getline(cells, phases, ',');
        ++rows;
        for (const double at_C : {250., 350., 450., 500.}) {
            const State state = stateOf(composition, at_C);
            std::istringstream names(phases);
            for (std::string phase; names >> phase;) {
                INFO(grade << " at " << at_C << ": " << phase);
                CHECK_FALSE(holds(state, phase));
            }
        }
    }
    CHECK(rows >= 14);
}

TEST_CASE("what hardens or holds the grain is there", "[light]") {
    // L.F. Mondolfo, Aluminum Alloys (1976); J.E. Hatch (ed.), Aluminum (1984): from memory.
    CHECK(holds(stateOf("Cu=4.4;Mg=1.5;Mn=0.6;Fe=0.2;Si=0.1", 300), "S"));
    CHECK(holds(stateOf("Cu=4.4;Mg=1.5;Mn=0.6;Fe=0.2;Si=0.1", 495), "Al20Cu2Mn3"));
    CHECK(holds(stateOf("Cu=6.3;Mn=0.3;Fe=0.15;Zr=0.17", 300), "theta"));
    CHECK(holds(stateOf("Zn=5.6;Mg=2.5;Cu=1.6;Cr=0.22;Fe=0.2;Si=0.1", 300), "eta"));
    CHECK(holds(stateOf("Zn=6.2;Mg=2.25;Cu=2.3;Zr=0.11;Fe=0.1;Si=0.06", 475), "Al3Zr"));
    CHECK(holds(stateOf("Mg=1.0;Si=0.6;Cu=0.28;Cr=0.2;Fe=0.35", 300), "Mg2Si"));
    CHECK(holds(stateOf("Si=6.5;Cu=3.5;Mg=0.45;Fe=0.4;Mn=0.3", 300), "Q"));
    CHECK(holds(stateOf("Mg=4.5;Mn=0.7;Cr=0.12;Fe=0.25;Si=0.14", 180), "beta"));
    CHECK(holds(stateOf("Mg=4.5;Mn=0.7;Cr=0.12;Fe=0.25;Si=0.14", 350), "Al6Mn"));
}
