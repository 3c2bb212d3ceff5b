// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/coverage.h"

#include <algorithm>

#include "planner/core/grade_check.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

constexpr double kPairMatters_wt2 = 4;  // common practice: below it the pair is a trace beside the others

/// The loader names a pair in either order of its elements.
bool lacksBinary(const DataSetFacts& set, const std::string& a, const std::string& b) {
    const auto named = [&](const std::string& pair) {
        return std::find(set.gaps.begin(), set.gaps.end(), "no assessed binary " + pair) != set.gaps.end();
    };
    return named(a + "-" + b) || named(b + "-" + a);
}

QString amountOf(const std::string& element, const Content& content) {
    return QString::fromStdString(element) + " " + (content.raw.isEmpty() ? QString::number(*content.wt) : content.raw);
}

}  // namespace

QString whyNotCovered(const Analysis& analysis, const DataSetFacts& set, const SetUse& use) {
    const QString named = QString("the data set \"%1\"").arg(QString::fromStdString(set.name));
    if (const std::string base = baseMetal(analysis); !base.empty() && base != set.balance)
        return QString("an alloy of %1, and %2 is for alloys of %3")
            .arg(QString::fromStdString(base), named, QString::fromStdString(set.balance));
    for (const auto& [element, content] : analysis) {
        if (!content.wt || element == kOthersEach || element == kOthersTotal || element == set.balance) continue;
        const bool known = std::find(set.elements.begin(), set.elements.end(), element) != set.elements.end();
        if (known) {
            const auto most = use.most_wt.find(element);
            if (most != use.most_wt.end() && *content.wt > most->second)
                return QString("%1 % is beyond %2, which holds up to %3 %")
                    .arg(amountOf(element, content), named, QString::number(most->second));
            continue;
        }
        const auto own = use.left_out_wt.find(element);
        const double most_wt = own == use.left_out_wt.end() ? use.left_out_wt.at("*") : own->second;
        if (!content.less_than && *content.wt > most_wt)
            return QString("%1 % is not in %2 and too much to be left out of the equilibrium (up to %3 % may be)")
                .arg(amountOf(element, content), named, QString::number(most_wt));
    }
    return {};
}

QStringList extrapolations(const std::map<std::string, double>& wt, const DataSetFacts& set, const SetUse& use) {
    QStringList all;
    for (const auto& [element, most] : use.most_wt)
        if (const auto at = wt.find(element); at != wt.end() && at->second > most)
            all << QString("%1 %2 %: the data set \"%3\" holds up to %4 %")
                       .arg(QString::fromStdString(element), QString::number(at->second),
                            QString::fromStdString(set.name), QString::number(most));
    for (auto a = wt.begin(); a != wt.end(); ++a)
        for (auto b = std::next(a); b != wt.end(); ++b)
            if (a->second * b->second >= kPairMatters_wt2 && lacksBinary(set, a->first, b->first))
                all << QString("%1 with %2: no assessed binary, their interaction is an estimate")
                           .arg(QString::fromStdString(a->first), QString::fromStdString(b->first));
    return all;
}

}  // namespace soak
