// SPDX-License-Identifier: GPL-3.0-or-later
#include <cmath>

#include "arguments.h"
#include "commands.h"
#include "json_parts.h"
#include "planner/core/run_review.h"
#include "planner/core/shop_floor.h"
#include "planner/core/units_text.h"

namespace soak::cli {
namespace {

Result<Done> readTime(const Arguments& arguments, const QString& name, const QDate& day,
                      std::optional<QDateTime>& into) {
    const QString text = arguments.text(name);
    if (text.isEmpty()) return Done{};
    const auto time = clockTime(text, day);
    if (!time) return Error(time.error()).within("--" + name.toStdString());
    into = time.value();
    return Done{};
}

Json asJson(const RunReview& review) {
    const auto time = [](const std::optional<QDateTime>& at) {
        return at ? Json(plain(at->toString("yyyy-MM-ddThh:mm:ss"))) : Json(nullptr);
    };
    return {{"fits", review.fits},
            {"soak_start", time(review.soak_start)},
            {"soak_min", optional(review.soak_min)},
            {"written_min", optional(review.written_min)},
            {"asked_min", optional(review.asked_min)},
            {"coldest_C", optional(review.coldest_C)},
            {"hottest_C", optional(review.hottest_C)},
            {"floor_margin_K", optional(review.floor_margin_K)},
            {"floor_cause", plain(review.floor_cause)},
            {"ceiling_margin_K", optional(review.ceiling_margin_K)},
            {"ceiling_cause", plain(review.ceiling_cause)},
            {"quench_s", optional(review.quench_s)},
            {"quench_allowed_s", optional(review.quench_allowed_s)},
            {"findings", list(review.findings)},
            {"salvage", list(review.salvage)},
            {"sentence", plain(review.sentence)}};
}

QString asText(const RunReview& review) {
    QString text = review.sentence + "\n";
    const auto line = [&](const char* what, const std::optional<double>& value, const QString& unit, bool up) {
        if (value) text += QString("  %1 %2\n").arg(what, withUnit(up ? std::ceil(*value) : std::floor(*value), unit));
    };
    line("real soak", review.soak_min, "min", false);
    line("soak as written", review.written_min, "min", false);
    line("coldest metal in the soak", review.coldest_C, "°C", false);
    line("hottest metal of the run", review.hottest_C, "°C", true);
    line("margin to the floor", review.floor_margin_K, "K", false);
    line("margin to the ceiling", review.ceiling_margin_K, "K", false);
    line("door to fully under", review.quench_s, "s", true);
    if (!review.salvage.isEmpty()) text += "What may be done:\n  " + review.salvage.join("\n  ") + "\n";
    return text;
}

}  // namespace

Result<int> runCommand(const QStringList& given) {
    const auto read = readArguments(given,
                                    {"heat", "cycle", "furnace", "store", "log", "soak-start", "soak-end", "door",
                                     "under", "load-sensor", "control-sensor", "setpoint", "date", "band-rule"},
                                    {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto heat = arguments.required("heat"), cycle = arguments.required("cycle"),
               furnace = arguments.required("furnace"), path = arguments.required("store"),
               log = arguments.required("log");
    for (const auto* needed : {&heat, &cycle, &furnace, &path, &log})
        if (!*needed) return needed->error();
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();
    auto store = Store::open(path.value(), Access::read);
    if (!store) return std::move(store).error();
    auto shelf = shelfFrom(store.value(), date.value());
    if (!shelf) return std::move(shelf).error();
    if (!arguments.text("band-rule").isEmpty()) shelf.value().rules.band_rule = arguments.text("band-rule");
    auto job = jobFrom(store.value(), heat.value(), cycle.value(), furnace.value());
    if (!job) return std::move(job).error();
    const auto setpoint_C = arguments.numberIfGiven("setpoint");
    if (!setpoint_C) return setpoint_C.error();
    job.value().setpoint_C = setpoint_C.value();

    const QDate day = shelf.value().rules.today;
    RunRecord record;
    auto readings = readLog(log.value(), day);
    if (!readings) return std::move(readings).error();
    record.readings = std::move(readings).value();
    if (!arguments.text("load-sensor").isEmpty()) record.load_sensor = arguments.text("load-sensor");
    if (!arguments.text("control-sensor").isEmpty()) record.control_sensor = arguments.text("control-sensor");
    for (const auto& done :
         {readTime(arguments, "soak-start", day, record.soak_start_written),
          readTime(arguments, "soak-end", day, record.soak_end), readTime(arguments, "door", day, record.door_open),
          readTime(arguments, "under", day, record.under_quench)})
        if (!done) return done.error();
    ReportCache cache;
    const auto answer = judge(job.value(), shelf.value(), cache);
    if (!answer) return answer.error();
    const auto review = reviewRun(answer.value(), job.value(), record, shelf.value());
    if (!review) return review.error();
    arguments.has("json") ? print(asJson(review.value())) : print(asText(review.value()));
    return review.value().fits ? 0 : kNeedsDecision;
}

}  // namespace soak::cli
