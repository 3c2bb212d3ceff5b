// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/window.h"

namespace soak {

/// One value in time: the margin of a heat, or its content of one element.
struct TrendPoint {
    QDate date;
    QString heat;
    double value = 0;
};

/// Values of one supplier and grade with their control limits.
struct TrendChart {
    QString supplier, grade, what, unit;  ///< what: "margin", "Cu"; unit: "K", "wt%"
    std::vector<TrendPoint> points;       ///< in the order of their dates
    double mean = 0, lower = 0, upper = 0;
    std::vector<int> alarms;  ///< points outside the limits, or that complete a run of eight on one side
    QString sentence;         ///< what the alarms say; empty: nothing
};

/// Individuals chart: mean +- 2.66 mean moving range, from the first `base` points (all when there are fewer); alarms
/// are points beyond the limits and runs of eight on one side of the mean.
/// W.A. Shewhart, Economic Control of Quality of Manufactured Product, 1931; D.C. Montgomery, Introduction to
/// Statistical Quality Control (2.66 = 3/1.128). Fewer than `kFewestPoints` points give a mean and no limits.
inline constexpr int kFewestPoints = 6;
TrendChart makeChart(QString supplier, QString grade, QString what, QString unit, std::vector<TrendPoint> points,
                     int base = 20);

}  // namespace soak
