// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

#include "base/result.h"
#include "db/store.h"

namespace soak {

/// A new store with the grade library, published treatments and cautions, and no shop data.
Result<Store> createEmpty(const QString& path);

/// The same, with the invented demonstration shop (furnaces, quenches, cycles, rules, date) and its deliveries: every
/// heat of db/demo/heats.csv (steel) and light_heats.csv (aluminium bay) whose row could be read.
Result<Store> createDemoShop(const QString& path);

}  // namespace soak
