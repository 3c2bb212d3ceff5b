// SPDX-License-Identifier: GPL-3.0-or-later
#include <map>

#include "commands.h"
#include "db/demo.h"
#include "db/journal.h"
#include "output.h"
#include "signed_in.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

Result<int> newStore(const Arguments& arguments) {
    const QString path = arguments.words[1];
    const auto store = arguments.has("demo") ? createDemoShop(path) : createEmpty(path);
    if (!store) return store.error();
    const auto heats = store.value().heats();
    if (!heats) return heats.error();
    if (arguments.has("json"))
        print(Json{{"store", path.toStdString()}, {"heats", heats.value().size()}});
    else
        print(QString("Made the store %1 with %2 heats.\n").arg(path).arg(heats.value().size()));
    return 0;
}

Result<int> checkStore(const Arguments& arguments) {
    const auto store = Store::open(arguments.words[1], Access::read);
    if (!store) return store.error();
    const auto findings = store.value().check();
    if (!findings) return findings.error();
    const auto entries = journal(store.value());
    if (!entries) return entries.error();
    const QString last = entries.value().empty() ? QString() : entries.value().back().hash;
    if (arguments.has("json")) {
        Json json{{"sound", findings.value().isEmpty()},
                  {"findings", Json::array()},
                  {"journal_entries", entries.value().size()},
                  {"journal_hash", last.toStdString()}};
        for (const QString& finding : findings.value()) json["findings"].push_back(finding.toStdString());
        print(json);
    } else {
        for (const QString& finding : findings.value()) print(finding + "\n");
        if (findings.value().isEmpty())
            print(QString("The store is sound: pages, references, every sheet's hash, the journal.\n"
                          "The journal has %1 entries; its last hash, to be noted elsewhere: %2\n")
                      .arg(entries.value().size())
                      .arg(last));
    }
    return findings.value().isEmpty() ? 0 : kNeedsDecision;
}

Result<int> backupStore(const Arguments& arguments) {
    const auto store = Store::open(arguments.words[1], Access::read);
    if (!store) return store.error();
    if (const auto done = store.value().backup(arguments.words[2]); !done) return done.error();
    print("A complete, checked copy is in " + arguments.words[2] + ".\n");
    return 0;
}

Result<int> restoreStore(const Arguments& arguments) {
    if (const auto done = Store::restore(arguments.words[1], arguments.words[2]); !done) return done.error();
    print("The backup is sound and is now the store " + arguments.words[2] + ".\n");
    return 0;
}

Result<int> showJournal(const Arguments& arguments) {
    const auto store = Store::open(arguments.words[1], Access::read);
    if (!store) return store.error();
    const auto entries = journal(store.value());
    if (!entries) return entries.error();
    Json json = Json::array();
    for (const JournalEntry& entry : entries.value()) {
        if (!arguments.has("json"))
            print(QString("%1  %2  %3  %4 %5 %6%7\n")
                      .arg(entry.number)
                      .arg(entry.at.isEmpty() ? "-" : entry.at, entry.who.isEmpty() ? "-" : entry.who, entry.what,
                           entry.which, entry.action, entry.why.isEmpty() ? QString() : ": " + entry.why));
        json.push_back({{"number", entry.number},
                        {"at", entry.at.toStdString()},
                        {"who", entry.who.toStdString()},
                        {"what", entry.what.toStdString()},
                        {"which", entry.which.toStdString()},
                        {"action", entry.action.toStdString()},
                        {"why", entry.why.toStdString()},
                        {"detail", entry.detail.toStdString()},
                        {"hash", entry.hash.toStdString()}});
    }
    if (arguments.has("json")) print(json);
    return 0;
}

/// The password of a new person, or of the one who acts, is the first line of --password-file; --new-password-file is
/// the new person's where both are needed.
Result<int> setPersonOf(const Arguments& arguments) {
    auto store = Store::open(arguments.words[1]);
    if (!store) return std::move(store).error();
    const auto act = actOf(arguments, store.value());
    if (!act) return act.error();
    Person person{arguments.words[2], listIn(arguments.text("roles")), !arguments.has("inactive")};
    QString password;
    if (const QString path = arguments.text("new-password-file"); !path.isEmpty()) {
        const auto line = firstLine(path);
        if (!line) return line.error();
        password = line.value();
    }
    if (const auto done = setPerson(store.value(), person, password, act.value()); !done) return done.error();
    print(person.name + " is stored: " + (person.active ? person.roles.join(", ") : QString("not active")) + ".\n");
    return 0;
}

Result<int> setRoles(const Arguments& arguments) {
    const QString word = arguments.words[2];
    if (word != "on" && word != "off") return refuse("roles are \"on\" or \"off\", not \"" + word + "\"");
    auto store = Store::open(arguments.words[1]);
    if (!store) return std::move(store).error();
    const auto act = actOf(arguments, store.value());
    if (!act) return act.error();
    if (const auto done = switchRoles(store.value(), word == "on", act.value()); !done) return done.error();
    print("Roles are " + word + ".\n");
    return 0;
}

struct Task {
    Result<int> (*run)(const Arguments&);
    qsizetype words;
    const char* use;
};

}  // namespace

Result<int> storeCommand(const QStringList& given) {
    static const std::map<QString, Task> tasks = {
        {"new", {newStore, 2, "new FILE [--demo]"}},
        {"check", {checkStore, 2, "check FILE"}},
        {"backup", {backupStore, 3, "backup FILE COPY"}},
        {"restore", {restoreStore, 3, "restore COPY FILE"}},
        {"journal", {showJournal, 2, "journal FILE"}},
        {"person", {setPersonOf, 3, "person FILE NAME --roles LIST [--new-password-file FILE] [--inactive]"}},
        {"roles", {setRoles, 3, "roles FILE on|off"}}};
    const auto arguments = readArguments(given, {"by", "why", "date", "roles", "password-file", "new-password-file"},
                                         {"demo", "json", "inactive"});
    if (!arguments) return arguments.error();
    const QStringList& words = arguments.value().words;
    const auto task = tasks.find(words.value(0));
    if (task == tasks.end()) {
        QStringList uses;
        for (const auto& [word, one] : tasks) uses << one.use;
        return refuse("use: soakwright store " + uses.join("\n  or soakwright store "));
    }
    if (words.size() != task->second.words) return refuse(QString("use: soakwright store ") + task->second.use);
    return task->second.run(arguments.value());
}

}  // namespace soak::cli
