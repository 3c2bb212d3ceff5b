// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>

#include "db/records.h"

namespace soak {

/// A rule such as "PRE = Cr + 3.3*Mo + 16*N >= 40", "Ti >= 5*C" or "Ti/N >= 3.5" put to an analysis. A censored value
/// stands for anything from 0 to its bound: a rule holds or is broken only when it does so all the way.
struct RuleOutcome {
    enum class Answer { holds, broken, cannot_say, unreadable } answer = Answer::unreadable;
    double left = 0, right = 0;  ///< both sides with the values as printed
    QStringList missing;         ///< elements that the rule needs and the analysis lacks
    QStringList elements;        ///< all elements of the rule
    QString text;                ///< "PRE = Cr + 3.3*Mo + 16*N >= 40: 37.54 against 40"
};
RuleOutcome applyRule(const QString& rule, const Analysis& analysis);

}  // namespace soak
