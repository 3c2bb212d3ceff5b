// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/furnace_change.h"

#include <QJsonDocument>

#include "db/furnace_rows.h"
#include "db/journal.h"
#include "db/record_json.h"

namespace soak {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

/// Uniformity class -> K either way. Source: SAE AMS 2750, furnace classes (also db/library/furnace_rules.csv).
double classLimit_K(const QString& uniformity_class) {
    constexpr double limits_K[] = {3, 6, 8, 10, 14, 28};
    bool is_number = false;
    const int number = uniformity_class.toInt(&is_number);
    return is_number && number >= 1 && number <= 6 ? limits_K[number - 1] : 0;
}

QString text(const QJsonValue& value) {
    if (value.isArray()) return QJsonDocument(value.toArray()).toJson(QJsonDocument::Compact);
    return value.toVariant().toString();
}

void checkSurvey(const Furnace& f, QStringList& wrong) {
    const double limit_K = classLimit_K(f.uniformity_class);
    for (size_t i = 0; i < f.survey.size(); ++i) {
        const SurveyPoint& point = f.survey[i];
        const QString at = QString("survey at %1 °C: ").arg(point.temperature_C);
        if (i > 0 && point.temperature_C <= f.survey[i - 1].temperature_C)
            wrong << at + "temperatures must rise from one survey to the next";
        if (point.coldest_K > point.hottest_K) wrong << at + "the coldest point is hotter than the hottest";
        if (limit_K > 0 && (point.coldest_K < -limit_K || point.hottest_K > limit_K))
            wrong << at + QString("%1 to %2 K is wider than class %3 allows, ±%4 K")
                              .arg(point.coldest_K)
                              .arg(point.hottest_K)
                              .arg(f.uniformity_class)
                              .arg(limit_K);
    }
}

}  // namespace

QStringList furnaceFindings(const Furnace& f) {
    QStringList wrong;
    if (f.id.trimmed().isEmpty()) wrong << "a furnace needs an id";
    if (f.minimum_C >= f.maximum_C) wrong << "the lowest temperature must lie below the highest";
    if (f.step <= 0) wrong << "the controller's step must be above zero";
    for (const double part_K : {f.instrument_K, f.swing_K})
        if (part_K < 0) wrong << "instrument error and control swing are amounts either way: not below zero";
    if (f.surveyed.isValid() && f.survey_due.isValid() && f.survey_due <= f.surveyed)
        wrong << "the next survey is due before the last one";
    if (f.accuracy_tested.isValid() && f.accuracy_due.isValid() && f.accuracy_due <= f.accuracy_tested)
        wrong << "the next accuracy test is due before the last one";
    checkSurvey(f, wrong);
    return wrong;
}

QStringList furnaceDifferences(const Furnace& from, const Furnace& to) {
    const QJsonObject a = recordJson(from), b = recordJson(to);
    QStringList differ;
    for (const QString& field : a.keys())
        if (a[field] != b[field]) differ << QString("%1 %2 -> %3").arg(field, text(a[field]), text(b[field]));
    return differ;
}

Result<int> furnaceVersion(const Store& store, const QString& id) {
    Rows rows(store.database(), store.path(), "reading a furnace", "SELECT version FROM furnace WHERE id = ?", {id});
    const bool found = rows.next();
    if (rows.error()) return *rows.error();
    if (!found) return refuse("furnace " + id + " is not in the store");
    return rows.integer(0);
}

Result<int> changeFurnace(Store& store, const Furnace& furnace, int made_from, const Act& act) {
    const QStringList wrong = furnaceFindings(furnace);
    if (!wrong.isEmpty()) return refuse("furnace " + furnace.id + ": " + wrong.join("; "));
    if (act.why.trimmed().isEmpty()) return refuse("furnace " + furnace.id + ": a reason is needed");
    Transaction transaction(store.database(), store.path(), "changing a furnace");
    transaction.at("furnace " + furnace.id);
    permit(transaction, act.who, Right::plan);
    const auto version = transaction.ask("SELECT version FROM furnace WHERE id = ?", {furnace.id});
    if (!version) transaction.fail(refuse("it is not in the store"));
    const Result<Furnace> stored = store.furnace(furnace.id);
    if (version && stored && version->toInt() != made_from) {
        const QStringList differ = furnaceDifferences(stored.value(), furnace);
        transaction.fail(refuse("it was changed meanwhile. Stored -> yours: " +
                                (differ.isEmpty() ? QString("no difference") : differ.join("; ")) +
                                ". Nothing of yours was stored; look at both and change it again"));
    }
    const int next = made_from + 1;
    replaceFurnace(transaction, furnace, next);
    const QJsonObject detail{{"from", stored ? recordJson(stored.value()) : QJsonObject()},
                             {"to", recordJson(furnace)}};
    record(transaction, {0,
                         act.at,
                         act.who,
                         "furnace",
                         furnace.id,
                         "changed",
                         act.why,
                         QJsonDocument(detail).toJson(QJsonDocument::Compact),
                         {}});
    const Result<Done> done = transaction.commit();
    if (!done) return done.error();
    return next;
}

}  // namespace soak
