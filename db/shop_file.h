// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QJsonObject>
#include <QString>
#include <vector>

#include "base/result.h"
#include "db/records.h"

namespace soak {

/// A whole shop as one JSON file: rules, quenches, furnaces, cycles with their limits (db/demo/shop.json shows every
/// field).
struct ShopFile {
    std::optional<Shop> shop;  ///< nothing in a file that adds a bay to a shop
    std::vector<Quench> quenches;
    std::vector<Furnace> furnaces;
    std::vector<Cycle> cycles;
};

/// Fault::data for what is wrong or missing, with the place: "shop.json: furnace F1: survey".
Result<ShopFile> readShopFile(const QString& path);

/// One record as the shop file and the journal write it (db/record_json.h).
Result<Furnace> furnaceFrom(const QJsonObject& json);
Result<Cycle> cycleFrom(const QJsonObject& json);

}  // namespace soak
