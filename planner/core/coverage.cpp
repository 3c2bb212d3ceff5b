// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/coverage.h"

#include <algorithm>

#include "planner/core/grade_check.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

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

}  // namespace soak
