// SPDX-License-Identifier: GPL-3.0-or-later
#include "alloy.h"

#include <algorithm>
#include <cmath>
#include <sstream>

#include "alloy_inside.h"
#include "base/units.h"

namespace soak {
namespace {

constexpr double kTrace = 1e-9;  // mole fraction below which an element is left out

std::string number(double value) {
    std::ostringstream out;
    out.precision(10);
    out << value;
    return out.str();
}

Error badInput(std::string message) { return {Fault::input, std::move(message), "", {}}; }

/// wt% of every element of the data set, the balance element taking the rest.
Result<std::vector<double>> contents(const DataSet& data, const Chemistry& chemistry) {
    std::vector<double> wt(data.elements.size(), 0.0);
    const int balance = data.elementIndex(chemistry.balance);
    if (balance < 0)
        return badInput("the balance element " + chemistry.balance + " is not in the data set " + data.facts.name);
    double sum = 0;
    for (const auto& [symbol, value] : chemistry.wt) {
        const int e = data.elementIndex(symbol);
        if (e < 0) return badInput("the element " + symbol + " is not in the data set " + data.facts.name);
        if (e == balance)
            return badInput(symbol +
                            " is the balance element and takes the rest: leave it out or choose another balance");
        if (!(value >= 0 && value <= 100))
            return badInput(symbol + " " + number(value) + " wt%: a content lies between 0 and 100 wt%");
        wt[static_cast<size_t>(e)] = value;
        sum += value;
    }
    if (sum > 100) return badInput("the contents add up to " + number(sum) + " wt%, which is more than 100");
    wt[static_cast<size_t>(balance)] = 100 - sum;
    return wt;
}

Result<Done> checkPhases(const DataSet& data, const std::vector<std::string>& names) {
    for (const auto& name : names)
        if (data.phaseIndex(name) < 0) {
            std::string known;
            for (const auto& phase : data.facts.phases) known += " " + phase;
            return badInput("no phase is named " + name + "; the data set " + data.facts.name + " knows:" + known);
        }
    return Done{};
}

std::string commandFor(const Chemistry& chemistry, const PhaseChoice& choice) {
    std::string list;
    for (const auto& [symbol, value] : chemistry.wt) list += symbol + "=" + number(value) + ",";
    std::string command = "soakwright state --wt \"" + list + chemistry.balance + "=bal\"";
    const auto add = [&](const char* option, const std::vector<std::string>& names) {
        for (size_t i = 0; i < names.size(); ++i) command += (i ? "," : std::string(" ") + option + " ") + names[i];
    };
    add("--with", choice.with);
    add("--without", choice.without);
    return command;
}

}  // namespace

Alloy::Alloy(std::unique_ptr<Inside> inside) : inside_(std::move(inside)) {}
Alloy::Alloy(Alloy&&) noexcept = default;
Alloy& Alloy::operator=(Alloy&&) noexcept = default;
Alloy::~Alloy() = default;
const Chemistry& Alloy::chemistry() const { return inside_->chemistry; }

Result<Alloy> Alloy::make(std::shared_ptr<const DataSet> data, const Chemistry& chemistry, const PhaseChoice& choice) {
    auto wt = contents(*data, chemistry);
    if (!wt) return std::move(wt).error();
    for (const auto* names : {&choice.with, &choice.without})
        if (auto known = checkPhases(*data, *names); !known) return std::move(known).error();

    auto inside = std::make_unique<Inside>();
    std::vector<double> moles(wt.value().size());
    double total = 0;
    for (size_t e = 0; e < moles.size(); ++e) total += moles[e] = wt.value()[e] / data->elements[e].mass;
    std::vector<int> present;
    std::vector<double> b;
    for (size_t e = 0; e < moles.size(); ++e)
        if (moles[e] / total > kTrace) {
            present.push_back(static_cast<int>(e));
            b.push_back(moles[e]);
            inside->mass.push_back(data->elements[e].mass);
            inside->molesPer100g += moles[e];
        }
    for (double& x : b) x /= inside->molesPer100g;
    inside->data = data;
    inside->chemistry = chemistry;
    inside->choice = choice;
    inside->repeat = commandFor(chemistry, choice);
    inside->system = data->system(present);
    std::vector<char> allowed;
    for (const PhaseModel& model : inside->system->phases()) {
        const PhaseData& phase = data->phases[static_cast<size_t>(model.data)];
        const auto listed = [&](const std::vector<std::string>& names) {
            return std::find(names.begin(), names.end(), phase.name) != names.end();
        };
        allowed.push_back(!listed(choice.without) && (!phase.left_out || listed(choice.with)));
    }
    if (std::none_of(allowed.begin(), allowed.end(), [](char a) { return a != 0; }))
        return badInput("no phase is left that could form from this chemistry");
    inside->solver = std::make_unique<Solver>(
        inside->system, Eigen::Map<Eigen::VectorXd>(b.data(), static_cast<Eigen::Index>(b.size())), std::move(allowed));
    return Alloy(std::move(inside));
}

Result<Alloy> Alloy::changed(const Chemistry& chemistry) const {
    auto other = make(inside_->data, chemistry, inside_->choice);
    if (!other || other.value().inside_->system != inside_->system) return other;
    Inside& near = *other.value().inside_;
    near.solver->startFrom(inside_->solver->point());
    near.absentAt = inside_->absentAt;  // what forms on heating here does so there too
    near.presentUpTo = inside_->presentUpTo;
    return other;
}

Error Alloy::Inside::failed(Error error, double T) const {
    error.repeat = repeat + " --at " + number(celsius(T));
    return error;
}

Result<Done> Alloy::Inside::solve(double T) {
    if (!(T >= 300 && T <= 6000))
        return Error{Fault::range, number(T) + " K lies outside the data's range, 300 to 6000 K", "", {}};
    const auto distance = [T](const Point& p) { return std::abs(p.T - T); };
    const auto nearest = std::min_element(starts.begin(), starts.end(),
                                          [&](const Point& x, const Point& y) { return distance(x) < distance(y); });
    if (nearest != starts.end() && distance(*nearest) + 10 < distance(solver->point())) solver->startFrom(*nearest);
    auto done = solver->solve(T);
    if (!done) return failed(std::move(done).error(), T);
    return done;
}

const std::string& Alloy::Inside::nameOf(int phase) const {
    return data->phases[static_cast<size_t>(system->phases()[static_cast<size_t>(phase)].data)].name;
}

Eigen::VectorXd Alloy::Inside::amountsOf(const PhaseSet& set) const {
    Eigen::VectorXd a(system->elementCount());
    system->phases()[static_cast<size_t>(set.phase)].amounts(set.y.data(), a.data(), system->elementCount());
    return a;
}

const LabelRule* Alloy::Inside::heatingRuleOf(const PhaseSet& set) const {
    const std::string& phase = nameOf(set.phase);
    const LabelRule* rule = heatingRule(*data, phase);
    const bool plain =
        rule && labelOf(*data, *system, set) == data->phases[static_cast<size_t>(data->phaseIndex(phase))].label;
    return plain ? rule : nullptr;
}

bool Alloy::Inside::namesOnHeating(const LabelRule& rule, const Point& point) const {
    return std::none_of(point.sets.begin(), point.sets.end(), [&](const PhaseSet& set) {
        const std::string& label = labelOf(*data, *system, set);
        return std::find(rule.unless_beside.begin(), rule.unless_beside.end(), label) != rule.unless_beside.end();
    });
}

std::vector<std::string> Alloy::Inside::labelsOf(const Point& point, bool onHeating) const {
    std::vector<std::string> labels;
    for (const PhaseSet& set : point.sets) {
        const LabelRule* rule = onHeating ? heatingRuleOf(set) : nullptr;
        labels.push_back(rule ? rule->label : labelOf(*data, *system, set));
    }
    return labels;
}

State Alloy::Inside::toState(const Point& point, bool onHeating) const {
    State state;
    state.temperature_K = point.T;
    state.gibbs_J_per_mol = point.gibbs;
    state.proof_J_per_mol = point.proof;
    state.matrixLabels = data->matrix;
    const auto labels = labelsOf(point, onHeating);
    double totalMass = 0, totalVolume = 0;
    for (size_t s = 0; s < point.sets.size(); ++s) {
        const PhaseSet& set = point.sets[s];
        const PhaseModel& model = system->phases()[static_cast<size_t>(set.phase)];
        const PhaseData& phase = data->phases[static_cast<size_t>(model.data)];
        const Eigen::VectorXd a = amountsOf(set);
        PhaseAmount amount;
        amount.name = phase.name;
        amount.label = labels[s];
        amount.mole_fraction = set.n * set.atoms;
        double grams = 0, volume = 0;
        for (int e = 0; e < system->elementCount(); ++e) {
            const ElementData& element =
                data->elements[static_cast<size_t>(system->elements()[static_cast<size_t>(e)])];
            grams += a[e] * element.mass;
            volume += a[e] * phase.volume_cm3.at(element.symbol);
        }
        for (int e = 0; e < system->elementCount(); ++e) {
            const ElementData& element =
                data->elements[static_cast<size_t>(system->elements()[static_cast<size_t>(e)])];
            amount.wt[element.symbol] = 100 * a[e] * element.mass / grams;
        }
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c) {
            const auto sub = static_cast<size_t>(model.sublattice[c]);
            amount.site_fraction[std::to_string(sub + 1) + ":" +
                                 phase.constituents[sub][static_cast<size_t>(model.origin[c])]] = set.y[c];
        }
        amount.mass_fraction = set.n * grams;
        amount.volume_fraction = set.n * volume;
        totalMass += amount.mass_fraction;
        totalVolume += amount.volume_fraction;
        state.phases.push_back(std::move(amount));
    }
    for (PhaseAmount& amount : state.phases) {
        amount.mass_fraction /= totalMass;
        if (totalVolume > 0) amount.volume_fraction /= totalVolume;
    }
    std::stable_sort(state.phases.begin(), state.phases.end(),
                     [](const PhaseAmount& x, const PhaseAmount& y) { return x.mole_fraction > y.mole_fraction; });
    for (int e = 0; e < system->elementCount(); ++e)
        state.chemical_potential_J_per_mol
            [data->elements[static_cast<size_t>(system->elements()[static_cast<size_t>(e)])].symbol] = point.mu[e];
    return state;
}

/// Looks down from the point for a temperature at which the set is absent: then it formed on heating.
bool Alloy::Inside::formsOnHeating(const Point& point) {
    const auto ruleAt = [&](const Point& p) {
        const LabelRule* rule = nullptr;
        for (const PhaseSet& set : p.sets)
            if (!rule) rule = heatingRuleOf(set);
        return rule;
    };
    constexpr double kLowest = 773.15, kStep = 25;  // below 500 C the metal's matrix no longer changes in a treatment
    const double T = point.T;
    const LabelRule* rule = ruleAt(point);
    if (!rule) return false;
    if (absentAt > 0 && T > absentAt) return true;
    if (T <= presentUpTo) return false;
    const Point kept = point;
    for (double below = T - kStep; below > std::max(kLowest, presentUpTo); below -= kStep) {
        if (!solver->solve(below)) break;
        const Point& p = solver->point();
        if (ruleAt(p)) continue;
        if (namesOnHeating(*rule, p)) absentAt = below;
        break;
    }
    solver->startFrom(kept);
    if (absentAt > 0 && T > absentAt) return true;
    presentUpTo = std::max(presentUpTo, T);
    return false;
}

std::map<std::string, double> Alloy::Inside::perWt(const Eigen::VectorXd& dT_db) const {
    std::map<std::string, double> slopes;
    // Where a label changes with no phase boundary, or at a congruent point, there is no finite slope.
    constexpr double kSteepest = 1e9;  // K per mole fraction: steeper than any trace element's
    if (dT_db.size() == 0 || !dT_db.allFinite() || dT_db.cwiseAbs().maxCoeff() > kSteepest) return slopes;
    const int balance = data->elementIndex(chemistry.balance);
    int local = -1;
    for (int e = 0; e < system->elementCount(); ++e)
        if (system->elements()[static_cast<size_t>(e)] == balance) local = e;
    if (local < 0) return slopes;
    for (int e = 0; e < system->elementCount(); ++e)
        if (e != local)
            slopes[data->elements[static_cast<size_t>(system->elements()[static_cast<size_t>(e)])].symbol] =
                (dT_db[e] / mass[static_cast<size_t>(e)] - dT_db[local] / mass[static_cast<size_t>(local)]) /
                molesPer100g;
    return slopes;
}

Result<State> Alloy::stateAt(double T_K) {
    auto done = inside_->solve(T_K);
    if (!done) return std::move(done).error();
    const Point point = inside_->solver->point();
    return inside_->toState(point, inside_->formsOnHeating(point));
}

double State::moleFraction(std::string_view label) const {
    double sum = 0;
    for (const auto& phase : phases)
        if (phase.label == label) sum += phase.mole_fraction;
    return sum;
}

double State::massFraction(std::string_view label) const {
    double sum = 0;
    for (const auto& phase : phases)
        if (phase.label == label) sum += phase.mass_fraction;
    return sum;
}

double State::volumeFraction(std::string_view label) const {
    double sum = 0;
    for (const auto& phase : phases)
        if (phase.label == label) sum += phase.volume_fraction;
    return sum;
}

const PhaseAmount* State::find(std::string_view label) const {
    for (const auto& phase : phases)
        if (phase.label == label) return &phase;
    return nullptr;
}

std::optional<double> State::matrixContent(std::string_view element) const {
    double mass = 0, held = 0;
    for (const auto& phase : phases) {
        if (std::find(matrixLabels.begin(), matrixLabels.end(), phase.label) == matrixLabels.end()) continue;
        mass += phase.mass_fraction;
        if (const auto found = phase.wt.find(std::string(element)); found != phase.wt.end())
            held += phase.mass_fraction * found->second;
    }
    if (mass <= 0) return {};
    return held / mass;
}

}  // namespace soak
