// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/remedies.h"

#include <algorithm>
#include <cmath>

#include "planner/core/units_text.h"
#include "planner/core/verdict.h"

namespace soak {
namespace {

// Half widths of furnace classes 1 to 6, K (AMS 2750 furnace class table, from memory).
constexpr double kClasses_K[] = {3, 6, 8, 10, 14, 28};
constexpr double kMostChange = 0.15;  // of an element's content: to first order it means something
constexpr double kTrace_wt = 0.01;

class Search {
public:
    Search(const WindowAnswer& answer, const Furnace& furnace, const ShopRules& rules)
        : answer_(answer), furnace_(furnace), rules_(rules) {}

    std::vector<Remedy> found;

    void setpoint() {
        const auto& suggested = answer_.suggested_setpoint_C;
        if (!suggested || std::abs(*suggested - answer_.setpoint_C) < 1e-6) return;
        add("setpoint", "set " + temperatureText(*suggested, furnace_.controller_fahrenheit),
            marginAt(furnace_, *suggested, rules_));
    }

    void furnaces(const std::vector<Furnace>& others, const QStringList& cycle_furnaces) {
        for (const Furnace& other : others) {
            if (other.id == furnace_.id) continue;
            if (answer_.low_C && other.maximum_C < *answer_.low_C) continue;
            if (answer_.high_C && other.minimum_C > *answer_.high_C) continue;
            const auto setpoint_C = suggestSetpoint(answer_, other, rules_, answer_.setpoint_C);
            if (!setpoint_C) continue;
            const auto margin = marginAt(other, *setpoint_C, rules_);
            if (!margin || *margin <= answer_.margin_K.value_or(-1e9) + 1) continue;
            const auto band = bandOrSetpoint(other, *setpoint_C, rules_);
            const bool listed_here = cycle_furnaces.contains(other.id);
            add("furnace",
                QString("%1 at %2%3%4")
                    .arg(other.id, temperatureText(*setpoint_C, other.controller_fahrenheit),
                         listed_here ? "" : ", which this cycle does not name",
                         band && !band.value().may_issue ? ", once its tests are in date" : ""),
                margin);
        }
    }

    /// The widest survey with which the band would still fit somewhere in the window.
    void furnaceClass() {
        if (furnace_.id.isEmpty() || !answer_.low_C || !answer_.high_C || furnace_.survey.empty()) return;
        for (auto half = std::rbegin(kClasses_K); half != std::rend(kClasses_K); ++half) {
            Furnace better = furnace_;
            bool narrower = false;
            for (SurveyPoint& point : better.survey) {
                narrower = narrower || point.coldest_K < -*half || point.hottest_K > *half;
                point.coldest_K = std::max(point.coldest_K, -*half);
                point.hottest_K = std::min(point.hottest_K, *half);
            }
            if (!narrower) continue;
            const auto setpoint_C = suggestSetpoint(answer_, better, rules_, answer_.setpoint_C);
            const auto margin = setpoint_C ? marginAt(better, *setpoint_C, rules_) : std::nullopt;
            if (!margin || *margin <= answer_.margin_K.value_or(-1e9)) continue;
            add("furnace",
                QString("a work zone within ±%1 (the better part of %2, surveyed) at %3")
                    .arg(withUnit(*half, "K"), furnace_.id,
                         temperatureText(*setpoint_C, furnace_.controller_fahrenheit)),
                margin);
            return;
        }
    }

    void rule() {
        if (furnace_.id.isEmpty() || rules_.band_rule != "added up") return;
        ShopRules other = rules_;
        other.band_rule = "root of squares";
        const auto setpoint_C = suggestSetpoint(answer_, furnace_, other, answer_.setpoint_C);
        const auto margin = setpoint_C ? marginAt(furnace_, *setpoint_C, other) : std::nullopt;
        if (margin && *margin >= 0)
            add("rule",
                QString("errors combined as root of squares instead of added up, at %1: a decision of the shop, "
                        "named on the sheet")
                    .arg(temperatureText(*setpoint_C, furnace_.controller_fahrenheit)),
                margin);
    }

    /// What is short: by how much the binding pair, or one limit against the band, fails.
    void limits() {
        const Limit *floor = first(answer_.floors), *ceiling = first(answer_.ceilings);
        if (answer_.verdict == Verdict::noWindow) {
            if (!floor || !ceiling || !floor->temperature_C || !ceiling->temperature_C) return;
            const double short_K = *floor->temperature_C - *ceiling->temperature_C;
            if (short_K <= 0) return;
            chemistry(floor, ceiling, short_K);
            for (const Limit* limit : {floor, ceiling}) people(*limit, short_K);
            return;
        }
        const Limit* worst = nullptr;
        double short_K = 0;
        for (const Limit* limit : {floor, ceiling}) {
            if (!limit || !limit->temperature_C) continue;
            const double lacking = neededMargin_K(*limit, rules_) - *marginTo(*limit, answer_.band);
            if (lacking > short_K) worst = limit, short_K = lacking;
        }
        if (!worst) return;
        chemistry(worst->side == Side::floor ? worst : nullptr, worst->side == Side::ceiling ? worst : nullptr,
                  short_K);
        people(*worst, short_K);
        certainty(*worst);
    }

    void nothing() {
        if (!found.empty()) return;
        const bool impossible = std::any_of(answer_.floors.begin(), answer_.floors.end(), isImpossible) ||
                                std::any_of(answer_.ceilings.begin(), answer_.ceilings.end(), isImpossible);
        add("nothing",
            impossible
                ? QString("nothing in this shop will: no temperature satisfies it in this heat; another heat, or "
                          "another rule agreed with the customer")
                : QString("nothing here will: no setpoint, furnace or small change of the chemistry that is known"),
            {});
    }

private:
    static bool isImpossible(const Limit& limit) { return limit.impossible; }
    static const Limit* first(const std::vector<Limit>& limits) { return limits.empty() ? nullptr : &limits.front(); }

    void add(const QString& what, const QString& text, std::optional<double> margin_K) {
        found.push_back({what, text, margin_K});
    }

    std::optional<double> marginAt(const Furnace& furnace, double setpoint_C, const ShopRules& rules) const {
        const auto band = bandOrSetpoint(furnace, setpoint_C, rules);
        if (!band) return std::nullopt;
        std::optional<double> least;
        for (const auto* side : {&answer_.floors, &answer_.ceilings})
            for (const Limit& limit : *side)
                if (const auto margin = marginTo(limit, band.value()))
                    least = std::min(least.value_or(*margin), *margin);
        return least;
    }

    /// The elements whose smallest change, against their own content, makes up for what is short; three at most.
    void chemistry(const Limit* floor, const Limit* ceiling, double short_K) {
        struct Change {
            std::string element;
            double change_wt, share;
        };
        std::vector<Change> changes;
        for (const auto& [element, content] : answer_.chemistry_wt) {
            const auto slope = [&element = element](const Limit* limit) {
                if (!limit) return 0.0;
                const auto at = limit->K_per_wt.find(element);
                return at == limit->K_per_wt.end() ? 0.0 : at->second;
            };
            const double opening_K_per_wt = slope(ceiling) - slope(floor);
            if (content < kTrace_wt || opening_K_per_wt == 0) continue;
            const double change = short_K / opening_K_per_wt;
            if (std::abs(change) / content <= kMostChange)
                changes.push_back({element, change, std::abs(change) / content});
        }
        std::sort(changes.begin(), changes.end(), [](const Change& a, const Change& b) { return a.share < b.share; });
        if (changes.size() > 3) changes.resize(3);
        QStringList parts;
        for (const Change& one : changes)
            parts << QString("%1 %2 %3")
                         .arg(withUnit(std::abs(one.change_wt), "%", std::abs(one.change_wt) < 0.1 ? 3 : 2),
                              one.change_wt < 0 ? "less" : "more", QString::fromStdString(one.element));
        if (!parts.isEmpty())
            add("chemistry", "a heat with " + parts.join(", or ") + " (each alone, to first order)", {});
    }

    void people(const Limit& limit, double short_K) {
        if (limit.kind.startsWith("specification"))
            add("specification",
                QString("a specification that allows %1 %2: ask the customer")
                    .arg(withUnit(std::ceil(short_K), "K"), limit.side == Side::floor ? "less" : "more"),
                {});
        else if (limit.margin_K >= short_K)
            add("margin",
                QString("a safety margin on \"%1\" that is %2 smaller: a decision of the metallurgist")
                    .arg(limit.cause, withUnit(std::ceil(short_K), "K")),
                {});
    }

    /// Where only the uncertainty is short, a better analysis or a better known limit helps.
    void certainty(const Limit& limit) {
        const double margin = *marginTo(limit, answer_.band);
        if (limit.set || margin < 0 || limit.uncertainty_K <= rules_.tight_computed_K) return;
        const double from_analysis = std::hypot(limit.certificate_K, limit.laboratory_K);
        add("certainty",
            from_analysis > limit.model_K
                ? QString("a better analysis: rounding and laboratory alone make ±%1 of this limit")
                      .arg(withUnit(std::ceil(from_analysis), "K"))
                : QString("a trial on this heat at %1: the calculation itself is only sure to ±%2 here")
                      .arg(temperatureText(answer_.setpoint_C, furnace_.controller_fahrenheit),
                           withUnit(std::ceil(limit.model_K), "K")),
            margin);
    }

    const WindowAnswer& answer_;
    const Furnace& furnace_;
    const ShopRules& rules_;
};

}  // namespace

std::vector<Remedy> remediesFor(const WindowAnswer& answer, const Furnace& furnace, const std::vector<Furnace>& others,
                                const QStringList& cycle_furnaces, const ShopRules& rules) {
    if (answer.verdict == Verdict::inside || answer.verdict == Verdict::notComputed) return {};
    Search search(answer, furnace, rules);
    if (answer.verdict != Verdict::noWindow) {
        search.setpoint();
        search.furnaces(others, cycle_furnaces);
        search.furnaceClass();
        search.rule();
    }
    search.limits();
    search.nothing();
    return std::move(search.found);
}

}  // namespace soak
