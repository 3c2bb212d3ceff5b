// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/limits.h"

#include <algorithm>
#include <cmath>

#include "planner/core/limit_making.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

// ---- limits set by people -----------------------------------------------------------------------------------------

Limit setAt(const CycleLimit& limit, Side side, const QString& what, double temperature_C) {
    Limit made =
        blankLimit(limit, side, what + (side == Side::floor ? " minimum " : " maximum ") + celsiusText(temperature_C));
    made.temperature_C = temperature_C + (side == Side::floor ? limit.margin_K : -limit.margin_K);
    made.set = true;
    return made;
}

std::vector<Limit> bySpecification(const CycleLimit& limit, const LimitContext&) {
    std::vector<Limit> made;
    if (limit.low) made.push_back(setAt(limit, Side::floor, "specification", *limit.low));
    if (limit.high) made.push_back(setAt(limit, Side::ceiling, "specification", *limit.high));
    return made;
}

std::vector<Limit> byFurnace(const CycleLimit& limit, const LimitContext& context) {
    std::optional<double> low = limit.low, high = limit.high;
    if (!context.furnace.id.isEmpty()) {
        low = std::max(low.value_or(context.furnace.minimum_C), context.furnace.minimum_C);
        high = std::min(high.value_or(context.furnace.maximum_C), context.furnace.maximum_C);
    }
    std::vector<Limit> made;
    if (low) made.push_back(setAt(limit, Side::floor, "furnace", *low));
    if (high) made.push_back(setAt(limit, Side::ceiling, "furnace", *high));
    return made;
}

/// "Ni + Mn < 1.0", or "unknown Ni, Mn".
bool applies(const QString& condition, const Analysis& analysis, QString* why_not) {
    const Formula::Values wt = amountsOf(analysis);
    if (condition.startsWith("unknown ")) {
        for (const QString& element : condition.mid(8).split(','))
            if (!wt.count(element.trimmed())) return true;
        return false;
    }
    const auto read = Condition::parse(condition);
    if (!read) {
        *why_not = QString::fromStdString(read.error().message);
        return false;
    }
    return read.value().holds(wt).value_or(true);
}

/// A specification that hangs on the chemistry, such as a code's ceiling by Ni + Mn. Where it does not apply there is
/// no limit to speak of.
std::vector<Limit> byConditionalSpecification(const CycleLimit& limit, const LimitContext& context) {
    QString unreadable;
    if (!applies(limit.phase, *context.analysis, &unreadable)) {
        if (unreadable.isEmpty()) return {};
        return {notComputed(blankLimit(limit, Side::ceiling, "specification"), unreadable)};
    }
    std::vector<Limit> made = bySpecification(limit, context);
    for (Limit& one : made) one.cause += " for " + limit.phase;
    return made;
}

/// A range in which the metal must not be held. With a phase, its upper end is where that phase dissolves.
std::vector<Limit> avoidLimit(const CycleLimit& limit, const LimitContext& context) {
    const QString what = limit.phase.isEmpty() ? QString("range to avoid,") : "range of " + limit.phase + " to avoid,";
    std::optional<double> upper_C = limit.high;
    std::vector<Limit> dissolves;
    if (!limit.phase.isEmpty()) {
        if (!context.missing.isEmpty() || !context.report)
            return {notComputed(blankLimit(limit, Side::floor, what),
                                context.report ? listed(context.missing) + " missing" : context.report_missing)};
        dissolves = dissolvedLimit(limit, context);
        if (!dissolves.front().temperature_C) return dissolves;
        upper_C = dissolves.front().temperature_C;
    }
    if (!limit.low || !upper_C) return {notComputed(blankLimit(limit, Side::floor, what), "its ends are not given")};
    const bool above = context.reference_C >= (*limit.low + *upper_C) / 2;
    if (above && !dissolves.empty()) return dissolves;
    return {above ? setAt(limit, Side::floor, what, *upper_C) : setAt(limit, Side::ceiling, what, *limit.low)};
}

/// Seconds bound no temperature; see cooling.h.
std::vector<Limit> noTemperature(const CycleLimit&, const LimitContext&) { return {}; }

struct Kind {
    QStringView word;
    Side side;  // the side a limit of this kind is reported on when nothing can be computed
    bool computed;
    std::vector<Limit> (*make)(const CycleLimit&, const LimitContext&);
};
constexpr Kind kKinds[] = {
    {u"dissolved", Side::floor, true, dissolvedLimit},
    {u"not_yet_formed", Side::ceiling, true, notYetFormedLimit},
    {u"below_solidus", Side::ceiling, true, solidusLimit},
    {u"below_segregated_solidus", Side::ceiling, true, segregatedSolidusLimit},
    {u"below_stepped_solidus", Side::ceiling, true, steppedSolidusLimit},
    {u"above_ae1", Side::floor, true, firstAusteniteLimit},
    {u"below_ae1", Side::ceiling, true, firstAusteniteLimit},
    {u"above_ae3", Side::floor, true, lastFerriteLimit},
    {u"fraction", Side::floor, true, fractionLimit},
    {u"matrix_content", Side::floor, true, matrixContentLimit},
    {u"grain_pinned", Side::ceiling, true, grainPinnedLimit},
    {u"retained_austenite", Side::ceiling, true, retainedAusteniteLimit},
    {u"martensite_start", Side::ceiling, true, martensiteStartLimit},
    {u"quenched_hardness", Side::floor, true, quenchedHardnessLimit},
    {u"tempered_hardness", Side::floor, false, temperedHardnessLimit},
    {u"specification_if", Side::ceiling, false, byConditionalSpecification},
    {u"avoid", Side::floor, false, avoidLimit},
    {u"quench_delay", Side::ceiling, false, noTemperature},
    {u"specification", Side::floor, false, bySpecification},
    {u"furnace", Side::floor, false, byFurnace},
};

/// The limit in words before anything is computed: "sigma dissolved", "ferrite between 40 and 60 vol%".
QString plainCause(const CycleLimit& limit) {
    if (limit.kind == "dissolved") return limit.phase + " dissolved";
    if (limit.kind == "not_yet_formed") return limit.phase + " not yet formed";
    if (limit.kind == "below_solidus") return "solidus";
    if (limit.kind == "below_segregated_solidus") return "segregated solidus";
    if (limit.kind == "below_stepped_solidus") return "first melting after the lower step";
    if (limit.kind == "grain_pinned") return "grain held by " + limit.phase;
    if (limit.kind == "above_ae3") return "Ae3";
    if (limit.kind == "above_ae1" || limit.kind == "below_ae1") return "Ae1";
    const QString what = limit.kind == "fraction"         ? limit.phase
                         : limit.kind == "matrix_content" ? limit.phase + " in the matrix"
                                                          : QString(limit.kind).replace('_', ' ');
    const QString unit = limit.kind == "matrix_content"      ? "wt%"
                         : limit.kind == "martensite_start"  ? "°C"
                         : limit.kind == "quenched_hardness" ? "HRC"
                                                             : "vol%";
    const auto amount = [](double value) { return number(value, value == std::round(value) ? 0 : 2); };
    if (limit.low && limit.high)
        return what + " between " + amount(*limit.low) + " and " + amount(*limit.high) + QChar(0x2009) + unit;
    if (limit.low) return what + " at least " + amount(*limit.low) + QChar(0x2009) + unit;
    if (limit.high) return what + " at most " + amount(*limit.high) + QChar(0x2009) + unit;
    return what;
}

}  // namespace

QStringList labelsOf(const QString& phase) {
    // Carbides of the trade, as the labels of the data sets have them. Nitrides and carbonitrides of the stabilisers
    // (MX) count as carbide: a point count under the microscope cannot tell them apart.
    if (phase == "carbide")
        return {"M23C6", "M7C3", "M6C", "M2C", "MX", "cementite", "M3C2", "M5C2", "xi_carbide", "MoC", "hexagonal_MC"};
    if (phase == "ferrite" || phase == "delta ferrite") return {"ferrite", "delta ferrite"};
    return {phase};
}

std::vector<Limit> evaluate(const CycleLimit& limit, const LimitContext& context) {
    const auto kind =
        std::find_if(std::begin(kKinds), std::end(kKinds), [&](const Kind& one) { return limit.kind == one.word; });
    if (kind == std::end(kKinds)) {
        const QString why = "this kind of limit is not judged: \"" + limit.kind + "\"";
        return {notComputed(blankLimit(limit, Side::floor, plainCause(limit)), why)};
    }
    if (kind->computed) {
        const Limit bare = blankLimit(limit, kind->side, plainCause(limit));
        if (!context.missing.isEmpty()) return {notComputed(bare, listed(context.missing) + " missing")};
        if (!context.report) return {notComputed(bare, context.report_missing)};
    }
    return kind->make(limit, context);
}

}  // namespace soak
