// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/verdict.h"

#include <algorithm>
#include <cmath>

#include "planner/core/band.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

/// Limits that settle the matter alone come first, then the binding ones, those that do not bind last.
int rank(const Limit& limit) { return !limit.computed || limit.impossible ? 0 : limit.temperature_C ? 1 : 2; }

void sortBindingFirst(std::vector<Limit>& limits, Side side) {
    std::stable_sort(limits.begin(), limits.end(), [&](const Limit& a, const Limit& b) {
        if (rank(a) != rank(b) || rank(a) != 1) return rank(a) < rank(b);
        return side == Side::floor ? *a.temperature_C > *b.temperature_C : *a.temperature_C < *b.temperature_C;
    });
}

const Limit* binding(const std::vector<Limit>& limits) {
    const auto at = std::find_if(limits.begin(), limits.end(), [](const Limit& one) { return rank(one) == 1; });
    return at == limits.end() ? nullptr : &*at;
}

std::vector<const Limit*> allLimits(const WindowAnswer& answer) {
    std::vector<const Limit*> all;
    for (const Limit& limit : answer.floors) all.push_back(&limit);
    for (const Limit& limit : answer.ceilings) all.push_back(&limit);
    return all;
}

/// "specification minimum 1040 °C" carries its temperature, "sigma dissolved + 20 K" gets it in brackets.
QString causeWithTemperature(const Limit& limit, int decimals) {
    if (limit.set && limit.margin_K == 0) return limit.cause;
    return limit.cause + " (" + (decimals ? celsiusText(*limit.temperature_C, decimals) : shownTemperature(limit)) +
           ")";
}

/// "the coldest metal, 1049 °C, stays 9 K above ..."; rounded so that the sentence never flatters. Within 2 K a decimal
/// is shown, or the whole numbers would seem to contradict each other.
QString clause(const Limit& limit, const Band& band) {
    const bool floor = limit.side == Side::floor;
    const double margin = *marginTo(limit, band);
    const int decimals = std::abs(margin) < 2 ? 1 : 0;
    const double unit = decimals ? 10 : 1;
    const double metal_C = (floor ? std::floor(band.low_C * unit + 1e-6) : std::ceil(band.high_C * unit - 1e-6)) / unit;
    const double shown_K = std::abs(std::floor(margin * unit + 1e-6) / unit);
    const QString where = (margin >= 0) == floor ? "above" : "below";
    return QString("the %1 metal, %2, %3 %4 %5 %6")
        .arg(floor ? "coldest" : "hottest", celsiusText(metal_C, decimals), margin >= 0 ? "stays" : "is",
             withUnit(shown_K, "K", decimals), where, causeWithTemperature(limit, decimals));
}

QString capital(QString sentence) {
    if (!sentence.isEmpty()) sentence[0] = sentence[0].toUpper();
    return sentence;
}

/// The limit of one side to speak of: the one that is broken most, else the one that falls shortest of what the shop
/// asks for, else the binding one.
const Limit* toSpeakOf(const std::vector<Limit>& limits, const Band& band, const ShopRules& rules) {
    const Limit *broken = nullptr, *short_of = nullptr;
    double least = 0, least_spare = 0;
    for (const Limit& limit : limits) {
        const auto margin = marginTo(limit, band);
        if (!margin) continue;
        if (*margin < least) broken = &limit, least = *margin;
        if (const double spare = *margin - neededMargin_K(limit, rules); spare < least_spare)
            short_of = &limit, least_spare = spare;
    }
    return broken ? broken : short_of ? short_of : binding(limits);
}

/// The smallest change of one element, against its own content, that would part two crossing limits; to first order,
/// and only where first order means something: less than a seventh of the content, of an element that is no trace.
QString whatWouldOpen(const WindowAnswer& answer, const Limit& floor, const Limit& ceiling, double crossing_K) {
    if (floor.K_per_wt.empty() && ceiling.K_per_wt.empty())
        return "Both are set by people: only another rule, order or furnace opens it.";
    constexpr double kTrace_wt = 0.01, kMostChange = 0.15;
    std::string best;
    double least = kMostChange, change_wt = 0;
    for (const auto& [element, content] : answer.chemistry_wt) {
        const auto in = [&element = element](const Limit& limit) {
            const auto at = limit.K_per_wt.find(element);
            return at == limit.K_per_wt.end() ? 0.0 : at->second;
        };
        const double opening_K_per_wt = in(ceiling)-in(floor);
        if (content < kTrace_wt || opening_K_per_wt == 0) continue;
        const double change = crossing_K / opening_K_per_wt;
        if (std::abs(change) / content < least) best = element, least = std::abs(change) / content, change_wt = change;
    }
    if (best.empty())
        return "No small change of the chemistry opens it; a smaller safety margin or another rule might.";
    return QString("About %1 %2 %3 would open it (first order), or a smaller safety margin.")
        .arg(withUnit(std::abs(change_wt), "%", std::abs(change_wt) < 0.1 ? 3 : 2), change_wt < 0 ? "less" : "more",
             QString::fromStdString(best));
}

QString driversOf(const Limit& limit) {
    if (limit.drivers.isEmpty()) return {};
    return QString(" %1 %2: %3.")
        .arg(capital(limit.cause), limit.side == Side::floor ? "lies high here" : "lies low here", limit.drivers);
}

/// The two answers never mix, but whoever reads only one of them must learn of the other.
QString gradeSentence(const WindowAnswer& answer) {
    return answer.grade_check.verdict == "fails" ? QString(" The grade check fails, whatever the setpoint.")
                                                 : QString();
}

void explainNotComputed(WindowAnswer& answer, const Limit& limit) {
    answer.verdict = Verdict::notComputed;
    answer.reason = QString("Not computed: %1 (%2).").arg(limit.remark, limit.cause);
}

void explainNoWindow(WindowAnswer& answer, const Limit* floor, const Limit* ceiling) {
    answer.verdict = Verdict::noWindow;
    answer.low_C.reset();
    answer.high_C.reset();
    for (const Limit* limit : allLimits(answer))
        if (limit->impossible) {
            answer.reason = QString("No window: %1 cannot be met, %2.").arg(limit->cause, limit->remark);
            return;
        }
    const double crossing_K = *floor->temperature_C - *ceiling->temperature_C;
    answer.reason =
        QString("No window: %1 asks for at least %2, %3 for at most %4; they cross by %5. %6")
            .arg(floor->cause, shownTemperature(*floor), ceiling->cause, shownTemperature(*ceiling),
                 withUnit(std::ceil(crossing_K), "K"), whatWouldOpen(answer, *floor, *ceiling, crossing_K)) +
        driversOf(*floor) + driversOf(*ceiling);
}

QString adviceFor(const WindowAnswer& answer, const Furnace& furnace) {
    if (answer.verdict == Verdict::inside) return {};
    const auto& suggested = answer.suggested_setpoint_C;
    const QString furnace_text = furnace.id.isEmpty() ? QString() : " in " + furnace.id;
    if (suggested && std::abs(*suggested - answer.setpoint_C) > 1e-6)
        return QString(" A setpoint of %1%2 fits better.")
            .arg(furnace.controller_fahrenheit ? temperatureText(*suggested, true) : celsiusText(*suggested),
                 furnace_text);
    if (suggested) return QString(" No other setpoint%1 has more room.").arg(furnace_text);
    return QString(" No setpoint%1 keeps all of the metal inside.").arg(furnace_text);
}

void explainBand(WindowAnswer& answer, const Furnace& furnace, const ShopRules& rules) {
    const Limit* floor = toSpeakOf(answer.floors, answer.band, rules);
    const Limit* ceiling = toSpeakOf(answer.ceilings, answer.band, rules);
    QStringList clauses;
    QString drivers;
    for (const Limit* limit : {floor, ceiling}) {
        if (!limit) continue;
        const double margin = *marginTo(*limit, answer.band), needed = neededMargin_K(*limit, rules);
        QString text = clause(*limit, answer.band);
        if (margin >= 0 && margin < needed)
            text += QString(" where %1 are wanted").arg(withUnit(std::ceil(needed), "K"));
        if (margin < needed) drivers += driversOf(*limit);
        clauses << text;
    }
    answer.reason = capital(word(answer.verdict)) + ": " + clauses.join("; ") + "." + drivers +
                    adviceFor(answer, furnace) + gradeSentence(answer);
}

}  // namespace

QString word(Verdict verdict) {
    switch (verdict) {
        case Verdict::inside:
            return "inside";
        case Verdict::tight:
            return "tight";
        case Verdict::outside:
            return "outside";
        case Verdict::noWindow:
            return "no window";
        case Verdict::notComputed:
            return "not computed";
    }
    return {};
}

std::optional<double> marginTo(const Limit& limit, const Band& band) {
    if (!limit.temperature_C) return std::nullopt;
    return limit.side == Side::floor ? band.low_C - *limit.temperature_C : *limit.temperature_C - band.high_C;
}

double neededMargin_K(const Limit& limit, const ShopRules& rules) {
    return limit.set ? rules.tight_set_K : std::max(rules.tight_computed_K, limit.uncertainty_K);
}

QString shownTemperature(const Limit& limit) {
    if (!limit.temperature_C) return {};
    // A hundredth of slack: 1040.0000001 from a unit conversion is still 1040.
    const double T = *limit.temperature_C;
    return celsiusText(limit.side == Side::floor ? std::ceil(T - 0.01) : std::floor(T + 0.01));
}

Result<Band> bandOrSetpoint(const Furnace& furnace, double setpoint_C, const ShopRules& rules) {
    if (!furnace.id.isEmpty()) return bandAt(furnace, setpoint_C, rules);
    Band band;
    band.setpoint_C = band.added_low_C = band.added_high_C = band.root_low_C = band.root_high_C = setpoint_C;
    band.low_C = band.high_C = setpoint_C;
    band.rule = "no furnace named";
    band.warnings << "no furnace named: the metal is taken to be at the setpoint";
    band.may_issue = false;
    return band;
}

void decide(WindowAnswer& answer, const Furnace& furnace, const ShopRules& rules) {
    sortBindingFirst(answer.floors, Side::floor);
    sortBindingFirst(answer.ceilings, Side::ceiling);
    answer.margin_K.reset();
    const Limit* floor = binding(answer.floors);
    const Limit* ceiling = binding(answer.ceilings);
    answer.low_C = floor ? floor->temperature_C : std::nullopt;
    answer.high_C = ceiling ? ceiling->temperature_C : std::nullopt;

    const auto all = allLimits(answer);
    for (const Limit* limit : all)
        if (!limit->computed) return explainNotComputed(answer, *limit);
    const bool impossible = std::any_of(all.begin(), all.end(), [](const Limit* limit) { return limit->impossible; });
    if (impossible || (floor && ceiling && *floor->temperature_C >= *ceiling->temperature_C))
        return explainNoWindow(answer, floor, ceiling);
    if (!floor && !ceiling) {
        answer.verdict = Verdict::notComputed;
        answer.reason = "Not computed: nothing limits this cycle.";
        return;
    }
    bool tight = false;
    for (const Limit* limit : all)
        if (const auto margin = marginTo(*limit, answer.band)) {
            answer.margin_K = std::min(answer.margin_K.value_or(*margin), *margin);
            tight = tight || *margin < neededMargin_K(*limit, rules);
        }
    answer.verdict = *answer.margin_K < 0 ? Verdict::outside : tight ? Verdict::tight : Verdict::inside;
    explainBand(answer, furnace, rules);
}

std::optional<double> suggestSetpoint(const WindowAnswer& answer, const Furnace& furnace, const ShopRules& rules,
                                      double standing_C) {
    const auto all = allLimits(answer);
    double lowest = furnace.id.isEmpty() ? answer.low_C.value_or(standing_C) : furnace.minimum_C;
    double highest = furnace.id.isEmpty() ? answer.high_C.value_or(standing_C) : furnace.maximum_C;
    for (const Limit* limit : all)
        if (limit->set && limit->temperature_C) {
            if (limit->side == Side::floor) lowest = std::max(lowest, *limit->temperature_C);
            if (limit->side == Side::ceiling) highest = std::min(highest, *limit->temperature_C);
        }
    struct Best {
        double setpoint_C = 0, margin_K = 0, distance_K = 0;
        bool comfortable = false;
    };
    std::optional<Best> best;
    const double step = step_K(furnace);
    for (double setpoint = stepUp_C(furnace, lowest); setpoint <= highest + 1e-6; setpoint += step) {
        const auto band = bandOrSetpoint(furnace, setpoint, rules);
        if (!band) continue;
        Best here{setpoint, 1e300, std::abs(setpoint - standing_C), true};
        for (const Limit* limit : all)
            if (const auto margin = marginTo(*limit, band.value())) {
                here.margin_K = std::min(here.margin_K, *margin);
                here.comfortable = here.comfortable && *margin >= neededMargin_K(*limit, rules);
            }
        if (here.margin_K < 0) continue;
        const bool better = !best || (here.comfortable != best->comfortable ? here.comfortable
                                      : here.comfortable                    ? here.distance_K < best->distance_K
                                                                            : here.margin_K > best->margin_K);
        if (better) best = here;
    }
    return best ? std::optional(best->setpoint_C) : std::nullopt;
}

}  // namespace soak
