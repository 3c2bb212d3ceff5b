// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QTemporaryDir>
#include <catch2/catch.hpp>
#include <optional>

#include "base/folders.h"
#include "db/demo.h"
#include "planner/core/shop_floor.h"

namespace soak::quillmere {

/// The invented demonstration shop in a store of its own, made once for the whole binary; its date is 2025-04-02.
struct Works {
    QTemporaryDir folder;
    std::optional<Store> store;
    std::optional<Shelf> shelf;

    Works() {
        auto made = createDemoShop(folder.filePath("demo.soak"));
        if (!made) FAIL(made.error().text());
        store.emplace(std::move(made).value());
        auto loaded = shelfFrom(*store, {});
        if (!loaded) FAIL(loaded.error().text());
        shelf.emplace(std::move(loaded).value());
    }
};
inline Works& works() {
    static Works made;
    return made;
}

inline Shelf shelfWith(const QString& band_rule) {
    Shelf shelf = *works().shelf;
    shelf.rules.band_rule = band_rule;
    return shelf;
}

/// The answer for one heat, cycle and furnace of the shop.
inline WindowAnswer ask(const QString& heat, const QString& cycle, const QString& furnace,
                        const QString& band_rule = "root of squares", std::optional<double> setpoint_C = {}) {
    auto job = jobFrom(*works().store, heat, cycle, furnace);
    if (!job) FAIL(job.error().text());
    job.value().setpoint_C = setpoint_C;
    static ReportCache cache;
    auto answer = judge(job.value(), shelfWith(band_rule), cache);
    if (!answer) FAIL(answer.error().text());
    return std::move(answer).value();
}

/// The limit whose cause begins with these words, or nullptr.
inline const Limit* limitOf(const WindowAnswer& answer, const QString& words) {
    for (const auto* side : {&answer.floors, &answer.ceilings})
        for (const Limit& limit : *side)
            if (limit.cause.startsWith(words)) return &limit;
    return nullptr;
}

inline std::vector<DeliveryItem> delivery(const char* file) {
    auto read = readCertificate(QString::fromStdString(productPath(file).string()));
    if (!read) FAIL(read.error().text());
    return read.value().delivery();
}

}  // namespace soak::quillmere
