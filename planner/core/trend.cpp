// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/trend.h"

#include <algorithm>
#include <cmath>

#include "planner/core/units_text.h"

namespace soak {
namespace {

constexpr double kMovingRangeFactor = 2.66;  // 3 / d2, d2 = 1.128 for pairs
constexpr int kRun = 8;

/// The last of eight neighbours on one side of the mean.
std::vector<int> runEnds(const std::vector<TrendPoint>& points, double mean) {
    std::vector<int> ends;
    int length = 0;
    for (size_t i = 0; i < points.size(); ++i) {
        const bool above = points[i].value > mean;
        const bool same = i > 0 && above == (points[i - 1].value > mean) && points[i].value != mean;
        length = same ? length + 1 : 1;
        if (length >= kRun) ends.push_back(static_cast<int>(i));
    }
    return ends;
}

QString valueText(const TrendChart& chart, double value) {
    return withUnit(value, chart.unit, chart.unit == "K" ? 0 : 3);
}

}  // namespace

TrendChart makeChart(QString supplier, QString grade, QString what, QString unit, std::vector<TrendPoint> points,
                     int base) {
    TrendChart chart{
        std::move(supplier), std::move(grade), std::move(what), std::move(unit), std::move(points), 0, 0, 0, {}, {}};
    std::stable_sort(chart.points.begin(), chart.points.end(),
                     [](const TrendPoint& a, const TrendPoint& b) { return a.date < b.date; });
    const size_t used = std::min(chart.points.size(), static_cast<size_t>(std::max(base, kFewestPoints)));
    if (used == 0) return chart;
    double sum = 0, ranges = 0;
    for (size_t i = 0; i < used; ++i) {
        sum += chart.points[i].value;
        if (i > 0) ranges += std::abs(chart.points[i].value - chart.points[i - 1].value);
    }
    chart.mean = chart.lower = chart.upper = sum / double(used);
    if (static_cast<int>(chart.points.size()) < kFewestPoints) return chart;
    const double half = kMovingRangeFactor * ranges / double(used - 1);
    chart.lower = chart.mean - half;
    chart.upper = chart.mean + half;
    for (size_t i = 0; i < chart.points.size(); ++i)
        if (chart.points[i].value < chart.lower || chart.points[i].value > chart.upper)
            chart.alarms.push_back(static_cast<int>(i));
    const bool beyond = !chart.alarms.empty();
    const auto runs = runEnds(chart.points, chart.mean);
    chart.alarms.insert(chart.alarms.end(), runs.begin(), runs.end());
    std::sort(chart.alarms.begin(), chart.alarms.end());
    chart.alarms.erase(std::unique(chart.alarms.begin(), chart.alarms.end()), chart.alarms.end());
    if (chart.alarms.empty()) return chart;
    const TrendPoint& first = chart.points[static_cast<size_t>(chart.alarms.front())];
    chart.sentence =
        QString("%1 of %2 from %3 %4: first at %5, %6; usual %7 to %8")
            .arg(chart.what, chart.grade, chart.supplier, beyond ? "left its usual range" : "has drifted to one side",
                 first.heat, valueText(chart, first.value), valueText(chart, chart.lower),
                 valueText(chart, chart.upper));
    return chart;
}

}  // namespace soak
