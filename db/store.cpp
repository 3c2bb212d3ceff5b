// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/store.h"

#include <QFile>
#include <QFileInfo>
#include <QSqlError>
#include <QSqlQuery>
#include <QStorageInfo>
#include <atomic>

#include "db/network_drive.h"
#include "db/schema.h"
#include "db/sql.h"
#include "db/store_error.h"

namespace soak {
namespace {

Error refuse(const QString& path, const QString& message) {
    return Error{Fault::store, ("store " + path + ": " + message).toStdString(), {}, {}};
}

std::optional<Error> unfitPlace(const QString& path) {
    const QStorageInfo storage(QFileInfo(path).absolutePath());
    if (!isNetworkDrive(storage.fileSystemType())) return {};
    return refuse(path, "it lies on a network drive (" + storage.fileSystemType() +
                            "), where two stations could damage it. Keep the store on a disk of this machine.");
}

/// What can be seen from outside, before SQLite touches the file.
std::optional<Error> unfitFile(const QString& path, Access access) {
    const QFileInfo info(path);
    if (!info.exists()) return refuse(path, "no such file. Make a new store, or check the name.");
    if (!info.isFile()) return refuse(path, "this is not a file.");
    QFile file(path);
    if (!file.open(QIODevice::ReadOnly)) return refuse(path, "it cannot be read: " + file.errorString() + ".");
    if (!file.read(16).startsWith("SQLite format 3"))
        return refuse(path, "the file is not a store. It was left as it is; check the name.");
    if (access == Access::write && !info.isWritable())
        return refuse(path, "it is read-only. Nothing was changed; ask for write permission on the file.");
    return unfitPlace(path);
}

/// A connection of our own, removed by the Store that will own its name.
Result<QString> connectTo(const QString& path, Access access) {
    static std::atomic<int> count{0};
    const QString name = QString("store-%1").arg(++count);
    QSqlDatabase database = QSqlDatabase::addDatabase("QSQLITE", name);
    database.setDatabaseName(path);
    // Two and a half seconds: other writers are done by then, and nobody waits longer for an answer.
    database.setConnectOptions(access == Access::read ? "QSQLITE_BUSY_TIMEOUT=2500;QSQLITE_OPEN_READONLY"
                                                      : "QSQLITE_BUSY_TIMEOUT=2500");
    if (database.open()) return name;
    Error error = storeError(database.lastError(), path, "opening it");
    database = {};
    QSqlDatabase::removeDatabase(name);
    return error;
}

/// Settings of a connection. FULL: a commit that was reported survives a power cut.
Result<Done> prepareConnection(const QSqlDatabase& database, const QString& path, Access access) {
    QStringList pragmas = {"PRAGMA foreign_keys = ON", "PRAGMA synchronous = FULL"};
    if (access == Access::write) pragmas << "PRAGMA journal_mode = WAL";
    for (const QString& pragma : pragmas) {
        QSqlQuery query(database);
        if (!query.exec(pragma)) return storeError(query.lastError(), path, "opening it");
    }
    return Done{};
}

Result<Done> checkVersion(const QSqlDatabase& database, const QString& path, Access access) {
    Rows rows(database, path, "opening it", "PRAGMA application_id");
    const bool ours = rows.next() && rows.integer(0) == kApplicationId;
    if (rows.error()) return *rows.error();
    if (!ours) return refuse(path, "this database belongs to another program. It was left as it is.");
    const Result<int> version = schemaVersion(database, path);
    if (!version) return version.error();
    if (version.value() > latestSchemaVersion())
        return refuse(path, QString("it was written by a newer program (version %1, this program knows up to %2). "
                                    "Nothing was changed; use the newer program.")
                                .arg(version.value())
                                .arg(latestSchemaVersion()));
    if (version.value() < latestSchemaVersion() && access == Access::read)
        return refuse(path, "it was written by an older program. Open it once for writing to bring it up to date.");
    return Done{};
}

}  // namespace

Result<Store> Store::open(const QString& path, Access access) {
    if (std::optional<Error> unfit = unfitFile(path, access)) return *unfit;
    Result<QString> connection = connectTo(path, access);
    if (!connection) return std::move(connection).error();
    Store store(path, connection.value());
    // The version first: nothing is written, not even a setting, to a file that is not ours.
    if (Result<Done> fits = checkVersion(store.database(), path, access); !fits) return fits.error();
    if (Result<Done> set = prepareConnection(store.database(), path, access); !set) return set.error();
    if (access == Access::read) return store;
    // A store that is up to date is opened without a write transaction: nobody waits for the others to finish.
    const Result<int> version = schemaVersion(store.database(), path);
    if (!version) return version.error();
    if (version.value() < latestSchemaVersion())
        if (Result<Done> done = migrate(store.database(), path); !done) return done.error();
    return store;
}

Result<Store> Store::create(const QString& path) {
    if (QFileInfo::exists(path)) return refuse(path, "the file exists already and was left as it is.");
    if (std::optional<Error> unfit = unfitPlace(path)) return *unfit;
    Result<QString> connection = connectTo(path, Access::write);
    if (!connection) return std::move(connection).error();
    Store store(path, connection.value());
    Result<Done> made = prepareConnection(store.database(), path, Access::write);
    if (made) made = migrate(store.database(), path);
    if (made) return store;
    store.close();
    QFile::remove(path);
    return made.error();
}

Store::Store(Store&& other) noexcept : path_(std::move(other.path_)), connection_(std::move(other.connection_)) {
    other.connection_.clear();
}

Store& Store::operator=(Store&& other) noexcept {
    if (this == &other) return *this;
    close();
    path_ = std::move(other.path_);
    connection_ = std::move(other.connection_);
    other.connection_.clear();
    return *this;
}

Store::~Store() { close(); }

void Store::close() {
    if (connection_.isEmpty()) return;
    database().close();
    QSqlDatabase::removeDatabase(connection_);
    connection_.clear();
}

}  // namespace soak
