// SPDX-License-Identifier: GPL-3.0-or-later
#include "scheil.h"

#include <algorithm>
#include <cmath>
#include <optional>

namespace soak {
namespace {

constexpr double kLeastStep_K = 0.25;
constexpr double kEnd_K = 0.1;  // how closely liquidus and invariant are found
constexpr int kMostSteps = 400;

using Wt = std::map<std::string, double>;

/// What the engine says of a liquid held at a temperature.
struct Held {
    double liquid = 0;  // mass fraction
    Wt liquid_wt, solid_wt;
    std::vector<std::string> solid;
};

Held heldOf(const State& state) {
    Held held;
    for (const PhaseAmount& phase : state.phases) {
        const bool liquid = phase.label == "liquid";
        if (liquid)
            held.liquid += phase.mass_fraction;
        else
            held.solid.push_back(phase.label);
        for (const auto& [element, wt] : phase.wt)
            (liquid ? held.liquid_wt : held.solid_wt)[element] += wt * phase.mass_fraction;
    }
    for (auto& [element, wt] : held.liquid_wt) wt /= std::max(held.liquid, 1e-12);
    for (auto& [element, wt] : held.solid_wt) wt /= std::max(1 - held.liquid, 1e-12);
    return held;
}

double at(const Wt& wt, const std::string& element) {
    const auto found = wt.find(element);
    return found == wt.end() ? 0 : found->second;
}

/// Follows one melt down.
class Freezing {
public:
    Freezing(const Alloy& alloy, const FreezingChoice& choice) : whole_(alloy.chemistry()), choice_(choice) {}

    Result<FreezingPath> run(const Alloy& alloy, double from_K) {
        auto melt = alloy.changed(whole_);
        if (!melt) return std::move(melt).error();
        alloy_.emplace_back(std::move(melt).value());
        if (auto done = findLiquidus(from_K); !done) return std::move(done).error();
        double step_K = 2;
        for (int i = 0; i < kMostSteps && path_.end_K == 0; ++i)
            if (auto done = goDown(step_K); !done) return std::move(done).error();
        if (path_.end_K == 0)
            return Error{Fault::noConvergence,
                         "the melt did not freeze within " + std::to_string(kMostSteps) + " steps",
                         {},
                         {}};
        if (auto done = findSlopes(); !done) return std::move(done).error();
        return std::move(path_);
    }

private:
    Alloy& liquid() { return alloy_.front(); }

    Result<Held> hold(double T) {
        const auto state = liquid().stateAt(T);
        if (!state) return state.error();
        return heldOf(state.value());
    }

    Result<Done> findLiquidus(double from_K) {
        double high = from_K, low = from_K;
        auto held = hold(high);
        if (!held) return std::move(held).error();
        if (held.value().liquid < 1 - 1e-9)
            return Error{Fault::range, "the alloy is not all liquid at the start of the freezing path", {}, {}};
        while (held.value().liquid > 1 - 1e-9) {
            high = low;
            low -= 60;
            held = hold(low);
            if (!held) return std::move(held).error();
        }
        while (high - low > kEnd_K) {
            const double middle = (high + low) / 2;
            held = hold(middle);
            if (!held) return std::move(held).error();
            (held.value().liquid > 1 - 1e-9 ? high : low) = middle;
        }
        path_.steps.push_back({high, 1, whole_.wt, {}});
        return Done{};
    }

    /// One step down; a step that freezes too much is halved, one that freezes little makes the next one longer.
    Result<Done> goDown(double& step_K) {
        const FreezingStep last = path_.steps.back();
        for (;;) {
            const double T = last.temperature_K - step_K;
            const auto held = hold(T);
            if (!held) return held.error();
            const double frozen = 1 - held.value().liquid;
            if (frozen > choice_.most_per_step && step_K > kLeastStep_K) {
                step_K = std::max(kLeastStep_K, step_K / 2);
                continue;
            }
            if (held.value().liquid < 1e-9) return endAtOnce(last.temperature_K, T);
            if (frozen < choice_.most_per_step / 3) step_K = std::min(choice_.most_step_K, 1.6 * step_K);
            return take(T, last, held.value());
        }
    }

    Result<Done> take(double T, const FreezingStep& last, const Held& held) {
        FreezingStep next{T, last.liquid * held.liquid, held.liquid_wt, held.solid};
        next.liquid_wt.erase(whole_.balance);
        if (1 - held.liquid > 1e-6)
            for (const std::string& element : choice_.fast) {
                // Lever rule with the partition of this step: C0 = fl Cl + (1 - fl) k Cl.
                const double in_liquid = at(held.liquid_wt, element);
                if (in_liquid <= 0) continue;
                const double k = at(held.solid_wt, element) / in_liquid;
                next.liquid_wt[element] = at(whole_.wt, element) / (next.liquid + k * (1 - next.liquid));
            }
        if (next.liquid <= choice_.last_liquid) {
            // Where the last liquid is left: linear in the logarithm of the amount.
            const double share = std::log(last.liquid / choice_.last_liquid) / std::log(last.liquid / next.liquid);
            path_.end_K = last.temperature_K - share * (last.temperature_K - T);
        }
        path_.steps.push_back(next);
        return become(next.liquid_wt);
    }

    /// All of the liquid freezes between two temperatures: an invariant reaction. The liquid just above it is kept.
    Result<Done> endAtOnce(double high, double low) {
        const FreezingStep last = path_.steps.back();
        std::vector<std::string> solid;
        std::optional<Held> before;
        while (high - low > kEnd_K) {
            const double middle = (high + low) / 2;
            auto held = hold(middle);
            if (!held) return std::move(held).error();
            (held.value().liquid > 1e-9 ? high : low) = middle;
            if (held.value().liquid > 1e-9)
                before = std::move(held).value();
            else
                solid = held.value().solid;
        }
        if (before) {
            path_.steps.push_back({high, last.liquid * before->liquid, before->liquid_wt, before->solid});
            path_.steps.back().liquid_wt.erase(whole_.balance);
        }
        path_.end_K = (high + low) / 2;
        path_.invariant = true;
        FreezingStep end = path_.steps.back();
        end.temperature_K = path_.end_K;
        end.liquid = 0;
        end.solid = std::move(solid);
        path_.steps.push_back(std::move(end));
        return Done{};
    }

    Result<Done> become(const Wt& wt) {
        auto next = liquid().changed({wt, whole_.balance});
        if (!next) return std::move(next).error();
        alloy_.clear();
        alloy_.emplace_back(std::move(next).value());
        return Done{};
    }

    /// The last liquid just begins to freeze at the end: the slope of its liquidus is an event of a short sweep.
    Result<Done> findSlopes() {
        const Wt& last = path_.steps.back().liquid_wt;
        const auto around = liquid().sweep(path_.end_K - 6, path_.end_K + 25);
        if (!around) return around.error();
        const Event* liquidus = nullptr;
        for (const Event& event : around.value().events)
            if (event.kind == EventKind::vanishes) liquidus = &event;
        if (!liquidus) return Done{};  // no slope is better than a wrong one
        for (const auto& [element, K_per_wt] : liquidus->K_per_wt)
            if (const double whole = at(whole_.wt, element); whole > 0)
                path_.K_per_wt[element] = K_per_wt * at(last, element) / whole;
        return Done{};
    }

    Chemistry whole_;
    FreezingChoice choice_;
    std::vector<Alloy> alloy_;  // one: an Alloy has no empty state
    FreezingPath path_;
};

}  // namespace

Result<FreezingPath> freeze(const Alloy& alloy, double from_K, const FreezingChoice& choice) {
    return Freezing(alloy, choice).run(alloy, from_K);
}

}  // namespace soak
