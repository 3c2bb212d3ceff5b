// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/formula.h"

#include <cmath>

namespace soak {

/// Recursive descent over the text; writes the steps of a formula in postfix order.
class FormulaReader {
public:
    explicit FormulaReader(const QString& text) { formula_.text_ = text; }

    Result<Formula> read() {
        sum();
        skipBlanks();
        if (ok_ && at_ < formula_.text_.size()) ok_ = false;
        if (ok_) return formula_;
        return Error{Fault::input,
                     "\"" + formula_.text_.toStdString() + "\" cannot be read at character " + std::to_string(at_ + 1),
                     {},
                     {}};
    }

private:
    using Op = Formula::Op;

    void skipBlanks() {
        while (at_ < formula_.text_.size() && formula_.text_[at_].isSpace()) ++at_;
    }
    bool take(const QString& wanted) {
        skipBlanks();
        if (!QStringView(formula_.text_).mid(at_).startsWith(wanted)) return false;
        at_ += wanted.size();
        return true;
    }
    bool takeTimes() {
        skipBlanks();
        const auto rest = QStringView(formula_.text_).mid(at_);
        return rest.startsWith(u'*') && !rest.startsWith(u"**") && take("*");
    }
    void emitStep(Op op, double number = 0, qsizetype name = 0) { formula_.steps_.push_back({op, number, name}); }

    void sum() {
        product();
        while (ok_) {
            const bool plus = take("+");
            if (!plus && !take("-")) return;
            product();
            emitStep(plus ? Op::add : Op::subtract);
        }
    }
    void product() {
        signedFactor();
        while (ok_) {
            const bool times = takeTimes();
            if (!times && !take("/")) return;
            signedFactor();
            emitStep(times ? Op::multiply : Op::divide);
        }
    }
    void signedFactor() {
        if (take("+")) return signedFactor();
        if (!take("-")) return powered();
        signedFactor();
        emitStep(Op::negate);
    }
    void powered() {
        operand();
        if (!ok_ || !take("**")) return;
        signedFactor();
        emitStep(Op::power);
    }
    void operand() {
        if (take("(")) {
            sum();
            ok_ = ok_ && take(")");
            return;
        }
        skipBlanks();
        if (at_ < formula_.text_.size() && formula_.text_[at_].isLetter()) return word();
        number();
    }
    void number() {
        const qsizetype start = at_;
        const QString& text = formula_.text_;
        const auto digit = [&](qsizetype i) { return i < text.size() && (text[i].isDigit() || text[i] == '.'); };
        while (digit(at_)) ++at_;
        if (at_ > start && at_ < text.size() && text[at_].toLower() == 'e') {
            const bool sign = at_ + 1 < text.size() && (text[at_ + 1] == '-' || text[at_ + 1] == '+');
            if (digit(at_ + (sign ? 2 : 1))) {
                at_ += sign ? 2 : 1;
                while (digit(at_)) ++at_;
            }
        }
        bool is_number = false;
        const double value = text.mid(start, at_ - start).toDouble(&is_number);
        ok_ = ok_ && is_number;
        emitStep(Op::number, value);
    }
    void word() {
        const qsizetype start = at_;
        const QString& text = formula_.text_;
        while (at_ < text.size() && (text[at_].isLetterOrNumber() || text[at_] == '_')) ++at_;
        const QString name = text.mid(start, at_ - start);
        for (const auto& [function, op] :
             {std::pair{u"ln", Op::ln}, {u"log10", Op::log10}, {u"exp", Op::exp}, {u"atan", Op::atan}})
            if (name == QStringView(function)) {
                ok_ = ok_ && take("(");
                sum();
                ok_ = ok_ && take(")");
                return emitStep(op);
            }
        if (!formula_.names_.contains(name)) formula_.names_ << name;
        emitStep(Op::name, 0, formula_.names_.indexOf(name));
    }

    Formula formula_;
    qsizetype at_ = 0;
    bool ok_ = true;
};

Result<Formula> Formula::parse(const QString& text) { return FormulaReader(text).read(); }

std::optional<double> Formula::value(const Values& values) const {
    std::vector<double> stack;
    const auto pop = [&] {
        const double top = stack.back();
        stack.pop_back();
        return top;
    };
    for (const Step& step : steps_) {
        if (step.op == Op::number) {
            stack.push_back(step.number);
            continue;
        }
        if (step.op == Op::name) {
            const auto known = values.find(names_[step.name]);
            stack.push_back(known == values.end() ? 0 : known->second);
            continue;
        }
        const double b = pop();
        switch (step.op) {
            case Op::add:
                stack.back() += b;
                break;
            case Op::subtract:
                stack.back() -= b;
                break;
            case Op::multiply:
                stack.back() *= b;
                break;
            case Op::divide:
                stack.back() /= b;
                break;
            case Op::power:
                stack.back() = std::pow(stack.back(), b);
                break;
            case Op::negate:
                stack.push_back(-b);
                break;
            case Op::ln:
                stack.push_back(std::log(b));
                break;
            case Op::log10:
                stack.push_back(std::log10(b));
                break;
            case Op::exp:
                stack.push_back(std::exp(b));
                break;
            case Op::atan:
                stack.push_back(std::atan(b));
                break;
            case Op::number:
            case Op::name:
                break;
        }
    }
    return std::isfinite(stack.back()) ? std::optional(stack.back()) : std::nullopt;
}

Result<Condition> Condition::parse(const QString& text) {
    for (const QString& comparison : {QString("<="), QString(">="), QString("<"), QString(">")}) {
        const qsizetype at = text.indexOf(comparison);
        if (at < 0) continue;
        auto left = Formula::parse(text.left(at)), right = Formula::parse(text.mid(at + comparison.size()));
        if (!left) return std::move(left).error();
        if (!right) return std::move(right).error();
        return Condition(std::move(left).value(), std::move(right).value(), comparison);
    }
    return Error{Fault::input, "\"" + text.toStdString() + "\" compares nothing: write < <= > or >=", {}, {}};
}

QStringList Condition::unknown(const Formula::Values& values) const {
    QStringList missing;
    for (const QString& name : names())
        if (!values.count(name) && !missing.contains(name)) missing << name;
    return missing;
}

std::optional<bool> Condition::holds(const Formula::Values& values) const {
    const auto left = left_.value(values), right = right_.value(values);
    if (!left || !right || !unknown(values).isEmpty()) return std::nullopt;
    // 1e-9: sums of printed decimals are not exact in binary
    if (comparison_ == "<=") return *left <= *right + 1e-9;
    if (comparison_ == ">=") return *left >= *right - 1e-9;
    return comparison_ == "<" ? *left < *right - 1e-9 : *left > *right + 1e-9;
}

}  // namespace soak
