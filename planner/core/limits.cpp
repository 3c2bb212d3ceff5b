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
    {u"above_ae1", Side::floor, true, firstAusteniteLimit},
    {u"below_ae1", Side::ceiling, true, firstAusteniteLimit},
    {u"above_ae3", Side::floor, true, lastFerriteLimit},
    {u"fraction", Side::floor, true, fractionLimit},
    {u"matrix_content", Side::floor, true, matrixContentLimit},
    {u"retained_austenite", Side::ceiling, true, retainedAusteniteLimit},
    {u"specification", Side::floor, false, bySpecification},
    {u"furnace", Side::floor, false, byFurnace},
};

/// The limit in words before anything is computed: "sigma dissolved", "ferrite between 40 and 60 vol%".
QString plainCause(const CycleLimit& limit) {
    if (limit.kind == "dissolved") return limit.phase + " dissolved";
    if (limit.kind == "not_yet_formed") return limit.phase + " not yet formed";
    if (limit.kind == "below_solidus") return "solidus";
    if (limit.kind == "above_ae3") return "Ae3";
    if (limit.kind == "above_ae1" || limit.kind == "below_ae1") return "Ae1";
    const QString what = limit.kind == "fraction"         ? limit.phase
                         : limit.kind == "matrix_content" ? limit.phase + " in the matrix"
                                                          : QString(limit.kind).replace('_', ' ');
    const QString unit = limit.kind == "matrix_content" ? "wt%" : "vol%";
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
