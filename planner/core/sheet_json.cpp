// SPDX-License-Identifier: GPL-3.0-or-later
// A sheet to JSON and back. Each kind of value lists its fields once; writing and reading are two ways to visit them.
#include "planner/core/sheet_json.h"

#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <array>

namespace soak {
namespace {

constexpr int kShownHash = 12;  // digits that people compare; the code carries all of them

template <class Visit>
void fields(Visit&& visit, Quantity& it) {
    visit("value", it.value);
    visit("decimals", it.decimals);
    visit("unit", it.unit);
}
template <class Visit>
void fields(Visit&& visit, TwoUnits& it) {
    visit("controller", it.controller);
    visit("other", it.other);
}
template <class Visit>
void fields(Visit&& visit, SheetHeat& it) {
    visit("number", it.number);
    visit("grade", it.grade);
    visit("product_form", it.product_form);
    visit("pieces", it.pieces);
    visit("section", it.section);
}
template <class Visit>
void fields(Visit&& visit, SheetLimit& it) {
    visit("side", it.side);
    visit("cause", it.cause);
    visit("because", it.because);
    visit("source", it.source);
    visit("temperature", it.temperature);
    visit("uncertainty", it.uncertainty);
}
template <class Visit>
void fields(Visit&& visit, SheetCaution& it) {
    visit("id", it.id);
    visit("severity", it.severity);
    visit("text", it.text);
    visit("defers_to", it.defers_to);
}
template <class Visit>
void fields(Visit&& visit, SheetSensor& it) {
    visit("label", it.label);
    visit("what", it.what);
    visit("decides", it.decides);
    visit("x", it.x);
    visit("y", it.y);
}
template <class Visit>
void fields(Visit&& visit, LoadSketch& it) {
    visit("columns", it.columns);
    visit("rows", it.rows);
    visit("round", it.round);
    visit("spacing", it.spacing);
    visit("sensors", it.sensors);
    visit("work_zone", it.work_zone);
}
template <class Visit>
void fields(Visit&& visit, SheetContent& it) {
    visit("date", it.date);
    visit("valid_until", it.valid_until);
    visit("kind", it.kind);
    visit("cycle", it.cycle);
    visit("heats", it.heats);
    visit("customer", it.customer);
    visit("order", it.order);
    visit("specification", it.specification);
    visit("furnace", it.furnace);
    visit("controller_step", it.controller_step);
    visit("setpoint", it.setpoint);
    visit("metal_low", it.metal_low);
    visit("metal_high", it.metal_high);
    visit("band_rule", it.band_rule);
    visit("never_above", it.never_above);
    visit("preheat", it.preheat);
    visit("ramp", it.ramp);
    visit("atmosphere", it.atmosphere);
    visit("soak_sensor", it.soak_sensor);
    visit("soak_start", it.soak_start);
    visit("soak_minutes", it.soak_minutes);
    visit("soak_formula", it.soak_formula);
    visit("load_notes", it.load_notes);
    visit("thermocouple_notes", it.thermocouple_notes);
    visit("sketch", it.sketch);
    visit("quench_medium", it.quench_medium);
    visit("cooling", it.cooling);
    visit("medium_limits", it.medium_limits);
    visit("max_delay", it.max_delay);
    visit("next_step", it.next_step);
    visit("checks", it.checks);
    visit("if_wrong", it.if_wrong);
    visit("cautions", it.cautions);
    visit("verdict", it.verdict);
    visit("verdict_sentence", it.verdict_sentence);
    visit("margin", it.margin);
    visit("binding", it.binding);
    visit("window_low", it.window_low);
    visit("window_high", it.window_high);
    visit("decision_rule", it.decision_rule);
    visit("grade_check", it.grade_check);
    visit("grade_findings", it.grade_findings);
    visit("left_out", it.left_out);
    visit("published", it.published);
    visit("remarks", it.remarks);
    visit("program_version", it.program_version);
    visit("data_set", it.data_set);
    visit("data_version", it.data_version);
    visit("rules_version", it.rules_version);
    visit("deference", it.deference);
}

// Writing.
QJsonValue written(const QString& value) { return value; }
QJsonValue written(double value) { return value; }
QJsonValue written(int value) { return value; }
QJsonValue written(bool value) { return value; }
QJsonValue written(const QDate& value) { return value.toString(Qt::ISODate); }
QJsonValue written(const QStringList& value) { return QJsonArray::fromStringList(value); }
QJsonValue written(Side value) { return value == Side::floor ? "floor" : "ceiling"; }
QJsonValue written(Verdict value) { return word(value); }
template <class T>
QJsonValue written(const T& value);
template <class T>
QJsonValue written(const std::optional<T>& value) {
    return value ? written(*value) : QJsonValue();
}
template <class T>
QJsonValue written(const std::vector<T>& values) {
    QJsonArray array;
    for (const T& value : values) array.append(written(value));
    return array;
}
template <class T>
QJsonValue written(const T& value) {
    QJsonObject object;
    T copy = value;
    fields([&](const char* name, auto& field) { object[QLatin1String(name)] = written(field); }, copy);
    return object;
}

// Reading. A field that is not there keeps what it was.
void take(const QJsonValue& from, QString& value) { value = from.toString(); }
void take(const QJsonValue& from, double& value) { value = from.toDouble(); }
void take(const QJsonValue& from, int& value) { value = from.toInt(); }
void take(const QJsonValue& from, bool& value) { value = from.toBool(); }
void take(const QJsonValue& from, QDate& value) { value = QDate::fromString(from.toString(), Qt::ISODate); }
void take(const QJsonValue& from, QStringList& value) {
    value.clear();
    for (const QJsonValue& one : from.toArray()) value << one.toString();
}
void take(const QJsonValue& from, Side& value) { value = from.toString() == "floor" ? Side::floor : Side::ceiling; }
void take(const QJsonValue& from, Verdict& value) {
    for (const Verdict one :
         {Verdict::inside, Verdict::tight, Verdict::outside, Verdict::noWindow, Verdict::notComputed})
        if (word(one) == from.toString()) value = one;
}
template <class T>
void take(const QJsonValue& from, T& value);
template <class T>
void take(const QJsonValue& from, std::optional<T>& value) {
    value.reset();
    if (!from.isNull()) take(from, value.emplace());
}
template <class T>
void take(const QJsonValue& from, std::vector<T>& values) {
    values.clear();
    for (const QJsonValue& one : from.toArray()) take(one, values.emplace_back());
}
template <class T>
void take(const QJsonValue& from, T& value) {
    const QJsonObject object = from.toObject();
    fields(
        [&](const char* name, auto& field) {
            const auto found = object.find(QLatin1String(name));
            if (found != object.end()) take(*found, field);
        },
        value);
}

}  // namespace

QByteArray sheetJson(const SheetContent& content) {
    return QJsonDocument(written(content).toObject()).toJson(QJsonDocument::Compact);
}

Result<SheetContent> sheetFromJson(const QByteArray& json) {
    QJsonParseError trouble;
    const QJsonDocument document = QJsonDocument::fromJson(json, &trouble);
    if (!document.isObject())
        return Error{
            Fault::data, "the content of the sheet cannot be read: " + trouble.errorString().toStdString(), {}, {}};
    SheetContent content;
    take(document.object(), content);
    return content;
}

Result<SheetContent> issuedContent(const Sheet& sheet) {
    auto content = sheetFromJson(sheet.content);
    if (!content)
        return std::move(content).error().within(("sheet " + sheet.number + " " + sheet.revision).toStdString());
    SheetContent& page = content.value();
    page.draft = false;
    page.draft_reasons.clear();
    page.number = sheet.number;
    page.revision = sheet.revision;
    page.replaces = sheet.replaces;
    page.content_hash = sheet.hash.left(kShownHash);
    page.qr_payload = sheetCode(sheet);
    return content;
}

QString sheetCode(const Sheet& sheet) {
    return QString("soakwright:%1:%2:%3").arg(sheet.number, sheet.revision, sheet.hash);
}

}  // namespace soak
