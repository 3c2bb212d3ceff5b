// SPDX-License-Identifier: GPL-3.0-or-later
// One published row -> the same quantity computed. Each kind of quantity has its own function; a reason in words is an
// ordinary outcome. Nothing here looks at the published value except to know where to begin and how far to look.
#include "planner/core/evidence_compute.h"

#include <QStringList>
#include <algorithm>
#include <cmath>
#include <functional>
#include <set>

#include "base/units.h"
#include "planner/core/families.h"

namespace soak {
namespace {

constexpr double kReach_K = 300;         // how far above and below the published temperature an event is looked for
constexpr double kLowest_K = 320;        // the engine begins at 300 K
constexpr double kHighest_K = 5900;      // and ends at 6000 K
constexpr double kTogether_K = 0.3;      // events closer than this are one invariant
constexpr double kBeside_K = 0.1;        // from an invariant, where the states on either side of it are taken
constexpr double kTrace_wt = 0.05;       // an element that the data lack is left out up to this content
constexpr double kNearInvariant_K = 80;  // computed and published temperature of the same three-phase line

// IUPAC standard atomic weights, abridged values; g/mol.
const std::map<std::string, double> kAtomicWeight{
    {"Al", 26.982}, {"C", 12.011}, {"Co", 58.933}, {"Cr", 51.996}, {"Cu", 63.546}, {"Fe", 55.845},
    {"Mn", 54.938}, {"Mo", 95.95}, {"N", 14.007},  {"Nb", 92.906}, {"Ni", 58.693}, {"Si", 28.085},
    {"Ti", 47.867}, {"V", 50.942}, {"W", 183.84},  {"Mg", 24.305}, {"Zn", 65.38},  {"Zr", 91.224}};

Error because(const QString& reason) { return {Fault::input, reason.toStdString(), {}, {}}; }

/// What every evaluation needs: the row, the data, the sample and the phases let in.
struct Case {
    const EvidenceRow& row;
    std::shared_ptr<const DataSet> data;
    const DataSetFacts& known;
    Chemistry sample;
    PhaseChoice choice;
    std::vector<PhaseWord> phases;  ///< the row's phases, in its order
    QString& remark;                ///< what was done on the way

    double from_K() const { return std::max(kLowest_K, kelvin(*row.value) - kReach_K); }
    double to_K() const { return std::min(kHighest_K, kelvin(*row.value) + kReach_K); }
    double at_K() const { return kelvin(*row.at_C); }

    Result<Alloy> alloy(const Chemistry& chemistry) const { return Alloy::make(data, chemistry, choice); }
    Result<State> state(const Chemistry& chemistry, double T_K) const {
        auto made = alloy(chemistry);
        if (!made) return std::move(made).error();
        return made.value().stateAt(T_K);
    }
    Result<Sweep> sweep(const Chemistry& chemistry, double from, double to) const {
        auto made = alloy(chemistry);
        if (!made) return std::move(made).error();
        return made.value().sweep(from, to);
    }
    Chemistry with(const std::string& element, double wt) const {
        Chemistry changed = sample;
        changed.wt[element] = wt;
        return changed;
    }
};

const PhaseAmount* find(const State& state, const PhaseWord& phase) {
    for (const PhaseAmount& one : state.phases)
        if (phase.matches(one)) return &one;
    return nullptr;
}

/// The same, or another composition of the phase when there is none of this label: zinc-rich aluminium is aluminium.
const PhaseAmount* findOrNearest(const State& state, const PhaseWord& phase) {
    const PhaseAmount* found = find(state, phase);
    return found || !phase.label.empty() ? found : find(state, {phase.key, "*"});
}

double volumePercent(const State& state, const PhaseWord& phase) {
    double sum = 0;
    for (const PhaseAmount& one : state.phases)
        if (phase.matches(one)) sum += one.volume_fraction;
    return 100 * sum;
}

double atomicPercent(const PhaseAmount& phase, const std::string& element) {
    double all = 0, its = 0;
    for (const auto& [symbol, wt] : phase.wt) {
        const double moles = wt / kAtomicWeight.at(symbol);
        all += moles;
        if (symbol == element) its = moles;
    }
    return all > 0 ? 100 * its / all : 0;
}

double content(const PhaseAmount& phase, const std::string& element, const QString& unit) {
    if (unit == "at%") return atomicPercent(phase, element);
    const auto at = phase.wt.find(element);
    return at == phase.wt.end() ? 0 : at->second;
}

Error absent(const Case& one, const QString& phase) {
    return because(phase + " does not form in the sample alloy at " + QString::number(*one.row.at_C) + " °C");
}
Error noEvent(const QString& what) {
    return because(QString("%1 within %2 K of the published temperature").arg(what).arg(kReach_K));
}

// ------------------------------------------------------------------------------------------------ temperatures

bool isMolten(const State& state) { return state.phases.size() == 1 && state.phases[0].name == "liquid"; }

Result<double> liquidus(const Case& one) {
    const auto sweep = one.sweep(one.sample, one.from_K(), one.to_K());
    if (!sweep) return sweep.error();
    if (!isMolten(sweep.value().states.back())) return noEvent("not wholly molten");
    const auto& events = sweep.value().events;
    for (auto event = events.rbegin(); event != events.rend(); ++event)
        if (event->kind == EventKind::vanishes && event->phase != "liquid") {
            if (one.phases[0].key != "liquid" && !one.phases[0].matches(event->phase, event->label))
                one.remark = "first solid computed: " + QString::fromStdString(event->label);
            return celsius(event->temperature_K);
        }
    return noEvent("no solid");
}

Result<double> solidus(const Case& one) {
    const auto sweep = one.sweep(one.sample, one.from_K(), one.to_K());
    if (!sweep) return sweep.error();
    for (const Event& event : sweep.value().events)
        if (event.kind == EventKind::appears && event.phase == "liquid") return celsius(event.temperature_K);
    return noEvent("no first melting");
}

/// As cast: where the segregated metal freezes last, by the rule of its data set; homogenised: the solidus.
Result<double> firstMelting(const Case& one) {
    if (one.row.phase == "homogenised") return solidus(one);
    static const Result<FamilyBook> book = loadFamilyBook();
    if (!book) return book.error();
    const auto rule = book.value().segregation.find(QString::fromStdString(one.known.name));
    if (rule == book.value().segregation.end()) return because("no rule of freezing for this data set");
    const auto alloy = one.alloy(one.sample);
    if (!alloy) return alloy.error();
    const auto path = freeze(alloy.value(), one.to_K(), rule->second.freezing);
    if (!path) return path.error();
    return celsius(path.value().end_K);
}

Result<double> appearance(const Case& one) {
    const auto sweep = one.sweep(one.sample, one.from_K(), one.to_K());
    if (!sweep) return sweep.error();
    for (const Event& event : sweep.value().events)
        if (event.kind == EventKind::appears && one.phases[0].matches(event.phase, event.label))
            return celsius(event.temperature_K);
    return noEvent(one.row.phase + " does not appear");
}

/// Delta ferrite is ferrite that comes back above the austenite field.
Result<double> deltaLimit(const Case& one) {
    const auto sweep = one.sweep(one.sample, one.from_K(), one.to_K());
    if (!sweep) return sweep.error();
    const auto event = sweep.value().firstAppearing("delta ferrite");
    return event ? Result<double>(celsius(event->temperature_K)) : noEvent("no delta ferrite");
}

Result<double> solvus(const Case& one) {
    const auto sweep = one.sweep(one.sample, one.from_K(), one.to_K());
    if (!sweep) return sweep.error();
    const auto& events = sweep.value().events;
    for (auto event = events.rbegin(); event != events.rend(); ++event)
        if (event->kind == EventKind::vanishes && one.phases[0].matches(event->phase, event->label) &&
            event->label != "delta ferrite")
            return celsius(event->temperature_K);
    return find(sweep.value().states.back(), one.phases[0]) ? noEvent(one.row.phase + " does not dissolve")
                                                            : noEvent(one.row.phase + " does not form");
}

/// Two phases that change places: the middle of their two-phase range, which is a point in pure elements and at the
/// extremes of binaries.
Result<double> exchange(const Case& one) {
    const auto sweep = one.sweep(one.sample, one.from_K(), one.to_K());
    if (!sweep) return sweep.error();
    for (const auto& [low, high] : {std::pair{one.phases[0], one.phases[1]}, std::pair{one.phases[1], one.phases[0]}}) {
        std::optional<double> begins, ends;
        for (const Event& event : sweep.value().events) {
            if (event.kind == EventKind::appears && high.matches(event.phase, event.label) && !begins)
                begins = event.temperature_K;
            if (event.kind == EventKind::vanishes && low.matches(event.phase, event.label)) ends = event.temperature_K;
        }
        if (begins && ends) return celsius((*begins + *ends) / 2);
    }
    return noEvent("no exchange of " + one.row.phase);
}

Result<double> transformation(const Case& one) {
    if (one.phases.size() == 2) return exchange(one);
    return one.row.phase == "austenite" ? appearance(one) : solvus(one);
}

/// The temperature of the largest heat capacity, from second differences of G.
Result<double> heatCapacityPeak(Alloy& alloy, double from, double to, double step) {
    double best = 0, at = from;
    for (double T = from; T <= to; T += step) {
        double gibbs[3];
        for (int side = 0; side < 3; ++side) {
            const auto state = alloy.stateAt(T + (side - 1) * step);
            if (!state) return state.error();
            gibbs[side] = state.value().gibbs_J_per_mol;
        }
        const double capacity = T * (2 * gibbs[1] - gibbs[0] - gibbs[2]) / (step * step);
        if (capacity > best) {
            best = capacity;
            at = T;
        }
    }
    return at;
}

Result<double> curie(const Case& one) {
    auto alloy = one.alloy(one.sample);
    if (!alloy) return std::move(alloy).error();
    const double middle = kelvin(*one.row.value);
    const auto near = heatCapacityPeak(alloy.value(), middle - 100, middle + 100, 2);
    if (!near) return near;
    const auto exact = heatCapacityPeak(alloy.value(), near.value() - 4, near.value() + 4, 0.1);
    return exact ? Result<double>(celsius(exact.value())) : exact;
}

// -------------------------------------------------------------------------------------------------- invariants

/// Words that fit one label only choose first, those that name the main element next.
int choosiness(const PhaseWord& phase) {
    if (!phase.label.empty() && phase.label != "*") return 0;
    return phase.main.empty() ? 2 : 1;
}

/// Whether every phase of the row is found in these states together, each in a set of its own.
bool holdsAll(std::vector<PhaseWord> wanted, const std::vector<const State*>& states) {
    std::map<std::string, const PhaseAmount*> there;  // one of each label
    for (const State* state : states)
        for (const PhaseAmount& phase : state->phases)
            there[phase.label == "delta ferrite" ? "ferrite" : phase.label] = &phase;  // a label that changes at events
    std::stable_sort(wanted.begin(), wanted.end(),
                     [](const auto& a, const auto& b) { return choosiness(a) < choosiness(b); });
    for (const PhaseWord& phase : wanted) {
        auto at = std::find_if(there.begin(), there.end(), [&](const auto& set) { return phase.matches(*set.second); });
        if (at == there.end() && phase.label.empty())  // the second of two aluminium solutions
            at = std::find_if(there.begin(), there.end(),
                              [&](const auto& set) { return set.second->name == phase.key; });
        if (at == there.end()) return false;
        there.erase(at);
    }
    return true;
}

/// Ranges of temperature in which all phases of the row are there, lowest first: points where a line meets the sample,
/// or stretches when the sample has more freedom than that.
using Range = std::pair<double, double>;
Result<std::vector<Range>> meetings(const Case& one, const Chemistry& sample, double from, double to) {
    auto alloy = one.alloy(sample);
    if (!alloy) return std::move(alloy).error();
    const auto sweep = alloy.value().sweep(from, to);
    if (!sweep) return sweep.error();
    const auto& events = sweep.value().events;
    std::vector<Range> ranges;
    bool goes_on = false;  // all of them coexist from the last range up to here
    for (size_t i = 0; i < events.size(); ++i) {
        const double first = events[i].temperature_K;
        while (i + 1 < events.size() && events[i + 1].temperature_K - first < kTogether_K) ++i;
        const double last = events[i].temperature_K;
        const auto below = alloy.value().stateAt(first - kBeside_K);
        if (!below) return below.error();
        const auto above = alloy.value().stateAt(last + kBeside_K);
        if (!above) return above.error();
        if (holdsAll(one.phases, {&below.value(), &above.value()})) {
            if (goes_on)
                ranges.back().second = last;
            else
                ranges.emplace_back(first, last);
        }
        goes_on = !ranges.empty() && holdsAll(one.phases, {&above.value()});
    }
    return ranges;
}

/// The sample first; then, in a binary, samples with less and more of its second element.
Result<double> invariantTemperature(const Case& one, double from, double to) {
    for (const double factor : {1.0, 0.9, 1.1, 0.75, 1.3, 0.5, 1.6}) {
        Chemistry sample = one.sample;
        if (factor != 1.0 && sample.wt.size() != 1) break;
        for (auto& [element, wt] : sample.wt) wt = std::min(99.0, wt * factor);
        const auto found = meetings(one, sample, from, to);
        if (!found) return found.error();
        if (found.value().empty()) continue;
        const bool upper =
            one.row.phase.contains("delta ferrite");  // ferrite and austenite may meet a third phase twice
        const Range& range = upper ? found.value().back() : found.value().front();
        return (range.first + range.second) / 2;
    }
    return noEvent(one.row.phase + " do not meet");
}

Result<double> invariantT(const Case& one) {
    const auto found = invariantTemperature(one, one.from_K(), one.to_K());
    return found ? Result<double>(celsius(found.value())) : found;
}

/// Content of a phase at the computed line nearest to the published temperature, not at the published temperature.
Result<double> invariantContent(const Case& one) {
    if (!one.row.at_C) return because("the point has no stated temperature: it would need a search over compositions");
    const double at = one.at_K();
    auto alloy = one.alloy(one.sample);
    if (!alloy) return std::move(alloy).error();
    const auto sweep = alloy.value().sweep(std::max(kLowest_K, at - kNearInvariant_K), at + kNearInvariant_K);
    if (!sweep) return sweep.error();
    std::optional<double> best, result;
    const auto& events = sweep.value().events;
    for (size_t i = 0; i + 1 < events.size(); ++i) {
        const double T = events[i].temperature_K;
        if (events[i + 1].temperature_K - T > kTogether_K) continue;  // one phase comes or goes: no invariant
        if (best && std::abs(*best - at) <= std::abs(T - at)) continue;
        for (const double side : {-kBeside_K, kBeside_K}) {
            const auto state = alloy.value().stateAt(T + side);
            if (!state) return state.error();
            const PhaseAmount* phase = findOrNearest(state.value(), one.phases[0]);
            if (!phase || (result && best && *best == T && state.value().phases.size() < 2)) continue;
            best = T;
            result = content(*phase, one.row.element.toStdString(), one.row.unit);
        }
    }
    if (result) return *result;
    return because(QString("no invariant with %1 within %2 K of the published temperature in the sample alloy")
                       .arg(one.row.phase)
                       .arg(kNearInvariant_K));
}

// ------------------------------------------------------------------------------------------- contents and amounts

Result<double> phaseComposition(const Case& one) {
    if (!one.row.at_C) return because("the row states no temperature");
    const auto state = one.state(one.sample, one.at_K());
    if (!state) return state.error();
    const PhaseAmount* phase = find(state.value(), one.phases[0]);
    if (!phase) return absent(one, one.row.phase);
    if (state.value().phases.size() < 2)
        return because(one.row.phase + " is alone in the sample alloy: nothing is beside it");
    return content(*phase, one.row.element.toStdString(), one.row.unit);
}

Result<double> phaseFraction(const Case& one) {
    const auto state = one.state(one.sample, one.at_K());
    if (!state) return state.error();
    return volumePercent(state.value(), one.phases[0]);
}

/// The content at which the field ends, by steps and bisection in the composition.
Result<double> gammaLoop(const Case& one) {
    const std::string element = one.row.element.toStdString();
    const PhaseWord austenite{"austenite", ""};
    Error failure;
    const auto inside = [&](double wt) -> std::optional<bool> {
        const auto state = one.state(one.with(element, wt), one.at_K());
        if (!state) {
            failure = state.error();
            return std::nullopt;
        }
        const bool has = find(state.value(), austenite) != nullptr;
        return one.row.phase == "austenite" ? has && state.value().phases.size() == 1 : has;
    };
    const double step = *one.row.value / 20;
    for (double wt = step; wt < 3 * *one.row.value; wt += step) {
        const auto still = inside(wt);
        if (!still) return failure;
        if (*still) continue;
        double low = wt - step, high = wt;
        for (int halving = 0; halving < 20; ++halving) {
            const auto middle = inside((low + high) / 2);
            if (!middle) return failure;
            (*middle ? low : high) = (low + high) / 2;
        }
        return (low + high) / 2;
    }
    return because("the loop does not close below three times the published content");
}

Result<double> solubility(const Case& one) {
    const auto product = solubilityProduct(one.row.note);
    if (product.empty() || one.row.unit.contains("a^"))
        return because("the product is one of activities, or not of contents of the matrix");
    const auto state = one.state(one.sample, one.at_K());
    if (!state) return state.error();
    if (!find(state.value(), one.phases[0])) return absent(one, one.row.phase);
    const PhaseAmount* liquid = one.row.note.contains("in liquid") ? state.value().find("liquid") : nullptr;
    if (one.row.note.contains("in liquid") && !liquid) return because("the sample alloy is not liquid there");
    double logarithm = 0;
    for (const ProductFactor& factor : product) {
        double sum = 0;
        for (const auto& [element, weight] : factor.sum)
            sum +=
                weight * (liquid ? content(*liquid, element, "wt%") : state.value().matrixContent(element).value_or(0));
        if (sum <= 0) return because("no content of the matrix to form the product from");
        logarithm += factor.power * std::log10(sum);
    }
    return logarithm;
}

// -------------------------------------------------------------------------------------------------- activities

Result<double> carbonPotential(const Case& one, const Chemistry& chemistry, const PhaseChoice& choice) {
    auto alloy = Alloy::make(one.data, chemistry, choice);
    if (!alloy) return std::move(alloy).error();
    const auto state = alloy.value().stateAt(one.at_K());
    if (!state) return state.error();
    const auto& potentials = state.value().chemical_potential_J_per_mol;
    const auto carbon = potentials.find("C");
    if (carbon == potentials.end()) return because("the sample holds no carbon");
    return carbon->second;
}

Result<double> carbonActivity(const Case& one) {
    const auto here = carbonPotential(one, one.sample, one.choice);
    if (!here) return here;
    const auto graphite = carbonPotential(one, Chemistry{{}, "C"}, {{"graphite"}, {}});
    if (!graphite) return graphite;
    return std::exp((here.value() - graphite.value()) / (kGas * one.at_K()));
}

/// Carbon of plain iron over carbon of the alloy at the same activity.
Result<double> carbonRatio(const Case& one) {
    const auto wanted = carbonPotential(one, one.sample, one.choice);
    if (!wanted) return wanted;
    const double carbon = one.sample.wt.at("C");
    double low = carbon / 3, high = carbon * 1.5;
    for (int halving = 0; halving < 40; ++halving) {
        const double middle = (low + high) / 2;
        const auto plain = carbonPotential(one, Chemistry{{{"C", middle}}, one.sample.balance}, one.choice);
        if (!plain) return plain;
        (plain.value() < wanted.value() ? low : high) = middle;
    }
    return (low + high) / 2 / carbon;
}

Result<double> activity(const Case& one) {
    if (!one.sample.wt.count("C")) return because("only activities of carbon are evaluated");
    return one.row.unit == "ratio" ? carbonRatio(one) : carbonActivity(one);
}

// ------------------------------------------------------------------------------------------------- the request

/// "C=0.2;Cr=1;Fe=bal"; without a balance element the last one takes the rest. Elements that the data lack are left
/// out when there is only a trace of them and the row is not about them.
Result<Chemistry> sampleOf(const EvidenceRow& row, const DataSetFacts& known, QString& remark) {
    Chemistry sample;
    sample.balance.clear();
    QStringList left_out;
    std::string last;
    for (const QString& part : row.composition.split(';', Qt::SkipEmptyParts)) {
        const QStringList sides = part.trimmed().split('=');
        if (sides.size() != 2) return because("the composition is not one alloy: " + row.composition);
        const std::string element = sides[0].toStdString();
        const bool there = std::find(known.elements.begin(), known.elements.end(), element) != known.elements.end();
        if (sides[1] == "bal") {
            if (!there) return because(sides[0] + " is not in the data set");
            sample.balance = element;
            continue;
        }
        bool is_number = false;
        const double wt = sides[1].toDouble(&is_number);
        if (!is_number) return because("the composition is not one alloy: " + row.composition);
        if (there)
            sample.wt[last = element] = wt;
        else if (wt < kTrace_wt && sides[0] != row.element)
            left_out << sides[0];
        else
            return because(sides[0] + " is not in the data set");
    }
    if (sample.balance.empty() && !last.empty()) {
        sample.balance = last;
        sample.wt.erase(last);
    }
    if (!left_out.isEmpty()) remark = left_out.join(", ") + " left out of the equilibrium";
    return sample;
}

PhaseChoice choiceOf(const EvidenceRow& row, const DataSetFacts& known) {
    PhaseChoice choice;
    const auto has = [&](const char* phase) {
        return std::find(known.phases.begin(), known.phases.end(), phase) != known.phases.end();
    };
    if (has("graphite") && (row.phase.contains("graphite") || row.note.contains("beside graphite")))
        choice.with.push_back("graphite");
    if (has("nitrogen_gas") && row.note.contains("beside N2 gas")) choice.with.push_back("nitrogen_gas");
    if (row.quantity == "solvus_metastable")
        for (const char* other : {"sigma", "laves", "chi"})
            if (row.phase.compare(other, Qt::CaseInsensitive) != 0) choice.without.push_back(other);
    return choice;
}

using Evaluator = Result<double> (*)(const Case&);
const std::map<QString, Evaluator> kEvaluators{{"liquidus", liquidus},
                                               {"solidus", solidus},
                                               {"first_melting", firstMelting},
                                               {"transformation", transformation},
                                               {"Ac1", appearance},
                                               {"Ac3", solvus},
                                               {"solvus", solvus},
                                               {"solvus_metastable", solvus},
                                               {"invariant_T", invariantT},
                                               {"invariant_x", invariantContent},
                                               {"phase_composition", phaseComposition},
                                               {"gamma_loop", gammaLoop},
                                               {"solubility_product", solubility},
                                               {"activity", activity},
                                               {"delta_limit", deltaLimit},
                                               {"phase_fraction", phaseFraction},
                                               {"curie", curie}};

QString phasesOf(const EvidenceRow& row) {
    if (row.quantity == "Ac1") return "austenite";
    if (row.quantity == "Ac3") return "ferrite";
    if (row.quantity == "first_melting") return "liquid";
    return row.phase == "bcc miscibility gap" ? QString("bcc") : row.phase;
}

}  // namespace

Result<double> computeRow(const EvidenceRow& row, const std::shared_ptr<const DataSet>& data, QString& remark) {
    const DataSetFacts& known = facts(*data);
    const auto evaluator = kEvaluators.find(row.quantity);
    if (evaluator == kEvaluators.end())
        return because(row.quantity.startsWith("phase_") ? "a constraint on what may form, not a number"
                                                         : row.quantity + " is not a matter of equilibrium");
    if (!row.value) return because("the published entry is a list or a range: " + row.value_text);
    Case one{row, data, known, {}, choiceOf(row, known), {}, remark};
    for (const QString& text : phasesOf(row).split('/')) {
        const auto phase = phaseWord(text, known);
        if (!phase) return because(text + " is not modelled");
        one.phases.push_back(*phase);
    }
    auto sample = sampleOf(row, known, remark);
    if (!sample) return std::move(sample).error();
    one.sample = std::move(sample).value();
    if (row.quantity.startsWith("Ac"))
        remark = "equilibrium temperature, below what heating shows" + (remark.isEmpty() ? QString() : "; " + remark);
    const bool needs_at = row.quantity == "gamma_loop" || row.quantity == "solubility_product" ||
                          row.quantity == "activity" || row.quantity == "phase_fraction";
    if (needs_at && !row.at_C) return because("the row states no temperature");
    return evaluator->second(one);
}

}  // namespace soak
