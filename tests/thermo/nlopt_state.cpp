// SPDX-License-Identifier: GPL-3.0-or-later
#include "nlopt_state.h"

#include <algorithm>
#include <cmath>
#include <exception>
#include <limits>
#include <nlopt.hpp>

#include "base/units.h"

namespace soak::test {
namespace {

constexpr double kLeast = 1e-9;  // lower bound of a variable
constexpr int kRuns = 20;        // of the optimiser, each from where the last one stopped

/// Variables: of each set its amount n, then z = sqrt(y) of its site fractions. In z the curvature of ideal mixing is
/// the same for rich and dilute constituents, which a quasi-Newton method needs to get anywhere with traces.
struct Problem {
    const System& system;
    const Eigen::VectorXd& b;
    double T;
    std::vector<int> phase;      ///< of each set
    std::vector<size_t> offset;  ///< of each set's amount among the variables
    size_t variables = 0, constraints = 0;
    Eigen::VectorXd at;
    int evaluations = 0;
    std::vector<double> best;  ///< the last point: SLSQP may stop by an exception

    Problem(const System& s, const Eigen::VectorXd& overall, double temperature, const std::vector<PhaseSet>& sets)
        : system(s), b(overall), T(temperature) {
        system.parametersAt(T, at);
        constraints = static_cast<size_t>(b.size());
        for (const PhaseSet& set : sets) {
            phase.push_back(set.phase);
            offset.push_back(variables);
            variables += 1 + static_cast<size_t>(model(phase.size() - 1).size);
            constraints += static_cast<size_t>(model(phase.size() - 1).sublattices);
        }
    }
    const PhaseModel& model(size_t set) const { return system.phases()[static_cast<size_t>(phase[set])]; }
};

double objective(unsigned, const double* x, double* slope, void* data) {
    auto& problem = *static_cast<Problem*>(data);
    ++problem.evaluations;
    problem.best.assign(x, x + problem.variables);
    const double RT = kGas * problem.T;
    double sum = 0, g[PhaseModel::kMost], y[PhaseModel::kMost];
    for (size_t s = 0; s < problem.phase.size(); ++s) {
        const PhaseModel& model = problem.model(s);
        const double n = x[problem.offset[s]];
        const double* z = x + problem.offset[s] + 1;
        for (int c = 0; c < model.size; ++c) y[c] = z[c] * z[c];
        const double G = model.gradient(problem.at.data(), problem.T, y, g);
        sum += n * G / RT;
        if (!slope) continue;
        double* into = slope + problem.offset[s];
        into[0] = G / RT;
        for (int c = 0; c < model.size; ++c) into[1 + c] = 2 * z[c] * n * g[c] / RT;
    }
    return sum;
}

/// Row by row: the mass balance of each element, over the root of its amount, then the sublattice sums.
void balances(unsigned rows, double* value, unsigned columns, const double* x, double* slope, void* data) {
    const auto& problem = *static_cast<Problem*>(data);
    const auto elements = static_cast<size_t>(problem.b.size());
    if (slope) std::fill(slope, slope + static_cast<size_t>(rows) * columns, 0.0);
    for (size_t e = 0; e < elements; ++e) value[e] = -std::sqrt(problem.b[static_cast<Eigen::Index>(e)]);
    size_t row = elements;
    for (size_t s = 0; s < problem.phase.size(); ++s) {
        const PhaseModel& model = problem.model(s);
        const size_t at = problem.offset[s];
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c) {
            if (model.element[c] < 0) continue;
            const auto e = static_cast<size_t>(model.element[c]);
            const double a = model.sites[c] / std::sqrt(problem.b[model.element[c]]), z = x[at + 1 + c];
            value[e] += x[at] * a * z * z;
            if (!slope) continue;
            slope[e * columns + at] += a * z * z;
            slope[e * columns + at + 1 + c] += x[at] * a * 2 * z;
        }
        for (size_t k = 0; k < static_cast<size_t>(model.sublattices); ++k, ++row) {
            value[row] = -1;
            for (int c = model.start[k]; c < model.start[k + 1]; ++c) {
                const double z = x[at + 1 + static_cast<size_t>(c)];
                value[row] += z * z;
                if (slope) slope[row * columns + at + 1 + static_cast<size_t>(c)] = 2 * z;
            }
        }
    }
}

}  // namespace

NloptState minimizeWithNlopt(const System& system, const Eigen::VectorXd& b, double T, std::vector<PhaseSet> start) {
    Problem problem(system, b, T, start);
    std::vector<double> x(problem.variables), lower(x.size(), kLeast), upper(x.size(), 1.0);
    for (size_t s = 0; s < start.size(); ++s) {
        x[problem.offset[s]] = std::max(start[s].n, kLeast);
        for (size_t c = 0; c < static_cast<size_t>(problem.model(s).size); ++c)
            x[problem.offset[s] + 1 + c] = std::clamp(std::sqrt(start[s].y[c]), kLeast, 1.0);
    }
    nlopt::opt optimizer(nlopt::LD_SLSQP, static_cast<unsigned>(x.size()));
    optimizer.set_lower_bounds(lower);
    optimizer.set_upper_bounds(upper);
    optimizer.set_min_objective(objective, &problem);
    optimizer.add_equality_mconstraint(balances, &problem, std::vector<double>(problem.constraints, 1e-10));
    optimizer.set_ftol_rel(1e-12);
    optimizer.set_maxeval(1000);
    std::vector<double> lack(problem.constraints);
    // SLSQP often stops early, limited by rounding; from where it stopped it goes on. Two runs in a row that agree, and
    // hold the balances, end it.
    double last = std::numeric_limits<double>::infinity();
    for (int run = 0; run < kRuns; ++run) {
        double value = 0;
        try {
            optimizer.optimize(x, value);
        } catch (const std::exception&) {
            if (!problem.best.empty()) x = problem.best;
        }
        value = objective(static_cast<unsigned>(x.size()), x.data(), nullptr, &problem);
        balances(static_cast<unsigned>(problem.constraints), lack.data(), static_cast<unsigned>(x.size()), x.data(),
                 nullptr, &problem);
        const auto [least, most] = std::minmax_element(lack.begin(), lack.end());
        if (std::abs(value - last) < 1e-9 && *most < 1e-8 && *least > -1e-8) break;
        last = value;
        for (double& v : x) v = std::clamp(v, kLeast, 1.0);
    }

    NloptState state;
    state.evaluations = problem.evaluations;
    Eigen::VectorXd missing = b, amounts(b.size());
    for (size_t s = 0; s < start.size(); ++s) {
        PhaseSet set = start[s];
        const PhaseModel& model = problem.model(s);
        set.n = x[problem.offset[s]];
        for (size_t k = 0; k < static_cast<size_t>(model.sublattices); ++k) {
            double sum = 0;
            for (auto c = static_cast<size_t>(model.start[k]); c < static_cast<size_t>(model.start[k + 1]); ++c)
                sum += set.y[c] = std::pow(std::max(x[problem.offset[s] + 1 + c], kLeast), 2);
            for (auto c = static_cast<size_t>(model.start[k]); c < static_cast<size_t>(model.start[k + 1]); ++c)
                set.y[c] /= sum;
        }
        set.atoms = model.amounts(set.y.data(), amounts.data(), static_cast<int>(b.size()));
        set.gibbs = model.gibbs(problem.at.data(), T, set.y.data());
        missing -= set.n * amounts;
        state.gibbs += set.n * set.gibbs;
        state.sets.push_back(set);
    }
    state.imbalance = missing.cwiseAbs().maxCoeff();
    return state;
}

}  // namespace soak::test
