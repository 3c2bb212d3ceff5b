// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <cmath>
#include <filesystem>
#include <fstream>

#include "support.h"

using namespace soak;
using namespace soak::test;

namespace {

struct Row {
    std::string id, composition;
    double at_C = 0, gibbs = 0;
    std::vector<std::pair<std::string, double>> phases;  ///< data key, mole fraction
    std::map<std::string, double> potentials;
};

/// States from an independent implementation on the same data; data/solver_cases.csv, copied as it was given.
std::vector<Row> rows() {
    std::ifstream in(TEST_DATA_DIR "/solver_cases.csv");
    std::string line;
    std::getline(in, line);
    std::vector<Row> list;
    while (std::getline(in, line)) {
        const auto cells = split(line, ',');
        Row row{cells[0], cells[2], std::stod(cells[3]), std::stod(cells[4]), {}, {}};
        for (const auto& part : split(cells[5], ';'))
            row.phases.emplace_back(part.substr(0, part.find('=')), std::stod(part.substr(part.find('=') + 1)));
        for (const auto& part : split(cells[6], ';'))
            row.potentials[part.substr(0, part.find('='))] = std::stod(part.substr(part.find('=') + 1));
        list.push_back(std::move(row));
    }
    return list;
}

/// The ferrous set as the other implementation had it: the shipped files, but those that have changed since as they
/// were then (data/ferrous_as_checked, whose `added` names files that are new).
std::shared_ptr<const DataSet> asChecked() {
    namespace fs = std::filesystem;
    const fs::path old = fs::path(TEST_DATA_DIR) / "ferrous_as_checked";
    const fs::path scratch =
        fs::temp_directory_path() / ("soakwright_as_checked_" + std::to_string(std::random_device{}()));
    const fs::path set = scratch / "ferrous";
    fs::create_directories(scratch);
    fs::copy(productPath("thermo/data/ferrous"), set, fs::copy_options::recursive);
    fs::copy(old, set, fs::copy_options::recursive | fs::copy_options::overwrite_existing);
    std::ifstream added(old / "added");
    for (std::string name; std::getline(added, name);) fs::remove(set / name);
    const auto data = loadDataSet(set);
    fs::remove_all(scratch);
    if (!data) FAIL(data.error().text());
    return data.value();
}

State stateIn(const std::shared_ptr<const DataSet>& data, const Row& row) {
    auto alloy = Alloy::make(data, wt(row.composition));
    if (!alloy) FAIL(alloy.error().text());
    return valueOf(alloy.value().stateAt(kelvin(row.at_C)));
}

}  // namespace

TEST_CASE("every state of an independent implementation is found again", "[solver_cases]") {
    // Margins: G and fractions as required of two solvers on the same data; potentials 1 J/mol, since the cases print
    // the fractions to 1e-8 and a trace element's potential answers to them most.
    const auto list = rows();
    REQUIRE(list.size() == 120);
    const auto data = asChecked();
    for (const Row& row : list) {
        INFO(row.id << " " << row.composition << " at " << row.at_C);
        const State state = stateIn(data, row);
        CHECK(state.gibbs_J_per_mol == Approx(row.gibbs).margin(0.01));
        std::vector<std::pair<std::string, double>> found, wanted = row.phases;
        for (const auto& phase : state.phases) found.emplace_back(phase.name, phase.mole_fraction);
        std::sort(found.begin(), found.end());
        std::sort(wanted.begin(), wanted.end());
        INFO("phases found: " << labelsOf(state));
        REQUIRE(found.size() == wanted.size());
        for (size_t k = 0; k < found.size(); ++k) {
            CHECK(found[k].first == wanted[k].first);
            CHECK(found[k].second == Approx(wanted[k].second).margin(1e-6));
        }
        REQUIRE(state.chemical_potential_J_per_mol.size() == row.potentials.size());
        for (const auto& [element, potential] : row.potentials)
            CHECK(state.chemical_potential_J_per_mol.at(element) == Approx(potential).margin(1));
    }
}
