// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "phase_model.h"

namespace soak {

/// G of one phase at one point with its gradient, and the inverse of its curvature within the sublattice sums, in
/// factored form.
///
/// All in the scaled variable z = dy / sqrt(y), in which the ideal part of the curvature is R T a and the sums'
/// normals are orthonormal: B = P H P + kappa (1 - P) = U^T U, with P the projection on the tangent space and
/// kappa the largest R T a. Plain arrays, and loops along rows.
struct Curvature {
    static constexpr int kMost = PhaseModel::kMost;
    static constexpr int kMostElements = 24;

    double G = 0;             ///< J per mole of formula unit
    double atoms = 0;         ///< moles of atoms per formula unit
    double g[kMost];          ///< gradient of G in y
    double root[kMost];       ///< sqrt(y)
    double a[kMostElements];  ///< moles of each element per formula unit
    bool shifted = false;     ///< the curvature was not positive and has been lifted
    double U[kMost * kMost];  ///< upper triangle, row-major n x n
    double inverse[kMost];    ///< 1 / diagonal of U

    /// Fills everything at y. `at`: the system's parameters at T.
    void evaluate(const PhaseModel& model, const double* at, double T, const double* y, int elements);
    /// Solves U^T v = v in place.
    void forward(double* v, int n) const;
    /// Solves U v = v in place.
    void backward(double* v, int n) const;
    /// w = U^-T P D (g - S^T mu), D = diag(sqrt(y)); returns its square, the Newton decrement (J).
    double residual(const PhaseModel& model, const double* mu, double* w) const;
    /// P v for a vector in z: takes out the part along each sublattice's normal sqrt(y).
    void project(const PhaseModel& model, double* v) const;

private:
    bool factor(const double* B, double shift, int n);
};

/// True when G is convex at y within the sublattice sums.
bool isConvex(const PhaseModel& model, const double* at, double T, const double* y, int elements);

}  // namespace soak
