// SPDX-License-Identifier: GPL-3.0-or-later
#include "ribbon.h"

#include <algorithm>
#include <set>

#include "phase_colours.h"
#include "thermo/base/units.h"

namespace soak::desk {
namespace {

double interpolate(double x, double x1, double y1, double x2, double y2) {
    return x2 > x1 ? y1 + (y2 - y1) * (x - x1) / (x2 - x1) : y2;
}

double volumeOf(const State& state, const std::string& label) {
    double sum = 0;
    for (const PhaseAmount& phase : state.phases)
        if (phase.label == label) sum += phase.volume_fraction;
    return sum;
}

const PhaseAmount* largestOf(const State& state, const std::string& label) {
    const PhaseAmount* found = nullptr;
    for (const PhaseAmount& phase : state.phases)
        if (phase.label == label && (!found || phase.volume_fraction > found->volume_fraction)) found = &phase;
    return found;
}

}  // namespace

Ribbons::Ribbons(const Sweep& sweep) {
    if (sweep.states.size() < 2) return;
    low_C_ = celsius(sweep.states.front().temperature_K);
    high_C_ = celsius(sweep.states.back().temperature_K);
    addLabels(sweep);
    for (const QString& label : labels_) addLine(sweep, label);
}

void Ribbons::addLabels(const Sweep& sweep) {
    std::set<std::pair<int, QString>> ordered;
    for (const State& state : sweep.states)
        for (const PhaseAmount& phase : state.phases) {
            const QString label = QString::fromStdString(phase.label);
            ordered.emplace(phaseLook(label).order, label);
        }
    for (const auto& [order, label] : ordered) labels_.push_back(label);
}

void Ribbons::addLine(const Sweep& sweep, const QString& label) {
    const std::string name = label.toStdString();
    std::vector<Knot> knots;
    std::vector<Composition> compositions;
    for (const State& state : sweep.states) {
        const double at_C = celsius(state.temperature_K);
        knots.emplace_back(at_C, volumeOf(state, name));
        if (const PhaseAmount* phase = largestOf(state, name)) compositions.push_back({at_C, phase->wt});
    }
    // At an event the amount is zero by definition, though no state need lie there.
    for (const Event& event : sweep.events)
        if (event.label == name) knots.emplace_back(celsius(event.temperature_K), 0.0);
    std::stable_sort(knots.begin(), knots.end(), [](const Knot& a, const Knot& b) { return a.first < b.first; });
    lines_.push_back(std::move(knots));
    compositions_.push_back(std::move(compositions));
}

std::vector<double> Ribbons::fractionsAt(double celsius) const {
    std::vector<double> fractions(labels_.size(), 0.0);
    if (isEmpty() || celsius < low_C_ || celsius > high_C_) return fractions;
    double sum = 0;
    for (size_t i = 0; i < lines_.size(); ++i) {
        const auto& knots = lines_[i];
        auto next = std::lower_bound(knots.begin(), knots.end(), celsius,
                                     [](const Knot& knot, double value) { return knot.first < value; });
        if (next == knots.begin()) ++next;
        if (next == knots.end()) --next;
        const auto& [x1, y1] = *std::prev(next);
        fractions[i] = std::max(0.0, interpolate(celsius, x1, y1, next->first, next->second));
        sum += fractions[i];
    }
    // Between a state and an event the lines bend separately; the parts of a whole still add up to one.
    if (sum > 0)
        for (double& fraction : fractions) fraction /= sum;
    return fractions;
}

std::map<std::string, double> Ribbons::compositionAt(size_t line, double celsius) const {
    const auto& known = compositions_[line];
    if (known.empty()) return {};
    auto next = std::lower_bound(known.begin(), known.end(), celsius,
                                 [](const Composition& entry, double value) { return entry.temperature_C < value; });
    if (next == known.begin()) return next->wt;
    if (next == known.end()) return std::prev(next)->wt;
    const Composition& before = *std::prev(next);
    std::map<std::string, double> mixed;
    for (const auto& [element, after_wt] : next->wt) {
        const auto found = before.wt.find(element);
        const double before_wt = found == before.wt.end() ? 0.0 : found->second;
        mixed[element] = interpolate(celsius, before.temperature_C, before_wt, next->temperature_C, after_wt);
    }
    return mixed;
}

std::vector<Reading> Ribbons::at(double celsius) const {
    const std::vector<double> fractions = fractionsAt(celsius);
    std::vector<Reading> readings;
    for (size_t i = 0; i < fractions.size(); ++i)
        if (fractions[i] > 1e-7) readings.push_back({labels_[i], fractions[i], compositionAt(i, celsius)});
    std::sort(readings.begin(), readings.end(), [](const Reading& a, const Reading& b) { return a.volume > b.volume; });
    return readings;
}

}  // namespace soak::desk
