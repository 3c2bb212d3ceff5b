// SPDX-License-Identifier: GPL-3.0-or-later
#include "desk_data.h"

#include <algorithm>

#include "db/store.h"
#include "planner/core/shop_floor.h"

namespace soak::desk {
namespace {

template <class T, class Key>
const T* findIn(const std::vector<T>& records, Key T::*key, const QString& wanted) {
    const auto found =
        std::find_if(records.begin(), records.end(), [&](const T& record) { return record.*key == wanted; });
    return found == records.end() ? nullptr : &*found;
}

/// Moves a value out of a result into `place`, or the error into `failed`.
template <class T>
void take(Result<T> result, T& place, std::optional<Error>& failed) {
    if (failed) return;
    if (result)
        place = std::move(result).value();
    else
        failed = std::move(result).error();
}

}  // namespace

const Heat* DeskData::heat(const QString& number) const { return findIn(heats, &Heat::number, number); }
const Cycle* DeskData::cycle(const QString& name) const { return findIn(cycles, &Cycle::name, name); }
const Furnace* DeskData::furnace(const QString& id) const { return findIn(furnaces, &Furnace::id, id); }

std::vector<const Cycle*> DeskData::standingCycles(const Heat& heat) const {
    const QStringList names = gradeNamesIn(heat.grade);
    std::vector<const Cycle*> standing;
    for (const Cycle& cycle : cycles)
        if (std::any_of(names.begin(), names.end(), [&](const QString& name) { return cycle.grades.contains(name); }))
            standing.push_back(&cycle);
    return standing;
}

Result<DeskData> loadDesk(const QString& path, const QDate& today) {
    Result<Store> opened = Store::open(path, Access::write);  // write: an older store is brought up to date
    if (!opened) return std::move(opened).error();
    const Store& store = opened.value();
    DeskData data;
    data.path = path;
    std::optional<Error> failed;
    take(store.shop(), data.shop, failed);
    take(store.heats(), data.heats, failed);
    take(store.cycles(), data.cycles, failed);
    take(store.furnaces(), data.furnaces, failed);
    take(store.quenches(), data.quenches, failed);
    take(store.cautions(), data.cautions, failed);
    if (failed) return std::move(*failed);
    if (!data.shop.today.isValid()) data.shop.today = today;
    Result<Shelf> shelf = shelfFrom(store, data.shop.today);
    if (!shelf) return std::move(shelf).error();
    data.shelf = std::make_shared<const Shelf>(std::move(shelf).value());
    return data;
}

}  // namespace soak::desk
