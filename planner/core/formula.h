// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <map>
#include <optional>
#include <vector>

#include "base/result.h"

namespace soak {

/// A relation written as text, read once and evaluated many times: + - * / ** and brackets over numbers, names and
/// ln log10 exp atan. ** binds tighter than a sign before it and is taken from right to left. Immutable: threads may
/// share it.
class Formula {
public:
    using Values = std::map<QString, double>;

    /// Fault::input names the place that cannot be read.
    static Result<Formula> parse(const QString& text);

    /// A name without a value counts as 0: an element that is absent. Nothing where the result is no number (division
    /// by zero, root or logarithm of a negative amount).
    std::optional<double> value(const Values& values) const;
    const QStringList& names() const { return names_; }
    const QString& text() const { return text_; }

private:
    friend class FormulaReader;
    enum class Op { number, name, add, subtract, multiply, divide, power, negate, ln, log10, exp, atan };
    struct Step {
        Op op;
        double number = 0;
        qsizetype name = 0;
    };
    QString text_;
    QStringList names_;
    std::vector<Step> steps_;  ///< postfix
};

/// "Ni + Mn < 1.0", "C >= 0.03": two relations compared. `unknown` lists the names that have no value; with any of
/// them the condition cannot be decided.
class Condition {
public:
    /// Fault::input when there is no comparison or a side cannot be read.
    static Result<Condition> parse(const QString& text);
    QStringList unknown(const Formula::Values& values) const;
    std::optional<bool> holds(const Formula::Values& values) const;
    const QStringList names() const { return left_.names() + right_.names(); }

private:
    Condition(Formula left, Formula right, QString comparison)
        : left_(std::move(left)), right_(std::move(right)), comparison_(std::move(comparison)) {}
    Formula left_, right_;
    QString comparison_;
};

}  // namespace soak
