// SPDX-License-Identifier: GPL-3.0-or-later
// Limits set by the hardness that is wanted after tempering or ageing.
#include <cmath>

#include "planner/core/limit_making.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

// Scatter of tempered hardness between heats of a grade, one standard deviation: 2 HRC, 20 HB. Common practice.
double scatterIn(const QString& unit) { return unit == "HRC" ? 2 : 20; }
// Above any Rockwell C number and below any Brinell number that a hardened steel is tempered to.
QString unitOf(double hardness) { return hardness <= 70 ? "HRC" : "HB"; }

Limit atHardness(const CycleLimit& limit, Side side, double hardness, const TemperingCurve& curve, double hours) {
    const bool floor = side == Side::floor;
    Limit made = blankLimit(
        limit, side,
        QString("hardness %1 %2 after tempering").arg(floor ? "at most" : "at least", withUnit(hardness, curve.unit)));
    const auto at_C = curve.temperatureFor(hardness, hours);
    const auto& first = curve.points.front();
    const auto& last = curve.points.back();
    if (!at_C) {
        const bool always = floor ? hardness >= first.hardness : hardness <= last.hardness;
        const QString range = QString("the published curve runs from %1 to %2")
                                  .arg(withUnit(first.hardness, curve.unit), withUnit(last.hardness, curve.unit));
        return always ? notBinding(made, range) : notComputed(made, range + ": it does not reach this hardness");
    }
    made.temperature_C = *at_C + (floor ? limit.margin_K : -limit.margin_K);
    const double slope = std::abs(curve.slopeAt(*at_C, hours));
    made.model_K = slope > 0 ? scatterIn(curve.unit) / slope : 0;
    made.uncertainty_K = made.model_K;
    made.remark = QString(
                      "rule of thumb: published curve of %1 (%2), carried to %3 by the Hollomon-Jaffe parameter; "
                      "for this grade, not for this heat")
                      .arg(curve.grade_key, curve.source, withUnit(hours, "h", 1));
    return made;
}

}  // namespace

std::vector<Limit> temperedHardnessLimit(const CycleLimit& limit, const LimitContext& context) {
    const Limit bare = blankLimit(limit, Side::floor, "hardness after tempering");
    const auto wanted = limit.low ? limit.low : limit.high;
    if (!wanted) return {notComputed(bare, "the limit names no hardness")};
    const QStringList names = limit.phase.isEmpty() ? context.grade_names : QStringList{limit.phase};
    const TemperingCurve* curve = curveFor(context.book->tempering, names, unitOf(*wanted));
    if (!curve) return {notComputed(bare, "no published tempering curve in " + unitOf(*wanted) + " for this grade")};
    const double hours = context.soak_min.value_or(60) / 60;
    std::vector<Limit> made;
    if (limit.high) made.push_back(atHardness(limit, Side::floor, *limit.high, *curve, hours));
    if (limit.low) made.push_back(atHardness(limit, Side::ceiling, *limit.low, *curve, hours));
    return made;
}

}  // namespace soak
