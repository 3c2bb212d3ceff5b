// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <vector>

#include "db/revision.h"
#include "db/sql.h"
#include "db/store.h"

namespace soak {

/// Stores the cycle as the next revision of its name, which it returns. No state: the caller gives it its first step.
int insertCycle(Transaction& transaction, const Cycle& cycle);

/// Appends a step to a revision's life.
void insertStep(Transaction& transaction, const QString& name, int revision, const CycleStep& step);

/// Every revision of the named cycle, oldest first.
Result<std::vector<Cycle>> loadCycles(const Store& store, const QString& name);

}  // namespace soak
