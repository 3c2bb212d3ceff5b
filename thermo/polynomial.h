// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <array>
#include <cstddef>
#include <vector>

namespace soak {

/// A sum of Redlich-Kister terms over site fractions y, each with a coefficient taken from a row of `at`:
///   monomial   p prod(y_k)                                  end-members, order-0 and reciprocal interactions
///   binary     C y_a y_b sum_v p_v (y_a - y_b)^v            C = product of the other sublattices' constituents
///   ternary    C y_a y_b y_c sum_m p_m v_m,  v_m = y_m + (1 - y_a - y_b - y_c)/3   (symmetric, Muggianu)
/// Source: M. Hillert, CALPHAD 4 (1980) 1-12; Y.-M. Muggianu, M. Gambino, J.-P. Bros, J. Chim. Phys. 72 (1975) 83.
/// Used for G (J/mol), the Curie temperature (K) and the magnetic moment (Bohr magnetons) alike.
/// Cost: O(terms); no allocation in evaluation.
class Polynomial {
public:
    static constexpr int kFactors = 6;  ///< the most constituents in one term
    static constexpr int kOrders = 10;

    void addMonomial(int row, std::vector<int> factors);
    /// One order of a binary interaction; orders of the same pair and context join one group.
    void addBinary(int row, int order, std::vector<int> context, int a, int b);
    /// One weight (0, 1, 2 for a, b, c) of a ternary interaction.
    void addTernary(int row, int weight, std::vector<int> context, int a, int b, int c);
    /// Call once after the last term.
    void finish();
    bool empty() const { return monomials_.empty() && binaries_.empty() && ternaries_.empty(); }

    double value(const double* at, const double* y) const;
    /// Adds the gradient to g (n) and returns the value.
    double gradient(const double* at, const double* y, double* g) const;
    /// Adds the gradient to g (n) and the upper triangle of the Hessian to H (row-major n x n, i <= j); returns the
    /// value.
    double derivatives(const double* at, const double* y, double* g, double* H, int n) const;
    /// Adds d(value)/d(at[row]) to out[row]: what each coefficient is multiplied by at y.
    void weights(const double* y, double* out) const;

private:
    struct Monomial {
        int row, degree;
        std::array<int, kFactors> factor;
    };
    struct Context {
        int size = 0;
        std::array<int, kFactors> factor{};
        bool operator==(const Context&) const = default;
    };
    struct Binary {
        Context context;
        int a, b, orders;
        std::array<int, kOrders> row;  ///< -1 where an order is absent
    };
    struct Ternary {
        Context context;
        std::array<int, 3> member, row;
    };
    static Context contextOf(const std::vector<int>& factors);

    std::vector<Monomial> monomials_;  ///< sorted by degree
    std::array<std::size_t, kFactors + 2> degreeStart_{};
    std::vector<Binary> binaries_;
    std::vector<Ternary> ternaries_;
};

}  // namespace soak
