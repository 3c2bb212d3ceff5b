// SPDX-License-Identifier: GPL-3.0-or-later
#include "curvature.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"

namespace soak {

void Curvature::forward(double* v, int n) const {
    for (int k = 0; k < n; ++k) {
        const double* row = U + k * n;
        const double w = v[k] *= inverse[k];
        for (int j = k + 1; j < n; ++j) v[j] -= row[j] * w;
    }
}

void Curvature::backward(double* v, int n) const {
    for (int i = n - 1; i >= 0; --i) {
        double sum = v[i];
        for (int j = i + 1; j < n; ++j) sum -= U[i * n + j] * v[j];
        v[i] = sum * inverse[i];
    }
}

/// Factors the upper triangle of B + shift; false when it is not positive.
bool Curvature::factor(const double* B, double shift, int n) {
    std::copy(B, B + n * n, U);
    for (int i = 0; i < n; ++i) U[i * n + i] += shift;
    for (int k = 0; k < n; ++k) {
        double* row = U + k * n;
        const double whole = B[k * n + k];
        if (row[k] <= 1e-6 * (whole > 0 ? whole + shift : shift)) return false;
        row[k] = std::sqrt(row[k]);
        inverse[k] = 1 / row[k];
        for (int j = k + 1; j < n; ++j) row[j] *= inverse[k];
        for (int i = k + 1; i < n; ++i) {
            double* below = U + i * n;
            const double f = row[i];
            for (int j = i; j < n; ++j) below[j] -= f * row[j];
        }
    }
    return true;
}

void Curvature::evaluate(const PhaseModel& model, const double* at, double T, const double* y, int elements) {
    const int n = model.size;
    const auto subs = static_cast<size_t>(model.sublattices);
    double B[kMost * kMost], q[kMost * 8], R[64];
    G = model.hessian(at, T, y, g, B);
    atoms = model.amounts(y, a, elements);
    double least = 1e30, kappa = 0;
    for (int c = 0; c < n; ++c) {
        const double ideal = kGas * T * model.sites[static_cast<size_t>(c)];
        root[c] = std::sqrt(y[c]);
        least = std::min(least, ideal);
        kappa = std::max(kappa, ideal);
    }
    // q = H n and R = n^T H n, with n the sublattices' normals.
    for (int i = 0; i < n; ++i) {
        double* row = B + i * n;
        for (int j = 0; j < n; ++j) row[j] *= root[i] * root[j];
        row[i] += kGas * T * model.sites[static_cast<size_t>(i)];
        for (size_t s = 0; s < subs; ++s) {
            double sum = 0;
            for (int j = model.start[s]; j < model.start[s + 1]; ++j) sum += row[j] * root[j];
            q[static_cast<size_t>(i) * subs + s] = sum;
        }
    }
    for (size_t s = 0; s < subs; ++s)
        for (size_t t = 0; t < subs; ++t) {
            double sum = 0;
            for (int i = model.start[s]; i < model.start[s + 1]; ++i)
                sum += root[i] * q[static_cast<size_t>(i) * subs + t];
            R[s * subs + t] = sum;
        }
    for (int i = 0; i < n; ++i) {
        double* row = B + i * n;
        const auto si = static_cast<size_t>(model.sublattice[static_cast<size_t>(i)]);
        for (size_t t = si; t < subs; ++t) {
            const double along =
                q[static_cast<size_t>(i) * subs + t] - root[i] * (R[si * subs + t] + (si == t ? kappa : 0));
            for (int j = std::max(i, model.start[t]); j < model.start[t + 1]; ++j)
                row[j] -= root[i] * q[static_cast<size_t>(j) * subs + si] + root[j] * along;
        }
    }
    shifted = false;
    for (double shift = 0; !factor(B, shift, n); shift = shift == 0 ? 0.05 * least : 2 * shift) shifted = true;
}

void Curvature::project(const PhaseModel& model, double* v) const {
    for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
        double along = 0;
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) along += root[c] * v[c];
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) v[c] -= along * root[c];
    }
}

double Curvature::residual(const PhaseModel& model, const double* mu, double* w) const {
    const int n = model.size;
    for (int c = 0; c < n; ++c) {
        const int e = model.element[static_cast<size_t>(c)];
        w[c] = root[c] * (g[c] - (e < 0 ? 0 : mu[e] * model.sites[static_cast<size_t>(c)]));
    }
    project(model, w);
    forward(w, n);
    double sum = 0;
    for (int c = 0; c < n; ++c) sum += w[c] * w[c];
    return sum;
}

bool isConvex(const PhaseModel& model, const double* at, double T, const double* y, int elements) {
    Curvature curvature;
    curvature.evaluate(model, at, T, y, elements);
    return !curvature.shifted;
}

}  // namespace soak
