// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <functional>
#include <map>
#include <string>
#include <vector>

#include "alloy.h"
#include "data_set.h"
#include "equilibrium.h"
#include "label.h"

namespace soak {

/// What an Alloy holds: the data, the chemistry in moles, and one solver.
struct Alloy::Inside {
    std::shared_ptr<const DataSet> data;
    Chemistry chemistry;
    PhaseChoice choice;
    std::string repeat;  ///< command line that repeats a state of this alloy, without temperature
    std::shared_ptr<const System> system;
    std::vector<double> mass;  ///< g/mol, in the system's order
    double molesPer100g = 0;
    std::unique_ptr<Solver> solver;
    /// Temperatures (K) at which the heating phase (ferrite) is known to be absent or present: see labelAt.
    double absentAt = 0, presentUpTo = 0;

    /// Every other state of the last sweep: where a state far from the last one starts.
    std::vector<Point> starts;

    Error failed(Error error, double T) const;
    Result<Done> solve(double T);
    /// Labels of the point's sets, in order; delta ferrite told from ferrite when `onHeating` says so.
    std::vector<std::string> labelsOf(const Point& point, bool onHeating) const;
    State toState(const Point& point, bool onHeating) const;
    /// True when the sets that have a heating name form from another matrix phase below T.
    bool formsOnHeating(const Point& point);
    /// The rule that would rename this set on heating, or nullptr when it is not of that kind.
    const LabelRule* heatingRuleOf(const PhaseSet& set) const;
    /// True when none of the labels that keep the plain name stands beside.
    bool namesOnHeating(const LabelRule& rule, const Point& point) const;
    std::map<std::string, double> perWt(const Eigen::VectorXd& dT_db) const;
    const std::string& nameOf(int phase) const;
    /// Moles of atoms of each element in one formula unit.
    Eigen::VectorXd amountsOf(const PhaseSet& set) const;
    using Weights = std::function<Condition(const Point&)>;
    /// The temperature between two that bracket it at which the condition holds; `measure` is its left side at a point.
    Result<Event> solveBetween(double from_K, double to_K, const std::function<double(const Point&)>& measure,
                               const Weights& weights);
};

}  // namespace soak
