// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <array>
#include <map>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.h"

namespace soak {

/// The temperature basis of every function in the data: 1, T, T ln T, T^2, T^3, T^4, T^6, T^7, T^-1, T^-2, T^-3, T^-9,
/// ln T.
inline constexpr int kPowers = 13;
using Powers = std::array<double, kPowers>;

/// The basis at T (K), and its derivative with respect to T.
Powers basisAt(double T);
Powers basisSlopeAt(double T);

/// G(T) in J/mol, piecewise over temperature. Below the first piece and above the last the nearest one is extrapolated.
struct Function {
    struct Piece {
        double from;  ///< K
        Powers coefficients;
    };
    std::vector<Piece> pieces;  ///< ascending `from`

    const Powers& coefficientsAt(double T) const;
    double valueAt(double T) const;
};

/// One range of a function as written in the data.
struct RangeText {
    double from;
    std::string value;
};

/// Reads a sum of terms such as "2*Fe_bcc - 1.5*C_graphite + 100 - 3*T + 2.1*T*ln(T)" over the given ranges.
/// `known` holds the functions that a term may name. Errors: Fault::data, the text and what is wrong with it.
Result<Function> readFunction(const std::vector<RangeText>& ranges, const std::map<std::string, Function>& known);

/// The names of functions that a value text refers to. Errors: Fault::data for a text that cannot be read.
Result<std::vector<std::string>> namesIn(std::string_view value);

}  // namespace soak
