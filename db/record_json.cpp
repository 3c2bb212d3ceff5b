// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/record_json.h"

#include <QJsonArray>
#include <QJsonDocument>

namespace soak {
namespace {

QString day(const QDate& date) { return date.toString(Qt::ISODate); }

QJsonObject limitJson(const CycleLimit& limit) {
    QJsonObject json{
        {"kind", limit.kind}, {"margin_K", limit.margin_K}, {"because", limit.because}, {"source", limit.source}};
    if (!limit.phase.isEmpty()) json["phase"] = limit.phase;
    if (limit.low) json["low"] = *limit.low;
    if (limit.high) json["high"] = *limit.high;
    return json;
}

QJsonArray list(const QStringList& texts) { return QJsonArray::fromStringList(texts); }

}  // namespace

QJsonObject recordJson(const Furnace& f) {
    QJsonArray survey;
    for (const SurveyPoint& point : f.survey)
        survey.append(QJsonArray{point.temperature_C, point.coldest_K, point.hottest_K});
    return {{"id", f.id},
            {"kind", f.kind},
            {"work_zone_mm", f.work_zone_mm},
            {"range_C", QJsonArray{f.minimum_C, f.maximum_C}},
            {"uniformity_class", f.uniformity_class},
            {"instrument_type", f.instrument_type},
            {"controller", f.controller_fahrenheit ? "F" : "C"},
            {"step", f.step},
            {"survey", survey},
            {"surveyed", day(f.surveyed)},
            {"survey_due", day(f.survey_due)},
            {"accuracy_tested", day(f.accuracy_tested)},
            {"accuracy_due", day(f.accuracy_due)},
            {"sensor_installed", day(f.sensor_installed)},
            {"thermocouple", f.thermocouple},
            {"thermocouple_class", f.thermocouple_class},
            {"instrument_K", f.instrument_K},
            {"swing_K", f.swing_K},
            {"offset_K", f.offset_K},
            {"maximum_load_kg", f.maximum_load_kg},
            {"quenches", list(f.quenches)},
            {"note", f.note}};
}

QJsonObject recordJson(const Cycle& c) {
    QJsonArray limits;
    for (const CycleLimit& limit : c.limits) limits.append(limitJson(limit));
    return {{"name", c.name},
            {"revision", c.revision},
            {"kind", c.kind},
            {"grades", list(c.grades)},
            {"furnaces", list(c.furnaces)},
            {"setpoint_C", c.setpoint_C},
            {"soak_rule", c.soak_rule},
            {"soak_base_min", c.soak_base_min},
            {"soak_per_25mm_min", c.soak_per_25mm_min},
            {"soak_free_mm", c.soak_free_mm},
            {"cooling", c.cooling},
            {"quenches", list(c.quenches)},
            {"limits", limits},
            {"note", c.note}};
}

QJsonObject recordJson(const Quench& q) {
    return {{"id", q.id},
            {"medium", q.medium},
            {"serves", q.serves},
            {"transfer_s", QJsonArray{q.transfer_min_s, q.transfer_max_s}},
            {"limits", q.limits}};
}

QJsonObject recordJson(const Grade& g) {
    QJsonObject limits;
    for (const auto& [element, limit] : g.limits)
        limits[QString::fromStdString(element)] = QJsonArray{limit.min_text, limit.max_text};
    return {{"id", g.id},
            {"names", list(g.names)},
            {"near_names", list(g.near_names)},
            {"standard", g.standard},
            {"edition", g.edition},
            {"family", g.family},
            {"limits", limits},
            {"rules", list(g.rules)},
            {"note", g.note}};
}

QJsonObject recordJson(const Shop& s) {
    return {{"name", s.name},
            {"band_rule", s.band_rule},
            {"tight_set_K", s.tight_set_K},
            {"tight_computed_K", s.tight_computed_K},
            {"today", day(s.today)}};
}

template <class Record>
QByteArray recordText(const Record& record) {
    return QJsonDocument(recordJson(record)).toJson(QJsonDocument::Compact);
}
template QByteArray recordText(const Furnace&);
template QByteArray recordText(const Cycle&);
template QByteArray recordText(const Quench&);
template QByteArray recordText(const Grade&);
template QByteArray recordText(const Shop&);

}  // namespace soak
