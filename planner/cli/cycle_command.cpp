// SPDX-License-Identifier: GPL-3.0-or-later
#include <map>

#include "commands.h"
#include "db/revision.h"
#include "output.h"
#include "signed_in.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

Result<int> showHistory(const Store& store, const QString& name, bool as_json) {
    const auto revisions = cycleRevisions(store, name);
    if (!revisions) return revisions.error();
    Json json = Json::array();
    const Cycle* before = nullptr;
    for (const CycleRevision& one : revisions.value()) {
        const QStringList differ = before ? cycleDifferences(*before, one.cycle) : QStringList();
        before = &one.cycle;
        Json steps = Json::array(), changes = Json::array();
        QString text = QString("%1 revision %2: %3\n").arg(name).arg(one.cycle.revision).arg(one.state());
        for (const QString& change : differ) {
            text += "    " + change + "\n";
            changes.push_back(change.toStdString());
        }
        for (const CycleStep& step : one.steps) {
            text += QString("  %1  %2  %3%4%5\n")
                        .arg(step.at.isEmpty() ? "-" : step.at, step.who.isEmpty() ? "-" : step.who, step.state,
                             step.customer.isEmpty() ? QString() : " for " + step.customer,
                             step.why.isEmpty() ? QString() : ": " + step.why);
            steps.push_back({{"state", step.state.toStdString()},
                             {"customer", step.customer.toStdString()},
                             {"who", step.who.toStdString()},
                             {"at", step.at.toStdString()},
                             {"why", step.why.toStdString()}});
        }
        json.push_back({{"cycle", name.toStdString()},
                        {"revision", one.cycle.revision},
                        {"state", one.state().toStdString()},
                        {"changes", changes},
                        {"steps", steps}});
        if (!as_json) print(text);
    }
    if (as_json) print(json);
    return 0;
}

/// The named revision, else the newest.
Result<int> revisionOf(const Arguments& arguments, const Store& store, const QString& name) {
    const auto revisions = cycleRevisions(store, name);
    if (!revisions) return revisions.error();
    const auto given = arguments.numberIfGiven("revision");
    if (!given) return given.error();
    return int(given.value().value_or(revisions.value().back().cycle.revision));
}

}  // namespace

Result<int> cycleCommand(const QStringList& given) {
    const auto read =
        readArguments(given, {"store", "revision", "by", "why", "date", "customer", "password-file"}, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto path = arguments.required("store");
    if (!path) return path.error();
    const QString action = arguments.words.value(0), name = arguments.words.value(1);
    static const std::map<QString, Result<Done> (*)(Store&, const QString&, int, const Act&)> steps = {
        {"approve", approveCycle}, {"unfreeze", unfreezeCycle}, {"withdraw", withdrawCycle}};
    if (arguments.words.size() != 2 || (!steps.count(action) && action != "freeze" && action != "history"))
        return refuse("use: soakwright cycle history|approve|freeze|unfreeze|withdraw NAME --store FILE");
    auto store = Store::open(path.value(), action == "history" ? Access::read : Access::write);
    if (!store) return std::move(store).error();
    if (action == "history") return showHistory(store.value(), name, arguments.has("json"));
    const auto act = actOf(arguments, store.value());
    if (!act) return act.error();
    const auto revision = revisionOf(arguments, store.value(), name);
    if (!revision) return revision.error();
    const auto done = action == "freeze"
                          ? freezeCycle(store.value(), name, revision.value(), arguments.text("customer"), act.value())
                          : steps.at(action)(store.value(), name, revision.value(), act.value());
    if (!done) return done.error();
    return showHistory(store.value(), name, arguments.has("json"));
}

}  // namespace soak::cli
