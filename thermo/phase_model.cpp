// SPDX-License-Identifier: GPL-3.0-or-later
#include "phase_model.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"

namespace soak {

// G = R T ln(beta + 1) g(tau),  tau = T/Tc,  q = 1/p - 1,  D = 518/1125 + 11692 q/15975
//   g = 1 - [79/(140 p tau) + 474/497 q (tau^3/6 + tau^9/135 + tau^15/600)] / D     tau <= 1
//   g =   - [tau^-5/10 + tau^-15/315 + tau^-25/1500] / D                            tau >  1
// Source: M. Hillert, M. Jarl, CALPHAD 2 (1978) 227-238; p = 0.40 in bcc, 0.28 in fcc and hcp. Seen: memory.
MagneticGibbs magneticGibbs(double T, double Tc, double beta, double p) {
    MagneticGibbs m;
    if (Tc < 1e-3 || beta <= 0) return m;  // g falls with Tc^5: below this the term is under 1e-20 J
    const double tau = T / Tc, q = 1 / p - 1, D = 518.0 / 1125 + 11692.0 / 15975 * q;
    double g, g1, g2;  // g and its derivatives in tau
    if (tau <= 1) {
        const double t2 = tau * tau, t3 = t2 * tau, t6 = t3 * t3, t9 = t6 * t3, c = 474.0 / 497 * q, a = 79 / (140 * p);
        g = 1 - (a / tau + c * (t3 / 6 + t9 / 135 + t9 * t6 / 600)) / D;
        g1 = -(-a / t2 + c * (t2 / 2 + t6 * t2 / 15 + t9 * t3 * t2 / 40)) / D;
        g2 = -(2 * a / t3 + c * (tau + 8 * t6 * tau / 15 + 7 * t9 * t3 * tau / 20)) / D;
    } else {
        const double u = 1 / tau, u5 = u * u * u * u * u, u15 = u5 * u5 * u5, u25 = u15 * u5 * u5;
        g = -(u5 / 10 + u15 / 315 + u25 / 1500) / D;
        g1 = (u5 / 2 + u15 / 21 + u25 / 60) * u / D;
        g2 = -(3 * u5 + 16 * u15 / 21 + 26 * u25 / 60) * u * u / D;
    }
    const double logBeta = std::log1p(beta), R = kGas, b1 = 1 + beta, tau_Tc = -tau / Tc;
    m.G = R * T * logBeta * g;
    m.G_T = R * logBeta * (g + tau * g1);
    m.G_Tc = R * T * logBeta * g1 * tau_Tc;
    m.G_beta = R * T * g / b1;
    m.G_TcTc = R * T * logBeta * (g2 * tau_Tc * tau_Tc + g1 * 2 * tau / (Tc * Tc));
    m.G_Tcbeta = R * T * g1 * tau_Tc / b1;
    m.G_betabeta = -R * T * g / (b1 * b1);
    m.G_TTc = R * logBeta * tau_Tc * (2 * g1 + tau * g2);
    m.G_Tbeta = R * (g + tau * g1) / b1;
    return m;
}

PhaseModel::Magnetism PhaseModel::magnetism(const double* y) const {
    Magnetism m;
    m.Tc = curieTerms.value(curieAt.data(), y);
    m.beta = momentTerms.value(momentAt.data(), y);
    if (m.Tc < 0) m.TcFactor = 1 / antiferro;
    if (m.beta < 0) m.betaFactor = 1 / antiferro;
    m.Tc *= m.TcFactor;
    m.beta *= m.betaFactor;
    return m;
}

double PhaseModel::ideal(double T, const double* y) const {
    double sum = 0;
    for (int c = 0; c < size; ++c) sum += sites[static_cast<size_t>(c)] * y[c] * std::log(y[c]);
    return kGas * T * sum;
}

double PhaseModel::gibbs(const double* at, double T, const double* y) const {
    double G = gibbsTerms.value(at, y) + ideal(T, y);
    if (magnetic) {
        const Magnetism m = magnetism(y);
        G += magneticGibbs(T, m.Tc, m.beta, structureFactor).G;
    }
    return G;
}

double PhaseModel::gradient(const double* at, double T, const double* y, double* g) const {
    const double RT = kGas * T;
    double G = 0;
    for (int c = 0; c < size; ++c) {
        const double a = RT * sites[static_cast<size_t>(c)], logY = std::log(y[c]);
        g[c] = a * (logY + 1);
        G += a * y[c] * logY;
    }
    G += gibbsTerms.gradient(at, y, g);
    if (!magnetic) return G;
    double tc[kMost] = {}, beta[kMost] = {};
    curieTerms.gradient(curieAt.data(), y, tc);
    momentTerms.gradient(momentAt.data(), y, beta);
    const Magnetism m = magnetism(y);
    const MagneticGibbs f = magneticGibbs(T, m.Tc, m.beta, structureFactor);
    for (int c = 0; c < size; ++c) g[c] += f.G_Tc * m.TcFactor * tc[c] + f.G_beta * m.betaFactor * beta[c];
    return G + f.G;
}

double PhaseModel::hessian(const double* at, double T, const double* y, double* g, double* H) const {
    const double RT = kGas * T;
    const int n = size;
    double G = 0;
    std::fill(H, H + n * n, 0.0);
    for (int c = 0; c < n; ++c) {
        const double a = RT * sites[static_cast<size_t>(c)], logY = std::log(y[c]);
        g[c] = a * (logY + 1);
        G += a * y[c] * logY;
    }
    G += gibbsTerms.derivatives(at, y, g, H, n);
    if (magnetic) {
        double tc[kMost] = {}, beta[kMost] = {}, tcH[kMost * kMost], betaH[kMost * kMost];
        std::fill(tcH, tcH + n * n, 0.0);
        std::fill(betaH, betaH + n * n, 0.0);
        double Tc = curieTerms.derivatives(curieAt.data(), y, tc, tcH, n);
        double moment = momentTerms.derivatives(momentAt.data(), y, beta, betaH, n);
        const double fTc = Tc < 0 ? 1 / antiferro : 1, fBeta = moment < 0 ? 1 / antiferro : 1;
        const MagneticGibbs f = magneticGibbs(T, Tc * fTc, moment * fBeta, structureFactor);
        if (f.G != 0) {
            const double a = f.G_TcTc * fTc * fTc, b = f.G_Tcbeta * fTc * fBeta, c = f.G_betabeta * fBeta * fBeta;
            const double d = f.G_Tc * fTc, e = f.G_beta * fBeta;
            for (int i = 0; i < n; ++i) {
                g[i] += d * tc[i] + e * beta[i];
                for (int j = i; j < n; ++j)
                    H[i * n + j] += d * tcH[i * n + j] + e * betaH[i * n + j] + a * tc[i] * tc[j] +
                                    b * (tc[i] * beta[j] + tc[j] * beta[i]) + c * beta[i] * beta[j];
            }
            G += f.G;
        }
    }
    for (int i = 0; i < n; ++i)
        for (int j = 0; j < i; ++j) H[i * n + j] = H[j * n + i];
    return G;
}

double PhaseModel::slope(const double* atSlope, double T, const double* y, double* g_T) const {
    double G_T = 0;
    for (int c = 0; c < size; ++c) {
        const double a = kGas * sites[static_cast<size_t>(c)], logY = std::log(y[c]);
        g_T[c] = a * (logY + 1);
        G_T += a * y[c] * logY;
    }
    G_T += gibbsTerms.gradient(atSlope, y, g_T);
    if (!magnetic) return G_T;
    double tc[kMost] = {}, beta[kMost] = {};
    curieTerms.gradient(curieAt.data(), y, tc);
    momentTerms.gradient(momentAt.data(), y, beta);
    const Magnetism m = magnetism(y);
    const MagneticGibbs f = magneticGibbs(T, m.Tc, m.beta, structureFactor);
    for (int c = 0; c < size; ++c) g_T[c] += f.G_TTc * m.TcFactor * tc[c] + f.G_Tbeta * m.betaFactor * beta[c];
    return G_T + f.G_T;
}

double PhaseModel::amounts(const double* y, double* amount, int elements) const {
    std::fill(amount, amount + elements, 0.0);
    double sum = 0;
    for (int c = 0; c < size; ++c) {
        const int e = element[static_cast<size_t>(c)];
        if (e < 0) continue;
        amount[e] += sites[static_cast<size_t>(c)] * y[c];
        sum += sites[static_cast<size_t>(c)] * y[c];
    }
    return sum;
}

}  // namespace soak
