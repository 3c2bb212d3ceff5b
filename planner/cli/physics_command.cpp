// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "base/units.h"
#include "chemistry_list.h"
#include "commands.h"
#include "data_choice.h"
#include "output.h"
#include "planner/core/coverage.h"

namespace soak::cli {
namespace {

struct Question {
    Alloy alloy;
    DataSetFacts set;
    QStringList extrapolated;  ///< what the set answers beyond what was assessed
};

/// Nothing is extrapolated in silence.
Result<QStringList> extrapolatedIn(const Chemistry& chemistry, const DataSetFacts& set) {
    const auto book = loadFamilyBook();
    if (!book) return book.error();
    const auto use = book.value().uses.find(QString::fromStdString(set.name));
    return extrapolations(chemistry.wt, set, use == book.value().uses.end() ? SetUse{} : use->second);
}

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
    auto extrapolated = extrapolatedIn(chemistry.value(), facts(*data.value()));
    if (!extrapolated) return std::move(extrapolated).error();
    return Question{std::move(alloy).value(), facts(*data.value()), std::move(extrapolated).value()};
}

/// Which data stand behind an answer.
Json setAsJson(Json answer, const Question& question) {
    answer["data_set"] = question.set.name;
    answer["data_version"] = question.set.version;
    answer["extrapolated"] = Json::array();
    for (const QString& what : question.extrapolated) answer["extrapolated"].push_back(what.toStdString());
    return answer;
}
QString setAsText(const Question& question) {
    QString text = QString("Data %1 %2\n")
                       .arg(QString::fromStdString(question.set.name), QString::fromStdString(question.set.version));
    for (const QString& what : question.extrapolated) text += "Extrapolated: " + what + "\n";
    return text;
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
    arguments.value().has("json") ? print(setAsJson(asJson(state.value()), question.value()))
                                  : print(asText(state.value()) + setAsText(question.value()));
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
        print(setAsText(question.value()));
        return 0;
    }
    Json json{{"states", Json::array()}, {"events", Json::array()}};
    for (const State& state : sweep.value().states) json["states"].push_back(asJson(state));
    for (const Event& event : sweep.value().events) json["events"].push_back(asJson(event));
    print(setAsJson(std::move(json), question.value()));
    return 0;
}

}  // namespace soak::cli
