// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/people.h"

#include <sodium.h>

#include <algorithm>

#include "db/journal.h"
#include "db/sql.h"
#include "db/store.h"

namespace soak {
namespace {

constexpr qsizetype kShortestPassword = 8;  // NIST SP 800-63B, 5.1.1.1 (from memory)

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

const QStringList& allRoles() {
    static const QStringList roles = {"operator", "inspector", "approver", "administrator"};
    return roles;
}

struct RightRow {
    Right right;
    const char* doing;
    QStringList roles;
};

const RightRow& rowOf(Right right) {
    static const std::vector<RightRow> rows = {
        {Right::enter, "enter heats and certificates", {"inspector", "approver"}},
        {Right::plan, "draft cycles and change furnaces and grades", {"inspector", "approver"}},
        {Right::approve, "approve, withdraw, freeze or issue", {"approver"}},
        {Right::manage, "manage people and roles", {"administrator"}}};
    return *std::find_if(rows.begin(), rows.end(), [&](const RightRow& row) { return row.right == right; });
}

/// Argon2id with libsodium's limits for a person at a screen: 64 MB, under a second.
std::optional<QString> hashed(const QString& password) {
    if (sodium_init() < 0) return {};
    char hash[crypto_pwhash_STRBYTES];
    const QByteArray bytes = password.toUtf8();
    if (crypto_pwhash_str(hash, bytes.constData(), static_cast<unsigned long long>(bytes.size()),
                          crypto_pwhash_OPSLIMIT_INTERACTIVE, crypto_pwhash_MEMLIMIT_INTERACTIVE) != 0)
        return {};
    return QString::fromLatin1(hash);
}

bool matches(const QString& hash, const QString& password) {
    if (sodium_init() < 0) return false;
    const QByteArray bytes = password.toUtf8();
    return crypto_pwhash_str_verify(hash.toLatin1().constData(), bytes.constData(),
                                    static_cast<unsigned long long>(bytes.size())) == 0;
}

bool rolesOn(Transaction& transaction) {
    const auto on = transaction.ask("SELECT value FROM setting WHERE name = 'roles'");
    return on && on->toString() == "on";
}

int administrators(Transaction& transaction) {
    const auto count = transaction.ask(
        "SELECT count(*) FROM person WHERE active = 1 AND ';' || roles || ';' LIKE '%;administrator;%'");
    return count ? count->toInt() : 0;
}

}  // namespace

Result<std::vector<Person>> people(const Store& store) {
    Rows rows(store.database(), store.path(), "reading people", "SELECT name, roles, active FROM person ORDER BY name");
    std::vector<Person> found;
    while (rows.next())
        found.push_back({rows.text(0), rows.text(1).split(';', Qt::SkipEmptyParts), rows.integer(2) != 0});
    if (rows.error()) return *rows.error();
    return found;
}

Result<Done> setPerson(Store& store, const Person& person, const QString& password, const Act& act) {
    if (person.name.trimmed().isEmpty()) return refuse("a person needs a name");
    for (const QString& role : person.roles)
        if (!allRoles().contains(role))
            return refuse("\"" + role + "\" is no role; there are " + allRoles().join(", "));
    if (!password.isEmpty() && password.size() < kShortestPassword)
        return refuse(QString("a password has at least %1 characters").arg(kShortestPassword));
    std::optional<QString> hash;
    if (!password.isEmpty() && !(hash = hashed(password)))
        return Error{Fault::store, "there is not enough memory to protect the password", {}, {}};
    Transaction transaction(store.database(), store.path(), "storing a person");
    permit(transaction, act.who, Right::manage);
    const auto known = transaction.ask("SELECT password_hash FROM person WHERE name = ?", {person.name});
    if (!known && !hash) transaction.fail(refuse("a new person needs a password"));
    transaction.run("DELETE FROM person WHERE name = ?", {person.name});
    transaction.run("INSERT INTO person (name, roles, active, password_hash) VALUES (?, ?, ?, ?)",
                    {person.name, person.roles.join(';'), int(person.active),
                     hash    ? *hash
                     : known ? known->toString()
                             : ""});
    if (rolesOn(transaction) && administrators(transaction) == 0)
        transaction.fail(refuse("the last administrator stays while roles are on"));
    record(transaction, {0,
                         act.at,
                         act.who,
                         "person",
                         person.name,
                         known ? "changed" : "added",
                         act.why,
                         ("{\"roles\":\"" + person.roles.join(';') + "\",\"active\":" +
                          (person.active ? "true" : "false") + ",\"password\":" + (hash ? "\"new\"" : "\"kept\"") + "}")
                             .toUtf8(),
                         {}});
    return transaction.commit();
}

Result<bool> rolesAreOn(const Store& store) {
    Rows rows(store.database(), store.path(), "reading settings", "SELECT value FROM setting WHERE name = 'roles'");
    const bool on = rows.next() && rows.text(0) == "on";
    if (rows.error()) return *rows.error();
    return on;
}

Result<Done> switchRoles(Store& store, bool on, const Act& act) {
    Transaction transaction(store.database(), store.path(), "switching roles");
    permit(transaction, act.who, Right::manage);
    if (on && administrators(transaction) == 0)
        transaction.fail(refuse("roles need an administrator first: add a person with that role"));
    transaction.run("DELETE FROM setting WHERE name = 'roles'");
    transaction.run("INSERT INTO setting (name, value) VALUES ('roles', ?)", {QString(on ? "on" : "off")});
    record(transaction, {0, act.at, act.who, "shop", "roles", on ? "switched on" : "switched off", act.why, {}, {}});
    return transaction.commit();
}

Result<Person> signIn(const Store& store, const QString& name, const QString& password) {
    Rows rows(store.database(), store.path(), "signing in",
              "SELECT roles, password_hash FROM person WHERE name = ? AND active = 1", {name});
    const bool known = rows.next();
    if (rows.error()) return *rows.error();
    // A wrong name costs as much time as a wrong password.
    const bool right = known ? matches(rows.text(1), password) : (hashed(password), false);
    if (!right) return refuse("name or password is wrong");
    return Person{name, rows.text(0).split(';', Qt::SkipEmptyParts), true};
}

void permit(Transaction& transaction, const QString& who, Right right) {
    if (!rolesOn(transaction)) return;
    const RightRow& row = rowOf(right);
    const auto roles = transaction.ask("SELECT roles FROM person WHERE name = ? AND active = 1", {who});
    const QStringList own = roles ? roles->toString().split(';') : QStringList();
    if (std::any_of(own.begin(), own.end(), [&](const QString& role) { return row.roles.contains(role); })) return;
    transaction.fail(refuse((who.isEmpty() ? QString("somebody who is not signed in") : who) + " may not " + row.doing +
                            ": this needs the role " + row.roles.join(" or ") + ". Nothing was changed"));
}

}  // namespace soak
