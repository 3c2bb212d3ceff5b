// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <filesystem>
#include <map>
#include <memory>
#include <mutex>
#include <optional>
#include <string>
#include <vector>

#include "alloy.h"
#include "function.h"

namespace soak {

class System;

struct ElementData {
    std::string symbol;
    double mass = 0;     ///< g/mol
    Function reference;  ///< stands for the element in end-members by default, J/mol of atoms
};

struct MagneticData {
    double antiferro = -1;  ///< divides a negative Tc or moment
    double p = 0.4;         ///< structure factor of the Inden-Hillert-Jarl model
};

/// When a composition set of a phase carries another trade name than the phase. All stated conditions must hold.
struct LabelRule {
    std::string phase, label;
    std::optional<double> filled_above;       ///< share of the last sublattice's sites that is not vacant
    std::string main;                         ///< the metal with the largest content
    std::string exceeds_this, exceeds_other;  ///< mole fraction of the first exceeds that of the second
    bool from_matrix_on_heating = false;      ///< the set forms from the other matrix phase on heating (delta ferrite)
    std::vector<std::string> unless_beside;   ///< labels whose presence where it forms keeps the plain name
};

struct PhaseData {
    std::string name, structure;
    std::string label;  ///< the trade's name when no rule matches
    std::vector<double> sites;
    std::vector<std::vector<std::string>> constituents;  ///< "Va" is a vacant site
    std::optional<MagneticData> magnetic;
    std::map<std::string, double> volume_cm3;  ///< per mole of atoms of the element in this phase
    bool left_out = false;                     ///< takes part only when asked for
};

enum class ParameterKind { G, Tc, beta };

struct Parameter {
    int phase = 0;
    ParameterKind kind = ParameterKind::G;
    std::vector<std::vector<int>> at;  ///< per sublattice: indices into the phase's constituents
    int order = 0;
    Function value;
    std::string source, fitted_to, place;  ///< place: file and entry, for messages
    bool estimated = false;
};

/// Assessed data as loaded and checked. Immutable but for the cache of compiled systems, which is guarded: threads
/// share it.
class DataSet {
public:
    DataSet();
    ~DataSet();
    DataSet(const DataSet&) = delete;
    DataSet& operator=(const DataSet&) = delete;

    std::vector<ElementData> elements;
    std::vector<PhaseData> phases;
    std::vector<Parameter> parameters;
    std::vector<LabelRule> labels;
    std::vector<std::string> matrix;  ///< labels that count as the metallic matrix
    DataSetFacts facts;

    int elementIndex(std::string_view symbol) const;  ///< -1 when unknown
    int phaseIndex(std::string_view name) const;      ///< -1 when unknown

    /// The models compiled for these elements (indices, ascending), made on first use and kept.
    std::shared_ptr<const System> system(const std::vector<int>& elements) const;

private:
    mutable std::mutex guard_;
    mutable std::map<std::vector<int>, std::shared_ptr<const System>> compiled_;
};

}  // namespace soak
