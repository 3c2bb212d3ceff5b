// SPDX-License-Identifier: GPL-3.0-or-later
#include "site_fractions.h"

#include <algorithm>
#include <cmath>

namespace soak {

double distance2(const double* y, const double* z, int n) {
    double sum = 0;
    for (int c = 0; c < n; ++c) {
        const double d = std::sqrt(y[c]) - std::sqrt(z[c]);
        sum += d * d;
    }
    return sum;
}

void move(const PhaseModel& model, const double* dz, double alpha, double* y) {
    for (int c = 0; c < model.size; ++c) {
        const double r = alpha * dz[c] / std::sqrt(y[c]);
        double next = y[c] * (1 + r);
        if (r < -0.1)
            next = y[c] * std::exp(std::max(r, -5.0));
        else if (r > 0.1)
            next = std::max(std::min(next, 2.0), std::min(y[c] * std::exp(std::min(r, 60.0)), 0.02));
        y[c] = std::max(next, kLeastFraction);
    }
    for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
        double sum = 0;
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) sum += y[c];
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) y[c] /= sum;
    }
}

}  // namespace soak
