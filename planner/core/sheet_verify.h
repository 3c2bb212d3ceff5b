// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDateTime>
#include <QString>
#include <optional>

#include "base/result.h"
#include "db/store.h"

namespace soak {

/// What the code on a printed sheet holds: "soakwright:2025-0412:B:9f2c...".
struct SheetCode {
    QString number, revision, hash;
};
/// Spaces and line breaks of a scanner are taken off. Fault::input for anything that is no such code.
Result<SheetCode> readSheetCode(const QString& code);

/// How a sheet on paper stands against the store.
enum class Standing {
    current,       ///< the newest revision, issued, and the content is the same
    superseded,    ///< a newer revision was issued
    withdrawn,     ///< taken back
    different,     ///< the store holds this number and revision with another content
    cannotConfirm  ///< the store cannot be asked, does not hold the sheet, or only a copy says that it is current
};
/// "current", "superseded", "withdrawn", "different", "cannot confirm"
QString word(Standing standing);

struct SheetStanding {
    Standing standing = Standing::cannotConfirm;
    SheetCode code;
    QString sentence;  ///< for a person, with what to do
};

/// When and how long ago a bay's copy of the store was taken.
struct CopyAge {
    QDateTime taken, now;
};

/// Answers from the store, or from a bay's copy of it when `copy` is given: a copy can say that a sheet was superseded,
/// for that never changes back, but never that it is still current.
SheetStanding verifySheet(const Result<Store>& store, const SheetCode& code, const std::optional<CopyAge>& copy = {});

}  // namespace soak
