// SPDX-License-Identifier: GPL-3.0-or-later
#include <QFileInfo>

#include "commands.h"
#include "db/csv.h"
#include "db/store.h"
#include "output.h"
#include "signed_in.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

/// "N2=N ppm; Gew. [kg]=" -> what a person says about these columns. Only semicolons part: headers hold commas.
Result<ColumnChoices> choicesIn(const QString& text) {
    ColumnChoices choices;
    for (const QString& entry : text.split(';', Qt::SkipEmptyParts)) {
        const qsizetype equals = entry.lastIndexOf('=');
        const auto choice = equals > 0 ? columnChoiceOf(entry.mid(equals + 1)) : std::nullopt;
        if (!choice)
            return refuse("--columns: \"" + entry + "\" is not HEADER=MEANING; a meaning is " +
                          columnMeanings().mid(0, 6).join(", ") +
                          ", an element (with % or ppm or 0.001 % behind it), or nothing");
        choices[entry.left(equals).trimmed()] = *choice;
    }
    return choices;
}

Json asJson(const CellFinding& finding) {
    Json json{{"heat", finding.heat.toStdString()},     {"row", finding.line},
              {"column", finding.column.toStdString()}, {"raw", finding.raw.toStdString()},
              {"read", finding.read.toStdString()},     {"text", finding.text.toStdString()}};
    if (!finding.stored.isEmpty()) json["stored"] = finding.stored.toStdString();
    return json;
}

Json asJson(const ImportPlan& plan, const std::optional<ImportRecord>& stored) {
    Json json{{"heats", plan.heats}, {"analyses", plan.analyses}, {"findings", Json::array()}};
    for (const CellFinding& finding : plan.findings) json["findings"].push_back(asJson(finding));
    json["held"] = plan.held();
    json["new_heats"] = plan.new_heats.size();
    json["added_to"] = plan.additions.size();
    json["unchanged"] = plan.unchanged.size();
    json["supplier"] = plan.supplier.toStdString();
    json["columns"] = Json::array();
    const Certificate& file = plan.certificate;
    for (qsizetype i = 0; i < file.columns.size(); ++i) {
        const bool element = file.taken_for[i].size() > 0 && file.taken_for[i].front().isUpper();
        json["columns"].push_back({{"column", file.columns[i].trimmed().toStdString()},
                                   {"taken_for", file.taken_for[i].toStdString()},
                                   {"unit", element ? amountUnitText(file.units[size_t(i)]).toStdString() : ""}});
    }
    json["import"] = stored ? Json(stored->id) : Json();
    return json;
}

QString columnsText(const Certificate& file) {
    QStringList taken, out;
    for (qsizetype i = 0; i < file.columns.size(); ++i) {
        const QString name = file.columns[i].trimmed(), meaning = file.taken_for[i];
        const AmountUnit unit = file.units[size_t(i)];
        if (name.isEmpty()) continue;
        if (meaning.isEmpty())
            out << name;
        else if (unit != AmountUnit::percent)
            taken << name + " -> " + meaning + " in " + amountUnitText(unit);
        else
            taken << (name == meaning ? name : name + " -> " + meaning);
    }
    return "Columns: " + taken.join(", ") + (out.isEmpty() ? QString() : "\nKept out: " + out.join(", ")) + "\n";
}

QString asText(const ImportPlan& plan, const std::optional<ImportRecord>& stored, const QString& path) {
    const Certificate& file = plan.certificate;
    QString text = file.file + (plan.supplier.isEmpty() ? QString() : " from " + plan.supplier) +
                   QString(": %1 heats, %2 analyses\n").arg(plan.heats).arg(plan.analyses) + columnsText(file) +
                   QString("New: %1 heats. Beside stored heats: %2. Unchanged: %3. Held for a decision: %4 rows.\n")
                       .arg(plan.new_heats.size())
                       .arg(plan.additions.size())
                       .arg(plan.unchanged.size())
                       .arg(plan.held());
    for (const CertificateRow& row : file.rows)
        if (!row.usable()) text += "  held  " + row.heat.number + " " + row.held + "\n";
    for (const CellFinding& finding : plan.findings)
        if (!finding.refuses) text += "  " + finding.heat + " " + findingText(finding) + "\n";
    if (!stored) return text + "Preview: nothing was stored.\n";
    return text + QString("Stored as import %1. To take it back: soakwright import --undo %1 --store %2\n")
                      .arg(stored->id)
                      .arg(path);
}

Result<int> undo(Store& store, const Arguments& arguments) {
    const auto number = arguments.number("undo");
    if (!number) return number.error();
    const auto act = actOf(arguments, store);
    if (!act) return act.error();
    const auto undone = store.undoImport(int(number.value()), act.value());
    if (!undone) return undone.error();
    const ImportRecord& record = undone.value();
    if (arguments.has("json"))
        print(Json{{"import", record.id}, {"undone", true}, {"heats", record.heats}, {"analyses", record.analyses}});
    else
        print(QString("Import %1 (%2) is taken back: %3 heats, %4 analyses. Its file is kept.\n")
                  .arg(record.id)
                  .arg(record.file)
                  .arg(record.heats)
                  .arg(record.analyses));
    return 0;
}

}  // namespace

Result<int> importCommand(const QStringList& given) {
    const auto read = readArguments(
        given, {"store", "supplier", "columns", "by", "why", "date", "undo", "password-file"}, {"preview", "json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto path = arguments.required("store");
    if (!path) return path.error();
    const bool preview = arguments.has("preview");
    auto store = Store::open(path.value(), preview ? Access::read : Access::write);
    if (!store) return std::move(store).error();
    if (!arguments.text("undo").isEmpty()) return undo(store.value(), arguments);
    if (arguments.words.size() != 1) return refuse("use: soakwright import FILE --store STORE [--preview] [--json]");

    ImportOptions options;
    options.supplier = arguments.text("supplier");
    const auto choices = choicesIn(arguments.text("columns"));
    if (!choices) return choices.error();
    options.choices = choices.value();
    const auto bytes = readFile(arguments.words[0]);
    if (!bytes) return bytes.error();
    const auto plan = planImport(store.value(), bytes.value(), QFileInfo(arguments.words[0]).fileName(), options);
    if (!plan) return plan.error();
    std::optional<ImportRecord> stored;
    if (!preview) {
        const auto act = actOf(arguments, store.value());
        if (!act) return act.error();
        const QDate day = QDate::fromString(act.value().at, Qt::ISODate);
        auto record = store.value().storeImport(plan.value(), day, act.value().who);
        if (!record) return record.error();
        stored = std::move(record).value();
        if (!options.choices.empty() && !plan.value().supplier.isEmpty())
            if (auto kept = store.value().rememberColumns(plan.value().supplier, options.choices); !kept)
                return kept.error();
    }
    if (arguments.has("json"))
        print(asJson(plan.value(), stored));
    else
        print(asText(plan.value(), stored, path.value()));
    return plan.value().held() > 0 ? kNeedsDecision : 0;
}

}  // namespace soak::cli
