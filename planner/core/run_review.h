// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDateTime>

#include "planner/core/planner.h"

namespace soak {

/// One reading of one sensor, as recorded.
struct Reading {
    QDateTime time;
    QString sensor;
    double read_C = 0;
};

/// What happened, as the chart and the crew have it.
struct RunRecord {
    std::vector<Reading> readings;
    QString control_sensor = "CT";  ///< the furnace's own
    QString load_sensor = "LT1";    ///< the one by which the soak counts
    std::optional<QDateTime> soak_start_written, soak_end, door_open, under_quench;
};

/// The run against the window.
struct RunReview {
    std::optional<QDateTime> soak_start;  ///< when the load sensor reached the band, for good
    std::optional<double> soak_min, written_min, asked_min;
    std::optional<double> coldest_C, hottest_C;              ///< metal during the soak; hottest: of the whole run
    std::optional<double> floor_margin_K, ceiling_margin_K;  ///< against the binding limits; negative: beyond
    QString floor_cause, ceiling_cause;
    std::optional<double> quench_s, quench_allowed_s;
    QStringList findings;  ///< what is not as planned, worst first
    QStringList salvage;   ///< what may be done; first "stop, tag, call" when anything is wrong
    bool fits = false;     ///< nothing found
    QString sentence;
};

/// A clock time of a record; without a date it takes `day`. Times are compared as written: no time zone is applied.
Result<QDateTime> clockTime(const QString& text, const QDate& day);

/// Reads a log: columns time, sensor, read_C (header row; time as 2025-04-02T10:05 or 10:05, which takes `day`).
/// Fault::input names the line.
Result<std::vector<Reading>> readLog(const QString& path, const QDate& day);

/// `answer` and `job` as planned. Readings are corrected by the furnace's offset; the metal's spread around the control
/// reading is that of the band. Fault::input when the record has no reading of the load sensor or of the control
/// sensor.
Result<RunReview> reviewRun(const WindowAnswer& answer, const Job& job, const RunRecord& record, const Shelf& shelf);

}  // namespace soak
