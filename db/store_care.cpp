// SPDX-License-Identifier: GPL-3.0-or-later
// Looking after a store: check, backup, restore.
#include <QFile>
#include <QFileInfo>

#include "db/journal.h"
#include "db/sql.h"
#include "db/store.h"

namespace soak {
namespace {

Error refuse(const QString& path, const QString& message) {
    return Error{Fault::store, ("store " + path + ": " + message).toStdString(), {}, {}};
}

/// What SQLite itself finds: damaged pages, rows that point nowhere.
std::optional<Error> checkFile(const Store& store, QStringList& findings) {
    Rows pages(store.database(), store.path(), "checking it", "PRAGMA integrity_check");
    while (pages.next())
        if (pages.text(0) != "ok") findings << "the file is damaged: " + pages.text(0);
    if (pages.error()) return pages.error();
    Rows keys(store.database(), store.path(), "checking it", "PRAGMA foreign_key_check");
    while (keys.next())
        findings << "a row of " + keys.text(0) + " refers to a row of " + keys.text(2) + " that is not there";
    return keys.error();
}

void checkSheets(const std::vector<Sheet>& sheets, QStringList& findings) {
    for (const Sheet& sheet : sheets)
        if (sheet.hash != sheetHash(sheet.number, sheet.revision, sheet.content))
            findings << "sheet " + sheet.number + " " + sheet.revision + " is not what was issued: its hash differs";
}

}  // namespace

Result<QStringList> Store::check() const {
    QStringList findings;
    if (std::optional<Error> error = checkFile(*this, findings)) return *error;
    const Result<std::vector<Sheet>> issued = sheets();
    if (!issued) return issued.error();
    checkSheets(issued.value(), findings);
    const Result<QStringList> chain = journalFindings(*this);
    if (!chain) return chain.error();
    return findings + chain.value();
}

Result<Done> Store::backup(const QString& path) const {
    if (QFileInfo::exists(path)) return refuse(path, "the file exists already and was left as it is.");
    const QString part = path + ".part";
    QFile::remove(part);
    // One consistent copy while others go on writing, and without a log file beside it (sqlite.org/lang_vacuum.html).
    Rows copy(database(), part, "writing the backup", "VACUUM INTO ?", {part});
    copy.next();
    if (copy.error()) {
        QFile::remove(part);
        return *copy.error();
    }
    {
        const Result<Store> made = Store::open(part, Access::read);
        const Result<QStringList> findings = made ? made.value().check() : Result<QStringList>(made.error());
        if (!findings) return findings.error();
        if (!findings.value().isEmpty()) return refuse(path, "the backup is not sound: " + findings.value().join("; "));
    }
    if (!QFile::rename(part, path)) return refuse(path, "the finished backup could not be put in its place.");
    return Done{};
}

Result<Done> Store::restore(const QString& backup, const QString& path) {
    const Result<Store> source = open(backup, Access::read);
    if (!source) return source.error();
    const Result<QStringList> findings = source.value().check();
    if (!findings) return findings.error();
    if (!findings.value().isEmpty()) return refuse(backup, "it is not sound: " + findings.value().join("; "));
    return source.value().backup(path);
}

}  // namespace soak
