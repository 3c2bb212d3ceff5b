// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "commands.h"
#include "output.h"
#include "planner/core/shop_floor.h"

namespace soak::cli {

Result<int> triageCommand(const QStringList& given) {
    const auto read = readArguments(given, {"csv", "store", "furnace", "date", "threads", "band-rule"}, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto csv = arguments.required("csv"), path = arguments.required("store");
    if (!csv) return csv.error();
    if (!path) return path.error();
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();
    const auto threads = arguments.numberIfGiven("threads");
    if (!threads) return threads.error();

    auto certificate = readCertificate(csv.value());
    if (!certificate) return std::move(certificate).error();
    auto store = Store::open(path.value(), Access::read);
    if (!store) return std::move(store).error();
    auto shelf = shelfFrom(store.value(), date.value());
    if (!shelf) return std::move(shelf).error();
    if (!arguments.text("band-rule").isEmpty()) shelf.value().rules.band_rule = arguments.text("band-rule");
    auto question = triageFrom(store.value(), certificate.value().delivery(), arguments.text("furnace"));
    if (!question) return std::move(question).error();
    question.value().threads = static_cast<int>(threads.value().value_or(0));

    const auto rows = triage(question.value(), shelf.value());
    if (arguments.has("json")) {
        Json json{{"heats", Json::array()}};
        for (const TriageRow& row : rows) json["heats"].push_back(asJson(row));
        print(json);
    } else {
        print(asText(rows));
    }
    return needsDecision(rows) ? kNeedsDecision : 0;
}

}  // namespace soak::cli
