// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <map>

#include "db/sql.h"
#include "db/store.h"

namespace soak {

/// Stores one heat with its analyses and products inside a transaction. A number that is stored already fails it.
void insertHeat(Transaction& transaction, const Heat& heat, qint64 import);

/// Puts a further analysis beside those of a stored heat.
void addAnalysis(Transaction& transaction, const QString& number, const OtherAnalysis& analysis, qint64 import);

/// Contents as JSON and back: {"C": {"raw": "0,048", "wt": 0.048, "less_than": false, "digit_wt": 0.001}}
QByteArray analysisJson(const Analysis& analysis);
Analysis analysisFrom(const QByteArray& json);

}  // namespace soak
