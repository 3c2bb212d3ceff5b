// SPDX-License-Identifier: GPL-3.0-or-later
#include "function.h"

#include <algorithm>
#include <cctype>
#include <charconv>
#include <cmath>
#include <optional>
#include <set>

namespace soak {
namespace {

struct Term {
    double factor = 1;
    int power = 0;     // of T
    bool log = false;  // times ln T
    std::string name;  // of a function, or empty
};

/// The place of T^power (ln T) in the basis, or nothing.
std::optional<int> placeInBasis(int power, bool log) {
    if (log) {
        if (power == 1) return 2;
        if (power == 0) return 12;
        return {};
    }
    switch (power) {
        case 0:
            return 0;
        case 1:
            return 1;
        case 2:
            return 3;
        case 3:
            return 4;
        case 4:
            return 5;
        case 6:
            return 6;
        case 7:
            return 7;
        case -1:
            return 8;
        case -2:
            return 9;
        case -3:
            return 10;
        case -9:
            return 11;
        default:
            return {};
    }
}

Error unreadable(std::string_view value, std::string_view why) {
    return {Fault::data, "cannot read the value \"" + std::string(value) + "\": " + std::string(why), "", {}};
}

/// Reads one value text from left to right.
class Reader {
public:
    explicit Reader(std::string_view text) : text_(text), rest_(text) {}

    Result<std::vector<Term>> read() {
        std::vector<Term> terms;
        skipSpace();
        if (rest_.empty()) return unreadable(text_, "it is empty");
        while (!rest_.empty()) {
            double sign = 1;
            if (rest_[0] == '+' || rest_[0] == '-') {
                sign = rest_[0] == '-' ? -1 : 1;
                rest_.remove_prefix(1);
                skipSpace();
            } else if (!terms.empty()) {
                return unreadable(text_, "a + or - is missing before \"" + std::string(rest_) + "\"");
            }
            Term term;
            term.factor = sign;
            do {
                if (auto why = factor(term); !why.empty()) return unreadable(text_, why);
                skipSpace();
            } while (take('*'));
            terms.push_back(std::move(term));
        }
        return terms;
    }

private:
    void skipSpace() {
        while (!rest_.empty() && std::isspace(static_cast<unsigned char>(rest_[0]))) rest_.remove_prefix(1);
    }
    bool take(char wanted) {
        if (rest_.empty() || rest_[0] != wanted) return false;
        rest_.remove_prefix(1);
        skipSpace();
        return true;
    }
    template <class Number>
    bool number(Number& into) {
        const auto [end, status] = std::from_chars(rest_.data(), rest_.data() + rest_.size(), into);
        if (status != std::errc()) return false;
        rest_.remove_prefix(static_cast<size_t>(end - rest_.data()));
        return true;
    }
    /// Multiplies one factor into the term; returns what is wrong, or nothing.
    std::string factor(Term& term) {
        if (rest_.empty()) return "it ends where a number, T or a name was expected";
        if (std::isdigit(static_cast<unsigned char>(rest_[0])) || rest_[0] == '.') {
            double value = 0;
            if (!number(value)) return "a number cannot be read at \"" + std::string(rest_) + "\"";
            term.factor *= value;
            return {};
        }
        size_t length = 0;
        while (length < rest_.size() &&
               (std::isalnum(static_cast<unsigned char>(rest_[length])) || rest_[length] == '_'))
            ++length;
        const std::string word(rest_.substr(0, length));
        rest_.remove_prefix(length);
        if (word.empty()) return "\"" + std::string(rest_) + "\" is neither a number, T, ln(T) nor a name";
        if (word == "T") {
            int power = 1;
            if (take('^') && !number(power)) return "the power of T is not a whole number";
            term.power += power;
        } else if (word == "ln") {
            if (rest_.substr(0, 3) != "(T)") return "only ln(T) is known";
            rest_.remove_prefix(3);
            if (term.log) return "ln(T) stands twice in one term";
            term.log = true;
        } else {
            if (!term.name.empty()) return "two functions are multiplied";
            term.name = word;
        }
        return {};
    }

    std::string_view text_, rest_;
};

}  // namespace

Powers basisAt(double T) {
    const double logT = std::log(T), T2 = T * T, T3 = T2 * T, T6 = T3 * T3;
    return {1, T, T * logT, T2, T3, T2 * T2, T6, T6 * T, 1 / T, 1 / T2, 1 / T3, 1 / (T6 * T3), logT};
}

Powers basisSlopeAt(double T) {
    const double logT = std::log(T), T2 = T * T, T3 = T2 * T, T6 = T3 * T3;
    return {0,           1,      logT + 1, 2 * T,   3 * T2,         4 * T3,
            6 * T3 * T2, 7 * T6, -1 / T2,  -2 / T3, -3 / (T2 * T2), -9 / (T6 * T2 * T2),
            1 / T};
}

const Powers& Function::coefficientsAt(double T) const {
    size_t at = 0;
    while (at + 1 < pieces.size() && pieces[at + 1].from <= T) ++at;
    return pieces[at].coefficients;
}

double Function::valueAt(double T) const {
    const Powers basis = basisAt(T), &c = coefficientsAt(T);
    double sum = 0;
    for (size_t k = 0; k < kPowers; ++k) sum += basis[k] * c[k];
    return sum;
}

Result<std::vector<std::string>> namesIn(std::string_view value) {
    auto terms = Reader(value).read();
    if (!terms) return std::move(terms).error();
    std::vector<std::string> names;
    for (const Term& term : terms.value())
        if (!term.name.empty()) names.push_back(term.name);
    return names;
}

Result<Function> readFunction(const std::vector<RangeText>& ranges, const std::map<std::string, Function>& known) {
    Function function;
    for (size_t r = 0; r < ranges.size(); ++r) {
        auto terms = Reader(ranges[r].value).read();
        if (!terms) return std::move(terms).error();
        const double upper = r + 1 < ranges.size() ? ranges[r + 1].from : 1e9;
        std::set<double> starts{ranges[r].from};
        for (const Term& term : terms.value()) {
            if (term.name.empty()) continue;
            const auto found = known.find(term.name);
            if (found == known.end()) return unreadable(ranges[r].value, "no function is named " + term.name);
            if (term.power != 0 || term.log) return unreadable(ranges[r].value, "a function is multiplied by T");
            for (const auto& piece : found->second.pieces)
                if (piece.from > ranges[r].from && piece.from < upper) starts.insert(piece.from);
        }
        for (double start : starts) {
            Function::Piece piece{start, {}};
            for (const Term& term : terms.value()) {
                if (!term.name.empty()) {
                    const Powers& other = known.at(term.name).coefficientsAt(start);
                    for (size_t k = 0; k < kPowers; ++k) piece.coefficients[k] += term.factor * other[k];
                    continue;
                }
                const auto place = placeInBasis(term.power, term.log);
                if (!place) return unreadable(ranges[r].value, "a power of T outside the known basis");
                piece.coefficients[static_cast<size_t>(*place)] += term.factor;
            }
            function.pieces.push_back(piece);
        }
    }
    return function;
}

}  // namespace soak
