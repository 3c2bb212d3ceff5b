// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QSqlError>
#include <QString>

#include "base/result.h"

namespace soak {

/// The one place that turns SQLite's codes into words: what happened, to which file, what is still safe, what to do.
Error storeError(const QSqlError& error, const QString& path, const QString& doing);

}  // namespace soak
