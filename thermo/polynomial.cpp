// SPDX-License-Identifier: GPL-3.0-or-later
#include "polynomial.h"

#include <algorithm>
#include <cassert>

namespace soak {
namespace {

/// Adds to the upper triangle.
inline void addTo(double* H, int n, int i, int j, double value) { H[i < j ? i * n + j : j * n + i] += value; }

/// sum over the monomials of one degree; the degree is a template argument so that the loops unroll.
template <int D, class Monomial>
double monomialSum(const Monomial* first, const Monomial* last, const double* at, const double* y, double* g, double* H,
                   int n) {
    double sum = 0;
    for (; first != last; ++first) {
        const double p = at[first->row];
        if (p == 0) continue;
        double v[D], before[D + 1], after[D + 1];
        for (int k = 0; k < D; ++k) v[k] = y[first->factor[static_cast<size_t>(k)]];
        before[0] = p;
        for (int k = 0; k < D; ++k) before[k + 1] = before[k] * v[k];
        sum += before[D];
        if (!g) continue;
        after[D] = 1;
        for (int k = D; k > 0; --k) after[k - 1] = after[k] * v[k - 1];
        for (int k = 0; k < D; ++k) g[first->factor[static_cast<size_t>(k)]] += before[k] * after[k + 1];
        if (!H) continue;
        for (int i = 0; i < D; ++i) {
            double between = before[i];
            for (int j = i + 1; j < D; ++j) {
                H[first->factor[static_cast<size_t>(i)] * n + first->factor[static_cast<size_t>(j)]] +=
                    between * after[j + 1];
                between *= v[j];
            }
        }
    }
    return sum;
}

/// Adds C(y) u(y) where C is the product of the context and u a local function of `members` with known derivatives.
template <int M, class Context>
double addLocal(const Context& context, const std::array<int, M>& member, const double* y, double u,
                const std::array<double, M>& first, const std::array<std::array<double, M>, M>& second, double* g,
                double* H, int n) {
    const int size = context.size;
    double all = 1;
    double without[8];
    for (int k = 0; k < size; ++k) all *= y[context.factor[static_cast<size_t>(k)]];
    if (!g) return all * u;
    for (int k = 0; k < size; ++k) {
        without[k] = 1;
        for (int l = 0; l < size; ++l)
            if (l != k) without[k] *= y[context.factor[static_cast<size_t>(l)]];
    }
    for (size_t i = 0; i < M; ++i) g[member[i]] += all * first[i];
    for (int k = 0; k < size; ++k) g[context.factor[static_cast<size_t>(k)]] += without[k] * u;
    if (!H) return all * u;
    for (size_t i = 0; i < M; ++i)
        for (size_t j = i; j < M; ++j) addTo(H, n, member[i], member[j], all * second[i][j]);
    for (int k = 0; k < size; ++k) {
        const int fk = context.factor[static_cast<size_t>(k)];
        for (size_t i = 0; i < M; ++i) addTo(H, n, fk, member[i], without[k] * first[i]);
        for (int l = k + 1; l < size; ++l) {
            double rest = u;
            for (int o = 0; o < size; ++o)
                if (o != k && o != l) rest *= y[context.factor[static_cast<size_t>(o)]];
            addTo(H, n, fk, context.factor[static_cast<size_t>(l)], rest);
        }
    }
    return all * u;
}

}  // namespace

Polynomial::Context Polynomial::contextOf(const std::vector<int>& factors) {
    assert(factors.size() <= kFactors);
    Context context;
    for (int f : factors) context.factor[static_cast<size_t>(context.size++)] = f;
    return context;
}

void Polynomial::addMonomial(int row, std::vector<int> factors) {
    assert(!factors.empty() && factors.size() <= kFactors);
    std::sort(factors.begin(), factors.end());
    Monomial m{row, static_cast<int>(factors.size()), {}};
    std::copy(factors.begin(), factors.end(), m.factor.begin());
    monomials_.push_back(m);
}

void Polynomial::addBinary(int row, int order, std::vector<int> context, int a, int b) {
    const Context c = contextOf(context);
    for (auto& group : binaries_)
        if (group.a == a && group.b == b && group.context == c) {
            group.row[static_cast<size_t>(order)] = row;
            group.orders = std::max(group.orders, order + 1);
            return;
        }
    Binary group{c, a, b, order + 1, {}};
    group.row.fill(-1);
    group.row[static_cast<size_t>(order)] = row;
    binaries_.push_back(group);
}

void Polynomial::addTernary(int row, int weight, std::vector<int> context, int a, int b, int c) {
    const Context outside = contextOf(context);
    for (auto& group : ternaries_)
        if (group.member == std::array{a, b, c} && group.context == outside) {
            group.row[static_cast<size_t>(weight)] = row;
            return;
        }
    Ternary group{outside, {a, b, c}, {-1, -1, -1}};
    group.row[static_cast<size_t>(weight)] = row;
    ternaries_.push_back(group);
}

void Polynomial::finish() {
    // A pair with order 0 alone is a plain monomial, which is cheaper.
    for (auto it = binaries_.begin(); it != binaries_.end();) {
        if (it->orders > 1) {
            ++it;
            continue;
        }
        std::vector<int> factors{it->a, it->b};
        for (int k = 0; k < it->context.size; ++k) factors.push_back(it->context.factor[static_cast<size_t>(k)]);
        addMonomial(it->row[0], std::move(factors));
        it = binaries_.erase(it);
    }
    std::stable_sort(monomials_.begin(), monomials_.end(),
                     [](const auto& x, const auto& y) { return x.degree < y.degree; });
    for (size_t d = 0; d < degreeStart_.size(); ++d)
        degreeStart_[d] = static_cast<size_t>(std::count_if(
            monomials_.begin(), monomials_.end(), [d](const auto& m) { return m.degree < static_cast<int>(d); }));
}

double Polynomial::derivatives(const double* at, const double* y, double* g, double* H, int n) const {
    const Monomial* m = monomials_.data();
    const auto& start = degreeStart_;
    double sum = monomialSum<1>(m + start[1], m + start[2], at, y, g, H, n) +
                 monomialSum<2>(m + start[2], m + start[3], at, y, g, H, n) +
                 monomialSum<3>(m + start[3], m + start[4], at, y, g, H, n) +
                 monomialSum<4>(m + start[4], m + start[5], at, y, g, H, n) +
                 monomialSum<5>(m + start[5], m + start[6], at, y, g, H, n) +
                 monomialSum<6>(m + start[6], m + start[7], at, y, g, H, n);
    for (const auto& group : binaries_) {
        const double ya = y[group.a], yb = y[group.b], d = ya - yb, yy = ya * yb;
        double p = 0, p1 = 0, p2 = 0;  // Horner with both derivatives
        for (int v = group.orders - 1; v >= 0; --v) {
            const int row = group.row[static_cast<size_t>(v)];
            p2 = p2 * d + 2 * p1;
            p1 = p1 * d + p;
            p = p * d + (row < 0 ? 0 : at[row]);
        }
        const double ab = p + d * p1 - yy * p2;
        sum += addLocal<2>(group.context, {group.a, group.b}, y, yy * p, {yb * p + yy * p1, ya * p - yy * p1},
                           {{{2 * yb * p1 + yy * p2, ab}, {ab, yy * p2 - 2 * ya * p1}}}, g, H, n);
    }
    for (const auto& group : ternaries_) {
        std::array<double, 3> v, L, D, first, two;
        for (size_t i = 0; i < 3; ++i) {
            v[i] = y[group.member[i]];
            L[i] = group.row[i] < 0 ? 0 : at[group.row[i]];
        }
        const double mean = (L[0] + L[1] + L[2]) / 3, rest = 1 - v[0] - v[1] - v[2];
        const double w = L[0] * v[0] + L[1] * v[1] + L[2] * v[2] + mean * rest, all = v[0] * v[1] * v[2];
        std::array<std::array<double, 3>, 3> second{};
        for (size_t i = 0; i < 3; ++i) {
            D[i] = L[i] - mean;
            two[i] = v[(i + 1) % 3] * v[(i + 2) % 3];
            first[i] = two[i] * w + all * D[i];
        }
        for (size_t i = 0; i < 3; ++i)
            for (size_t j = 0; j < 3; ++j)
                second[i][j] = two[i] * D[j] + two[j] * D[i] + (i == j ? 0 : v[3 - i - j] * w);
        sum += addLocal<3>(group.context, group.member, y, all * w, first, second, g, H, n);
    }
    return sum;
}

double Polynomial::value(const double* at, const double* y) const { return derivatives(at, y, nullptr, nullptr, 0); }

double Polynomial::gradient(const double* at, const double* y, double* g) const {
    return derivatives(at, y, g, nullptr, 0);
}

void Polynomial::weights(const double* y, double* out) const {
    const auto product = [y](const auto& factor, int size) {
        double p = 1;
        for (int k = 0; k < size; ++k) p *= y[factor[static_cast<size_t>(k)]];
        return p;
    };
    for (const auto& m : monomials_) out[m.row] += product(m.factor, m.degree);
    for (const auto& group : binaries_) {
        double p = product(group.context.factor, group.context.size) * y[group.a] * y[group.b];
        for (int v = 0; v < group.orders; ++v, p *= y[group.a] - y[group.b])
            if (const int row = group.row[static_cast<size_t>(v)]; row >= 0) out[row] += p;
    }
    for (const auto& group : ternaries_) {
        const double p = product(group.context.factor, group.context.size) * product(group.member, 3);
        const double rest = (1 - y[group.member[0]] - y[group.member[1]] - y[group.member[2]]) / 3;
        for (size_t i = 0; i < 3; ++i)
            if (group.row[i] >= 0) out[group.row[i]] += p * (y[group.member[i]] + rest);
    }
}

}  // namespace soak
