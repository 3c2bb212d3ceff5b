// SPDX-License-Identifier: GPL-3.0-or-later
#include <cmath>

#include "arguments.h"
#include "commands.h"
#include "json_parts.h"
#include "planner/core/mixed_load.h"
#include "planner/core/shop_floor.h"
#include "planner/core/units_text.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

/// "F2407/1:SA-6A", or "F2407/1" where the grade has one standing cycle.
Result<LoadItem> itemFrom(const QString& entry, const Store& store, const Shelf& shelf, const QString& furnace,
                          ReportCache& cache) {
    const QString heat = entry.section(':', 0, 0).trimmed();
    QString cycle = entry.section(':', 1).trimmed();
    if (cycle.isEmpty()) {
        const auto found = store.heat(heat);
        if (!found) return found.error();
        const auto cycles = store.cyclesFor(found.value().grade);
        if (!cycles) return cycles.error();
        if (cycles.value().size() != 1)
            return refuse("--heats: name the cycle of " + heat + " as " + heat + ":CYCLE; its grade has " +
                          QString::number(cycles.value().size()) + " standing cycles");
        cycle = cycles.value().front().name;
    }
    auto job = jobFrom(store, heat, cycle, furnace);
    if (!job) return std::move(job).error();
    job.value().keep_sweep = false;
    auto answer = judge(job.value(), shelf, cache);
    if (!answer) return std::move(answer).error().within("heat " + heat.toStdString());
    return LoadItem{heat, cycle, job.value().cycle.quenches.join("/"), std::move(answer).value()};
}

QString groupText(const LoadGroup& group, const std::vector<LoadItem>& items, const Furnace& furnace, size_t index) {
    QStringList heats;
    for (const int item : group.items) {
        const LoadItem& one = items[static_cast<size_t>(item)];
        heats << one.heat + " (" + one.cycle + ")";
    }
    QString text = QString("Charge %1: %2\n  setpoint %3, smallest margin %4%5\n")
                       .arg(index + 1)
                       .arg(heats.join(", "), temperatureText(group.setpoint_C, furnace.controller_fahrenheit),
                            withUnit(std::floor(group.margin_K), "K"), group.tight ? ", tight" : "");
    text += QString("  from %1 (%2) to %3 (%4)\n")
                .arg(temperatureText(group.low_C), group.lower_by, temperatureText(group.high_C), group.upper_by);
    if (group.soak_min)
        text += "  soak " + withUnit(std::ceil(*group.soak_min), "min") + ", the longest of the rules\n";
    return text;
}

QString asText(const LoadPlan& plan, const std::vector<LoadItem>& items, const Furnace& furnace) {
    QString text;
    for (size_t i = 0; i < plan.groups.size(); ++i) text += groupText(plan.groups[i], items, furnace, i);
    for (const QString& why : plan.why_apart) text += "Apart because " + why + "\n";
    for (const auto& [item, why] : plan.left_out)
        text += "Left out: " + items[static_cast<size_t>(item)].heat + ": " + why + "\n";
    return text;
}

Json asJson(const LoadPlan& plan, const std::vector<LoadItem>& items) {
    Json groups = Json::array(), left_out = Json::array();
    for (const LoadGroup& group : plan.groups) {
        Json heats = Json::array();
        for (const int item : group.items)
            heats.push_back({{"heat", plain(items[static_cast<size_t>(item)].heat)},
                             {"cycle", plain(items[static_cast<size_t>(item)].cycle)}});
        groups.push_back({{"heats", heats},
                          {"setpoint_C", group.setpoint_C},
                          {"low_C", group.low_C},
                          {"high_C", group.high_C},
                          {"margin_K", group.margin_K},
                          {"tight", group.tight},
                          {"lower_by", plain(group.lower_by)},
                          {"upper_by", plain(group.upper_by)},
                          {"soak_min", optional(group.soak_min)}});
    }
    for (const auto& [item, why] : plan.left_out)
        left_out.push_back({{"heat", plain(items[static_cast<size_t>(item)].heat)}, {"reason", plain(why)}});
    return {{"groups", groups}, {"left_out", left_out}, {"why_apart", list(plan.why_apart)}};
}

}  // namespace

Result<int> loadCommand(const QStringList& given) {
    const auto read = readArguments(given, {"heats", "furnace", "store", "date", "band-rule"}, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto heats = arguments.required("heats"), path = arguments.required("store"),
               furnace_name = arguments.required("furnace");
    for (const auto* needed : {&heats, &path, &furnace_name})
        if (!*needed) return needed->error();
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();
    auto store = Store::open(path.value(), Access::read);
    if (!store) return std::move(store).error();
    auto shelf = shelfFrom(store.value(), date.value());
    if (!shelf) return std::move(shelf).error();
    if (!arguments.text("band-rule").isEmpty()) shelf.value().rules.band_rule = arguments.text("band-rule");
    const auto furnace = store.value().furnace(furnace_name.value());
    if (!furnace) return furnace.error();
    ReportCache cache;
    std::vector<LoadItem> items;
    for (const QString& entry : listIn(heats.value())) {
        auto item = itemFrom(entry, store.value(), shelf.value(), furnace_name.value(), cache);
        if (!item) return std::move(item).error();
        items.push_back(std::move(item).value());
    }
    const LoadPlan plan = planLoads(items, furnace.value(), shelf.value().rules);
    arguments.has("json") ? print(asJson(plan, items)) : print(asText(plan, items, furnace.value()));
    return plan.left_out.empty() ? 0 : kNeedsDecision;
}

}  // namespace soak::cli
