// SPDX-License-Identifier: GPL-3.0-or-later
#include "data_choice.h"

#include <QDir>

#include "base/folders.h"
#include "planner/core/plausible.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

std::vector<std::string> words(const QString& list) {
    std::vector<std::string> all;
    for (const QString& word : listIn(list)) all.push_back(word.toStdString());
    return all;
}

}  // namespace

Result<std::shared_ptr<const DataSet>> chooseDataSet(const Arguments& arguments, const QString& balance) {
    const QString folder = QString::fromStdString(productPath("thermo/data").string());
    if (const QString named = arguments.text("set"); !named.isEmpty()) {
        const QString path = QDir(named).exists() ? named : folder + "/" + named;
        if (!QDir(path).exists())
            return refuse("--set: no data set \"" + named + "\"; there are " +
                          QDir(folder).entryList(QDir::Dirs | QDir::NoDotAndDotDot).join(", "));
        return loadDataSet(path.toStdString());
    }
    const std::string wanted = balance.isEmpty() ? "Fe" : balance.toStdString();
    QStringList there;
    for (const QString& name : QDir(folder).entryList(QDir::Dirs | QDir::NoDotAndDotDot)) {
        auto data = loadDataSet((folder + "/" + name).toStdString());
        if (!data) return data;
        if (facts(*data.value()).balance == wanted) return data;
        there << name + " (" + QString::fromStdString(facts(*data.value()).balance) + ")";
    }
    return refuse("no data set for alloys of " + QString::fromStdString(wanted) + "; there are " + there.join(", "));
}

PhaseChoice phaseChoice(const Arguments& arguments) {
    return {words(arguments.text("with")), words(arguments.text("without"))};
}

Result<double> temperatureIn(const Arguments& arguments, const QString& name) {
    const auto temperature = arguments.number(name);
    if (!temperature) return temperature;
    if (auto plausible = checkCalculationTemperature(temperature.value()); !plausible)
        return std::move(plausible).error().within("--" + name.toStdString());
    return temperature;
}

}  // namespace soak::cli
