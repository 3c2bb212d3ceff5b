// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QSqlDatabase>
#include <QString>

#include "base/result.h"

namespace soak {

/// The version that this program writes. A store of a newer one is refused, of an older one brought up to date.
int latestSchemaVersion();

/// Marks the file as ours, so that another program's database is never written to ("SOAK" in ASCII).
constexpr int kApplicationId = 0x534F414B;

Result<int> schemaVersion(const QSqlDatabase& database, const QString& path);

/// Runs every migration from the store's version up to `version`, in one transaction.
Result<Done> migrate(const QSqlDatabase& database, const QString& path, int version = latestSchemaVersion());

}  // namespace soak
