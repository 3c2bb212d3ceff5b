// SPDX-License-Identifier: GPL-3.0-or-later
// Imports: stored as one, undone as one, their files kept.
#include <QCryptographicHash>
#include <QJsonDocument>
#include <QJsonObject>

#include "db/heat_rows.h"
#include "db/journal.h"
#include "db/people.h"

namespace soak {
namespace {

constexpr int kStep = 50;  // heats between two calls of `progress`

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

ImportRecord recordOf(const Rows& rows) {
    ImportRecord record;
    record.id = rows.integer(0);
    record.file = rows.text(1);
    record.supplier = rows.text(2);
    record.stored_by = rows.text(3);
    record.day = QDate::fromString(rows.text(4), Qt::ISODate);
    record.heats = rows.integer(5);
    record.analyses = rows.integer(6);
    record.undone = rows.integer(7) != 0;
    record.file_hash = rows.text(8);
    return record;
}

ImportRecord recordFor(const ImportPlan& plan, const QDate& date, const QString& by) {
    ImportRecord record;
    record.file = plan.certificate.file;
    record.supplier = plan.supplier;
    record.stored_by = by;
    record.day = date;
    record.heats = int(plan.new_heats.size());
    for (const Heat& heat : plan.new_heats) record.analyses += 1 + int(heat.other_analyses.size());
    for (const Heat& heat : plan.additions) record.analyses += int(heat.other_analyses.size());
    record.file_hash = QCryptographicHash::hash(plan.bytes, QCryptographicHash::Sha256).toHex();
    return record;
}

void insertHeldRows(Transaction& transaction, const Certificate& certificate, int import) {
    for (const CertificateRow& row : certificate.rows) {
        if (row.usable()) continue;
        transaction.at(QString("held row, line %1").arg(row.line));
        transaction.run(
            "INSERT INTO held_row (import, line, heat, grade, kind, why, analysis) VALUES (?, ?, ?, ?, ?, ?, ?)",
            {import, row.line, row.heat.number, row.heat.grade, row.heat.analysis_kind, row.held,
             QString::fromUtf8(analysisJson(row.heat.analysis))});
    }
}

void insertAddition(Transaction& transaction, const Heat& addition, int import) {
    for (const OtherAnalysis& analysis : addition.other_analyses)
        addAnalysis(transaction, addition.number, analysis, import);
    for (const Product& product : addition.other_products)
        transaction.run(
            "INSERT INTO product (heat, position, form, section_mm, source, import) SELECT heat.id, "
            "(SELECT count(*) FROM product WHERE heat = heat.id), ?, ?, ?, ? FROM heat WHERE number = ?",
            {product.form, nullable(product.section_mm), product.source, import, addition.number});
}

/// What stands in the way of taking an import back, or nothing.
QString obstacleToUndo(Transaction& transaction, int id) {
    const auto sheet = transaction.ask(
        "SELECT sheet.number || ' for heat ' || sheet.heat FROM sheet JOIN heat ON heat.number = sheet.heat "
        "WHERE heat.import = ? ORDER BY sheet.number LIMIT 1",
        {id});
    if (sheet) return "sheet " + sheet->toString() + " was issued from it";
    const auto later = transaction.ask(
        "SELECT heat.number || ' by import ' || added.import FROM heat JOIN "
        "(SELECT heat, import FROM analysis UNION SELECT heat, import FROM product) AS added ON added.heat = heat.id "
        "WHERE heat.import = ? AND added.import IS NOT NULL LIMIT 1",
        {id});
    if (later) return "something was added to heat " + later->toString() + "; undo that one first";
    return {};
}

void removeRows(Transaction& transaction, int id) {
    const QString own = "(SELECT id FROM heat WHERE import = ?)";
    const QString analyses = "SELECT id FROM analysis WHERE import = ? OR heat IN " + own;
    transaction.run("DELETE FROM content WHERE analysis IN (" + analyses + ")", {id, id});
    transaction.run("DELETE FROM analysis WHERE import = ? OR heat IN " + own, {id, id});
    transaction.run("DELETE FROM product WHERE import = ? OR heat IN " + own, {id, id});
    transaction.run("DELETE FROM heat WHERE import = ?", {id});
    transaction.run("UPDATE import SET undone = 1 WHERE id = ?", {id});
}

QByteArray journalText(const ImportRecord& record) {
    return QJsonDocument(QJsonObject{{"file", record.file},
                                     {"supplier", record.supplier},
                                     {"heats", record.heats},
                                     {"analyses", record.analyses},
                                     {"file_hash", record.file_hash}})
        .toJson(QJsonDocument::Compact);
}

const QString kColumns = "id, source, supplier, stored_by, day, heats, analyses, undone, file_hash";

}  // namespace

Result<ImportRecord> Store::storeImport(const ImportPlan& plan, const QDate& date, const QString& by,
                                        const ImportProgress& progress) {
    ImportRecord record = recordFor(plan, date, by);
    Transaction transaction(database(), path_, "storing an import");
    permit(transaction, by, Right::enter);
    transaction.run(
        "INSERT INTO import (source, day, heats, supplier, analyses, stored_by, file_hash, file) "
        "VALUES (?, ?, ?, ?, ?, ?, ?, ?)",
        {record.file, date.toString(Qt::ISODate), record.heats, record.supplier, record.analyses, by, record.file_hash,
         qCompress(plan.bytes)});
    record.id = int(transaction.lastId());
    const int total = int(plan.new_heats.size() + plan.additions.size());
    int done = 0;
    const auto step = [&] {
        if (++done % kStep != 0 && done != total) return;
        if (progress && !progress(done, total))
            transaction.fail({Fault::cancelled, "the import was stopped; nothing of it was stored", {}, {}});
    };
    for (const Heat& heat : plan.new_heats) {
        transaction.at("heat " + heat.number);
        insertHeat(transaction, heat, record.id);
        step();
        if (!transaction.ok()) break;
    }
    for (const Heat& addition : plan.additions) {
        transaction.at("heat " + addition.number);
        insertAddition(transaction, addition, record.id);
        step();
        if (!transaction.ok()) break;
    }
    insertHeldRows(transaction, plan.certificate, record.id);
    soak::record(transaction, {0,
                               date.toString(Qt::ISODate),
                               by,
                               "import",
                               QString::number(record.id),
                               "stored",
                               {},
                               journalText(record),
                               {}});
    const Result<Done> stored = transaction.commit();
    if (!stored) return stored.error();
    return record;
}

Result<ImportRecord> Store::undoImport(int id, const Act& act) {
    const Result<std::vector<ImportRecord>> all = imports();
    if (!all) return all.error();
    for (ImportRecord record : all.value()) {
        if (record.id != id) continue;
        Transaction transaction(database(), path_, "undoing an import");
        permit(transaction, act.who, Right::enter);
        const auto undone = transaction.ask("SELECT undone FROM import WHERE id = ?", {id});
        if (undone && undone->toInt() != 0) return refuse(QString("import %1 was undone already").arg(id));
        if (const QString obstacle = obstacleToUndo(transaction, id); !obstacle.isEmpty())
            return refuse(QString("import %1 (%2) cannot be undone: %3").arg(id).arg(record.file, obstacle));
        removeRows(transaction, id);
        soak::record(transaction,
                     {0, act.at, act.who, "import", QString::number(id), "undone", act.why, journalText(record), {}});
        const Result<Done> stored = transaction.commit();
        if (!stored) return stored.error();
        record.undone = true;
        return record;
    }
    return refuse(QString("there is no import %1 in the store").arg(id));
}

Result<std::vector<ImportRecord>> Store::imports() const {
    Rows rows(database(), path_, "reading imports", "SELECT " + kColumns + " FROM import ORDER BY id");
    std::vector<ImportRecord> records;
    while (rows.next()) records.push_back(recordOf(rows));
    if (rows.error()) return *rows.error();
    return records;
}

Result<QByteArray> Store::importFile(int id) const {
    Rows rows(database(), path_, "reading an import's file", "SELECT file FROM import WHERE id = ?", {id});
    const bool found = rows.next();
    if (rows.error()) return *rows.error();
    if (!found) return refuse(QString("there is no import %1 in the store").arg(id));
    const QByteArray packed = rows.bytes(0);
    return packed.isEmpty() ? QByteArray() : qUncompress(packed);
}

Result<std::vector<HeldRow>> Store::heldRows() const {
    Rows rows(database(), path_, "reading held rows",
              "SELECT held_row.import, line, import.source, heat, grade, kind, why, analysis FROM held_row "
              "JOIN import ON import.id = held_row.import WHERE import.undone = 0 ORDER BY held_row.import, line");
    std::vector<HeldRow> held;
    while (rows.next())
        held.push_back({rows.integer(0), rows.integer(1), rows.text(2), rows.text(3), rows.text(4), rows.text(5),
                        rows.text(6), analysisFrom(rows.text(7).toUtf8())});
    if (rows.error()) return *rows.error();
    return held;
}

Result<ColumnChoices> Store::columnChoices(const QString& supplier) const {
    Rows rows(database(), path_, "reading a supplier's columns",
              "SELECT header, choice FROM column_choice WHERE supplier = ?", {supplier});
    ColumnChoices choices;
    while (rows.next())
        if (const auto choice = columnChoiceOf(rows.text(1))) choices[rows.text(0)] = *choice;
    if (rows.error()) return *rows.error();
    return choices;
}

Result<Done> Store::rememberColumns(const QString& supplier, const ColumnChoices& choices) {
    if (supplier.trimmed().isEmpty()) return refuse("columns are remembered for a supplier: name one");
    Transaction transaction(database(), path_, "remembering a supplier's columns");
    for (const auto& [header, choice] : choices) {
        transaction.run("DELETE FROM column_choice WHERE supplier = ? AND header = ?", {supplier, header});
        transaction.run("INSERT INTO column_choice (supplier, header, choice) VALUES (?, ?, ?)",
                        {supplier, header, columnChoiceText(choice)});
    }
    return transaction.commit();
}

}  // namespace soak
