// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/mixed_load.h"

#include <algorithm>
#include <cmath>

#include "planner/core/band.h"
#include "planner/core/units_text.h"
#include "planner/core/verdict.h"

namespace soak {
namespace {

/// The setpoints that serve one heat, comfortable where there are any.
struct Range {
    int item = 0;
    double low_C = 0, high_C = 0;
    bool tight = false;
    QString lower_by, upper_by;
};

struct Margins {
    double least_K = 1e300;
    bool comfortable = true;
    const Limit* worst[2] = {nullptr, nullptr};  // floor, ceiling
};

std::optional<Margins> marginsAt(const WindowAnswer& answer, const Furnace& furnace, const ShopRules& rules,
                                 double setpoint_C) {
    const auto band = bandOrSetpoint(furnace, setpoint_C, rules);
    if (!band) return std::nullopt;
    Margins margins;
    double spare[2] = {1e300, 1e300};
    for (const auto* side : {&answer.floors, &answer.ceilings})
        for (const Limit& limit : *side) {
            const auto margin = marginTo(limit, band.value());
            if (!margin) continue;
            margins.least_K = std::min(margins.least_K, *margin);
            const double left = *margin - neededMargin_K(limit, rules);
            margins.comfortable = margins.comfortable && left >= 0;
            const size_t which = limit.side == Side::floor ? 0 : 1;
            if (left < spare[which]) margins.worst[which] = &limit, spare[which] = left;
        }
    return margins;
}

/// All setpoints on the controller's steps that serve the heat; the unbroken stretch nearest to its standing setpoint.
std::optional<Range> rangeOf(const LoadItem& item, int index, const Furnace& furnace, const ShopRules& rules) {
    for (const bool comfortable : {true, false}) {
        std::optional<Range> best;
        double best_distance = 1e300;
        std::optional<Range> open;
        const auto close = [&] {
            if (!open) return;
            const double distance =
                std::max({open->low_C - item.answer.setpoint_C, item.answer.setpoint_C - open->high_C, 0.0});
            if (distance < best_distance) best = open, best_distance = distance;
            open.reset();
        };
        for (double setpoint = stepUp_C(furnace, furnace.minimum_C); setpoint <= furnace.maximum_C + 1e-6;
             setpoint += step_K(furnace)) {
            const auto margins = marginsAt(item.answer, furnace, rules, setpoint);
            const bool serves = margins && margins->least_K >= 0 && (!comfortable || margins->comfortable);
            if (!serves) {
                close();
                continue;
            }
            if (!open) open = Range{index, setpoint, setpoint, !comfortable, {}, {}};
            open->high_C = setpoint;
        }
        close();
        if (!best) continue;
        const auto cause = [&](double setpoint, size_t side) {
            const auto margins = marginsAt(item.answer, furnace, rules, setpoint);
            const Limit* limit = margins ? margins->worst[side] : nullptr;
            return item.heat + ": " + (limit ? limit->cause : QString("the furnace's range"));
        };
        best->lower_by = cause(best->low_C, 0);
        best->upper_by = cause(best->high_C, 1);
        return best;
    }
    return std::nullopt;
}

QString whyNone(const LoadItem& item) {
    const Verdict verdict = item.answer.verdict;
    if (verdict == Verdict::notComputed || verdict == Verdict::noWindow) return item.answer.reason;
    return "no setpoint of this furnace keeps all of its metal inside";
}

/// The setpoint of a group: the one in its common range at which the smallest margin is largest.
void chooseSetpoint(LoadGroup& group, const std::vector<LoadItem>& items, const Furnace& furnace,
                    const ShopRules& rules) {
    double best_K = -1e300;
    for (double setpoint = group.low_C; setpoint <= group.high_C + 1e-6; setpoint += step_K(furnace)) {
        double least_K = 1e300;
        for (const int item : group.items)
            if (const auto margins = marginsAt(items[static_cast<size_t>(item)].answer, furnace, rules, setpoint))
                least_K = std::min(least_K, margins->least_K);
        if (least_K > best_K + 1e-9) best_K = least_K, group.setpoint_C = setpoint;
    }
    group.margin_K = best_K;
}

}  // namespace

LoadPlan planLoads(const std::vector<LoadItem>& items, const Furnace& furnace, const ShopRules& rules) {
    LoadPlan plan;
    std::map<QString, std::vector<Range>> by_cooling;
    for (size_t i = 0; i < items.size(); ++i) {
        const auto range = rangeOf(items[i], static_cast<int>(i), furnace, rules);
        if (range)
            by_cooling[items[i].cooling].push_back(*range);
        else
            plan.left_out.push_back({static_cast<int>(i), whyNone(items[i])});
    }
    for (auto& [cooling, ranges] : by_cooling) {
        std::sort(ranges.begin(), ranges.end(), [](const Range& a, const Range& b) { return a.high_C < b.high_C; });
        const size_t first_group = plan.groups.size();
        while (!ranges.empty()) {
            const double stab_C = ranges.front().high_C;
            LoadGroup group;
            group.low_C = -1e300, group.high_C = stab_C;
            group.upper_by = ranges.front().upper_by;
            std::vector<Range> rest;
            for (const Range& range : ranges) {
                if (range.low_C > stab_C + 1e-6) {
                    rest.push_back(range);
                    continue;
                }
                group.items.push_back(range.item);
                group.tight = group.tight || range.tight;
                if (range.low_C > group.low_C) group.low_C = range.low_C, group.lower_by = range.lower_by;
                if (const auto soak = items[static_cast<size_t>(range.item)].answer.soak.rule_min)
                    group.soak_min = std::max(group.soak_min.value_or(0), *soak);
            }
            chooseSetpoint(group, items, furnace, rules);
            if (plan.groups.size() > first_group)
                plan.why_apart << QString("%1 allows at most %2; %3 asks for at least %4")
                                      .arg(plan.groups.back().upper_by, temperatureText(plan.groups.back().high_C),
                                           group.lower_by, temperatureText(group.low_C));
            plan.groups.push_back(std::move(group));
            ranges = std::move(rest);
        }
    }
    if (by_cooling.size() > 1) {
        QStringList ways;
        for (const auto& [cooling, ranges] : by_cooling) ways << "\"" + cooling + "\"";
        plan.why_apart << "different cooling never shares a charge: " + ways.join(", ");
    }
    return plan;
}

}  // namespace soak
