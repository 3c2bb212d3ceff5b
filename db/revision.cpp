// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/revision.h"

#include <QJsonDocument>

#include "db/cycle_rows.h"
#include "db/journal.h"
#include "db/record_json.h"

namespace soak {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

QString named(const QString& name, int revision) { return QString("%1 revision %2").arg(name).arg(revision); }

QString stateOf(Transaction& transaction, const QString& name, int revision) {
    const auto known = transaction.ask("SELECT 1 FROM cycle WHERE name = ? AND revision = ?", {name, revision});
    if (!known) transaction.fail(refuse("cycle " + named(name, revision) + " is not in the store"));
    const auto state =
        transaction.ask("SELECT state FROM cycle_step WHERE cycle = ? AND revision = ? ORDER BY position DESC LIMIT 1",
                        {name, revision});
    return state ? state->toString() : "draft";
}

struct Step {
    QString state, action, customer;
    QStringList from;  ///< states that it may follow
};

/// One step, checked and journalled, in a transaction of its own.
Result<Done> take(Store& store, const QString& name, int revision, const Step& step, const Act& act) {
    Transaction transaction(store.database(), store.path(), step.action + " a cycle");
    transaction.at("cycle " + named(name, revision));
    permit(transaction, act.who, Right::approve);
    const QString present = stateOf(transaction, name, revision);
    if (!step.from.contains(present))
        transaction.fail(refuse(QString("it is %1 and cannot be %2").arg(present, step.action)));
    if (act.who.trimmed().isEmpty()) transaction.fail(refuse("a person's name is needed"));
    if (present != "draft" && act.why.trimmed().isEmpty())
        transaction.fail(refuse("a reason is needed: it was released"));
    if (step.action == "approved") {
        const auto frozen = transaction.ask(
            "SELECT s.revision || ' for ' || s.customer FROM cycle_step s WHERE s.cycle = ? AND s.state = 'frozen' AND "
            "s.position = (SELECT max(position) FROM cycle_step t WHERE t.cycle = s.cycle AND t.revision = s.revision)",
            {name});
        if (frozen)
            transaction.fail(
                refuse("revision " + frozen->toString() + " is frozen: unfreeze it with the customer's leave first"));
    }
    insertStep(transaction, name, revision, {step.state, step.customer, act.who, act.at, act.why});
    record(transaction, {0,
                         act.at,
                         act.who,
                         "cycle",
                         named(name, revision),
                         step.action,
                         act.why,
                         step.customer.isEmpty()
                             ? QByteArray()
                             : QJsonDocument(QJsonObject{{"customer", step.customer}}).toJson(QJsonDocument::Compact),
                         {}});
    return transaction.commit();
}

QString number(double value) { return QString::number(value, 'g', 10); }
QString number(const std::optional<double>& value) { return value ? number(*value) : QString("none"); }

QString limitText(const CycleLimit& limit) {
    return QString("%1 %2 low %3 high %4 margin %5 K (%6; %7)")
        .arg(limit.kind, limit.phase, number(limit.low), number(limit.high), number(limit.margin_K), limit.because,
             limit.source)
        .simplified();
}

QStringList limitTexts(const Cycle& cycle) {
    QStringList texts;
    for (const CycleLimit& limit : cycle.limits) texts << limitText(limit);
    return texts;
}

}  // namespace

Result<std::vector<CycleRevision>> cycleRevisions(const Store& store, const QString& name) {
    Result<std::vector<Cycle>> cycles = loadCycles(store, name);
    if (!cycles) return cycles.error();
    if (cycles.value().empty()) return refuse("cycle " + name + " is not in the store");
    std::vector<CycleRevision> revisions;
    for (Cycle& cycle : cycles.value()) revisions.push_back({std::move(cycle), {}});
    Rows rows(store.database(), store.path(), "reading a cycle's history",
              "SELECT revision, state, customer, who, at, why FROM cycle_step WHERE cycle = ? ORDER BY position",
              {name});
    while (rows.next())
        for (CycleRevision& one : revisions)
            if (one.cycle.revision == rows.integer(0))
                one.steps.push_back({rows.text(1), rows.text(2), rows.text(3), rows.text(4), rows.text(5)});
    if (rows.error()) return *rows.error();
    return revisions;
}

Result<int> draftCycle(Store& store, const Cycle& cycle, const Act& act) {
    Transaction transaction(store.database(), store.path(), "drafting a cycle");
    transaction.at("cycle " + cycle.name);
    permit(transaction, act.who, Right::plan);
    if (cycle.name.trimmed().isEmpty()) transaction.fail(refuse("a cycle needs a name"));
    const auto last = transaction.ask("SELECT max(revision) FROM cycle WHERE name = ?", {cycle.name});
    const int newest = last ? last->toInt() : 0;
    const bool conflict = transaction.ok() && newest != (newest == 0 ? 0 : cycle.revision);
    if (conflict) {
        // The other side's work is shown beside this one; nothing is merged and nothing is lost.
        const Result<std::vector<Cycle>> stored = loadCycles(store, cycle.name);
        const QStringList differ =
            stored ? cycleDifferences(stored.value().back(), cycle) : QStringList{"the stored one cannot be read"};
        const auto by =
            transaction.ask("SELECT who FROM cycle_step WHERE cycle = ? AND revision = ? ORDER BY position LIMIT 1",
                            {cycle.name, newest});
        transaction.fail(
            refuse(QString("revision %1 was stored meanwhile%2, while this was made from revision %3. "
                           "Stored -> yours: %4. Nothing of yours was stored; look at both and draft again")
                       .arg(newest)
                       .arg(by && !by->toString().isEmpty() ? " by " + by->toString() : QString())
                       .arg(cycle.revision)
                       .arg(differ.isEmpty() ? "no difference" : differ.join("; "))));
    }
    const int revision = insertCycle(transaction, cycle);
    insertStep(transaction, cycle.name, revision, {"draft", {}, act.who, act.at, act.why});
    record(transaction,
           {0, act.at, act.who, "cycle", named(cycle.name, revision), "drafted", act.why, recordText(cycle), {}});
    const Result<Done> done = transaction.commit();
    if (!done) return done.error();
    return revision;
}

Result<Done> approveCycle(Store& store, const QString& name, int revision, const Act& act) {
    return take(store, name, revision, {"approved", "approved", {}, {"draft"}}, act);
}

Result<Done> freezeCycle(Store& store, const QString& name, int revision, const QString& customer, const Act& act) {
    if (customer.trimmed().isEmpty()) return refuse("a cycle is frozen for a customer: name one");
    return take(store, name, revision, {"frozen", "frozen", customer, {"approved"}}, act);
}

Result<Done> unfreezeCycle(Store& store, const QString& name, int revision, const Act& act) {
    return take(store, name, revision, {"approved", "unfrozen", {}, {"frozen"}}, act);
}

Result<Done> withdrawCycle(Store& store, const QString& name, int revision, const Act& act) {
    return take(store, name, revision, {"withdrawn", "withdrawn", {}, {"draft", "approved", "frozen"}}, act);
}

QStringList cycleDifferences(const Cycle& from, const Cycle& to) {
    QStringList differ;
    const auto text = [&](const QString& what, const QString& a, const QString& b) {
        if (a != b) differ << QString("%1 \"%2\" -> \"%3\"").arg(what, a, b);
    };
    const auto figure = [&](const QString& what, double a, double b, const QString& unit) {
        if (a != b) differ << QString("%1 %2 -> %3 %4").arg(what, number(a), number(b), unit);
    };
    text("kind", from.kind, to.kind);
    figure("setpoint", from.setpoint_C, to.setpoint_C, "°C");
    text("grades", from.grades.join(", "), to.grades.join(", "));
    text("furnaces", from.furnaces.join(", "), to.furnaces.join(", "));
    text("soak rule", from.soak_rule, to.soak_rule);
    figure("soak", from.soak_base_min, to.soak_base_min, "min");
    figure("soak per 25 mm", from.soak_per_25mm_min, to.soak_per_25mm_min, "min");
    figure("section free of extra soak", from.soak_free_mm, to.soak_free_mm, "mm");
    text("cooling", from.cooling, to.cooling);
    text("quenches", from.quenches.join(", "), to.quenches.join(", "));
    text("note", from.note, to.note);
    const QStringList before = limitTexts(from), after = limitTexts(to);
    for (const QString& limit : before)
        if (!after.contains(limit)) differ << "limit taken away: " + limit;
    for (const QString& limit : after)
        if (!before.contains(limit)) differ << "limit added: " + limit;
    return differ;
}

}  // namespace soak
