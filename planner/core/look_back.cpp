// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/look_back.h"

#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <algorithm>
#include <cmath>

#include "base/units.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

/// A temperature of the sheet in °C, whichever unit the controller's was; nothing when the sheet has none.
std::optional<double> celsiusIn(const QJsonObject& sheet, const char* field) {
    const QJsonObject both = sheet[field].toObject();
    for (const char* which : {"controller", "other"}) {
        const QJsonObject quantity = both[which].toObject();
        if (quantity["unit"].toString() == "°C") return quantity["value"].toDouble();
    }
    const QJsonObject controller = both["controller"].toObject();
    if (controller["unit"].toString() == "°F") return celsiusFromFahrenheit(controller["value"].toDouble());
    return std::nullopt;
}

QString heatsIn(const QJsonObject& sheet) {
    QStringList numbers;
    for (const QJsonValue heat : sheet["heats"].toArray()) numbers << heat.toObject()["number"].toString();
    return numbers.join(", ");
}

Result<AffectedLoad> loadOf(const Sheet& sheet, double shift_K) {
    const auto document = QJsonDocument::fromJson(sheet.content);
    const QJsonObject content = document.object();
    const auto low_C = celsiusIn(content, "metal_low"), high_C = celsiusIn(content, "metal_high");
    if (!low_C || !high_C)
        return Error{Fault::data,
                     "the stored content of sheet " + sheet.number.toStdString() + " " + sheet.revision.toStdString() +
                         " gives no metal temperatures; look at the paper",
                     {},
                     {}};
    AffectedLoad load;
    load.sheet = sheet.number + " " + sheet.revision;
    load.heats = heatsIn(content);
    if (load.heats.isEmpty()) load.heats = sheet.heat;
    load.cycle = sheet.cycle;
    load.issued_by = sheet.issued_by;
    load.date = sheet.issued;
    if (const auto floor_C = celsiusIn(content, "window_low")) load.floor_margin_K = *low_C + shift_K - *floor_C;
    if (const auto ceiling_C = celsiusIn(content, "window_high"))
        load.ceiling_margin_K = *ceiling_C - (*high_C + shift_K);
    load.ceiling_side =
        load.ceiling_margin_K && (!load.floor_margin_K || *load.ceiling_margin_K <= *load.floor_margin_K);
    load.margin_K = load.ceiling_side ? *load.ceiling_margin_K : load.floor_margin_K.value_or(1e9);
    load.lost = load.margin_K < 0;
    const QString side = load.ceiling_side ? "hottest metal" : "coldest metal";
    load.sentence = load.margin_K >= 1e9
                        ? QString("no limit was written on this sheet")
                        : QString("%1 really %2 with %3 %4")
                              .arg(side, load.lost ? "outside" : "inside",
                                   withUnit(load.lost ? std::ceil(-load.margin_K) : std::floor(load.margin_K), "K"),
                                   load.lost ? "beyond its limit" : "to spare");
    return load;
}

}  // namespace

Result<std::vector<AffectedLoad>> lookBack(const std::vector<Sheet>& sheets, const FurnaceFinding& finding) {
    std::vector<AffectedLoad> loads;
    for (const Sheet& sheet : sheets) {
        const bool in_time = (!finding.since.isValid() || sheet.issued >= finding.since) &&
                             (!finding.until.isValid() || sheet.issued <= finding.until);
        if (sheet.furnace != finding.furnace || !in_time) continue;
        auto load = loadOf(sheet, finding.true_minus_read_K - finding.known_K);
        if (!load) return std::move(load).error();
        loads.push_back(std::move(load).value());
    }
    std::stable_sort(loads.begin(), loads.end(), [](const AffectedLoad& a, const AffectedLoad& b) {
        if (a.lost != b.lost) return a.lost;
        if (a.ceiling_side != b.ceiling_side) return a.ceiling_side;
        return a.margin_K < b.margin_K;
    });
    return loads;
}

}  // namespace soak
