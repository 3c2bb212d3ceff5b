// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/sql.h"

#include <QSqlError>

#include "db/store_error.h"

namespace soak {
namespace {

/// Texts are never NULL in the store: an empty one is an empty one.
void bind(QSqlQuery& query, const QVariantList& values) {
    for (qsizetype i = 0; i < values.size(); ++i) {
        const bool is_null_text = values[i].metaType().id() == QMetaType::QString && values[i].toString().isNull();
        query.bindValue(int(i), is_null_text ? QVariant(QString("")) : values[i]);
    }
}

}  // namespace

Transaction::Transaction(const QSqlDatabase& database, QString path, QString doing)
    : database_(database), path_(std::move(path)), doing_(std::move(doing)) {
    open_ = run("BEGIN IMMEDIATE");
}

Transaction::~Transaction() {
    if (!open_) return;
    prepared_.clear();  // a statement that is still being read would keep the transaction open
    QSqlQuery(database_).exec("ROLLBACK");
}

QSqlQuery* Transaction::execute(const QString& sql, const QVariantList& values) {
    if (error_) return nullptr;
    auto [entry, is_new] = prepared_.try_emplace(sql, database_);
    QSqlQuery& query = entry->second;
    query.setForwardOnly(true);
    bool done = !is_new || query.prepare(sql);
    bind(query, values);
    done = done && query.exec();
    if (!done) {
        fail(storeError(query.lastError(), path_, doing_));
        return nullptr;
    }
    return &query;
}

bool Transaction::run(const QString& sql, const QVariantList& values) {
    QSqlQuery* query = execute(sql, values);
    if (!query) return false;
    last_id_ = query->lastInsertId().toLongLong();
    query->finish();
    return true;
}

std::optional<QVariant> Transaction::ask(const QString& sql, const QVariantList& values) {
    QSqlQuery* query = execute(sql, values);
    if (!query) return {};
    std::optional<QVariant> answer;
    if (query->next()) answer = query->value(0);
    query->finish();
    return answer;
}

void Transaction::fail(Error error) {
    if (error_) return;
    error_ = place_.isEmpty() ? std::move(error) : std::move(error).within(place_.toStdString());
}

Result<Done> Transaction::commit() {
    place_.clear();
    if (!run("COMMIT")) return *error_;  // the destructor rolls back
    open_ = false;
    return Done{};
}

Rows::Rows(const QSqlDatabase& database, QString path, QString doing, const QString& sql, const QVariantList& values)
    : query_(database), path_(std::move(path)), doing_(std::move(doing)) {
    query_.setForwardOnly(true);
    bool done = query_.prepare(sql);
    bind(query_, values);
    done = done && query_.exec();
    if (!done) error_ = storeError(query_.lastError(), path_, doing_);
}

bool Rows::next() {
    if (error_) return false;
    if (query_.next()) return true;
    if (query_.lastError().isValid()) error_ = storeError(query_.lastError(), path_, doing_);
    return false;
}

std::optional<double> Rows::maybe(int column) const {
    const QVariant value = query_.value(column);
    return value.isNull() ? std::optional<double>() : value.toDouble();
}

QVariant nullable(const std::optional<double>& value) {
    return value ? QVariant(*value) : QVariant(QMetaType(QMetaType::Double));
}

}  // namespace soak
