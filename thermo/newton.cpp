// SPDX-License-Identifier: GPL-3.0-or-later
#include "newton.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"

namespace soak {

/// Fills W after evaluate.
void NewtonStep::Local::spread(const PhaseModel& model, const double* y, int elements) {
    std::fill(W, W + size * elements, 0.0);
    for (int k = 0; k < size; ++k) {
        const int e = model.element[static_cast<size_t>(k)];
        if (e < 0) continue;
        const auto s = static_cast<size_t>(model.sublattice[static_cast<size_t>(k)]);
        const double sites = model.sites[static_cast<size_t>(k)];
        for (int c = model.start[s]; c < model.start[s + 1]; ++c)
            W[c * elements + e] += root[c] * sites * ((c == k ? 1.0 : 0.0) - y[k]);
    }
    for (int k = 0; k < size; ++k) {
        double* row = W + k * elements;
        for (int e = 0; e < elements; ++e) row[e] *= inverse[k];
        for (int i = k + 1; i < size; ++i) {
            const double f = U[k * size + i];
            double* below = W + i * elements;
            for (int e = 0; e < elements; ++e) below[e] -= f * row[e];
        }
    }
}

/// Fills G_T and wT after evaluate.
void NewtonStep::Local::addSlope(const PhaseModel& model, const double* slope, double T, const double* y) {
    G_T = model.slope(slope, T, y, wT);
    for (int c = 0; c < size; ++c) wT[c] *= root[c];
    project(model, wT);
    forward(wT, size);
}

bool NewtonStep::compute(const System& system, Point& p, const Eigen::VectorXd& b, const Eigen::VectorXd& at,
                         const Eigen::VectorXd& slope, const Condition* condition) {
    elements_ = system.elementCount();
    const int sets = static_cast<int>(p.sets.size());
    const int size = elements_ + sets + (condition ? 1 : 0);
    if (locals_.size() < p.sets.size()) locals_.resize(p.sets.size());
    M_.setZero(size, size);
    rhs_.setZero(size);
    rhs_.head(elements_) = b;
    for (int s = 0; s < sets; ++s) {
        PhaseSet& set = p.sets[static_cast<size_t>(s)];
        const PhaseModel& model = system.phases()[static_cast<size_t>(set.phase)];
        Local& local = locals_[static_cast<size_t>(s)];
        local.size = model.size;
        local.evaluate(model, at.data(), p.T, set.y.data(), elements_);
        local.spread(model, set.y.data(), elements_);
        if (condition)
            local.addSlope(model, slope.data(), p.T, set.y.data());
        else
            std::fill(local.wT, local.wT + model.size, 0.0);
        local.residual(model, p.mu.data(), local.w0);
        set.atoms = local.atoms;
        set.gibbs = local.G;
        set.unstable = local.shifted;
        addSet(s, set, p.mu, condition ? &condition->weight[static_cast<size_t>(s)] : nullptr, condition != nullptr);
    }
    return M_.allFinite() && rhs_.allFinite() && solve(p, b, condition != nullptr);
}

/// The rows of one set: its share of every element's balance, its distance to the plane, its weight in the condition.
void NewtonStep::addSet(int s, const PhaseSet& set, const Eigen::VectorXd& mu_, const Eigen::VectorXd* weight,
                        bool withT) {
    using Rows = Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor>;
    using Small =
        Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, 0, Curvature::kMostElements, Curvature::kMostElements>;
    const Local& local = locals_[static_cast<size_t>(s)];
    const Eigen::Map<const Rows> W(local.W, local.size, elements_);
    const Eigen::Map<const Eigen::VectorXd> w0(local.w0, local.size), wT(local.wT, local.size);
    const Eigen::Map<const Eigen::VectorXd> a(local.a, elements_);
    Small K(elements_, elements_);
    K.noalias() = W.transpose().lazyProduct(W);
    M_.topLeftCorner(elements_, elements_) += set.n * K;
    M_.col(elements_ + s).head(elements_) = a;
    M_.row(elements_ + s).head(elements_) = a.transpose();
    for (int c = 0; c < local.size; ++c) rhs_.head(elements_) += (set.n * w0[c]) * W.row(c).transpose();
    rhs_.head(elements_) -= set.n * a;
    rhs_[elements_ + s] = local.G - a.dot(mu_);
    if (!withT) return;
    const Eigen::Index last = M_.rows() - 1;
    const Eigen::VectorXd WwT = W.transpose() * wT;
    M_.col(last).head(elements_) -= set.n * WwT;
    M_(elements_ + s, last) = -local.G_T;
    if (weight->size() == 0) return;
    M_.row(last).head(elements_) += set.n * (weight->transpose() * K);
    M_(last, elements_ + s) = weight->dot(a);
    M_(last, last) -= set.n * weight->dot(WwT);
    rhs_[last] += set.n * weight->dot(W.transpose() * w0) - set.n * weight->dot(a);
}

/// Solves M x = rhs, scaled so that a trace element's row weighs as much as iron's.
bool NewtonStep::solve(const Point& p, const Eigen::VectorXd& b, bool withT) {
    const Eigen::Index size = M_.rows(), sets = size - elements_ - (withT ? 1 : 0);
    const double RT = kGas * p.T;
    rows_.setOnes(size);
    for (int e = 0; e < elements_; ++e) rows_[e] = 1 / std::sqrt(std::max(M_(e, e), 1e-3 * b[e] / RT));
    for (Eigen::Index s = 0; s < sets; ++s)
        rows_[elements_ + s] = 1 / (locals_[static_cast<size_t>(s)].atoms * std::sqrt(RT));
    columns_ = rows_;
    if (withT) {
        rows_[size - 1] = 1 / std::max(M_.row(size - 1).cwiseAbs().maxCoeff(), 1e-300);
        columns_[size - 1] = 1;
    }
    scaled_ = rows_.asDiagonal() * M_ * columns_.asDiagonal();
    scaledRhs_ = rows_.cwiseProduct(rhs_);
    lu_.compute(scaled_);
    x_ = lu_.solve(scaledRhs_);
    if (!x_.allFinite() ||
        (scaled_ * x_ - scaledRhs_).cwiseAbs().maxCoeff() > 1e-6 * (1 + scaledRhs_.cwiseAbs().maxCoeff()))
        x_ = scaled_.completeOrthogonalDecomposition().solve(scaledRhs_);
    if (!x_.allFinite()) return false;
    if (withT) {
        dT_db.resize(elements_);
        Eigen::VectorXd unit = Eigen::VectorXd::Zero(size);
        for (int e = 0; e < elements_; ++e) {
            unit[e] = rows_[e];
            dT_db[e] = lu_.solve(unit)[size - 1];
            unit[e] = 0;
        }
    }
    x_.array() *= columns_.array();
    mu = x_.head(elements_);
    n = x_.segment(elements_, sets);
    T = withT ? x_[size - 1] : 0;
    return true;
}

double NewtonStep::sites(int s, double share, double* dz) const {
    const Local& local = locals_[static_cast<size_t>(s)];
    for (int c = 0; c < local.size; ++c) {
        double sum = -local.w0[c] - local.wT[c] * T;
        for (int e = 0; e < elements_; ++e) sum += local.W[c * elements_ + e] * mu[e];
        dz[c] = sum * share;
    }
    local.backward(dz, local.size);
    double change = 0;
    for (int c = 0; c < local.size; ++c) change = std::max(change, std::abs(dz[c] * local.root[c]));
    return change;
}

}  // namespace soak
