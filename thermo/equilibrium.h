// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <memory>
#include <vector>

#include "base/result.h"
#include "hull.h"
#include "newton.h"
#include "point.h"
#include "system.h"

namespace soak {

/// Finds the global minimum of G at T, 1 atm and overall composition. One per thread.
///   1. Start: warm from the last point, or cold: lower hull over samples of every phase by linear programming.
///   2. Refine: Newton on chemical potentials, amounts and site fractions together.
///      M. Hillert, Physica 103B (1981) 31-40; B. Sundman, X.-G. Lu, H. Ohtani, Comput. Mater. Sci. 101 (2015) 127-137.
///   3. Prove: minimise every phase's distance to the tangent plane from several starts; what lies below enters, and 2
///   runs again.
///   4. When 2 fails, new columns from 3 refine the hull until its plane is near enough for Newton.
class Solver {
public:
    /// `b`: mole fractions in the system's order, all positive. `allowed`: per phase of the system.
    Solver(std::shared_ptr<const System> system, Eigen::VectorXd b, std::vector<char> allowed);

    /// Solves at T (K). Starts from the last point when it lies within 60 K, else cold; falls back to cold.
    Result<Done> solve(double T);
    /// The same from nothing, ignoring the last point.
    Result<Done> solveCold(double T);
    const Point& point() const { return point_; }
    /// Makes `point` the start of the next solve.
    void startFrom(const Point& point) { point_ = point; }
    /// Another composition over the same elements and phases; the last point stays the start.
    void setComposition(const Eigen::VectorXd& b) { b_ = b; }
    const Eigen::VectorXd& composition() const { return b_; }
    const System& system() const { return *system_; }

    /// Solves for the temperature at which `condition` holds with exactly the sets of `start` (some may have n = 0).
    /// Not proven; see prove(). `dT_db` receives dT per mole of each element added to the alloy.
    bool solveCondition(Point& start, const Condition& condition, Eigen::VectorXd& dT_db);
    /// Proves a point at its temperature; returns the largest driving force (J per mole of atoms).
    double prove(Point& point, bool thorough);

    struct Counters {
        long states = 0, cold = 0, newton = 0, descents = 0, descentSteps = 0, hulls = 0, fallbacks = 0, settled = 0;
    };
    Counters counters;

private:
    bool refine(Point& p, const Condition* condition, Eigen::VectorXd* dT_db);
    bool settle(Point& p);
    bool removeTwins(Point& p) const;
    void total(Point& p);
    void descend(Minimum& m, double T, const Eigen::VectorXd& mu, const std::vector<Minimum>& known,
                 const std::vector<PhaseSet>& sets);
    bool leadsToKnown(const Minimum& m, const double* y, const std::vector<Minimum>& known,
                      const std::vector<PhaseSet>& sets) const;
    bool stands(const Point& p) const;
    bool converge(Point& p, bool thorough);
    bool exchange(Point& p, const std::vector<Minimum>& entering);
    Point coldStart(double T);
    bool columnStart(Point& p);
    std::vector<PhaseSet> setsOf(const Hull& hull, const std::vector<PhaseSet>& extra, int sampleCount) const;
    void mergeSets(std::vector<PhaseSet>& sets, double T) const;
    void addOverall(std::vector<PhaseSet>& into, double T) const;
    bool solveHull(Hull& hull, const std::vector<PhaseSet>& extra, bool withSamples);
    void complete(PhaseSet& set, double T) const;
    std::vector<Minimum> violators(const Point& p) const;
    double heldBound(const Point& p, size_t phase) const;
    bool consider(Minimum m, const Point& p, std::vector<Minimum>& mine, double& low, bool toTheEnd = false);
    std::vector<std::pair<double, int>> startsOf(Point& p, size_t phase, bool thorough);
    static double softness(const PhaseModel& model, const Curvature& local, double T, double* v);
    void searchAround(const PhaseSet& set, const Point& p, std::vector<Minimum>& mine, double& low);
    void reopen(Point& p, size_t phase, const std::vector<Minimum>& mine) const;
    double searchPhase(Point& p, size_t phase, bool thorough, std::vector<Minimum>& found);
    bool hasMoved(const Point& p, int phase, const std::vector<Minimum>& found) const;

    std::shared_ptr<const System> system_;
    Eigen::VectorXd b_;
    std::vector<char> allowed_;
    Point point_;
    NewtonStep step_;
    Eigen::VectorXd at_, slope_, sampleG_, height_;
    std::vector<int> bestAt_;  ///< best sample of each class of the phase at hand
    double atT_ = 0, sampleT_ = 0;
    void setTemperature(double T);
    const Eigen::VectorXd& samplesAt(double T);
};

}  // namespace soak
