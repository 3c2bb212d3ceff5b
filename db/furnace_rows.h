// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "db/sql.h"
#include "db/store.h"

namespace soak {

/// Puts a record in the place of the stored one of the same id; its place in the list stays.
void replaceFurnace(Transaction& transaction, const Furnace& furnace, int version);

}  // namespace soak
