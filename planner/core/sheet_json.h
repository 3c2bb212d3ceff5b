// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "db/records.h"
#include "planner/core/sheet_content.h"
#include "thermo/base/result.h"

namespace soak {

/// The sheet as JSON, what the store keeps and the code on the paper vouches for: everything of the page but its
/// number, revision, hash and code, which the store gives.
QByteArray sheetJson(const SheetContent& content);
/// The same back. What an older program did not write stays empty. Fault::data when the text is no JSON object.
Result<SheetContent> sheetFromJson(const QByteArray& json);

/// The page of a stored sheet as it was issued, number, code and hash included.
Result<SheetContent> issuedContent(const Sheet& sheet);
/// What the code on an issued sheet's paper holds.
QString sheetCode(const Sheet& sheet);

}  // namespace soak
