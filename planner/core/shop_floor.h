// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "db/store.h"
#include "planner/core/planner.h"
#include "planner/core/triage.h"

namespace soak {

// From the store to core's values. The store's connection belongs to its thread; what comes out of here does not.

/// Grades, published ranges, the planner's tables, the assessed data and the shop's rules as of `today`; an invalid
/// date means the store's own (a demonstration store has one).
Result<Shelf> shelfFrom(const Store& store, const QDate& today);

/// One question by its names. Fault::input names what is not there and lists what is.
Result<Job> jobFrom(const Store& store, const QString& heat, const QString& cycle, const QString& furnace);

/// A delivery against the standing cycles: every stored cycle and furnace; one furnace when it is named.
Result<TriageQuestion> triageFrom(const Store& store, std::vector<DeliveryItem> delivery, const QString& furnace);

}  // namespace soak
