// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/alloy_report.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"

namespace soak {
namespace {

constexpr double kTolerance_K = 0.01;
constexpr int kMostSteps = 60;

Error noEngine() { return {Fault::data, "only a stored sweep is at hand, nothing between its states", {}, {}}; }

/// Step for a difference in composition: small against the content, large against the solver's own tolerance.
double compositionStep_wt(double content_wt) { return 1e-3 * content_wt + 1e-4; }

}  // namespace

Result<AlloyReport> AlloyReport::make(const std::shared_ptr<const DataSet>& data, const Chemistry& chemistry,
                                      const PhaseChoice& choice, double from_C, double to_C) {
    auto alloy = Alloy::make(data, chemistry, choice);
    if (!alloy) return std::move(alloy).error();
    auto held = std::make_unique<Alloy>(std::move(alloy).value());
    auto sweep = held->sweep(kelvin(from_C), kelvin(to_C));
    if (!sweep) return std::move(sweep).error();
    AlloyReport report(std::move(sweep).value());
    report.data_ = data;
    report.choice_ = choice;
    report.alloy_ = std::move(held);
    return report;
}

Result<State> AlloyReport::stateAt(double temperature_K) {
    if (!alloy_) return noEngine();
    return alloy_->stateAt(temperature_K);
}

Result<FreezingPath> AlloyReport::freezing(const FreezingChoice& choice) {
    if (frozen_) return *frozen_;
    if (!alloy_) return noEngine();
    constexpr double kAbove_K = 120;  // the sweep may end below the liquidus
    auto path = freeze(*alloy_, sweep_.states.back().temperature_K + kAbove_K, choice);
    if (path) frozen_ = path.value();
    return path;
}

Result<InterdendriticMelting> AlloyReport::meltingAfter(const std::map<std::string, double>& last_liquid_wt,
                                                        const std::map<std::string, double>& left, double from_K,
                                                        double to_K) {
    if (!alloy_) return noEngine();
    return meltingAfterHold(*alloy_, last_liquid_wt, left, from_K, to_K);
}

Result<Alloy> AlloyReport::changed(const std::string& element, double wt) const {
    if (!alloy_) return noEngine();
    Chemistry moved = alloy_->chemistry();
    moved.wt[element] = wt;
    return alloy_->changed(moved);
}

Result<Event> AlloyReport::solved(const std::string& what, double value, double from_K, double to_K,
                                  const std::function<Result<Event>()>& solve) {
    if (!alloy_) return noEngine();
    const std::string key =
        what + " " + std::to_string(value) + " " + std::to_string(from_K) + " " + std::to_string(to_K);
    if (const auto known = solved_.find(key); known != solved_.end()) return known->second;
    auto event = solve();
    if (event) solved_[key] = event.value();
    return event;
}

Result<Event> AlloyReport::crossingOfFraction(const std::string& label, double fraction, double from_K, double to_K) {
    return solved("fraction " + label, fraction, from_K, to_K,
                  [&] { return alloy_->temperatureOfFraction(label, fraction, from_K, to_K); });
}

Result<Event> AlloyReport::crossingOfContent(const std::string& element, double content_wt, double from_K,
                                             double to_K) {
    return solved("content " + element, content_wt, from_K, to_K,
                  [&] { return alloy_->temperatureOfMatrixContent(element, content_wt, from_K, to_K); });
}

Result<Event> AlloyReport::crossing(const std::string& name, const Quantity& quantity, double value, double from_K,
                                    double to_K) {
    return solved(name, value, from_K, to_K, [&] { return solve(quantity, value, from_K, to_K); });
}

Result<Event> AlloyReport::solve(const Quantity& quantity, double value, double from_K, double to_K) {
    Error failure;
    const auto missAt = [&](double T) -> std::optional<double> {
        const auto state = alloy_->stateAt(T);
        if (!state) failure = state.error();
        return state ? std::optional(quantity(state.value()) - value) : std::nullopt;
    };
    auto low = missAt(from_K), high = missAt(to_K);
    if (!low || !high) return failure;
    if ((*low < 0) == (*high < 0))
        return Error{Fault::range, "the quantity does not cross the value between the two temperatures", {}, {}};

    // Regula falsi, Illinois form: halving the stale end keeps it from creeping.
    double T = from_K;
    for (int step = 0, stale = 0; step < kMostSteps && to_K - from_K > kTolerance_K; ++step) {
        const double secant = (from_K * *high - to_K * *low) / (*high - *low);
        T = std::clamp(secant, from_K + 0.25 * kTolerance_K, to_K - 0.25 * kTolerance_K);
        const auto miss = missAt(T);
        if (!miss) return failure;
        if (std::abs(*miss) < 1e-9) break;
        const bool same_as_low = (*miss < 0) == (*low < 0);
        (same_as_low ? from_K : to_K) = T;
        (same_as_low ? low : high) = miss;
        if (stale == (same_as_low ? 1 : -1)) *(same_as_low ? high : low) /= 2;
        stale = same_as_low ? 1 : -1;
    }
    Event event;
    event.temperature_K = T;

    const auto above = missAt(T + 0.5), below = missAt(T - 0.5), here = missAt(T);
    if (!above || !below || !here) return failure;
    const double slope_per_K = *above - *below;
    if (slope_per_K == 0) return event;  // no sensitivity can be given at a flat place
    for (const auto& [element, content] : alloy_->chemistry().wt) {
        Chemistry moved = alloy_->chemistry();
        const double step = compositionStep_wt(content);
        moved.wt[element] = content + step;
        auto other = alloy_->changed(moved);
        if (!other) return std::move(other).error();
        const auto state = other.value().stateAt(T);
        if (!state) return state.error();
        event.K_per_wt[element] = -(quantity(state.value()) - value - *here) / step / slope_per_K;
    }
    return event;
}

}  // namespace soak
