// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QJsonObject>

#include "db/records.h"

namespace soak {

// Records as the shop file writes them (db/demo/shop.json): what the journal keeps, and what readShopFile() takes back.
QJsonObject recordJson(const Furnace& furnace);
QJsonObject recordJson(const Cycle& cycle);
QJsonObject recordJson(const Quench& quench);
QJsonObject recordJson(const Grade& grade);
QJsonObject recordJson(const Shop& shop);

/// The same as text for the journal.
template <class Record>
QByteArray recordText(const Record& record);

}  // namespace soak
