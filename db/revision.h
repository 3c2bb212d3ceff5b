// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <vector>

#include "base/result.h"
#include "db/people.h"
#include "db/records.h"

namespace soak {

class Store;

/// One step in the life of a cycle's revision.
struct CycleStep {
    QString state;     ///< "draft", "approved", "frozen", "withdrawn"
    QString customer;  ///< frozen: for whom
    QString who, at, why;
};

/// A revision of a cycle with all that happened to it; its state is that of the last step.
struct CycleRevision {
    Cycle cycle;
    std::vector<CycleStep> steps;
    QString state() const { return steps.empty() ? QString("draft") : steps.back().state; }
};

/// Every revision of a cycle, oldest first. Fault::input when there is no such cycle.
Result<std::vector<CycleRevision>> cycleRevisions(const Store& store, const QString& name);

// The states and what leads from one to the next. Sheets are issued from an approved or frozen revision only, and the
// newest such revision is the standing one (Store::cycles()). Each needs Right::approve but the draft, which needs
// Right::plan; `why` is asked for where something released is changed. Fault::input, in words, for a step that the
// present state does not allow.
//
//   draft -> approved                    a person with the approver's role looked at it
//   approved -> frozen                   a customer's leave is needed from now on; names the customer
//   frozen -> approved                   the customer's leave, in `why`
//   draft, approved, frozen -> withdrawn it is never used again
//
// While a revision is frozen no later one of the cycle is approved: unfreeze() first.

/// Stores the cycle as the next revision, a draft. The cycle's own `revision` must be the one that it was made from (0
/// for a new cycle); another one is a conflict, whose message shows both sides, and nothing is stored. Returns the new
/// revision.
Result<int> draftCycle(Store& store, const Cycle& cycle, const Act& act);
Result<Done> approveCycle(Store& store, const QString& name, int revision, const Act& act);
Result<Done> freezeCycle(Store& store, const QString& name, int revision, const QString& customer, const Act& act);
Result<Done> unfreezeCycle(Store& store, const QString& name, int revision, const Act& act);
Result<Done> withdrawCycle(Store& store, const QString& name, int revision, const Act& act);

/// What differs between two revisions, field by field, in words: "setpoint 1050 -> 1065 °C".
QStringList cycleDifferences(const Cycle& from, const Cycle& to);

}  // namespace soak
