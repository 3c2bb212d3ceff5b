// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/grade_rule.h"

#include <optional>

#include "planner/core/formula.h"

namespace soak {
namespace {

using Amounts = Formula::Values;

struct Parts {
    Formula left, right;
    bool at_least = true;
};
/// Nothing when the rule has no comparison or a side cannot be read.
std::optional<Parts> split(const QString& rule) {
    for (const bool at_least : {true, false}) {
        const qsizetype at = rule.indexOf(at_least ? ">=" : "<=");
        if (at < 0) continue;
        const QString named = rule.left(at);
        const auto left = Formula::parse(named.mid(named.indexOf('=') + 1)), right = Formula::parse(rule.mid(at + 2));
        return left && right ? std::optional(Parts{left.value(), right.value(), at_least}) : std::nullopt;
    }
    return std::nullopt;
}

bool holds(const Parts& parts, double left, double right) { return parts.at_least ? left >= right : left <= right; }

/// Whether the rule holds for these amounts; nothing when a side cannot be evaluated.
std::optional<bool> verdictFor(const Parts& parts, const Amounts& amounts) {
    const auto left = parts.left.value(amounts), right = parts.right.value(amounts);
    if (!left || !right) return std::nullopt;
    // 1e-9: sums of printed decimals are not exact in binary
    return holds(parts, *left + (parts.at_least ? 1e-9 : -1e-9), *right);
}

}  // namespace

RuleOutcome applyRule(const QString& rule, const Analysis& analysis) {
    using Answer = RuleOutcome::Answer;
    RuleOutcome outcome;
    const auto parts = split(rule);
    if (!parts) {
        outcome.text = rule + ": cannot be read";
        return outcome;
    }

    Amounts amounts;
    QStringList censored;
    for (const auto& [symbol, content] : analysis)
        if (content.wt) {
            amounts[QString::fromStdString(symbol)] = *content.wt;
            if (content.less_than) censored << QString::fromStdString(symbol);
        }
    const auto left_value = parts->left.value(amounts), right_value = parts->right.value(amounts);
    outcome.elements = parts->left.names() + parts->right.names();
    outcome.elements.removeDuplicates();
    for (const QString& symbol : outcome.elements)
        if (!amounts.count(symbol)) outcome.missing << symbol;
    if (!outcome.missing.isEmpty()) {
        outcome.answer = Answer::cannot_say;
        outcome.text = rule + ": cannot be checked, " + outcome.missing.join(", ") + " missing";
        return outcome;
    }
    if (!left_value || !right_value) {
        outcome.answer = Answer::cannot_say;
        outcome.text = rule + ": cannot be evaluated, division by zero";
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
