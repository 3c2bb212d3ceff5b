// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <vector>

#include "base/result.h"

namespace soak {

class Store;
class Transaction;

/// What a person may do. A one-man shop's store knows no roles until they are switched on: then everybody may do
/// everything, and a name is only written down.
enum class Right {
    enter,    ///< heats, imports, suppliers' columns              inspector, approver
    plan,     ///< drafts of cycles, furnaces, quenches, grades    inspector, approver
    approve,  ///< cycles approved, withdrawn, frozen; the shop's rules; sheets issued    approver
    manage,   ///< people, roles, restoring                        administrator
};

struct Person {
    QString name;
    QStringList roles;  ///< of "operator", "inspector", "approver", "administrator"; several are allowed
    bool active = true;
};

/// Who acts, when, and why: what the journal keeps. `at` is a day or a time, ISO 8601, from the caller's clock.
struct Act {
    QString who, at, why;
};

Result<std::vector<Person>> people(const Store& store);
/// Adds a person or changes roles; an empty password keeps the present one. Fault::input for an unknown role, a new
/// person without a password, a password under 8 characters, and for taking the last administrator away while roles
/// are on.
Result<Done> setPerson(Store& store, const Person& person, const QString& password, const Act& act);

/// Whether roles are on.
Result<bool> rolesAreOn(const Store& store);
/// Fault::input without an active administrator.
Result<Done> switchRoles(Store& store, bool on, const Act& act);

/// Checks name and password (libsodium's memory-hard hash, Argon2id). The answer to a wrong name and to a wrong
/// password is the same. Front ends ask before they pass a name on as `who`.
Result<Person> signIn(const Store& store, const QString& name, const QString& password);

/// Fails the transaction when roles are on and `who` may not do this.
void permit(Transaction& transaction, const QString& who, Right right);

}  // namespace soak
