// SPDX-License-Identifier: GPL-3.0-or-later
#include "equilibrium.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include "base/units.h"

namespace soak {
namespace {

constexpr int kMost = PhaseModel::kMost;
constexpr int kMostElements = 24;
constexpr double kFloor = 1e-20;     // smallest site fraction: below it a constituent weighs nothing in G
constexpr double kViolation = 2e-7;  // driving force, in RT per mole of atoms, above which a phase enters
constexpr double kNear = 0.05;       // height, in RT per mole of atoms, below which a minimum is followed exactly
constexpr double kArrived = 2e-4;    // distance2 at which a search is on its way to a known place
constexpr double kSame = 1e-5;       // distance2 below which two places are one
constexpr double kWarmRange = 60;    // K between neighbours that may start from each other
constexpr double kResettle = 0.02;  // fall of a sample, in RT per formula unit, after which its class is searched again

/// Euclidean distance of the square roots of site fractions: the natural metric of mixing entropy.
double distance2(const double* y, const double* z, int n) {
    double sum = 0;
    for (int c = 0; c < n; ++c) {
        const double d = std::sqrt(y[c]) - std::sqrt(z[c]);
        sum += d * d;
    }
    return sum;
}

/// Moves y by `alpha` times the Newton step dz (in units of sqrt(y)), keeps it positive and each sublattice summing
/// to 1. Small fractions move in their logarithm, where ideal mixing is linear.
void move(const PhaseModel& model, const double* dz, double alpha, double* y) {
    for (int c = 0; c < model.size; ++c) {
        const double r = alpha * dz[c] / std::sqrt(y[c]);
        double next = y[c] * (1 + r);
        if (r < -0.1)
            next = y[c] * std::exp(std::max(r, -60.0));
        else if (r > 0.1)
            next = std::max(std::min(next, 2.0), std::min(y[c] * std::exp(std::min(r, 60.0)), 0.02));
        y[c] = std::max(next, kFloor);
    }
    for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
        double sum = 0;
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) sum += y[c];
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) y[c] /= sum;
    }
}

}  // namespace

/// One phase at one point: G, its gradient, and the inverse of its curvature within the sublattice sums, in factored
/// form. All in the scaled variable z = dy / sqrt(y), in which the ideal part of the curvature is R T a and the sums'
/// normals are orthonormal; B = P H P + kappa (1 - P) = L L^T with P the projection on the tangent space.
struct Solver::Local {
    double G = 0, G_T = 0, atoms = 0;
    bool shifted = false;  ///< the curvature was not positive and has been lifted
    double g[kMost], root[kMost];
    double L[kMost * kMost];          ///< lower triangle, row-major n x n
    double W[kMost * kMostElements];  ///< L^-1 P A, row-major n x elements
    double w0[kMost], wT[kMost];      ///< L^-1 P of the residual gradient (needs mu) and of its slope in T
    double a[kMostElements];

    /// Solves L v = v in place.
    void forward(double* v, int n) const {
        for (int i = 0; i < n; ++i) {
            double sum = v[i];
            for (int j = 0; j < i; ++j) sum -= L[i * n + j] * v[j];
            v[i] = sum / L[i * n + i];
        }
    }
    /// Solves L^T v = v in place.
    void backward(double* v, int n) const {
        for (int i = n - 1; i >= 0; --i) {
            double sum = v[i];
            for (int j = i + 1; j < n; ++j) sum -= L[j * n + i] * v[j];
            v[i] = sum / L[i * n + i];
        }
    }
    bool factor(const double* B, double shift, int n) {
        for (int i = 0; i < n; ++i)
            for (int j = 0; j <= i; ++j) {
                double sum = B[i * n + j] + (i == j ? shift : 0);
                for (int k = 0; k < j; ++k) sum -= L[i * n + k] * L[j * n + k];
                if (i == j) {
                    if (sum <= 1e-6 * (B[i * n + i] > 0 ? B[i * n + i] + shift : shift)) return false;
                    L[i * n + i] = std::sqrt(sum);
                } else {
                    L[i * n + j] = sum / L[j * n + j];
                }
            }
        return true;
    }
    /// P v for a vector in z: takes out the part along each sublattice's normal sqrt(y).
    static void project(const PhaseModel& model, const double* root, double* v) {
        for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
            double along = 0;
            for (int c = model.start[s]; c < model.start[s + 1]; ++c) along += root[c] * v[c];
            for (int c = model.start[s]; c < model.start[s + 1]; ++c) v[c] -= along * root[c];
        }
    }
    /// w0 = L^-1 P D (g - S^T mu); returns its square, the Newton decrement (J).
    double residual(const PhaseModel& model, const double* mu) {
        const int n = model.size;
        for (int c = 0; c < n; ++c) {
            const int e = model.element[static_cast<size_t>(c)];
            w0[c] = root[c] * (g[c] - (e < 0 ? 0 : mu[e] * model.sites[static_cast<size_t>(c)]));
        }
        project(model, root, w0);
        forward(w0, n);
        double sum = 0;
        for (int c = 0; c < n; ++c) sum += w0[c] * w0[c];
        return sum;
    }
};

Solver::Solver(std::shared_ptr<const System> system, Eigen::VectorXd b, std::vector<char> allowed)
    : system_(std::move(system)), b_(std::move(b)), allowed_(std::move(allowed)) {}

void Solver::setTemperature(double T) {
    if (T == atT_) return;
    system_->parametersAt(T, at_);
    atT_ = T;
}

const Eigen::VectorXd& Solver::samplesAt(double T) {
    if (T == sampleT_) return sampleG_;
    system_->sampleGibbs(T, sampleG_);
    const auto& samples = system_->samples();
    for (size_t p = 0; p < allowed_.size(); ++p)
        if (!allowed_[p]) sampleG_.segment(samples.first[p], samples.first[p + 1] - samples.first[p]).setConstant(1e30);
    sampleT_ = T;
    return sampleG_;
}

void Solver::complete(PhaseSet& set, double T) const {
    const PhaseModel& model = system_->phases()[static_cast<size_t>(set.phase)];
    double amounts[kMostElements];
    set.atoms = model.amounts(set.y.data(), amounts, system_->elementCount());
    set.gibbs = model.gibbs(at_.data(), T, set.y.data());
}

void Solver::localize(const PhaseModel& model, const double* y, double T, Local& local, bool withSlope) const {
    const int n = model.size, elements = system_->elementCount(), subs = model.sublattices;
    double H[kMost * kMost], q[kMost * 8], R[64];
    local.G = model.hessian(at_.data(), T, y, local.g, H);
    local.atoms = model.amounts(y, local.a, elements);
    double least = 1e30, kappa = 0;
    const double RT = kGas * T;
    for (int c = 0; c < n; ++c) {
        local.root[c] = std::sqrt(y[c]);
        least = std::min(least, RT * model.sites[static_cast<size_t>(c)]);
        kappa = std::max(kappa, RT * model.sites[static_cast<size_t>(c)]);
    }
    double* root = local.root;
    for (int i = 0; i < n; ++i) {
        for (int j = 0; j < n; ++j) H[i * n + j] *= root[i] * root[j];
        H[i * n + i] += RT * model.sites[static_cast<size_t>(i)];
    }
    for (int i = 0; i < n; ++i)
        for (int s = 0; s < subs; ++s) {
            double sum = 0;
            for (int j = model.start[static_cast<size_t>(s)]; j < model.start[static_cast<size_t>(s) + 1]; ++j)
                sum += H[i * n + j] * root[j];
            q[i * subs + s] = sum;
        }
    for (int s = 0; s < subs; ++s)
        for (int t = 0; t < subs; ++t) {
            double sum = 0;
            for (int i = model.start[static_cast<size_t>(s)]; i < model.start[static_cast<size_t>(s) + 1]; ++i)
                sum += root[i] * q[i * subs + t];
            R[s * subs + t] = sum;
        }
    for (int i = 0; i < n; ++i)
        for (int j = 0; j <= i; ++j) {
            const int si = model.sublattice[static_cast<size_t>(i)], sj = model.sublattice[static_cast<size_t>(j)];
            double B = H[i * n + j] - root[i] * q[j * subs + si] - root[j] * q[i * subs + sj] +
                       root[i] * root[j] * R[si * subs + sj];
            if (si == sj) B += kappa * root[i] * root[j];
            H[i * n + j] = B;
        }
    local.shifted = false;
    for (double shift = 0; !local.factor(H, shift, n); shift = shift == 0 ? 0.05 * least : 2 * shift)
        local.shifted = true;
    for (int e = 0; e < elements; ++e)
        for (int c = 0; c < n; ++c) local.W[c * elements + e] = 0;
    for (int k = 0; k < n; ++k) {
        const int e = model.element[static_cast<size_t>(k)];
        if (e < 0) continue;
        const auto s = static_cast<size_t>(model.sublattice[static_cast<size_t>(k)]);
        const double a = model.sites[static_cast<size_t>(k)];
        for (int c = model.start[s]; c < model.start[s + 1]; ++c)
            local.W[c * elements + e] += root[c] * a * ((c == k ? 1.0 : 0.0) - y[k]);
    }
    for (int i = 0; i < n; ++i) {
        double* row = local.W + i * elements;
        for (int j = 0; j < i; ++j) {
            const double l = local.L[i * n + j];
            if (l == 0) continue;
            const double* other = local.W + j * elements;
            for (int e = 0; e < elements; ++e) row[e] -= l * other[e];
        }
        const double inverse = 1 / local.L[i * n + i];
        for (int e = 0; e < elements; ++e) row[e] *= inverse;
    }
    if (!withSlope) return;
    local.G_T = model.slope(slope_.data(), T, y, local.wT);
    for (int c = 0; c < n; ++c) local.wT[c] *= root[c];
    Local::project(model, root, local.wT);
    local.forward(local.wT, n);
}

bool Solver::refine(Point& p, const Condition* condition, Eigen::VectorXd* dT_db) {
    const int elements = system_->elementCount();
    const auto& models = system_->phases();
    std::vector<Local> locals;
    std::vector<int> negative(p.sets.size(), 0);
    Eigen::MatrixXd M;
    Eigen::VectorXd rhs, x, scale;
    bool done = false;
    for (int turn = 0; turn < 80; ++turn) {
        ++counters.newton;
        if (condition) system_->slopesAt(p.T, slope_);
        setTemperature(p.T);
        const int sets = static_cast<int>(p.sets.size());
        const int size = elements + sets + (condition ? 1 : 0);
        locals.resize(static_cast<size_t>(sets));
        M.setZero(size, size);
        rhs.setZero(size);
        rhs.head(elements) = b_;
        for (int s = 0; s < sets; ++s) {
            PhaseSet& set = p.sets[static_cast<size_t>(s)];
            const PhaseModel& model = models[static_cast<size_t>(set.phase)];
            Local& local = locals[static_cast<size_t>(s)];
            const int n = model.size;
            localize(model, set.y.data(), p.T, local, condition != nullptr);
            local.residual(model, p.mu.data());
            const Eigen::Map<const Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor>> W(local.W, n,
                                                                                                             elements);
            const Eigen::Map<const Eigen::VectorXd> w0(local.w0, n), a(local.a, elements), wT(local.wT, n);
            Eigen::MatrixXd K = W.transpose() * W;
            M.topLeftCorner(elements, elements) += set.n * K;
            M.block(0, elements + s, elements, 1) = a;
            M.block(elements + s, 0, 1, elements) = a.transpose();
            rhs.head(elements) += set.n * (W.transpose() * w0 - a);
            rhs[elements + s] = local.G - a.dot(p.mu);
            set.atoms = local.atoms;
            set.gibbs = local.G;
            set.unstable = local.shifted;
            if (!condition) continue;
            const int last = size - 1;
            M.block(0, last, elements, 1) -= set.n * (W.transpose() * wT);
            M(elements + s, last) = -local.G_T;
            const Eigen::VectorXd& weight = condition->weight[static_cast<size_t>(s)];
            if (weight.size() == 0) continue;
            M.block(last, 0, 1, elements) += set.n * (weight.transpose() * K);
            M(last, elements + s) = weight.dot(a);
            M(last, last) -= set.n * weight.dot(W.transpose() * wT);
            rhs[last] += set.n * weight.dot(W.transpose() * w0) - set.n * weight.dot(a);
        }
        if (!M.allFinite() || !rhs.allFinite()) return false;
        // Scaled so that a trace element's row weighs as much as iron's.
        scale.setOnes(size);
        for (int e = 0; e < elements; ++e) scale[e] = 1 / std::sqrt(std::max(M(e, e), 1e-3 * b_[e] / (kGas * p.T)));
        for (int s = 0; s < sets; ++s)
            scale[elements + s] = 1 / (locals[static_cast<size_t>(s)].atoms * std::sqrt(kGas * p.T));
        if (condition) scale[size - 1] = 1 / std::max(M.row(size - 1).cwiseAbs().maxCoeff(), 1e-300);
        Eigen::VectorXd columns = scale;
        if (condition) columns[size - 1] = 1;
        const Eigen::MatrixXd scaled = scale.asDiagonal() * M * columns.asDiagonal();
        const Eigen::PartialPivLU<Eigen::MatrixXd> lu(scaled);
        const Eigen::VectorXd scaledRhs = scale.asDiagonal() * rhs;
        x = lu.solve(scaledRhs);
        if (!x.allFinite() ||
            (scaled * x - scaledRhs).cwiseAbs().maxCoeff() > 1e-6 * (1 + scaledRhs.cwiseAbs().maxCoeff()))
            x = scaled.completeOrthogonalDecomposition().solve(scaledRhs);
        if (!x.allFinite()) return false;
        if (done) {
            if (dT_db) {  // one more factorisation at the solution: the exact slope of T with every element's amount
                dT_db->resize(elements);
                for (int e = 0; e < elements; ++e) {
                    Eigen::VectorXd unit = Eigen::VectorXd::Zero(size);
                    unit[e] = scale[e];
                    (*dT_db)[e] = lu.solve(unit)[size - 1];
                }
            }
            return true;
        }
        x.array() *= columns.array();

        double dT = condition ? x[size - 1] : 0;
        if (std::abs(dT) > 40) {
            x *= 40 / std::abs(dT);
            dT = x[size - 1];
        }
        // An amount that would turn negative stops the step short of zero; a set that does so again leaves.
        double largest = 0, largestN = 0, reach = 1;
        bool guarded = false;
        int leaving = -1;
        for (int s = 0; s < sets && !condition; ++s) {
            const double n = p.sets[static_cast<size_t>(s)].n, dn = x[elements + s];
            if (n + dn >= 0) continue;
            guarded = true;
            if (n < 1e-11) {
                leaving = s;
                reach = 0;
                break;
            }
            const bool again = ++negative[static_cast<size_t>(s)] >= 3;
            const double most = (again ? 1.0 : 0.9) * n / -dn;
            if (most >= reach) continue;
            reach = most;
            leaving = again ? s : -1;
        }
        x *= reach;
        for (int s = 0; s < sets && reach > 0; ++s) {
            PhaseSet& set = p.sets[static_cast<size_t>(s)];
            const PhaseModel& model = models[static_cast<size_t>(set.phase)];
            const Local& local = locals[static_cast<size_t>(s)];
            const int n = model.size;
            double dz[kMost];
            for (int c = 0; c < n; ++c) {
                double sum = -local.w0[c] - local.wT[c] * (condition ? dT : 0);
                for (int e = 0; e < elements; ++e) sum += local.W[c * elements + e] * x[e] / reach;
                dz[c] = sum * reach;
            }
            local.backward(dz, n);
            double change = 0, alpha = 1;
            for (int c = 0; c < n; ++c) {
                largest = std::max(largest, std::abs(dz[c]));
                if (set.y[static_cast<size_t>(c)] > 1e-12)
                    largest = std::max(largest, 1e-3 * std::abs(dz[c]) / local.root[c]);
                change = std::max(change, std::abs(dz[c] * local.root[c]));
            }
            if (change > 0.25) {
                alpha = 0.25 / change;
                guarded = true;
            }
            move(model, dz, alpha, set.y.data());
            const double dn = x[elements + s];
            largestN = std::max(largestN, std::abs(dn) * local.atoms);
            set.n += dn;
        }
        p.mu += x.head(elements);
        p.T += dT;
        if (p.T < 200 || p.T > 6000) return false;
        if (leaving >= 0) {
            if (p.sets.size() == 1) return false;
            p.minima.push_back({p.sets[static_cast<size_t>(leaving)], 0});  // it may come back: the proof watches it
            p.sets.erase(p.sets.begin() + leaving);
            negative.erase(negative.begin() + leaving);
        }
        if (!condition)  // two sets that have run into each other are one
            for (size_t s = 0; s < p.sets.size(); ++s)
                for (size_t t = p.sets.size(); t-- > s + 1;) {
                    if (p.sets[t].phase != p.sets[s].phase) continue;
                    const int n = models[static_cast<size_t>(p.sets[s].phase)].size;
                    if (distance2(p.sets[s].y.data(), p.sets[t].y.data(), n) > 1e-8) continue;
                    p.sets[s].n += p.sets[t].n;
                    p.sets.erase(p.sets.begin() + static_cast<long>(t));
                    negative.erase(negative.begin() + static_cast<long>(t));
                    guarded = true;
                }
        const double driftMu = x.head(elements).cwiseAbs().maxCoeff();
        if (!guarded && largest < 1e-7 && largestN < 1e-9 && driftMu < 1e-5 * kGas * p.T && std::abs(dT) < 1e-6) {
            if (!dT_db) {
                setTemperature(p.T);
                p.gibbs = 0;
                for (PhaseSet& set : p.sets) {
                    complete(set, p.T);
                    p.gibbs += set.n * set.gibbs;
                }
                return true;
            }
            done = true;
        }
    }
    return false;
}

bool Solver::solveCondition(Point& start, const Condition& condition, Eigen::VectorXd& dT_db) {
    if (!refine(start, &condition, &dT_db)) return false;
    setTemperature(start.T);
    start.gibbs = 0;
    for (PhaseSet& set : start.sets) {
        complete(set, start.T);
        start.gibbs += set.n * set.gibbs;
    }
    return true;
}

void Solver::descend(Minimum& m, double T, const Eigen::VectorXd& mu, const std::vector<Minimum>& known,
                     const std::vector<PhaseSet>& sets) {
    ++counters.descents;
    const PhaseModel& model = system_->phases()[static_cast<size_t>(m.set.phase)];
    const int n = model.size, elements = system_->elementCount();
    Local local;
    double next[kMost], amounts[kMostElements];
    const Eigen::Map<const Eigen::VectorXd> a(local.a, elements);
    double* y = m.set.y.data();
    for (int turn = 0; turn < 100; ++turn) {
        ++counters.descentSteps;
        localize(model, y, T, local, false);
        m.height = local.G - a.dot(mu);
        m.set.atoms = local.atoms;
        const double decrement = local.residual(model, mu.data());
        double dz[kMost], change = 0;
        for (int c = 0; c < n; ++c) dz[c] = -local.w0[c];
        local.backward(dz, n);
        if (!local.shifted && turn > 0) {  // heading for a place that is known already?
            for (const PhaseSet& set : sets)
                if (set.phase == m.set.phase && !set.unstable && distance2(set.y.data(), y, n) < kArrived) return;
            for (const Minimum& other : known)
                if (other.set.phase == m.set.phase && distance2(other.set.y.data(), y, n) < kArrived / 2 &&
                    other.height < m.height + 1e-6)
                    return;
        }
        // Far above the plane the height need not be exact; near it, to the last digit.
        const double beyond = m.height - kNear * kGas * T * local.atoms;
        if (!local.shifted && decrement < std::max(1e-9, beyond > 0 ? 0.1 * beyond : 0)) {
            move(model, dz, 1, y);
            m.height -= beyond > 0 ? decrement : decrement / 2;  // at least what Newton's step promises
            break;
        }
        for (int c = 0; c < n; ++c) change = std::max(change, std::abs(dz[c] * local.root[c]));
        double alpha = change > 0.2 ? 0.2 / change : 1;  // short enough to stay in the valley
        for (int halving = 0; halving < 30; ++halving, alpha /= 2) {
            std::copy(y, y + n, next);
            move(model, dz, alpha, next);
            const double G = model.gibbs(at_.data(), T, next);
            model.amounts(next, amounts, elements);
            double height = G;
            for (int e = 0; e < elements; ++e) height -= amounts[e] * mu[e];
            if (height < m.height - 1e-4 * alpha * decrement || halving == 29) break;
            if (decrement < 1e-7) break;  // within rounding of the minimum
        }
        std::copy(next, next + n, y);
    }
    m.set.atoms = model.amounts(y, amounts, elements);
}

/// True when a known place of the phase no longer lies where it lay when every class of the phase was last open: what
/// led to it then may lead elsewhere now, as when a miscibility gap opens.
bool Solver::hasMoved(const Point& p, int phase, const std::vector<Minimum>& found) const {
    constexpr double kMoved = 1e-3;
    const int n = system_->phases()[static_cast<size_t>(phase)].size;
    const auto away = [&](const PhaseSet& set) {
        if (set.phase != phase) return false;
        if (set.unstable) return true;
        return std::none_of(p.anchors.begin(), p.anchors.end(), [&](const PhaseSet& anchor) {
            return anchor.phase == phase && distance2(anchor.y.data(), set.y.data(), n) < kMoved;
        });
    };
    return std::any_of(p.sets.begin(), p.sets.end(), away) ||
           std::any_of(found.begin(), found.end(), [&](const Minimum& m) { return away(m.set); });
}

double Solver::prove(Point& p, bool thorough) {
    const double RT = kGas * p.T;
    setTemperature(p.T);
    const auto& samples = system_->samples();
    const auto& models = system_->phases();
    height_.noalias() = -(samples.composition.transpose() * p.mu);
    height_ += samplesAt(p.T);
    const bool tracked = !thorough && p.sampleHeight.size() == height_.size() && p.lowest.size() == models.size();
    std::vector<Minimum> found;
    std::vector<double> lowest(models.size(), std::numeric_limits<double>::infinity());
    std::vector<std::pair<double, int>> order;
    std::vector<double> best;
    std::vector<int> bestAt;
    double proof = 0;
    if (thorough) p.anchors.clear();
    if (thorough || p.settled.empty())
        p.settled.assign(static_cast<size_t>(samples.firstKind.back()), std::numeric_limits<double>::infinity());
    for (size_t f = 0; f < models.size(); ++f) {
        if (!allowed_[f]) continue;
        const int first = samples.first[f], count = samples.first[f + 1] - first;
        const double most = samples.atoms.segment(first, count).maxCoeff();
        if (tracked) {
            // Between two states the height of a phase changes almost linearly over its corners, all of which are
            // samples.
            const double fall = (p.sampleHeight.segment(first, count) - height_.segment(first, count)).maxCoeff();
            const double bound = p.lowest[f] - 1.25 * std::max(fall, 0.0) - 0.01 * RT;
            if (bound > 0.02 * RT * most) {
                lowest[f] = bound;
                for (const Minimum& m : p.minima)
                    if (m.set.phase == static_cast<int>(f)) found.push_back(m);
                continue;
            }
        }
        const size_t firstFound = found.size();
        double low = std::numeric_limits<double>::infinity();
        // Returns false when the search ends in a place that is known already.
        const auto consider = [&](Minimum m) {
            descend(m, p.T, p.mu, found, p.sets);
            for (const PhaseSet& set : p.sets)
                if (set.phase == m.set.phase && distance2(set.y.data(), m.set.y.data(), models[f].size) < kSame)
                    return false;
            for (size_t k = firstFound; k < found.size(); ++k)
                if (distance2(found[k].set.y.data(), m.set.y.data(), models[f].size) < 10 * kSame) {
                    if (m.height < found[k].height) found[k] = m;
                    return false;
                }
            low = std::min(low, m.height);
            if (m.height < 5 * kNear * RT * m.set.atoms) found.push_back(m);  // what lies higher is only a bound
            return true;
        };
        for (const Minimum& m : p.minima)
            if (m.set.phase == static_cast<int>(f)) consider(m);
        const bool opened = hasMoved(p, static_cast<int>(f), found);
        if (opened) {
            std::fill(p.settled.begin() + samples.firstKind[f], p.settled.begin() + samples.firstKind[f + 1],
                      std::numeric_limits<double>::infinity());
            std::erase_if(p.anchors, [f](const PhaseSet& anchor) { return anchor.phase == static_cast<int>(f); });
            for (const PhaseSet& set : p.sets)
                if (set.phase == static_cast<int>(f)) p.anchors.push_back(set);
            for (size_t k = firstFound; k < found.size(); ++k) p.anchors.push_back(found[k].set);
        }
        best.assign(static_cast<size_t>(samples.firstKind[f + 1] - samples.firstKind[f]),
                    std::numeric_limits<double>::infinity());
        bestAt.assign(best.size(), -1);
        for (int k = first; k < first + count; ++k) {
            const auto kind = static_cast<size_t>(samples.kind[static_cast<size_t>(k)]);
            if (height_[k] < best[kind]) best[kind] = height_[k], bestAt[kind] = k;
        }
        order.clear();
        double* settled = p.settled.data() + samples.firstKind[f];
        const double reach = (thorough ? 4.0 : 2.0) * RT * most;
        for (size_t kind = 0; kind < best.size(); ++kind) {
            if (bestAt[kind] < 0) continue;
            if (best[kind] < reach && (thorough || best[kind] < settled[kind] - kResettle * RT))
                order.push_back({best[kind], bestAt[kind]});
            else if (best[kind] > settled[kind])
                settled[kind] = best[kind];  // the fall counts from the highest place since the last search
        }
        std::sort(order.begin(), order.end());
        size_t starts = 0;
        for (const auto& [height, at] : order) {
            if (starts++ >= (thorough || opened ? 24u : 8u)) break;
            Minimum m;
            m.set.phase = static_cast<int>(f);
            std::copy(samples.site(at), samples.site(at) + models[f].size, m.set.y.begin());
            consider(m);
            settled[samples.kind[static_cast<size_t>(at)]] = height;
        }
        for (size_t k = firstFound; k < found.size(); ++k) low = std::min(low, found[k].height);
        for (const PhaseSet& set : p.sets)
            if (set.phase == static_cast<int>(f)) low = std::min(low, 0.0);
        if (low == std::numeric_limits<double>::infinity()) low = 0;  // nothing near: searched again soon
        lowest[f] = low;
    }
    for (const Minimum& m : found) proof = std::max(proof, -m.height / m.set.atoms);
    p.minima = std::move(found);
    p.lowest = std::move(lowest);
    p.sampleHeight = height_;
    p.proof = proof;
    return proof;
}

std::vector<Minimum> Solver::violators(const Point& p) const {
    std::vector<Minimum> list;
    for (const Minimum& m : p.minima)
        if (-m.height / m.set.atoms > kViolation * kGas * p.T) list.push_back(m);
    std::sort(list.begin(), list.end(),
              [](const Minimum& x, const Minimum& y) { return x.height / x.set.atoms < y.height / y.set.atoms; });
    return list;
}

bool Solver::solveHull(Hull& hull, const std::vector<PhaseSet>& extra, bool withSamples) {
    ++counters.hulls;
    const auto& samples = system_->samples();
    const int elements = system_->elementCount();
    const auto count = static_cast<Eigen::Index>(extra.size());
    Eigen::MatrixXd A(elements, count);
    Eigen::VectorXd G(count), atoms(count);
    for (Eigen::Index k = 0; k < count; ++k) {
        const PhaseSet& set = extra[static_cast<size_t>(k)];
        system_->phases()[static_cast<size_t>(set.phase)].amounts(set.y.data(), A.col(k).data(), elements);
        G[k] = set.gibbs;
        atoms[k] = set.atoms;
    }
    hull.solve(b_, {&samples.composition, &sampleG_, &samples.atoms, withSamples ? samples.count() : 0},
               {&A, &G, &atoms, count});
    return hull.feasible;
}

std::vector<PhaseSet> Solver::setsOf(const Hull& hull, const std::vector<PhaseSet>& extra, int sampleCount) const {
    const auto& samples = system_->samples();
    std::vector<PhaseSet> sets;
    for (size_t i = 0; i < hull.basis.size(); ++i) {
        const int k = hull.basis[i];
        const double x = hull.amount[static_cast<Eigen::Index>(i)];
        if (k < 0 || x < 1e-13) continue;
        PhaseSet set;
        if (k < sampleCount) {
            set.phase = samples.phase[static_cast<size_t>(k)];
            const auto n = system_->phases()[static_cast<size_t>(set.phase)].size;
            std::copy(samples.site(k), samples.site(k) + n, set.y.begin());
            set.gibbs = sampleG_[k];
        } else {
            set = extra[static_cast<size_t>(k - sampleCount)];
        }
        set.n = x;
        sets.push_back(set);
    }
    return sets;
}

/// Columns of one phase that are not held apart by a miscibility gap become one set.
void Solver::mergeSets(std::vector<PhaseSet>& sets, double T) const {
    for (size_t s = 0; s < sets.size(); ++s)
        for (size_t t = sets.size(); t-- > s + 1;) {
            PhaseSet &one = sets[s], &other = sets[t];
            if (one.phase != other.phase) continue;
            const auto n = static_cast<size_t>(system_->phases()[static_cast<size_t>(one.phase)].size);
            PhaseSet between = one;
            between.n = one.n + other.n;
            bool convex = true;
            for (double share : {one.n / between.n, 0.5}) {
                PhaseSet probe = one;
                for (size_t c = 0; c < n; ++c) probe.y[c] = share * one.y[c] + (1 - share) * other.y[c];
                complete(probe, T);
                convex = convex && probe.gibbs <= share * one.gibbs + (1 - share) * other.gibbs;
            }
            if (!convex) continue;
            for (size_t c = 0; c < n; ++c) between.y[c] = (one.n * one.y[c] + other.n * other.y[c]) / between.n;
            complete(between, T);
            one = between;
            sets.erase(sets.begin() + static_cast<long>(t));
        }
}

/// The overall composition as a single solution phase, for every phase in which each element has one place.
void Solver::addOverall(std::vector<PhaseSet>& into, double T) const {
    const int elements = system_->elementCount();
    for (size_t f = 0; f < allowed_.size(); ++f) {
        const PhaseModel& model = system_->phases()[f];
        if (!allowed_[f]) continue;
        std::vector<int> places(static_cast<size_t>(elements), 0);
        for (int e : model.element)
            if (e >= 0) ++places[static_cast<size_t>(e)];
        if (std::any_of(places.begin(), places.end(), [](int k) { return k != 1; })) continue;
        // Sublattices without vacancies fix the number of formula units; they must all agree.
        std::vector<double> held(static_cast<size_t>(model.sublattices), 0), sites(held);
        std::vector<bool> vacant(static_cast<size_t>(model.sublattices), false);
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c) {
            const auto s = static_cast<size_t>(model.sublattice[c]);
            sites[s] = model.sites[c];
            if (model.element[c] < 0)
                vacant[s] = true;
            else
                held[s] += b_[model.element[c]];
        }
        double units = 0;
        for (size_t s = 0; s < held.size(); ++s)
            if (!vacant[s]) units = std::max(units, held[s] / sites[s]);
        bool fits = units > 0;
        for (size_t s = 0; s < held.size(); ++s) {
            const double filled = held[s] / sites[s] / units;
            fits = fits && (vacant[s] ? filled < 0.999 : filled > 1 - 1e-9);
        }
        if (!fits) continue;
        PhaseSet set;
        set.phase = static_cast<int>(f);
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c) {
            const auto s = static_cast<size_t>(model.sublattice[c]);
            const double y =
                model.element[c] < 0 ? 1 - held[s] / sites[s] / units : b_[model.element[c]] / sites[s] / units;
            set.y[c] = std::max(y, kFloor);
        }
        complete(set, T);
        into.push_back(set);
    }
}

Point Solver::coldStart(double T) {
    setTemperature(T);
    samplesAt(T);
    Point p;
    p.T = T;
    std::vector<PhaseSet> extra;
    addOverall(extra, T);
    Hull hull;
    if (!solveHull(hull, extra, true)) return p;
    p.sets = setsOf(hull, extra, system_->samples().count());
    mergeSets(p.sets, T);
    p.mu = hull.mu;
    return p;
}

/// Refines the hull with minima of every phase until its energy and the best lower bound meet. The plane of a hull that
/// is still coarse swings wildly, so the minima are sought at a plane between it and the best one known (smoothing
/// after P. Wentges, Int. Trans. Oper. Res. 4 (1997) 151-162); mu b - (largest driving force) bounds the energy from
/// below.
bool Solver::columnStart(Point& p) {
    constexpr double kTrust = 0.75;  // weight of the best plane
    constexpr int kRounds = 200;
    ++counters.fallbacks;
    setTemperature(p.T);
    samplesAt(p.T);
    std::vector<PhaseSet> extra;
    addOverall(extra, p.T);
    Hull hull;
    if (!solveHull(hull, extra, true)) return false;
    Eigen::VectorXd best = hull.mu;
    double bound = -std::numeric_limits<double>::infinity();
    Point probe;
    probe.T = p.T;
    for (int round = 0; round < kRounds; ++round) {
        if (hull.feasible) p.sets = setsOf(hull, extra, system_->samples().count());
        probe.minima.clear();  // every phase is searched, from the columns of the basis too
        for (const PhaseSet& set : p.sets) probe.minima.push_back({set, 0});
        probe.mu = round == 0 ? hull.mu : Eigen::VectorXd(kTrust * best + (1 - kTrust) * hull.mu);
        const double lower = probe.mu.dot(b_) - prove(probe, true);
        if (lower > bound) {
            bound = lower;
            best = probe.mu;
        }
        if (hull.mu.dot(b_) - bound < 1e-5 * kGas * p.T) break;
        for (const Minimum& m : probe.minima) {
            PhaseSet set = m.set;
            complete(set, p.T);
            extra.push_back(set);
        }
        if (!solveHull(hull, extra, true) && round > 10) break;
    }
    if (p.sets.empty()) return false;
    p.mu = best;
    mergeSets(p.sets, p.T);
    p.minima.clear();
    return true;
}

/// As many sets as elements: a new one can only take another's place. The hull over them all decides which.
bool Solver::exchange(Point& p, const std::vector<Minimum>& entering) {
    std::vector<PhaseSet> columns = p.sets;
    for (const Minimum& m : entering) columns.push_back(m.set);
    for (PhaseSet& set : columns) complete(set, p.T);
    Hull hull;
    if (!solveHull(hull, columns, false)) return false;
    for (const PhaseSet& set : columns) p.minima.push_back({set, 0});  // what loses its place is watched further
    p.sets = setsOf(hull, columns, 0);
    p.mu = hull.mu;
    return !p.sets.empty();
}

/// Every set lies on the plane and the sets add up to the alloy: what Newton's last step must have reached.
bool Solver::stands(const Point& p) const {
    double amounts[kMostElements];
    const int elements = system_->elementCount();
    const Eigen::Map<const Eigen::VectorXd> a(amounts, elements);
    Eigen::VectorXd lack = b_;
    for (const PhaseSet& set : p.sets) {
        system_->phases()[static_cast<size_t>(set.phase)].amounts(set.y.data(), amounts, elements);
        if (std::abs(set.gibbs - a.dot(p.mu)) > 1e-7 * kGas * p.T * set.atoms) return false;
        lack -= set.n * a;
    }
    return lack.cwiseAbs().maxCoeff() < 1e-10;
}

bool Solver::converge(Point& p, bool thorough) {
    Point best;  // the lowest point so far, with what wants to enter it
    std::vector<Minimum> entering;
    size_t tried = 0;  // how many of these have led nowhere
    bool assured = !thorough;
    for (int round = 0; round < 60; ++round) {
        const bool refined = refine(p, nullptr, nullptr) && stands(p);
        if (round == 0 && !refined) return false;
        // On a boundary the energy does not change; there the plane must have come nearer to the minima.
        bool better = refined && (best.sets.empty() || p.gibbs < best.gibbs - 1e-9);
        if (better || (refined && p.gibbs < best.gibbs + 1e-6)) {
            // Until the answer stands, a light search is enough to see what enters; then the thorough one confirms.
            prove(p, thorough && assured);
            std::vector<Minimum> now = violators(p);
            if (now.empty() && !assured) {
                prove(p, true);
                now = violators(p);
            }
            if (now.empty()) return true;
            better = better || p.proof < best.proof;
            if (better) entering = std::move(now);
        }
        if (better) {
            best = p;
            tried = 0;
        } else {
            // It led upward. First the hull over what stood before, where it led and what wants to enter; then the mean
            // of what stood and where it led; then the next that wants to enter.
            const Point reached = std::move(p);
            p = best;
            ++tried;
            if (tried % 3 == 1) {
                std::vector<Minimum> bundle = entering;
                for (const PhaseSet& set : reached.sets)
                    if (refined) bundle.push_back({set, 0});
                if (exchange(p, bundle)) {
                    mergeSets(p.sets, p.T);
                    continue;
                }
            }
            if (tried % 3 == 2 && refined) {
                p.sets.insert(p.sets.end(), reached.sets.begin(), reached.sets.end());
                for (PhaseSet& set : p.sets) set.n /= 2;
                mergeSets(p.sets, p.T);
                if (static_cast<int>(p.sets.size()) <= system_->elementCount()) continue;
                p = best;
            }
        }
        const size_t next = tried / 3;
        if (next >= std::min<size_t>(entering.size(), 8)) return false;
        if (static_cast<int>(p.sets.size()) >= system_->elementCount()) {
            // No room: the new set can only take another's place.
            if (!exchange(p, {entering.begin() + static_cast<long>(next), entering.end()})) return false;
            continue;
        }
        PhaseSet set = entering[next].set;
        set.n = 0;
        p.sets.push_back(set);
    }
    return false;
}

Result<Done> Solver::solveCold(double T) {
    ++counters.cold;
    Point p = coldStart(T);
    if (!p.sets.empty() && converge(p, true)) {
        point_ = std::move(p);
        return Done{};
    }
    Point q;
    q.T = T;
    if (columnStart(q) && converge(q, true)) {
        point_ = std::move(q);
        return Done{};
    }
    return Error{Fault::noConvergence, "the equilibrium at " + inCelsius(T) + " did not converge", "", {}};
}

Result<Done> Solver::solve(double T) {
    ++counters.states;
    if (!point_.sets.empty() && std::abs(T - point_.T) < kWarmRange) {
        Point p = point_;
        p.T = T;
        if (converge(p, false)) {
            point_ = std::move(p);
            return Done{};
        }
    }
    return solveCold(T);
}

}  // namespace soak
