// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <vector>

#include "polynomial.h"

namespace soak {

/// Magnetic part of G, J per mole of magnetic atoms, with its derivatives in T (K), Tc (K) and beta (Bohr magnetons).
struct MagneticGibbs {
    double G = 0, G_T = 0, G_Tc = 0, G_beta = 0;
    double G_TcTc = 0, G_Tcbeta = 0, G_betabeta = 0, G_TTc = 0, G_Tbeta = 0;
};
MagneticGibbs magneticGibbs(double T, double Tc, double beta, double p);

/// Gibbs energy of one phase, compiled for the elements at hand (compound energy formalism). Immutable: threads share
/// it.
///   T  K
///   y  site fractions, all sublattices end to end, length `size`; each sublattice sums to 1, every y > 0
///   G  J per mole of formula unit (sites as in phases.toml) at 101 325 Pa
///   at all G parameters of the system at T, J/mol (System::parametersAt); the phase's rows are its own
/// Properties, each a test: gradient and Hessian agree with differences of G; the order of elements is free.
/// Errors: none at run time. Cost: O(terms + n^2) a call, no allocation.
/// Source: M. Hillert, J. Alloys Compd. 320 (2001) 161-176 (compound energy formalism).
class PhaseModel {
public:
    static constexpr int kMost = 32;  ///< the most constituents of one phase

    int data = 0;  ///< index into DataSet::phases
    int size = 0;  ///< constituents that are active
    int sublattices = 0;
    std::vector<int> start;       ///< first constituent of each sublattice, and one past the last: sublattices + 1
    std::vector<int> sublattice;  ///< of each constituent
    std::vector<int> element;     ///< of each constituent: index into the system's elements, -1 = vacant
    std::vector<int> origin;      ///< of each constituent: its index in the data set's list
    std::vector<double> sites;    ///< of each constituent: sites of its sublattice
    Polynomial gibbsTerms;        ///< rows into the system's parameters
    Polynomial curieTerms, momentTerms;  ///< rows into the constants below
    std::vector<double> curieAt, momentAt;
    double antiferro = -1, structureFactor = 0.4;
    bool magnetic = false;

    /// G at y.
    double gibbs(const double* at, double T, const double* y) const;
    /// G; fills the gradient g (n). The ideal part R T a (ln y + 1) is contained.
    double gradient(const double* at, double T, const double* y, double* g) const;
    /// G; fills g (n) and H (row-major n x n, both triangles). The ideal part of H, R T a / y on the diagonal, is left
    /// out: scaled by sqrt(y_i y_j) it is R T a exactly, however small y is.
    double hessian(const double* at, double T, const double* y, double* g, double* H) const;
    /// dG/dT and d(gradient)/dT at constant y, from the parameters' slopes dP/dT.
    double slope(const double* atSlope, double T, const double* y, double* g_T) const;
    /// Tc and beta at y after the antiferromagnetic rule, with the factors that turned the raw values into them.
    struct Magnetism {
        double Tc = 0, beta = 0, TcFactor = 1, betaFactor = 1;
    };
    Magnetism magnetism(const double* y) const;
    /// R T sum a y ln y
    double ideal(double T, const double* y) const;
    /// Amount of each element in one formula unit (mole of atoms) into `amount` (elements); returns the sum.
    double amounts(const double* y, double* amount, int elements) const;
};

}  // namespace soak
