// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <memory>
#include <vector>

#include "db/records.h"
#include "planner/core/planner.h"

namespace soak::desk {

/// Everything the desk shows of one store, as values: read in a worker, shown in the window.
struct DeskData {
    QString path;
    Shop shop;
    std::vector<Heat> heats;
    std::vector<Cycle> cycles;
    std::vector<Furnace> furnaces;
    std::vector<Quench> quenches;
    std::vector<Caution> cautions;
    std::shared_ptr<const Shelf> shelf;

    const Heat* heat(const QString& number) const;
    const Cycle* cycle(const QString& name) const;
    const Furnace* furnace(const QString& id) const;
    /// Cycles whose grades name this heat's grade.
    std::vector<const Cycle*> standingCycles(const Heat& heat) const;
};

/// Opens the store, reads it and loads the assessed data. Takes a moment: call it from a worker. `today` stands for the
/// date when the store has none of its own.
Result<DeskData> loadDesk(const QString& path, const QDate& today);

}  // namespace soak::desk
