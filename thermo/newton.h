// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <vector>

#include "curvature.h"
#include "point.h"
#include "system.h"

namespace soak {

/// One Newton step of an equilibrium: chemical potentials, amounts, site fractions and, under a condition, T together.
///
/// The site fractions are eliminated phase by phase (curvature.h), so that the system to solve has one row per element
/// and set. Its matrices keep their memory from step to step.
///   M. Hillert, Physica 103B (1981) 31-40; B. Sundman, X.-G. Lu, H. Ohtani, Comput. Mater. Sci. 101 (2015) 127-137.
class NewtonStep {
public:
    /// Computes the step at p; fills atoms, gibbs and unstable of its sets. `at`, `slope`: the system's parameters at
    /// p.T and their slopes in T (needed with a condition only). False when no step can be found.
    bool compute(const System& system, Point& p, const Eigen::VectorXd& b, const Eigen::VectorXd& at,
                 const Eigen::VectorXd& slope, const Condition* condition);

    Eigen::VectorXd mu;     ///< change of the chemical potentials, J/mol
    Eigen::VectorXd n;      ///< change of the amounts
    double T = 0;           ///< change of the temperature, K
    Eigen::VectorXd dT_db;  ///< under a condition: dT per mole of each element added, exact at a solution

    /// The step of set s in units of sqrt(y), shortened to `share`; returns the largest change of a site fraction.
    double sites(int s, double share, double* dz) const;
    const Curvature& curvature(int s) const { return locals_[static_cast<size_t>(s)]; }

private:
    struct Local : Curvature {
        int size = 0;
        double G_T = 0;
        double W[kMost * kMostElements];   ///< U^-T P A, row-major n x elements
        double w0[kMost], wT[kMost] = {};  ///< U^-T P of the residual gradient and of its slope in T
        void spread(const PhaseModel& model, const double* y, int elements);
        void addSlope(const PhaseModel& model, const double* slope, double T, const double* y);
    };
    void addSet(int s, const PhaseSet& set, const Eigen::VectorXd& mu, const Eigen::VectorXd* weight, bool withT);
    bool solve(const Point& p, const Eigen::VectorXd& b, bool withT);

    int elements_ = 0;
    std::vector<Local> locals_;
    Eigen::MatrixXd M_, scaled_;
    Eigen::VectorXd rhs_, x_, rows_, columns_, scaledRhs_;
    Eigen::PartialPivLU<Eigen::MatrixXd> lu_;
};

}  // namespace soak
