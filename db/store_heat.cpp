// SPDX-License-Identifier: GPL-3.0-or-later
// Heats with their analyses, raw text included.
#include <QJsonDocument>
#include <QJsonObject>

#include "db/heat_number.h"
#include "db/heat_rows.h"
#include "db/journal.h"
#include "db/people.h"

namespace soak {
namespace {

using HeatById = std::map<int, Heat*>;

/// Every analysis of the heats that `where` picks; the first of a heat is its own, the others stand beside it.
std::optional<Error> addAnalyses(const Store& store, const HeatById& heats, const QString& where,
                                 const QVariantList& values) {
    Rows rows(store.database(), store.path(), "reading heats",
              "SELECT heat.id, analysis.position, analysis.kind, analysis.source, content.element, content.raw, "
              "content.wt, content.less_than, content.digit_wt, content.remark FROM heat "
              "JOIN analysis ON analysis.heat = heat.id LEFT JOIN content ON content.analysis = analysis.id " +
                  where + " ORDER BY heat.id, analysis.position",
              values);
    while (rows.next()) {
        Heat& heat = *heats.at(rows.integer(0));
        const auto position = size_t(rows.integer(1));
        if (position == 0) heat.analysis_kind = rows.text(2);
        if (position > heat.other_analyses.size()) heat.other_analyses.push_back({rows.text(2), {}, rows.text(3)});
        Analysis& analysis = position == 0 ? heat.analysis : heat.other_analyses[position - 1].analysis;
        if (rows.text(4).isEmpty()) continue;
        analysis[rows.text(4).toStdString()] = {rows.text(5), rows.maybe(6), rows.integer(7) != 0, rows.number(8),
                                                rows.text(9)};
    }
    return rows.error();
}

std::optional<Error> addProducts(const Store& store, const HeatById& heats, const QString& where,
                                 const QVariantList& values) {
    Rows rows(store.database(), store.path(), "reading heats",
              "SELECT heat.id, product.form, product.section_mm, product.source FROM heat "
              "JOIN product ON product.heat = heat.id " +
                  where + " ORDER BY heat.id, product.position",
              values);
    while (rows.next())
        heats.at(rows.integer(0))->other_products.push_back({rows.text(1), rows.maybe(2), rows.text(3)});
    return rows.error();
}

Result<std::vector<Heat>> load(const Store& store, const QString& where, const QVariantList& values) {
    std::vector<Heat> heats;
    std::vector<int> ids;
    {
        Rows rows(store.database(), store.path(), "reading heats",
                  "SELECT id, number, grade, product_form, section_mm, melt_route, source FROM heat " + where +
                      " ORDER BY id",
                  values);
        while (rows.next()) {
            Heat heat;
            ids.push_back(rows.integer(0));
            heat.number = rows.text(1);
            heat.grade = rows.text(2);
            heat.product_form = rows.text(3);
            heat.section_mm = rows.maybe(4);
            heat.melt_route = rows.text(5);
            heat.source = rows.text(6);
            heats.push_back(std::move(heat));
        }
        if (rows.error()) return *rows.error();
    }
    HeatById by_id;
    for (size_t i = 0; i < heats.size(); ++i) by_id[ids[i]] = &heats[i];
    for (const auto add : {addAnalyses, addProducts})
        if (std::optional<Error> error = add(store, by_id, where, values)) return *error;
    return heats;
}

/// `import`: NULL when the analysis came with its heat.
void insertAnalysis(Transaction& transaction, qint64 heat, int position, const OtherAnalysis& stored,
                    const QVariant& import = QVariant(QMetaType(QMetaType::LongLong))) {
    transaction.run("INSERT INTO analysis (heat, position, kind, source, import) VALUES (?, ?, ?, ?, ?)",
                    {heat, position, stored.kind, stored.source, import});
    const qint64 id = transaction.lastId();
    for (const auto& [element, content] : stored.analysis)
        transaction.run(
            "INSERT INTO content (analysis, element, raw, wt, less_than, digit_wt, remark) "
            "VALUES (?, ?, ?, ?, ?, ?, ?)",
            {id, QString::fromStdString(element), content.raw, nullable(content.wt), int(content.less_than),
             content.digit_wt, content.remark});
}

}  // namespace

void insertHeat(Transaction& transaction, const Heat& heat, qint64 import) {
    if (heat.number.trimmed().isEmpty())
        return transaction.fail(Error{Fault::input, "a heat without a number cannot be stored", {}, {}});
    if (transaction.ask("SELECT id FROM heat WHERE number = ?", {heat.number}))
        return transaction.fail(
            Error{Fault::input, "this number is stored already; nothing of the delivery was stored", {}, {}});
    transaction.run(
        "INSERT INTO heat (number, grade, product_form, section_mm, melt_route, source, import) "
        "VALUES (?, ?, ?, ?, ?, ?, ?)",
        {heat.number, heat.grade, heat.product_form, nullable(heat.section_mm), heat.melt_route, heat.source, import});
    const qint64 id = transaction.lastId();
    insertAnalysis(transaction, id, 0, {heat.analysis_kind, heat.analysis, heat.source});
    int position = 1;
    for (const OtherAnalysis& other : heat.other_analyses) insertAnalysis(transaction, id, position++, other);
    position = 0;
    for (const Product& product : heat.other_products)
        transaction.run("INSERT INTO product (heat, position, form, section_mm, source) VALUES (?, ?, ?, ?, ?)",
                        {id, position++, product.form, nullable(product.section_mm), product.source});
}

void addAnalysis(Transaction& transaction, const QString& number, const OtherAnalysis& analysis, qint64 import) {
    const std::optional<QVariant> heat = transaction.ask("SELECT id FROM heat WHERE number = ?", {number});
    if (!heat)
        return transaction.fail(
            Error{Fault::input, "this heat is not in the store any more; make the import's preview again", {}, {}});
    const std::optional<QVariant> position =
        transaction.ask("SELECT coalesce(max(position), 0) + 1 FROM analysis WHERE heat = ?", {*heat});
    insertAnalysis(transaction, heat->toLongLong(), position ? position->toInt() : 1, analysis, import);
}

QByteArray analysisJson(const Analysis& analysis) {
    QJsonObject object;
    for (const auto& [element, content] : analysis)
        object[QString::fromStdString(element)] =
            QJsonObject{{"raw", content.raw},
                        {"wt", content.wt ? QJsonValue(*content.wt) : QJsonValue()},
                        {"less_than", content.less_than},
                        {"digit_wt", content.digit_wt}};
    return QJsonDocument(object).toJson(QJsonDocument::Compact);
}

Analysis analysisFrom(const QByteArray& json) {
    Analysis analysis;
    const QJsonObject object = QJsonDocument::fromJson(json).object();
    for (auto at = object.begin(); at != object.end(); ++at) {
        const QJsonObject content = at.value().toObject();
        const QJsonValue wt = content["wt"];
        analysis[at.key().toStdString()] = {content["raw"].toString(),
                                            wt.isDouble() ? std::optional(wt.toDouble()) : std::nullopt,
                                            content["less_than"].toBool(),
                                            content["digit_wt"].toDouble(),
                                            {}};
    }
    return analysis;
}

Result<std::vector<Heat>> Store::heats() const { return load(*this, {}, {}); }

Result<Heat> Store::heat(const QString& number) const {
    Result<std::vector<Heat>> found = load(*this, "WHERE heat.number = ?", {number});
    if (!found) return found.error();
    if (!found.value().empty()) return std::move(found.value().front());
    QStringList numbers;
    Rows rows(database(), path_, "looking for a heat", "SELECT number FROM heat ORDER BY id");
    while (rows.next()) numbers << rows.text(0);
    if (rows.error()) return *rows.error();
    const QStringList near = nearNumbers(number, numbers);
    const QString offer = near.isEmpty() ? QString() : ". Did you mean " + near.join(" or ") + "?";
    return Error{Fault::input, ("heat " + number + " is not in the store" + offer).toStdString(), {}, {}};
}

Result<int> Store::storeHeats(const std::vector<Heat>& heats, const QString& source, const QDate& date) {
    Transaction transaction(database(), path_, "storing a delivery");
    permit(transaction, {}, Right::enter);
    transaction.run("INSERT INTO import (source, day, heats) VALUES (?, ?, ?)",
                    {source, date.toString(Qt::ISODate), int(heats.size())});
    const qint64 import = transaction.lastId();
    for (const Heat& heat : heats) {
        transaction.at("heat " + heat.number);
        insertHeat(transaction, heat, import);
    }
    record(transaction,
           {0, date.toString(Qt::ISODate), {}, "import", QString::number(import), "stored", {}, source.toUtf8(), {}});
    Result<Done> done = transaction.commit();
    if (!done) return std::move(done).error();
    return int(heats.size());
}

}  // namespace soak
