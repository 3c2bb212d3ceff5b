// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/demo.h"

#include <QFile>
#include <QFileInfo>

#include "base/folders.h"
#include "db/csv.h"
#include "db/library.h"
#include "db/revision.h"
#include "db/shop_file.h"

namespace soak {
namespace {

QString demoFolder() { return QString::fromStdString(productPath("db/demo").string()); }

Result<Done> storeLibrary(Store& store) {
    const auto grades = readGrades(libraryFolder());
    if (!grades) return grades.error();
    const auto treatments = readTreatments(libraryFolder());
    if (!treatments) return treatments.error();
    const auto cautions = readCautions(libraryFolder());
    if (!cautions) return cautions.error();
    if (Result<Done> done = store.storeGrades(grades.value()); !done) return done;
    if (Result<Done> done = store.storeTreatments(treatments.value()); !done) return done;
    return store.storeCautions(cautions.value());
}

/// One bay of the shop: its quenches, furnaces and cycles, and the delivery that waits in it.
Result<Done> storeBay(Store& store, const QString& shop_file, const QString& heats) {
    const Result<ShopFile> file = readShopFile(demoFolder() + "/" + shop_file);
    if (!file) return file.error();
    if (file.value().shop)
        if (Result<Done> done = store.setShop(*file.value().shop); !done) return done;
    if (Result<Done> done = store.storeQuenches(file.value().quenches); !done) return done;
    if (Result<Done> done = store.storeFurnaces(file.value().furnaces); !done) return done;
    if (Result<Done> done = store.storeCycles(file.value().cycles); !done) return done;
    const Result<Shop> shop = store.shop();
    if (!shop) return shop.error();
    const Act approval{"quality manager", shop.value().today.toString(Qt::ISODate),
                       "the demonstration's standing cycle"};
    for (const Cycle& cycle : file.value().cycles)
        if (Result<Done> done = approveCycle(store, cycle.name, 1, approval); !done) return done;
    const Result<QByteArray> delivery = readFile(demoFolder() + "/" + heats);
    if (!delivery) return delivery.error();
    const Result<ImportPlan> plan = planImport(store, delivery.value(), heats);
    if (!plan) return plan.error();
    const Result<ImportRecord> stored = store.storeImport(plan.value(), shop.value().today, "receiving bench");
    if (!stored) return stored.error();
    return Done{};
}

Result<Done> storeShop(Store& store) {
    if (Result<Done> done = storeBay(store, "shop.json", "heats.csv"); !done) return done;
    return storeBay(store, "light_bay.json", "light_heats.csv");
}

void removeStore(const QString& path) {
    for (const char* suffix : {"", "-wal", "-shm", "-journal"}) QFile::remove(path + suffix);
}

/// A new store is filled beside its place and moved there when complete: a half-filled one is never found.
Result<Store> createFilled(const QString& path, std::initializer_list<Result<Done> (*)(Store&)> steps) {
    if (QFileInfo::exists(path)) return Store::create(path);  // refuses, with the reason
    const QString part = path + ".part";
    removeStore(part);
    {
        Result<Store> store = Store::create(part);
        if (!store) return store;
        for (const auto step : steps)
            if (Result<Done> done = step(store.value()); !done) {
                store = Error(done.error());  // closes the file
                removeStore(part);
                return store;
            }
    }
    if (!QFile::rename(part, path)) {
        removeStore(part);
        return Error{
            Fault::store, ("store " + path + ": the new file could not be put in its place").toStdString(), {}, {}};
    }
    return Store::open(path);
}

}  // namespace

Result<Store> createEmpty(const QString& path) { return createFilled(path, {storeLibrary}); }

Result<Store> createDemoShop(const QString& path) { return createFilled(path, {storeLibrary, storeShop}); }

}  // namespace soak
