// SPDX-License-Identifier: GPL-3.0-or-later
// Grades and what is published about them.
#include <QRegularExpression>
#include <map>

#include "db/journal.h"
#include "db/sql.h"
#include "db/store.h"

namespace soak {
namespace {

using GradeById = std::map<QString, Grade*>;

std::optional<Error> addNames(const Store& store, const GradeById& grade) {
    Rows rows(store.database(), store.path(), "reading grades",
              "SELECT grade, name, near FROM grade_name ORDER BY grade, position");
    while (rows.next()) {
        Grade* owner = grade.at(rows.text(0));
        (rows.integer(2) ? owner->near_names : owner->names) << rows.text(1);
    }
    return rows.error();
}

std::optional<Error> addLimits(const Store& store, const GradeById& grade) {
    Rows rows(store.database(), store.path(), "reading grades",
              "SELECT grade, element, min_wt, max_wt, min_text, max_text FROM grade_limit");
    while (rows.next())
        grade.at(rows.text(0))->limits[rows.text(1).toStdString()] = {rows.maybe(2), rows.maybe(3), rows.text(4),
                                                                      rows.text(5)};
    return rows.error();
}

std::optional<Error> addRules(const Store& store, const GradeById& grade) {
    Rows rows(store.database(), store.path(), "reading grades",
              "SELECT grade, rule FROM grade_rule ORDER BY grade, position");
    while (rows.next()) grade.at(rows.text(0))->rules << rows.text(1);
    return rows.error();
}

void insertGrade(Transaction& transaction, const Grade& grade) {
    transaction.run(
        "INSERT INTO grade (id, position, standard, edition, family, seen, note) "
        "VALUES (?, (SELECT count(*) FROM grade), ?, ?, ?, ?, ?)",
        {grade.id, grade.standard, grade.edition, grade.family, grade.seen, grade.note});
    int position = 0;
    for (const bool near : {false, true})
        for (const QString& name : near ? grade.near_names : grade.names)
            transaction.run("INSERT INTO grade_name (grade, position, name, near) VALUES (?, ?, ?, ?)",
                            {grade.id, position++, name, int(near)});
    for (const auto& [element, limit] : grade.limits)
        transaction.run(
            "INSERT INTO grade_limit (grade, element, min_wt, max_wt, min_text, max_text) VALUES (?, ?, ?, ?, ?, ?)",
            {grade.id, QString::fromStdString(element), nullable(limit.min_wt), nullable(limit.max_wt), limit.min_text,
             limit.max_text});
    for (qsizetype i = 0; i < grade.rules.size(); ++i)
        transaction.run("INSERT INTO grade_rule (grade, position, rule) VALUES (?, ?, ?)",
                        {grade.id, i, grade.rules[i]});
}

}  // namespace

QStringList gradeNamesIn(const QString& words) {
    static const QRegularExpression between(R"(\s+/\s+|\s*[;,]\s*)");
    QStringList names;
    for (const QString& part : words.split(between, Qt::SkipEmptyParts)) names << part.trimmed();
    return names;
}

Result<std::vector<Grade>> Store::grades() const {
    std::vector<Grade> grades;
    {
        Rows rows(database(), path_, "reading grades",
                  "SELECT id, standard, edition, family, seen, note FROM grade ORDER BY position");
        while (rows.next()) {
            Grade grade;
            grade.id = rows.text(0);
            grade.standard = rows.text(1);
            grade.edition = rows.text(2);
            grade.family = rows.text(3);
            grade.seen = rows.text(4);
            grade.note = rows.text(5);
            grades.push_back(std::move(grade));
        }
        if (rows.error()) return *rows.error();
    }
    GradeById by_id;
    for (Grade& grade : grades) by_id[grade.id] = &grade;
    for (const auto add : {addNames, addLimits, addRules})
        if (std::optional<Error> error = add(*this, by_id)) return *error;
    return grades;
}

Result<std::vector<Grade>> Store::gradeRowsNamed(const QString& words) const {
    Result<std::vector<Grade>> all = grades();
    if (!all) return all;
    const QStringList wanted = gradeNamesIn(words);
    std::vector<Grade> named;
    for (Grade& grade : all.value()) {
        const bool is_named = std::any_of(wanted.begin(), wanted.end(), [&](const QString& name) {
            return grade.names.contains(name, Qt::CaseInsensitive);
        });
        if (is_named) named.push_back(std::move(grade));
    }
    return named;
}

Result<Done> Store::storeGrades(const std::vector<Grade>& grades) {
    Transaction transaction(database(), path_, "storing grades");
    for (const Grade& grade : grades) {
        transaction.at("grade " + grade.id);
        insertGrade(transaction, grade);
    }
    transaction.at({});
    record(transaction, {0, {}, {}, "grade", QString("%1 rows").arg(grades.size()), "stored", {}, {}, {}});
    return transaction.commit();
}

Result<std::vector<PublishedTreatment>> Store::treatments() const {
    Rows rows(database(), path_, "reading published treatments",
              "SELECT id, grade_key, kind, low_C, high_C, hold_rule, quench, result, source, seen, note FROM treatment "
              "ORDER BY position");
    std::vector<PublishedTreatment> treatments;
    while (rows.next())
        treatments.push_back({rows.text(0), rows.text(1), rows.text(2), rows.maybe(3), rows.maybe(4), rows.text(5),
                              rows.text(6), rows.text(7), rows.text(8), rows.text(9), rows.text(10)});
    if (rows.error()) return *rows.error();
    return treatments;
}

Result<std::vector<PublishedTreatment>> Store::treatmentsFor(const QString& grade_id) const {
    Result<std::vector<PublishedTreatment>> all = treatments();
    if (!all) return all;
    std::vector<PublishedTreatment> fitting;
    for (PublishedTreatment& treatment : all.value())
        if (grade_id == treatment.grade_key || grade_id.startsWith(treatment.grade_key + "-"))
            fitting.push_back(std::move(treatment));
    return fitting;
}

Result<Done> Store::storeTreatments(const std::vector<PublishedTreatment>& treatments) {
    Transaction transaction(database(), path_, "storing published treatments");
    for (const PublishedTreatment& row : treatments) {
        transaction.at("treatment " + row.row_id);
        transaction.run(
            "INSERT INTO treatment (id, position, grade_key, kind, low_C, high_C, hold_rule, quench, result, source, "
            "seen, note) VALUES (?, (SELECT count(*) FROM treatment), ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)",
            {row.row_id, row.grade_key, row.kind, nullable(row.low_C), nullable(row.high_C), row.hold_rule, row.quench,
             row.result, row.source, row.seen, row.note});
    }
    return transaction.commit();
}

Result<std::vector<Caution>> Store::cautions() const {
    Rows rows(database(), path_, "reading cautions",
              "SELECT id, applies_to, severity, text, defers_to, source FROM caution ORDER BY position");
    std::vector<Caution> cautions;
    while (rows.next())
        cautions.push_back({rows.text(0), rows.text(1), rows.text(2), rows.text(3), rows.text(4), rows.text(5)});
    if (rows.error()) return *rows.error();
    return cautions;
}

Result<Done> Store::storeCautions(const std::vector<Caution>& cautions) {
    Transaction transaction(database(), path_, "storing cautions");
    for (const Caution& row : cautions) {
        transaction.at("caution " + row.row_id);
        transaction.run(
            "INSERT INTO caution (id, position, applies_to, severity, text, defers_to, source) "
            "VALUES (?, (SELECT count(*) FROM caution), ?, ?, ?, ?, ?)",
            {row.row_id, row.applies_to, row.severity, row.text, row.defers_to, row.source});
    }
    return transaction.commit();
}

}  // namespace soak
