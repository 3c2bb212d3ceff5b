// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/run_review.h"

#include <algorithm>
#include <cmath>

#include "db/csv.h"
#include "planner/core/units_text.h"
#include "planner/core/verdict.h"

namespace soak {
namespace {

constexpr double kImpossible_C = 1700;  // no steel furnace reads this: another unit, a broken sensor

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

double minutesBetween(const QDateTime& from, const QDateTime& to) { return double(from.secsTo(to)) / 60; }

QString clock(const QDateTime& time) { return time.toString("hh:mm"); }

std::vector<Reading> of(const std::vector<Reading>& readings, const QString& sensor) {
    std::vector<Reading> found;
    for (const Reading& one : readings)
        if (one.sensor == sensor) found.push_back(one);
    std::sort(found.begin(), found.end(), [](const Reading& a, const Reading& b) { return a.time < b.time; });
    return found;
}

class Review {
public:
    Review(const WindowAnswer& answer, const Job& job, const RunRecord& record, const Shelf& shelf)
        : answer_(answer), job_(job), record_(record), shelf_(shelf) {}

    Result<RunReview> run() {
        load_ = of(record_.readings, record_.load_sensor);
        control_ = of(record_.readings, record_.control_sensor);
        if (load_.empty())
            return refuse("the record has no reading of the load sensor \"" + record_.load_sensor + "\"");
        if (control_.empty())
            return refuse("the record has no reading of the control sensor \"" + record_.control_sensor + "\"");
        plausible();
        soak();
        metal();
        quench();
        conclude();
        return std::move(review_);
    }

private:
    double offset() const { return job_.furnace.offset_K; }

    /// Thermocouple or lead reversed, another unit: said before anything is made of the numbers.
    void plausible() {
        for (const Reading& one : record_.readings)
            if (one.read_C > kImpossible_C || one.read_C < -50) {
                find("hot",
                     QString("%1 read %2 at %3: no furnace of steel reads that; sensor, lead or unit is wrong")
                         .arg(one.sensor, celsiusText(one.read_C), clock(one.time)),
                     false);
                return;
            }
        // At temperature both sensors sit in the same chamber.
        const double apart = std::abs(load_.back().read_C - control_.back().read_C);
        if (apart > 50)
            find("cold",
                 QString("load sensor and control differ by %1 at the end: have both checked")
                     .arg(withUnit(std::round(apart), "K")),
                 false);
    }

    QDateTime soakEnd() const {
        if (record_.soak_end) return *record_.soak_end;
        if (record_.door_open) return *record_.door_open;
        return load_.back().time;
    }

    void soak() {
        const double start_C = std::max(answer_.low_C.value_or(answer_.band.low_C), answer_.band.low_C);
        const QDateTime end = soakEnd();
        for (const Reading& one : load_) {
            if (one.time > end) break;
            const bool there = one.read_C + offset() >= start_C;
            if (there && !review_.soak_start) review_.soak_start = one.time;
            if (!there && review_.soak_start) {
                find("short",
                     QString("the load fell below %1 at %2: the soak counts anew")
                         .arg(celsiusText(std::ceil(start_C)), clock(one.time)),
                     false);
                review_.soak_start.reset();
            }
        }
        review_.asked_min = answer_.soak.rule_min;
        if (record_.soak_start_written) review_.written_min = minutesBetween(*record_.soak_start_written, end);
        if (!review_.soak_start) {
            find("cold", QString("the load sensor never reached %1").arg(celsiusText(std::ceil(start_C))), true);
            return;
        }
        review_.soak_min = minutesBetween(*review_.soak_start, end);
        if (record_.soak_start_written && *record_.soak_start_written < *review_.soak_start)
            find(
                "short",
                QString("soak start written %1, the load reached temperature at %2: %3 too early")
                    .arg(clock(*record_.soak_start_written), clock(*review_.soak_start),
                         withUnit(std::round(minutesBetween(*record_.soak_start_written, *review_.soak_start)), "min")),
                false);
        if (review_.asked_min && *review_.soak_min < *review_.asked_min - 0.5)
            find("short",
                 QString("real soak %1, %2 short of the %3 asked for")
                     .arg(withUnit(std::floor(*review_.soak_min), "min"),
                          withUnit(std::ceil(*review_.asked_min - *review_.soak_min), "min"),
                          withUnit(std::ceil(*review_.asked_min), "min")),
                 true);
    }

    void metal() {
        const double below_K = answer_.band.low_C - answer_.band.setpoint_C;
        const double above_K = answer_.band.high_C - answer_.band.setpoint_C;
        for (const Reading& one : control_)  // band = setpoint + offset + spread, so the offset is in both already
            review_.hottest_C = std::max(review_.hottest_C.value_or(-1e9), one.read_C + above_K);
        for (const Reading& one : load_)
            review_.hottest_C = std::max(review_.hottest_C.value_or(-1e9), one.read_C + offset());
        if (review_.soak_start) {
            for (const Reading& one : control_)
                if (one.time >= *review_.soak_start && one.time <= soakEnd())
                    review_.coldest_C = std::min(review_.coldest_C.value_or(1e9), one.read_C + below_K);
            for (const Reading& one : load_)
                if (one.time >= *review_.soak_start && one.time <= soakEnd())
                    review_.coldest_C = std::min(review_.coldest_C.value_or(1e9), one.read_C + offset());
        }
        for (const Limit& limit : answer_.floors) {
            if (!limit.temperature_C || !review_.coldest_C) continue;
            const double margin = *review_.coldest_C - *limit.temperature_C;
            if (review_.floor_margin_K && *review_.floor_margin_K <= margin) continue;
            review_.floor_margin_K = margin;
            review_.floor_cause = limit.cause;
        }
        bool melted = false;
        for (const Limit& limit : answer_.ceilings) {
            if (!limit.temperature_C || !review_.hottest_C) continue;
            const double margin = *limit.temperature_C - *review_.hottest_C;
            if (limit.kind.endsWith("solidus") && margin + limit.margin_K < 0) melted = true;
            if (review_.ceiling_margin_K && *review_.ceiling_margin_K <= margin) continue;
            review_.ceiling_margin_K = margin;
            review_.ceiling_cause = limit.cause;
        }
        if (review_.floor_margin_K && *review_.floor_margin_K < 0)
            find("cold",
                 QString("the coldest metal, %1, was %2 below %3")
                     .arg(celsiusText(std::floor(*review_.coldest_C)),
                          withUnit(std::ceil(-*review_.floor_margin_K), "K"), review_.floor_cause),
                 true);
        if (review_.ceiling_margin_K && *review_.ceiling_margin_K < 0)
            find(melted                                    ? "melting"
                 : review_.ceiling_cause.startsWith("Ae1") ? "above Ae1"
                                                           : "hot",
                 QString("the hottest metal, %1, was %2 above %3")
                     .arg(celsiusText(std::ceil(*review_.hottest_C)),
                          withUnit(std::ceil(-*review_.ceiling_margin_K), "K"), review_.ceiling_cause),
                 true);
    }

    void quench() {
        review_.quench_allowed_s = answer_.cooling.allowed_s;
        if (!record_.door_open || !record_.under_quench) return;
        review_.quench_s = double(record_.door_open->secsTo(*record_.under_quench));
        if (*review_.quench_s < 0) {
            find("slow quench", "the load is written under the quench before the door opened: a clock is wrong", false);
            return;
        }
        if (review_.quench_allowed_s && *review_.quench_s > *review_.quench_allowed_s)
            find("slow quench",
                 QString("door to fully under took %1, allowed were %2")
                     .arg(withUnit(*review_.quench_s, "s"), withUnit(std::floor(*review_.quench_allowed_s), "s")),
                 true);
    }

    void find(const QString& wrong, const QString& text, bool harms) {
        review_.findings << text;
        if (!harms) return;
        for (const QString& line : salvageFor(shelf_.book.salvage, wrong, answer_.family, answer_.kind))
            if (!review_.salvage.contains(line)) review_.salvage << line;
    }

    void conclude() {
        review_.fits = review_.findings.isEmpty();
        if (review_.fits) {
            review_.sentence =
                QString("The run fits: real soak %1, coldest metal %2, hottest %3.")
                    .arg(withUnit(std::floor(*review_.soak_min), "min"), celsiusText(std::floor(*review_.coldest_C)),
                         celsiusText(std::ceil(*review_.hottest_C)));
            return;
        }
        review_.salvage.prepend("stop, tag, call the metallurgist: a person decides, with name and reason");
        review_.sentence = "The run does not fit: " + review_.findings.join("; ") + ".";
    }

    const WindowAnswer& answer_;
    const Job& job_;
    const RunRecord& record_;
    const Shelf& shelf_;
    std::vector<Reading> load_, control_;
    RunReview review_;
};

/// "2025-04-02T10:05:30", "2025-04-02 10:05" or "10:05".
QDateTime timeIn(const QString& text, const QDate& day) {
    for (const char* form : {"yyyy-MM-dd hh:mm:ss", "yyyy-MM-dd hh:mm"})
        if (const auto full = QDateTime::fromString(QString(text).replace('T', ' '), form); full.isValid())
            return QDateTime(full.date(), full.time(), Qt::UTC);
    for (const char* form : {"hh:mm:ss", "hh:mm"})
        if (const auto time = QTime::fromString(text, form); time.isValid() && day.isValid())
            return QDateTime(day, time, Qt::UTC);
    return {};
}

}  // namespace

Result<QDateTime> clockTime(const QString& text, const QDate& day) {
    const QDateTime time = timeIn(text.trimmed(), day);
    if (time.isValid()) return time;
    return refuse("\"" + text + "\" is no time: write 10:05, 10:05:30 or 2025-04-02T10:05" +
                  (day.isValid() ? "" : "; a time without a date needs --date"));
}

Result<std::vector<Reading>> readLog(const QString& path, const QDate& day) {
    const auto read = CsvTable::read(path, {"time", "sensor", "read_C"});
    if (!read) return read.error();
    const CsvTable& table = read.value();
    std::vector<Reading> readings;
    for (size_t row = 0; row < table.size(); ++row) {
        const auto time = clockTime(table.text(row, "time"), day);
        if (!time) return table.error(row, "time", QString::fromStdString(time.error().message));
        const auto value = table.number(row, "read_C");
        if (!value) return value.error();
        if (!value.value()) return table.error(row, "read_C", "a reading is missing");
        readings.push_back({time.value(), table.text(row, "sensor"), *value.value()});
    }
    return readings;
}

Result<RunReview> reviewRun(const WindowAnswer& answer, const Job& job, const RunRecord& record, const Shelf& shelf) {
    if (answer.band.rule.isEmpty()) return refuse("the plan has no band to compare the run with: " + answer.reason);
    return Review(answer, job, record, shelf).run();
}

}  // namespace soak
