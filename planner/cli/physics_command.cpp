// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "base/units.h"
#include "chemistry_list.h"
#include "commands.h"
#include "data_choice.h"
#include "output.h"

namespace soak::cli {
namespace {

Result<Alloy> alloyFrom(const Arguments& arguments) {
    const auto text = arguments.required("wt");
    if (!text) return text.error();
    const auto typed = readChemistry(text.value());
    if (!typed) return typed.error();
    auto data = chooseDataSet(arguments, typed.value().balance);
    if (!data) return std::move(data).error();
    const auto chemistry = plainChemistry(typed.value(), QString::fromStdString(facts(*data.value()).balance));
    if (!chemistry) return chemistry.error();
    return Alloy::make(data.value(), chemistry.value(), phaseChoice(arguments));
}

}  // namespace

Result<int> stateCommand(const QStringList& given) {
    const auto arguments = readArguments(given, {"wt", "at", "with", "without", "set"}, {"json"});
    if (!arguments) return arguments.error();
    const auto at_C = temperatureIn(arguments.value(), "at");
    if (!at_C) return at_C.error();
    auto alloy = alloyFrom(arguments.value());
    if (!alloy) return std::move(alloy).error();
    const auto state = alloy.value().stateAt(kelvin(at_C.value()));
    if (!state) return state.error();
    arguments.value().has("json") ? print(asJson(state.value())) : print(asText(state.value()));
    return 0;
}

Result<int> sweepCommand(const QStringList& given) {
    const auto arguments = readArguments(given, {"wt", "from", "to", "with", "without", "set"}, {"json"});
    if (!arguments) return arguments.error();
    const auto from_C = temperatureIn(arguments.value(), "from"), to_C = temperatureIn(arguments.value(), "to");
    if (!from_C) return from_C.error();
    if (!to_C) return to_C.error();
    if (from_C.value() >= to_C.value()) return Error{Fault::input, "--from must be below --to", {}, {}};
    auto alloy = alloyFrom(arguments.value());
    if (!alloy) return std::move(alloy).error();
    const auto sweep = alloy.value().sweep(kelvin(from_C.value()), kelvin(to_C.value()));
    if (!sweep) return sweep.error();

    if (!arguments.value().has("json")) {
        for (const Event& event : sweep.value().events) print(asText(event));
        return 0;
    }
    Json json{{"states", Json::array()}, {"events", Json::array()}};
    for (const State& state : sweep.value().states) json["states"].push_back(asJson(state));
    for (const Event& event : sweep.value().events) json["events"].push_back(asJson(event));
    print(json);
    return 0;
}

}  // namespace soak::cli
