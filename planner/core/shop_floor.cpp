// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/shop_floor.h"

#include <QStringList>

namespace soak {

Result<Shelf> shelfFrom(const Store& store, const QDate& today) {
    auto shop = store.shop();
    if (!shop) return std::move(shop).error();
    auto grades = store.grades();
    if (!grades) return std::move(grades).error();
    auto published = store.treatments();
    if (!published) return std::move(published).error();
    ShopRules rules;
    rules.band_rule = shop.value().band_rule;
    rules.tight_set_K = shop.value().tight_set_K;
    rules.tight_computed_K = shop.value().tight_computed_K;
    rules.today = today.isValid() ? today : shop.value().today;
    auto quenches = store.quenches();
    if (!quenches) return std::move(quenches).error();
    auto shelf = makeShelf(std::move(grades).value(), std::move(published).value(), rules);
    auto furnaces = store.furnaces();
    if (!furnaces) return std::move(furnaces).error();
    if (shelf) shelf.value().quenches = std::move(quenches).value();
    if (shelf) shelf.value().furnaces = std::move(furnaces).value();
    return shelf;
}

Result<Job> jobFrom(const Store& store, const QString& heat, const QString& cycle, const QString& furnace) {
    auto found_heat = store.heat(heat);
    if (!found_heat) return std::move(found_heat).error();
    auto found_cycle = store.cycle(cycle);
    if (!found_cycle) return std::move(found_cycle).error();
    auto found_furnace = store.furnace(furnace);
    if (!found_furnace) return std::move(found_furnace).error();
    return Job{
        std::move(found_heat).value(), std::move(found_cycle).value(), std::move(found_furnace).value(), {}, {}, true};
}

Result<TriageQuestion> triageFrom(const Store& store, std::vector<DeliveryItem> delivery, const QString& furnace) {
    TriageQuestion question;
    question.delivery = std::move(delivery);
    question.furnace = furnace;
    auto cycles = store.cycles();
    if (!cycles) return std::move(cycles).error();
    question.cycles = std::move(cycles).value();
    if (!furnace.isEmpty()) {
        auto named = store.furnace(furnace);  // says which furnaces there are when the name is wrong
        if (!named) return std::move(named).error();
        question.furnaces = {std::move(named).value()};
        return question;
    }
    auto furnaces = store.furnaces();
    if (!furnaces) return std::move(furnaces).error();
    question.furnaces = std::move(furnaces).value();
    return question;
}

}  // namespace soak
