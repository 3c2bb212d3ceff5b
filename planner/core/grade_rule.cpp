// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/grade_rule.h"

#include <cmath>
#include <map>
#include <optional>

namespace soak {
namespace {

using Amounts = std::map<QString, double>;

/// Reads and evaluates + - * / and brackets over numbers and element symbols, in one pass.
class Expression {
public:
    Expression(const QString& text, const Amounts& amounts) : text_(text), amounts_(amounts) {}

    /// Nothing when the text is no expression, or on a division by zero.
    std::optional<double> value() {
        const double result = sum();
        skipBlanks();
        ok_ = ok_ && at_ == text_.size();
        return ok_ && !zero_divisor_ ? std::optional(result) : std::nullopt;
    }
    bool readable() const { return ok_; }
    const QStringList& symbols() const { return symbols_; }

private:
    void skipBlanks() {
        while (at_ < text_.size() && text_[at_].isSpace()) ++at_;
    }
    bool take(QChar wanted) {
        skipBlanks();
        if (at_ >= text_.size() || text_[at_] != wanted) return false;
        ++at_;
        return true;
    }
    double sum() {
        double total = product();
        for (;;) {
            if (take('+'))
                total += product();
            else if (take('-'))
                total -= product();
            else
                return total;
        }
    }
    double product() {
        double total = factor();
        for (;;) {
            if (take('*')) {
                total *= factor();
            } else if (take('/')) {
                const double divisor = factor();
                zero_divisor_ = zero_divisor_ || divisor == 0;
                total /= divisor;
            } else {
                return total;
            }
        }
    }
    double factor() {
        if (take('(')) {
            const double inside = sum();
            ok_ = ok_ && take(')');
            return inside;
        }
        const qsizetype start = at_;
        while (at_ < text_.size() && (text_[at_].isLetterOrNumber() || text_[at_] == '.')) ++at_;
        const QString word = text_.mid(start, at_ - start);
        if (!word.isEmpty() && word[0].isLetter()) return amountOf(word);
        bool is_number = false;
        const double number = word.toDouble(&is_number);
        ok_ = ok_ && is_number;
        return number;
    }
    double amountOf(const QString& symbol) {
        if (!symbols_.contains(symbol)) symbols_ << symbol;
        const auto known = amounts_.find(symbol);
        return known == amounts_.end() ? 0 : known->second;
    }

    QString text_;
    const Amounts& amounts_;
    QStringList symbols_;
    qsizetype at_ = 0;
    bool ok_ = true, zero_divisor_ = false;
};

struct Parts {
    QString left, right;
    bool at_least = true;
};
std::optional<Parts> split(const QString& rule) {
    for (const bool at_least : {true, false}) {
        const qsizetype at = rule.indexOf(at_least ? ">=" : "<=");
        if (at < 0) continue;
        const QString named = rule.left(at);
        return Parts{named.mid(named.indexOf('=') + 1).trimmed(), rule.mid(at + 2).trimmed(), at_least};
    }
    return std::nullopt;
}

bool holds(const Parts& parts, double left, double right) { return parts.at_least ? left >= right : left <= right; }

/// Whether the rule holds for these amounts; nothing when a side cannot be evaluated.
std::optional<bool> verdictFor(const Parts& parts, const Amounts& amounts) {
    const auto left = Expression(parts.left, amounts).value(), right = Expression(parts.right, amounts).value();
    if (!left || !right) return std::nullopt;
    // 1e-9: sums of printed decimals are not exact in binary
    return holds(parts, *left + (parts.at_least ? 1e-9 : -1e-9), *right);
}

}  // namespace

RuleOutcome applyRule(const QString& rule, const Analysis& analysis) {
    using Answer = RuleOutcome::Answer;
    RuleOutcome outcome;
    const auto parts = split(rule);
    if (!parts) return outcome;

    Amounts amounts;
    QStringList censored;
    for (const auto& [symbol, content] : analysis)
        if (content.wt) {
            amounts[QString::fromStdString(symbol)] = *content.wt;
            if (content.less_than) censored << QString::fromStdString(symbol);
        }
    Expression left(parts->left, amounts), right(parts->right, amounts);
    const auto left_value = left.value(), right_value = right.value();
    outcome.elements = left.symbols() + right.symbols();
    outcome.elements.removeDuplicates();
    for (const QString& symbol : outcome.elements)
        if (!amounts.count(symbol)) outcome.missing << symbol;
    if (!outcome.missing.isEmpty()) {
        outcome.answer = Answer::cannot_say;
        outcome.text = rule + ": cannot be checked, " + outcome.missing.join(", ") + " missing";
        return outcome;
    }
    if (!left_value || !right_value) {
        const bool readable = left.readable() && right.readable();
        if (readable) outcome.answer = Answer::cannot_say;
        outcome.text = rule + (readable ? ": cannot be evaluated, division by zero" : ": cannot be read");
        return outcome;
    }
    outcome.left = *left_value;
    outcome.right = *right_value;
    outcome.text = QString("%1: %2 against %3").arg(rule).arg(outcome.left, 0, 'g', 4).arg(outcome.right, 0, 'g', 4);

    // Rules are monotone in each element, so the corners of the censored values decide.
    bool any_holds = false, any_broken = false;
    censored.removeIf([&](const QString& symbol) { return !outcome.elements.contains(symbol); });
    for (unsigned corner = 0; corner < (1u << censored.size()); ++corner) {
        Amounts at_corner = amounts;
        for (qsizetype i = 0; i < censored.size(); ++i)
            if (corner >> i & 1u) at_corner[censored[i]] = 0;
        const auto verdict = verdictFor(*parts, at_corner);
        any_holds = any_holds || !verdict || *verdict;
        any_broken = any_broken || !verdict || !*verdict;
    }
    outcome.answer = !any_broken ? Answer::holds : !any_holds ? Answer::broken : Answer::cannot_say;
    if (outcome.answer == Answer::cannot_say) outcome.text += ", cannot be decided with a \"less than\" value";
    return outcome;
}

}  // namespace soak
