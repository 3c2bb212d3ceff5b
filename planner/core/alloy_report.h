// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <functional>
#include <map>
#include <memory>

#include "planner/core/window.h"
#include "thermo/back_diffusion.h"
#include "thermo/scheil.h"

namespace soak {

/// One chemistry with its sweep, computed once and used for every cycle and furnace. Not for two threads at a time.
class AlloyReport {
public:
    static Result<AlloyReport> make(const std::shared_ptr<const DataSet>& data, const Chemistry& chemistry,
                                    const PhaseChoice& choice, double from_C, double to_C);
    /// From a sweep that is already there; further temperatures cannot be computed then.
    explicit AlloyReport(Sweep sweep) : sweep_(std::move(sweep)) {}

    const Sweep& sweep() const { return sweep_; }

    /// The temperature between two others where `quantity` of the state equals `value`; it must lie on both sides at
    /// the ends. To 0.01 K by bisection and secants. With sensitivities dT/d(wt%) by central differences of the state.
    /// `name` tells quantities apart: what was solved once is not solved again for the next furnace.
    using Quantity = std::function<double(const State&)>;
    Result<Event> crossing(const std::string& name, const Quantity& quantity, double value, double from_K, double to_K);
    /// The same for one label's volume fraction and for an element's content of the matrix, with exact derivatives.
    Result<Event> crossingOfFraction(const std::string& label, double fraction, double from_K, double to_K);
    Result<Event> crossingOfContent(const std::string& element, double content_wt, double from_K, double to_K);
    Result<State> stateAt(double temperature_K);
    /// How the melt freezes between dendrites, computed once.
    Result<FreezingPath> freezing(const FreezingChoice& choice);
    /// First melting between dendrites with part of the segregation left; see thermo/back_diffusion.h.
    Result<InterdendriticMelting> meltingAfter(const std::map<std::string, double>& last_liquid_wt,
                                               const std::map<std::string, double>& left, double from_K, double to_K);
    /// The same alloy with another content of one element. Fault::data when only a stored sweep is at hand.
    Result<Alloy> changed(const std::string& element, double wt) const;

private:
    Result<Event> solved(const std::string& what, double value, double from_K, double to_K,
                         const std::function<Result<Event>()>& solve);
    Result<Event> solve(const Quantity& quantity, double value, double from_K, double to_K);

    std::shared_ptr<const DataSet> data_;
    PhaseChoice choice_;
    std::unique_ptr<Alloy> alloy_;
    Sweep sweep_;
    std::map<std::string, Event> solved_;
    std::optional<FreezingPath> frozen_;
};

}  // namespace soak
