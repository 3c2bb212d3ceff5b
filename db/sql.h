// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QSqlDatabase>
#include <QSqlQuery>
#include <QVariantList>
#include <map>
#include <optional>

#include "base/result.h"

namespace soak {

/// One write transaction. Opened at once (BEGIN IMMEDIATE): a busy store is met here, not halfway. The first failure
/// sticks: later statements do nothing, commit() returns it, and nothing of the transaction remains.
class Transaction {
public:
    Transaction(const QSqlDatabase& database, QString path, QString doing);
    Transaction(const Transaction&) = delete;
    Transaction& operator=(const Transaction&) = delete;
    ~Transaction();  ///< rolls back unless commit() succeeded

    /// Names what is being stored, for messages: "heat 004731".
    void at(const QString& place) { place_ = place; }
    /// Runs one statement (prepared once for each text); false once anything has failed.
    bool run(const QString& sql, const QVariantList& values = {});
    /// The first column of the first row, or nothing.
    std::optional<QVariant> ask(const QString& sql, const QVariantList& values = {});
    qint64 lastId() const { return last_id_; }
    void fail(Error error);
    bool ok() const { return !error_; }
    Result<Done> commit();

private:
    QSqlQuery* execute(const QString& sql, const QVariantList& values);
    QSqlDatabase database_;
    QString path_, doing_, place_;
    std::map<QString, QSqlQuery> prepared_;
    std::optional<Error> error_;
    qint64 last_id_ = 0;
    bool open_ = false;
};

/// A question to the store, row by row. After the last row `error()` says whether it ended early.
class Rows {
public:
    Rows(const QSqlDatabase& database, QString path, QString doing, const QString& sql,
         const QVariantList& values = {});
    bool next();
    QString text(int column) const { return query_.value(column).toString(); }
    double number(int column) const { return query_.value(column).toDouble(); }
    int integer(int column) const { return query_.value(column).toInt(); }
    std::optional<double> maybe(int column) const;
    QByteArray bytes(int column) const { return query_.value(column).toByteArray(); }
    std::optional<Error> error() const { return error_; }

private:
    QSqlQuery query_;
    QString path_, doing_;
    std::optional<Error> error_;
};

/// Nothing becomes NULL.
QVariant nullable(const std::optional<double>& value);

}  // namespace soak
