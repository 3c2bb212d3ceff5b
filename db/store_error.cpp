// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/store_error.h"

#include <map>

namespace soak {
namespace {

// Extended codes that say more than their low byte. Source: sqlite.org/rescode.html.
constexpr int kWrite = 778, kUnique = 2067, kPrimaryKey = 1555, kTrigger = 1811, kForeignKey = 787;

QString words(int code) {
    static const std::map<int, QString> by_code = {
        {5, "another program is writing to it. Nothing was changed; try again in a moment"},
        {6, "another program is writing to it. Nothing was changed; try again in a moment"},
        {8, "it is read-only. Nothing was changed; ask for write permission on the file and on its folder"},
        {9, "the work was interrupted. Nothing was changed"},
        {10,
         "the disk could not be read or written. Everything stored earlier is kept as far as the disk allows; check "
         "the disk, then check the store"},
        {11, "the file is damaged. Do not write to it: set it aside and restore the last backup"},
        {13,
         "the disk is full. Nothing of this change was stored and everything stored earlier is safe; make room and "
         "try again"},
        {14, "the file cannot be opened. Check its name, and the permissions of the file and of its folder"},
        {26, "the file is not a store"},
        {kWrite,
         "the file could not grow: the disk is full, failing, or a limit on file sizes was met. Nothing of this change "
         "was stored and everything stored earlier is safe; make room and try again"},
        {kUnique, "this is stored already. Nothing of this change was stored"},
        {kPrimaryKey, "this is stored already. Nothing of this change was stored"},
        {kForeignKey, "it refers to something that is not in the store. Nothing of this change was stored"},
        {kTrigger, "an issued record cannot be changed or removed. Nothing was changed"},
    };
    if (const auto exact = by_code.find(code); exact != by_code.end()) return exact->second;
    if (const auto low = by_code.find(code & 0xff); low != by_code.end()) return low->second;
    return {};
}

}  // namespace

Error storeError(const QSqlError& error, const QString& path, const QString& doing) {
    QString what = words(error.nativeErrorCode().toInt());
    if (what.isEmpty()) what = "the store answered \"" + error.databaseText() + "\". Nothing of this change was stored";
    return Error{Fault::store, ("store " + path + ", " + doing + ": " + what + ".").toStdString(), {}, {}};
}

}  // namespace soak
