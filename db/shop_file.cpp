// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/shop_file.h"

#include <QFileInfo>
#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <algorithm>

#include "db/csv.h"

namespace soak {
namespace {

/// Reads the fields of one object. The first field that is missing or of the wrong kind is kept as the error.
class Fields {
public:
    Fields(const QJsonValue& value, QString place) : object_(value.toObject()), place_(std::move(place)) {
        if (!value.isObject()) wrong("is not an object");
    }
    QString text(const QString& field) { return take(field, QJsonValue::String).toString(); }
    double number(const QString& field) { return take(field, QJsonValue::Double).toDouble(); }
    QJsonArray array(const QString& field) { return take(field, QJsonValue::Array).toArray(); }
    std::optional<double> maybe(const QString& field) {
        return object_.contains(field) ? std::optional<double>(number(field)) : std::nullopt;
    }
    QString optionalText(const QString& field) { return object_.contains(field) ? text(field) : QString(); }
    QStringList texts(const QString& field) {
        QStringList list;
        for (const QJsonValue entry : array(field)) {
            if (!entry.isString()) wrong(field + " must hold texts");
            list << entry.toString();
        }
        return list;
    }
    /// A list of exactly `count` numbers, such as "range_C": [600, 1150].
    std::vector<double> numbers(const QString& field, qsizetype count) { return numbersOf(array(field), field, count); }
    std::vector<double> numbersOf(const QJsonArray& list, const QString& field, qsizetype count) {
        std::vector<double> values(size_t(count), 0.0);
        if (list.size() != count || std::any_of(list.begin(), list.end(), [](auto v) { return !v.isDouble(); })) {
            wrong(QString("%1 must hold %2 numbers").arg(field).arg(count));
            return values;
        }
        for (qsizetype i = 0; i < count; ++i) values[size_t(i)] = list[i].toDouble();
        return values;
    }
    /// A date as 2025-04-02; an empty text is "not on record".
    QDate date(const QString& field) {
        const QString written = text(field);
        const QDate read = QDate::fromString(written, Qt::ISODate);
        if (!written.isEmpty() && !read.isValid()) wrong(field + " \"" + written + "\" is not a date like 2025-04-02");
        return read;
    }
    void wrong(const QString& what) {
        if (!error_) error_ = Error{Fault::data, what.toStdString(), {}, {place_.toStdString()}};
    }
    const std::optional<Error>& error() const { return error_; }

private:
    QJsonValue take(const QString& field, QJsonValue::Type type) {
        const QJsonValue value = object_.value(field);
        if (value.type() != type) wrong(field + (value.isUndefined() ? " is missing" : " is of the wrong kind"));
        return value;
    }
    QJsonObject object_;
    QString place_;
    std::optional<Error> error_;
};

Shop shopOf(Fields& fields) {
    return {fields.text("name"), fields.text("band_rule"), fields.number("tight_set_K"),
            fields.number("tight_computed_K"), fields.date("today")};
}

Quench quenchOf(Fields& fields) {
    const std::vector<double> transfer = fields.numbers("transfer_s", 2);
    return {fields.text("id"), fields.text("medium"), fields.text("serves"),
            transfer[0],       transfer[1],           fields.text("limits")};
}

Furnace furnaceOf(Fields& fields) {
    Furnace f;
    f.id = fields.text("id");
    f.kind = fields.text("kind");
    f.work_zone_mm = fields.text("work_zone_mm");
    const std::vector<double> range = fields.numbers("range_C", 2);
    f.minimum_C = range[0];
    f.maximum_C = range[1];
    f.uniformity_class = fields.text("uniformity_class");
    f.instrument_type = fields.text("instrument_type");
    const QString unit = fields.text("controller");
    if (unit != "C" && unit != "F") fields.wrong("controller must be \"C\" or \"F\"");
    f.controller_fahrenheit = unit == "F";
    f.step = fields.number("step");
    for (const QJsonValue point : fields.array("survey")) {
        const std::vector<double> values = fields.numbersOf(point.toArray(), "survey", 3);
        f.survey.push_back({values[0], values[1], values[2]});
    }
    f.surveyed = fields.date("surveyed");
    f.survey_due = fields.date("survey_due");
    f.accuracy_tested = fields.date("accuracy_tested");
    f.accuracy_due = fields.date("accuracy_due");
    f.sensor_installed = fields.date("sensor_installed");
    f.thermocouple = fields.text("thermocouple");
    f.thermocouple_class = int(fields.number("thermocouple_class"));
    f.instrument_K = fields.number("instrument_K");
    f.swing_K = fields.number("swing_K");
    f.offset_K = fields.number("offset_K");
    f.maximum_load_kg = fields.number("maximum_load_kg");
    f.quenches = fields.texts("quenches");
    f.note = fields.text("note");
    return f;
}

CycleLimit limitOf(const QJsonValue& value, Fields& cycle) {
    Fields fields(value, "limit");
    CycleLimit limit;
    limit.kind = fields.text("kind");
    limit.phase = fields.optionalText("phase");
    limit.low = fields.maybe("low");
    limit.high = fields.maybe("high");
    limit.margin_K = fields.maybe("margin_K").value_or(0);
    limit.because = fields.text("because");
    limit.source = fields.text("source");
    if (limit.low && limit.high && *limit.low >= *limit.high) fields.wrong("low must lie below high");
    if (fields.error()) cycle.wrong("limit " + limit.kind + ": " + QString::fromStdString(fields.error()->message));
    return limit;
}

Cycle cycleOf(Fields& fields) {
    Cycle cycle;
    cycle.name = fields.text("name");
    cycle.kind = fields.text("kind");
    cycle.grades = fields.texts("grades");
    cycle.furnaces = fields.texts("furnaces");
    cycle.setpoint_C = fields.number("setpoint_C");
    cycle.soak_rule = fields.text("soak_rule");
    cycle.soak_base_min = fields.number("soak_base_min");
    cycle.soak_per_25mm_min = fields.number("soak_per_25mm_min");
    cycle.soak_free_mm = fields.number("soak_free_mm");
    cycle.cooling = fields.text("cooling");
    cycle.quenches = fields.texts("quenches");
    for (const QJsonValue limit : fields.array("limits")) cycle.limits.push_back(limitOf(limit, fields));
    cycle.note = fields.text("note");
    return cycle;
}

/// Reads every object of a list; `what` and its id or name are the place in a message.
template <class Record>
std::optional<Error> readList(const QJsonArray& list, const QString& what, Record (*read)(Fields&),
                              std::vector<Record>& records) {
    for (const QJsonValue value : list) {
        const QJsonObject object = value.toObject();
        Fields fields(value, what + " " + object.value(object.contains("id") ? "id" : "name").toString());
        records.push_back(read(fields));
        if (fields.error()) return fields.error();
    }
    return {};
}

}  // namespace

Result<Furnace> furnaceFrom(const QJsonObject& json) {
    Fields fields(json, "furnace " + json["id"].toString());
    Furnace furnace = furnaceOf(fields);
    if (fields.error()) return *fields.error();
    return furnace;
}

Result<Cycle> cycleFrom(const QJsonObject& json) {
    Fields fields(json, "cycle " + json["name"].toString());
    Cycle cycle = cycleOf(fields);
    cycle.revision = json["revision"].toInt(1);
    if (fields.error()) return *fields.error();
    return cycle;
}

Result<ShopFile> readShopFile(const QString& path) {
    const Result<QByteArray> bytes = readFile(path);
    if (!bytes) return bytes.error();
    const std::string name = QFileInfo(path).fileName().toStdString();
    QJsonParseError parse;
    const QJsonDocument document = QJsonDocument::fromJson(bytes.value(), &parse);
    if (parse.error != QJsonParseError::NoError)
        return Error{
            Fault::data, QString("%1 at byte %2").arg(parse.errorString()).arg(parse.offset).toStdString(), {}, {name}};
    const QJsonObject root = document.object();
    ShopFile file;
    std::optional<Error> error;
    if (root.contains("shop")) {
        Fields shop(root.value("shop"), "shop");
        file.shop = shopOf(shop);
        error = shop.error();
    }
    if (!error) error = readList(root.value("quenches").toArray(), "quench", quenchOf, file.quenches);
    if (!error) error = readList(root.value("furnaces").toArray(), "furnace", furnaceOf, file.furnaces);
    if (!error) error = readList(root.value("cycles").toArray(), "cycle", cycleOf, file.cycles);
    if (error) return std::move(*error).within(name);
    return file;
}

}  // namespace soak
