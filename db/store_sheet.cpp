// SPDX-License-Identifier: GPL-3.0-or-later
// Issued sheets: numbered here alone, never changed, never removed.
#include <QCryptographicHash>
#include <QJsonDocument>

#include "db/journal.h"
#include "db/people.h"
#include "db/sql.h"
#include "db/store.h"

namespace soak {
namespace {

const QString kColumns =
    "number, revision, replaces, heat, cycle, cycle_revision, furnace, content, hash, issued_by, issued, status";

Sheet sheetOf(const Rows& rows) {
    Sheet sheet;
    sheet.number = rows.text(0);
    sheet.revision = rows.text(1);
    sheet.replaces = rows.text(2);
    sheet.heat = rows.text(3);
    sheet.cycle = rows.text(4);
    sheet.cycle_revision = rows.integer(5);
    sheet.furnace = rows.text(6);
    sheet.content = rows.text(7).toUtf8();
    sheet.hash = rows.text(8);
    sheet.issued_by = rows.text(9);
    sheet.issued = QDate::fromString(rows.text(10), Qt::ISODate);
    sheet.status = rows.text(11);
    return sheet;
}

/// A, B ... Z, AA, AB ...
QString nextRevision(QString revision) {
    for (qsizetype i = revision.size() - 1; i >= 0; --i) {
        if (revision[i] != 'Z') {
            revision[i] = QChar(revision[i].unicode() + 1);
            return revision;
        }
        revision[i] = 'A';
    }
    return "A" + revision;
}

/// The counter is a row of its own, so that a number is never given twice.
QString nextNumber(Transaction& transaction, int year) {
    transaction.run("INSERT INTO sheet_counter (year, last) VALUES (?, 0) ON CONFLICT (year) DO NOTHING", {year});
    transaction.run("UPDATE sheet_counter SET last = last + 1 WHERE year = ?", {year});
    const std::optional<QVariant> last = transaction.ask("SELECT last FROM sheet_counter WHERE year = ?", {year});
    return last ? QString("%1-%2").arg(year, 4, 10, QChar('0')).arg(last->toInt(), 4, 10, QChar('0')) : QString();
}

void nameNew(Transaction& transaction, Sheet& sheet, int year) {
    sheet.number = nextNumber(transaction, year);
    sheet.revision = "A";
    sheet.replaces.clear();
}

void nameNextRevision(Transaction& transaction, Sheet& sheet) {
    const std::optional<QVariant> last = transaction.ask(
        "SELECT revision FROM sheet WHERE number = ? ORDER BY length(revision) DESC, revision DESC LIMIT 1",
        {sheet.number});
    if (!last)
        return transaction.fail(Error{
            Fault::input, "there is no sheet " + sheet.number.toStdString() + " that this could replace", {}, {}});
    sheet.replaces = sheet.number + " " + last->toString();
    sheet.revision = nextRevision(last->toString());
    transaction.run("UPDATE sheet SET status = 'superseded' WHERE number = ? AND status = 'issued'", {sheet.number});
}

/// Only what a person with the right to do so approved goes to the furnace.
void checkCycle(Transaction& transaction, const Sheet& sheet) {
    if (sheet.cycle.isEmpty()) return;
    const auto state =
        transaction.ask("SELECT state FROM cycle_step WHERE cycle = ? AND revision = ? ORDER BY position DESC LIMIT 1",
                        {sheet.cycle, sheet.cycle_revision});
    const QString present = state ? state->toString() : "not in the store";
    if (present == "approved" || present == "frozen") return;
    transaction.fail(Error{Fault::input,
                           QString("cycle %1 revision %2 is %3: a sheet is issued from an approved cycle only. A draft "
                                   "can be printed")
                               .arg(sheet.cycle)
                               .arg(sheet.cycle_revision)
                               .arg(present == "draft" ? "a draft" : present)
                               .toStdString(),
                           {},
                           {}});
}

}  // namespace

QString sheetHash(const QString& number, const QString& revision, const QByteArray& content) {
    QCryptographicHash hash(QCryptographicHash::Sha256);
    hash.addData((number + '\n' + revision + '\n').toUtf8());
    hash.addData(content);
    return QString::fromLatin1(hash.result().toHex());
}

Result<Sheet> Store::issueSheet(Sheet sheet, const QDate& date) {
    if (!date.isValid()) return Error{Fault::input, "a sheet needs the date of its issue", {}, {}};
    if (!QJsonDocument::fromJson(sheet.content).isObject())
        return Error{Fault::input, "the content of a sheet must be one JSON object", {}, {}};
    Transaction transaction(database(), path_, "issuing a sheet");
    permit(transaction, sheet.issued_by, Right::approve);
    checkCycle(transaction, sheet);
    if (sheet.number.isEmpty())
        nameNew(transaction, sheet, date.year());
    else
        nameNextRevision(transaction, sheet);
    sheet.hash = sheetHash(sheet.number, sheet.revision, sheet.content);
    sheet.issued = date;
    sheet.status = "issued";
    transaction.run(
        "INSERT INTO sheet (" + kColumns + ") VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)",
        {sheet.number, sheet.revision, sheet.replaces, sheet.heat, sheet.cycle, sheet.cycle_revision, sheet.furnace,
         QString::fromUtf8(sheet.content), sheet.hash, sheet.issued_by, date.toString(Qt::ISODate), sheet.status});
    record(transaction, {0,
                         date.toString(Qt::ISODate),
                         sheet.issued_by,
                         "sheet",
                         sheet.number + " " + sheet.revision,
                         "issued",
                         {},
                         ("{\"hash\":\"" + sheet.hash + "\"}").toUtf8(),
                         {}});
    Result<Done> done = transaction.commit();
    if (!done) return std::move(done).error();
    return sheet;
}

Result<std::vector<Sheet>> Store::sheets() const {
    Rows rows(database(), path_, "reading sheets",
              "SELECT " + kColumns + " FROM sheet ORDER BY number, length(revision), revision");
    std::vector<Sheet> sheets;
    while (rows.next()) sheets.push_back(sheetOf(rows));
    if (rows.error()) return *rows.error();
    return sheets;
}

Result<Sheet> Store::sheet(const QString& number, const QString& revision) const {
    Rows rows(database(), path_, "reading a sheet",
              "SELECT " + kColumns +
                  " FROM sheet WHERE number = ? AND (? = '' OR revision = ?) "
                  "ORDER BY length(revision) DESC, revision DESC LIMIT 1",
              {number, revision, revision});
    const bool found = rows.next();
    if (rows.error()) return *rows.error();
    if (found) return sheetOf(rows);
    return Error{
        Fault::input, ("sheet " + (number + " " + revision).trimmed() + " is not in the store").toStdString(), {}, {}};
}

}  // namespace soak
