// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/sheet_issue.h"

#include <QCryptographicHash>
#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>

#include "planner/core/grade_check.h"

namespace soak {
namespace {

constexpr int kShownHash = 12;  // digits that people compare; the code carries all of them

QJsonArray list(const QStringList& lines) { return QJsonArray::fromStringList(lines); }

QJsonObject json(const Quantity& quantity) {
    return {{"value", quantity.value}, {"decimals", quantity.decimals}, {"unit", quantity.unit}};
}
QJsonObject json(const TwoUnits& both) {
    QJsonObject object{{"controller", json(both.controller)}};
    if (both.other) object["other"] = json(*both.other);
    return object;
}
template <class T>
QJsonValue json(const std::optional<T>& value) {
    return value ? QJsonValue(json(*value)) : QJsonValue();
}

QJsonArray heatsJson(const SheetContent& content) {
    QJsonArray heats;
    for (const SheetHeat& heat : content.heats)
        heats.append(QJsonObject{{"number", heat.number},
                                 {"grade", heat.grade},
                                 {"product_form", heat.product_form},
                                 {"section", json(heat.section)}});
    return heats;
}
QJsonArray bindingJson(const SheetContent& content) {
    QJsonArray limits;
    for (const SheetLimit& limit : content.binding)
        limits.append(QJsonObject{{"side", limit.side == Side::floor ? "floor" : "ceiling"},
                                  {"cause", limit.cause},
                                  {"because", limit.because},
                                  {"source", limit.source},
                                  {"temperature", json(limit.temperature)},
                                  {"uncertainty", json(limit.uncertainty)}});
    return limits;
}
QJsonArray cautionsJson(const SheetContent& content) {
    QJsonArray cautions;
    for (const SheetCaution& caution : content.cautions)
        cautions.append(QJsonObject{{"id", caution.id},
                                    {"severity", caution.severity},
                                    {"text", caution.text},
                                    {"defers_to", caution.defers_to}});
    return cautions;
}

}  // namespace

QByteArray sheetJson(const SheetContent& content) {
    const QJsonObject object{
        {"date", content.date.toString(Qt::ISODate)},
        {"kind", content.kind},
        {"cycle", content.cycle},
        {"heats", heatsJson(content)},
        {"specification", content.specification},
        {"furnace", content.furnace},
        {"setpoint", json(content.setpoint)},
        {"metal_low", json(content.metal_low)},
        {"metal_high", json(content.metal_high)},
        {"band_rule", content.band_rule},
        {"never_above", json(content.never_above)},
        {"soak_sensor", content.soak_sensor},
        {"soak_start", json(content.soak_start)},
        {"soak_minutes", content.soak_minutes ? QJsonValue(*content.soak_minutes) : QJsonValue()},
        {"soak_formula", content.soak_formula},
        {"load_notes", list(content.load_notes)},
        {"thermocouple_notes", list(content.thermocouple_notes)},
        {"quench_medium", content.quench_medium},
        {"cooling", content.cooling},
        {"medium_limits", list(content.medium_limits)},
        {"cautions", cautionsJson(content)},
        {"verdict", word(content.verdict)},
        {"verdict_sentence", content.verdict_sentence},
        {"margin", json(content.margin)},
        {"binding", bindingJson(content)},
        {"window_low", json(content.window_low)},
        {"window_high", json(content.window_high)},
        {"decision_rule", content.decision_rule},
        {"grade_check", content.grade_check},
        {"grade_findings", list(content.grade_findings)},
        {"left_out", list(content.left_out)},
        {"published", list(content.published)},
        {"remarks", list(content.remarks)},
        {"program_version", content.program_version},
        {"data_set", content.data_set},
        {"data_version", content.data_version},
        {"rules_version", content.rules_version},
    };
    return QJsonDocument(object).toJson(QJsonDocument::Compact);
}

Result<SheetContent> draftSheet(const Store& store, const WindowAnswer& answer, const Job& job,
                                const ShopRules& rules) {
    auto quenches = store.quenches();
    if (!quenches) return std::move(quenches).error();
    auto cautions = store.cautions();
    if (!cautions) return std::move(cautions).error();
    auto grades = store.grades();
    if (!grades) return std::move(grades).error();
    SheetRequest request{answer, job, rules, std::move(quenches).value(), std::move(cautions).value(), {}};
    if (const Grade* row = mainRow(job.heat, grades.value()))
        request.specification = row->edition == "unknown" ? row->standard : row->standard + ":" + row->edition;
    SheetContent content = makeSheet(request);
    content.content_hash =
        QCryptographicHash::hash(sheetJson(content), QCryptographicHash::Sha256).toHex().left(kShownHash);
    return content;
}

Result<SheetContent> issueSheet(Store& store, const WindowAnswer& answer, const Job& job, const ShopRules& rules,
                                const QString& released_by) {
    const QStringList obstacles = obstaclesToIssue(answer);
    if (!obstacles.isEmpty())
        return Error{
            Fault::input,
            ("this sheet may not be issued: " + obstacles.join("; ") + ". A draft can be printed.").toStdString(),
            {},
            {}};
    auto drafted = draftSheet(store, answer, job, rules);
    if (!drafted) return drafted;
    SheetContent content = std::move(drafted).value();

    Sheet sheet;
    sheet.heat = job.heat.number;
    sheet.cycle = job.cycle.name;
    sheet.cycle_revision = job.cycle.revision;
    sheet.furnace = job.furnace.id;
    sheet.content = sheetJson(content);
    sheet.issued_by = released_by;
    const auto stored = store.issueSheet(sheet, rules.today);
    if (!stored) return stored.error();
    content.draft = false;
    content.draft_reasons.clear();
    content.number = stored.value().number;
    content.revision = stored.value().revision;
    content.replaces = stored.value().replaces;
    content.content_hash = stored.value().hash.left(kShownHash);
    content.qr_payload = QString("soakwright:%1:%2:%3").arg(content.number, content.revision, stored.value().hash);
    return content;
}

}  // namespace soak
