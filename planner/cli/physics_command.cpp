// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "base/units.h"
#include "chemistry_list.h"
#include "commands.h"
#include "data_choice.h"
#include "output.h"

namespace soak::cli {
namespace {

struct Question {
    Alloy alloy;
    DataSetFacts set;
};

Result<Question> questionFrom(const Arguments& arguments) {
    const auto text = arguments.required("wt");
    if (!text) return text.error();
    const auto typed = readChemistry(text.value());
    if (!typed) return typed.error();
    auto data = chooseDataSet(arguments, typed.value().balance);
    if (!data) return std::move(data).error();
    const auto chemistry = plainChemistry(typed.value(), QString::fromStdString(facts(*data.value()).balance));
    if (!chemistry) return chemistry.error();
    auto alloy = Alloy::make(data.value(), chemistry.value(), phaseChoice(arguments));
    if (!alloy) return std::move(alloy).error();
    return Question{std::move(alloy).value(), facts(*data.value())};
}

/// Which data stand behind an answer.
Json setAsJson(Json answer, const DataSetFacts& set) {
    answer["data_set"] = set.name;
    answer["data_version"] = set.version;
    return answer;
}
QString setAsText(const DataSetFacts& set) {
    return QString("Data %1 %2\n").arg(QString::fromStdString(set.name), QString::fromStdString(set.version));
}

}  // namespace

Result<int> stateCommand(const QStringList& given) {
    const auto arguments = readArguments(given, {"wt", "at", "with", "without", "set"}, {"json"});
    if (!arguments) return arguments.error();
    const auto at_C = temperatureIn(arguments.value(), "at");
    if (!at_C) return at_C.error();
    auto question = questionFrom(arguments.value());
    if (!question) return std::move(question).error();
    const auto state = question.value().alloy.stateAt(kelvin(at_C.value()));
    if (!state) return state.error();
    const DataSetFacts& set = question.value().set;
    arguments.value().has("json") ? print(setAsJson(asJson(state.value()), set))
                                  : print(asText(state.value()) + setAsText(set));
    return 0;
}

Result<int> sweepCommand(const QStringList& given) {
    const auto arguments = readArguments(given, {"wt", "from", "to", "with", "without", "set"}, {"json"});
    if (!arguments) return arguments.error();
    const auto from_C = temperatureIn(arguments.value(), "from"), to_C = temperatureIn(arguments.value(), "to");
    if (!from_C) return from_C.error();
    if (!to_C) return to_C.error();
    if (from_C.value() >= to_C.value()) return Error{Fault::input, "--from must be below --to", {}, {}};
    auto question = questionFrom(arguments.value());
    if (!question) return std::move(question).error();
    const auto sweep = question.value().alloy.sweep(kelvin(from_C.value()), kelvin(to_C.value()));
    if (!sweep) return sweep.error();

    if (!arguments.value().has("json")) {
        for (const Event& event : sweep.value().events) print(asText(event));
        print(setAsText(question.value().set));
        return 0;
    }
    Json json{{"states", Json::array()}, {"events", Json::array()}};
    for (const State& state : sweep.value().states) json["states"].push_back(asJson(state));
    for (const Event& event : sweep.value().events) json["events"].push_back(asJson(event));
    print(setAsJson(std::move(json), question.value().set));
    return 0;
}

}  // namespace soak::cli
