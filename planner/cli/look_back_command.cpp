// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <cmath>

#include "arguments.h"
#include "commands.h"
#include "db/store.h"
#include "json_parts.h"
#include "planner/core/look_back.h"
#include "planner/core/units_text.h"

namespace soak::cli {
namespace {

QString asText(const std::vector<AffectedLoad>& loads, const FurnaceFinding& finding) {
    QString text =
        QString(
            "%1 loads in %2 since %3, true minus read %4 (planned with %5); a drift grows with time: each "
            "is taken to have had all of it\n")
            .arg(loads.size())
            .arg(finding.furnace, finding.since.isValid() ? finding.since.toString(Qt::ISODate) : "the first",
                 withUnit(finding.true_minus_read_K, "K", 1), withUnit(finding.known_K, "K", 1));
    for (const AffectedLoad& load : loads)
        text += QString("  %1 %2  %3, %4, released by %5\n      %6\n")
                    .arg(load.date.toString(Qt::ISODate), load.sheet, load.heats, load.cycle, load.issued_by,
                         load.sentence);
    return text;
}

Json asJson(const std::vector<AffectedLoad>& loads) {
    Json array = Json::array();
    for (const AffectedLoad& load : loads)
        array.push_back({{"sheet", plain(load.sheet)},
                         {"heats", plain(load.heats)},
                         {"cycle", plain(load.cycle)},
                         {"issued_by", plain(load.issued_by)},
                         {"date", plain(load.date.toString(Qt::ISODate))},
                         {"floor_margin_K", optional(load.floor_margin_K)},
                         {"ceiling_margin_K", optional(load.ceiling_margin_K)},
                         {"ceiling_side", load.ceiling_side},
                         {"lost", load.lost},
                         {"sentence", plain(load.sentence)}});
    return {{"loads", array}};
}

}  // namespace

Result<int> lookBackCommand(const QStringList& given) {
    const auto read = readArguments(given, {"furnace", "error", "known", "since", "until", "store"}, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto furnace = arguments.required("furnace"), path = arguments.required("store");
    if (!furnace) return furnace.error();
    if (!path) return path.error();
    const auto error_K = arguments.number("error");
    if (!error_K) return error_K.error();
    const auto known_K = arguments.numberIfGiven("known");
    if (!known_K) return known_K.error();
    const auto since = arguments.dateIfGiven("since"), until = arguments.dateIfGiven("until");
    if (!since) return since.error();
    if (!until) return until.error();
    auto store = Store::open(path.value(), Access::read);
    if (!store) return std::move(store).error();
    const auto record = store.value().furnace(furnace.value());  // says which furnaces there are when the name is wrong
    if (!record) return record.error();
    const auto sheets = store.value().sheets();
    if (!sheets) return sheets.error();
    const FurnaceFinding finding{furnace.value(), error_K.value(), known_K.value().value_or(record.value().offset_K),
                                 since.value(), until.value()};
    const auto loads = lookBack(sheets.value(), finding);
    if (!loads) return loads.error();
    arguments.has("json") ? print(asJson(loads.value())) : print(asText(loads.value(), finding));
    const bool lost =
        std::any_of(loads.value().begin(), loads.value().end(), [](const AffectedLoad& load) { return load.lost; });
    return lost ? kNeedsDecision : 0;
}

}  // namespace soak::cli
