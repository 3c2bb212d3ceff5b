// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDate>
#include <QSqlDatabase>
#include <QString>
#include <optional>
#include <vector>

#include "base/result.h"
#include "db/import.h"
#include "db/people.h"
#include "db/records.h"

namespace soak {

enum class Access { write, read };

/// One store, one file (SQLite), one connection. A connection belongs to the thread that opened it: every thread opens
/// its own Store. Needs a QCoreApplication. Never reads the clock: dates are arguments.
/// Errors: Fault::store (no such file, not a store, newer version, locked, full, read-only, damaged), each naming the
/// file and what is still safe; Fault::input for a number or name that is not there.
class Store {
public:
    /// Opens an existing store and brings an older one up to date. Never creates a file.
    static Result<Store> open(const QString& path, Access access = Access::write);
    /// Makes an empty store with the present schema and nothing in it. Refuses a path that exists.
    static Result<Store> create(const QString& path);

    Store(Store&& other) noexcept;
    Store& operator=(Store&& other) noexcept;
    ~Store();

    const QString& path() const { return path_; }
    QSqlDatabase database() const { return QSqlDatabase::database(connection_, false); }

    // Grades. A certificate's words ("X2CrNiMoN22-5-3 / 1.4462") name every row that one of its parts names exactly;
    // near equivalents never count.
    Result<std::vector<Grade>> grades() const;
    Result<std::vector<Grade>> gradeRowsNamed(const QString& words) const;

    // Heats, in the order in which they were stored.
    Result<std::vector<Heat>> heats() const;
    Result<Heat> heat(const QString& number) const;
    /// Stores one delivery, all or nothing, and returns how many heats it held. Fault::input: a number that is stored
    /// already, or twice in the delivery.
    Result<int> storeHeats(const std::vector<Heat>& heats, const QString& source, const QDate& date);

    // Imports: see db/import.h for planImport().
    /// Stores what the plan found, all or nothing, with the file itself. Fault::cancelled when `progress` says stop;
    /// Fault::input when another station has stored one of the new heats since the plan was made.
    Result<ImportRecord> storeImport(const ImportPlan& plan, const QDate& date, const QString& by,
                                     const ImportProgress& progress = {});
    /// Takes everything back that the import stored; its record and its file stay. Fault::input when a sheet was issued
    /// for one of its heats, or a later import added to one of them.
    Result<ImportRecord> undoImport(int id, const Act& act = {});
    Result<std::vector<ImportRecord>> imports() const;
    /// The file of an import, byte by byte as it came; empty for heats that came without one.
    Result<QByteArray> importFile(int id) const;
    /// Rows that wait for a person's decision, of imports that were not undone.
    Result<std::vector<HeldRow>> heldRows() const;
    /// What this supplier's columns mean, as a person chose.
    Result<ColumnChoices> columnChoices(const QString& supplier) const;
    Result<Done> rememberColumns(const QString& supplier, const ColumnChoices& choices);

    // The shop.
    Result<Shop> shop() const;
    Result<Done> setShop(const Shop& shop);
    Result<std::vector<Furnace>> furnaces() const;
    Result<Furnace> furnace(const QString& id) const;
    Result<std::vector<Quench>> quenches() const;
    Result<std::vector<Cycle>> cycles() const;
    Result<Cycle> cycle(const QString& name) const;
    /// Standing cycles for a certificate's grade, matched by its exact names: "1.4408" finds a cycle for "1.4408".
    Result<std::vector<Cycle>> cyclesFor(const QString& grade_words) const;

    Result<Done> storeGrades(const std::vector<Grade>& grades);
    Result<Done> storeFurnaces(const std::vector<Furnace>& furnaces);
    Result<Done> storeQuenches(const std::vector<Quench>& quenches);
    /// A cycle name that is stored already gets the next revision; each is a draft (db/revision.h). cycles() and
    /// cycle() give the newest revision that is approved or frozen, or the newest draft where none is.
    Result<Done> storeCycles(const std::vector<Cycle>& cycles);

    // Published knowledge.
    Result<std::vector<PublishedTreatment>> treatments() const;
    /// By the id of a grade row: "en-1.4462-3" finds rows of "en-1.4462" too.
    Result<std::vector<PublishedTreatment>> treatmentsFor(const QString& grade_id) const;
    Result<std::vector<Caution>> cautions() const;
    Result<Done> storeTreatments(const std::vector<PublishedTreatment>& treatments);
    Result<Done> storeCautions(const std::vector<Caution>& cautions);

    // Sheets. Without a number: the next number of the date's year, revision A. With the number of an issued sheet: its
    // next revision, and the earlier one is superseded. Returns the sheet as stored: number, revision, replaces, hash.
    // Fault::input when its cycle's revision is neither approved nor frozen; a sheet that names no cycle is not asked.
    Result<Sheet> issueSheet(Sheet sheet, const QDate& date);
    Result<std::vector<Sheet>> sheets() const;
    /// The newest revision, or the one named: ("2025-0001", "A").
    Result<Sheet> sheet(const QString& number, const QString& revision = {}) const;

    // Care.
    /// What is wrong with the store, in words; empty when it is sound: pages, references, every sheet's hash.
    Result<QStringList> check() const;
    /// A complete, checked copy in one file, made while others go on writing. Refuses a path that exists.
    Result<Done> backup(const QString& path) const;
    /// A new store at `path` from a sound backup. Refuses a path that exists: a store in use is never overwritten.
    static Result<Done> restore(const QString& backup, const QString& path);

private:
    Store(QString path, QString connection) : path_(std::move(path)), connection_(std::move(connection)) {}
    void close();
    QString path_, connection_;
};

/// SHA-256 in hex over number, revision and content; what the printed code carries.
QString sheetHash(const QString& number, const QString& revision, const QByteArray& content);

/// The parts of a certificate's grade words: "X2CrNiMoN22-5-3 / 1.4462" -> both, "1.4408" -> itself.
QStringList gradeNamesIn(const QString& words);

}  // namespace soak
