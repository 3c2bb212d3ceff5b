// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <filesystem>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.h"

namespace soak {

/// The chemistry that a calculation is asked for: wt% of every element but the balance element, which takes the rest.
struct Chemistry {
    std::map<std::string, double> wt;  ///< element symbol -> wt%, each in 0..100; the balance element is not listed
    std::string balance = "Fe";
};

/// Which phases take part. Data keys ("sigma", "graphite") as in the set's phases.toml.
struct PhaseChoice {
    std::vector<std::string> with;     ///< phases that the set leaves out by default (gas, graphite) but are wanted
    std::vector<std::string> without;  ///< phases to leave out
};

/// One phase (or one composition set of it) in a state.
struct PhaseAmount {
    std::string name;                             ///< data key: "austenite", "hexagonal"
    std::string label;                            ///< the trade's name by composition: "MX", "Cr2N", "delta ferrite"
    double mole_fraction = 0;                     ///< of atoms, 0..1
    double mass_fraction = 0;                     ///< 0..1
    double volume_fraction = 0;                   ///< 0..1, from densities or lattice parameters at room temperature
    std::map<std::string, double> wt;             ///< composition of the phase, wt%
    std::map<std::string, double> site_fraction;  ///< "1:Fe" -> y; sublattices count from 1
};

/// One equilibrium: the global minimum of G at temperature and composition, with its proof.
struct State {
    double temperature_K = 0;
    std::vector<PhaseAmount> phases;  ///< largest amount first
    std::map<std::string, double> chemical_potential_J_per_mol;
    double gibbs_J_per_mol = 0;  ///< per mole of atoms
    double proof_J_per_mol =
        0;  ///< largest driving force of any phase above the found tangent plane, per mole of atoms

    /// Sum over all sets that carry this label, 0 when absent.
    double moleFraction(std::string_view label) const;
    double massFraction(std::string_view label) const;
    double volumeFraction(std::string_view label) const;
    /// The first (largest) set with this label, or nullptr.
    const PhaseAmount* find(std::string_view label) const;
    /// wt% of `element` in the metallic matrix: all of austenite, ferrite, delta ferrite, Cr-rich ferrite together
    /// (the labels that the data set marks as matrix), weighted by mass. Nothing when there is no matrix.
    std::optional<double> matrixContent(std::string_view element) const;
    std::vector<std::string> matrixLabels;  ///< copied from the data set
};

/// What happens to a label on heating through an event.
enum class EventKind { appears, vanishes };

/// A temperature at which the amount of a label reaches zero (sweep), or a stated fraction or content (see Alloy).
struct Event {
    EventKind kind = EventKind::appears;  ///< as seen on heating
    std::string phase;                    ///< data key
    std::string label;                    ///< the trade's name
    double temperature_K = 0;
    /// Exact derivative, K per wt% of each element, the balance element giving way. Empty where there is none
    /// (invariant points, pure elements).
    std::map<std::string, double> K_per_wt;
};

/// Equilibrium against temperature: states in ascending order, close enough to interpolate, and every event between.
struct Sweep {
    std::vector<State> states;
    std::vector<Event> events;  ///< ascending temperature

    /// Highest temperature at which `label` vanishes on heating ("solvus"); nothing if it is never present.
    /// A label still present at the top of the sweep has no solvus within it: see presentAtTop.
    std::optional<Event> lastVanishing(std::string_view label) const;
    /// Lowest temperature above `from_K` at which `label` appears on heating.
    std::optional<Event> firstAppearing(std::string_view label, double from_K = 0) const;
    bool presentAnywhere(std::string_view label) const;
    bool presentAtTop(std::string_view label) const;
};

/// A set of assessed data, loaded and checked once; share it between threads.
class DataSet;
Result<std::shared_ptr<const DataSet>> loadDataSet(const std::filesystem::path& folder);

/// Facts about a set, for screens, results and sheets.
struct DataSetFacts {
    std::string name;                   ///< folder name: "ferrous"
    std::string version;                ///< content hash of the files, 12 hex digits
    std::string balance;                ///< element that takes the rest when none is written
    std::vector<std::string> elements;  ///< in the set's order
    std::vector<std::string> phases;    ///< data keys
    std::vector<std::string> left_out;  ///< phases that take part only when asked for (gas, graphite)
    std::vector<std::string> gaps;      ///< end-members by default, binaries without a file, in words
    int parameters = 0, estimated = 0;
};
const DataSetFacts& facts(const DataSet& data);

/// One chemistry, ready to calculate. Owns its workspace: one per thread, cheap to make for the same elements (the
/// compiled models are cached inside the data set).
/// Elements below 1e-9 mole fraction are left out. Errors: Fault::input (unknown element, negative or above 100 %,
/// unknown phase), Fault::range (temperature outside 300..6000 K), Fault::noConvergence (with `repeat`).
class Alloy {
public:
    static Result<Alloy> make(std::shared_ptr<const DataSet> data, const Chemistry& chemistry,
                              const PhaseChoice& choice = {});
    Alloy(Alloy&&) noexcept;
    Alloy& operator=(Alloy&&) noexcept;
    ~Alloy();

    const Chemistry& chemistry() const;

    /// The same alloy with another chemistry near it: its first state starts from this one's last, which costs a tenth
    /// of a cold one. For differences of a quantity with composition.
    Result<Alloy> changed(const Chemistry& chemistry) const;

    /// The equilibrium at T; started from the last state when that is near.
    Result<State> stateAt(double T_K);

    /// All states and events between two temperatures, every event to 0.1 K or better.
    Result<Sweep> sweep(double from_K, double to_K);

    /// The temperature between the two states' temperatures at which the volume fraction of `label` equals `fraction`;
    /// the amounts at the ends must lie on both sides. With exact derivatives.
    Result<Event> temperatureOfFraction(std::string_view label, double fraction, double from_K, double to_K);

    /// The same for the content (wt%) of `element` in the matrix.
    Result<Event> temperatureOfMatrixContent(std::string_view element, double content_wt, double from_K, double to_K);

    struct Inside;  ///< workspace, defined beside the implementation

private:
    std::unique_ptr<Inside> inside_;
    explicit Alloy(std::unique_ptr<Inside> inside);
};

}  // namespace soak
