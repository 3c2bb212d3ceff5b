// SPDX-License-Identifier: GPL-3.0-or-later
// The shop's own records: rules, furnaces, quenches, cycles.
#include <map>

#include "db/cycle_rows.h"
#include "db/furnace_rows.h"
#include "db/journal.h"
#include "db/record_json.h"

namespace soak {
namespace {

QString day(const QDate& date) { return date.toString(Qt::ISODate); }
QDate dayOf(const QString& text) { return QDate::fromString(text, Qt::ISODate); }

Error notThere(const QString& what, const QString& name, const QStringList& known) {
    const QString message =
        QString("%1 %2 is not in the store; it holds %3").arg(what, name, known.isEmpty() ? "none" : known.join(", "));
    return Error{Fault::input, message.toStdString(), {}, {}};
}

std::optional<Error> addSurvey(const Store& store, const std::map<QString, Furnace*>& furnace) {
    Rows rows(store.database(), store.path(), "reading furnaces",
              "SELECT furnace, temperature_C, coldest_K, hottest_K FROM survey_point ORDER BY furnace, temperature_C");
    while (rows.next()) furnace.at(rows.text(0))->survey.push_back({rows.number(1), rows.number(2), rows.number(3)});
    return rows.error();
}

std::optional<Error> addQuenches(const Store& store, const std::map<QString, Furnace*>& furnace) {
    Rows rows(store.database(), store.path(), "reading furnaces",
              "SELECT furnace, quench FROM furnace_quench ORDER BY furnace, position");
    while (rows.next()) furnace.at(rows.text(0))->quenches << rows.text(1);
    return rows.error();
}

Furnace furnaceOf(const Rows& rows) {
    Furnace f;
    f.id = rows.text(0);
    f.kind = rows.text(1);
    f.work_zone_mm = rows.text(2);
    f.uniformity_class = rows.text(3);
    f.instrument_type = rows.text(4);
    f.minimum_C = rows.number(5);
    f.maximum_C = rows.number(6);
    f.controller_fahrenheit = rows.integer(7) != 0;
    f.step = rows.number(8);
    f.surveyed = dayOf(rows.text(9));
    f.survey_due = dayOf(rows.text(10));
    f.accuracy_tested = dayOf(rows.text(11));
    f.accuracy_due = dayOf(rows.text(12));
    f.sensor_installed = dayOf(rows.text(13));
    f.thermocouple = rows.text(14);
    f.thermocouple_class = rows.integer(15);
    f.instrument_K = rows.number(16);
    f.swing_K = rows.number(17);
    f.offset_K = rows.number(18);
    f.maximum_load_kg = rows.number(19);
    f.note = rows.text(20);
    return f;
}

/// Survey and quenches hang on the furnace's own row.
void insertFurnaceParts(Transaction& transaction, const Furnace& f) {
    for (const SurveyPoint& point : f.survey)
        transaction.run("INSERT INTO survey_point (furnace, temperature_C, coldest_K, hottest_K) VALUES (?, ?, ?, ?)",
                        {f.id, point.temperature_C, point.coldest_K, point.hottest_K});
    for (qsizetype i = 0; i < f.quenches.size(); ++i)
        transaction.run("INSERT INTO furnace_quench (furnace, position, quench) VALUES (?, ?, ?)",
                        {f.id, i, f.quenches[i]});
}

/// The values of a furnace's own row behind its id, in the order of the columns below.
QVariantList furnaceValues(const Furnace& f) {
    return {f.kind,
            f.work_zone_mm,
            f.uniformity_class,
            f.instrument_type,
            f.minimum_C,
            f.maximum_C,
            int(f.controller_fahrenheit),
            f.step,
            day(f.surveyed),
            day(f.survey_due),
            day(f.accuracy_tested),
            day(f.accuracy_due),
            day(f.sensor_installed),
            f.thermocouple,
            f.thermocouple_class,
            f.instrument_K,
            f.swing_K,
            f.offset_K,
            f.maximum_load_kg,
            f.note};
}

void insertFurnace(Transaction& transaction, const Furnace& f) {
    transaction.run(
        "INSERT INTO furnace (id, kind, work_zone_mm, uniformity_class, instrument_type, minimum_C, "
        "maximum_C, controller_fahrenheit, step, surveyed, survey_due, accuracy_tested, accuracy_due, "
        "sensor_installed, thermocouple, thermocouple_class, instrument_K, swing_K, offset_K, maximum_load_kg, note, "
        "position) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, "
        "(SELECT count(*) FROM furnace))",
        QVariantList{f.id} + furnaceValues(f));
    insertFurnaceParts(transaction, f);
}

using CycleByRevision = std::map<std::pair<QString, int>, Cycle*>;

/// A row of a revision that was not asked for belongs to no cycle here.
Cycle* asked(const CycleByRevision& cycles, const Rows& rows) {
    const auto found = cycles.find({rows.text(0), rows.integer(1)});
    return found == cycles.end() ? nullptr : found->second;
}

std::optional<Error> addLists(const Store& store, const CycleByRevision& cycles) {
    Rows rows(store.database(), store.path(), "reading cycles",
              "SELECT cycle, revision, list, entry FROM cycle_list ORDER BY cycle, revision, list, position");
    while (rows.next()) {
        Cycle* cycle = asked(cycles, rows);
        if (!cycle) continue;
        const QString list = rows.text(2);
        (list == "grade" ? cycle->grades : list == "furnace" ? cycle->furnaces : cycle->quenches) << rows.text(3);
    }
    return rows.error();
}

std::optional<Error> addCycleLimits(const Store& store, const CycleByRevision& cycles) {
    Rows rows(store.database(), store.path(), "reading cycles",
              "SELECT cycle, revision, kind, phase, low, high, margin_K, because, source FROM cycle_limit "
              "ORDER BY cycle, revision, position");
    while (rows.next())
        if (Cycle* cycle = asked(cycles, rows))
            cycle->limits.push_back(
                {rows.text(2), rows.text(3), rows.maybe(4), rows.maybe(5), rows.number(6), rows.text(7), rows.text(8)});
    return rows.error();
}

/// The revisions that `where` picks, whole.
Result<std::vector<Cycle>> load(const Store& store, const QString& where, const QVariantList& values) {
    std::vector<Cycle> cycles;
    {
        Rows rows(store.database(), store.path(), "reading cycles",
                  "SELECT name, revision, kind, setpoint_C, soak_rule, soak_base_min, soak_per_25mm_min, "
                  "soak_free_mm, cooling, note FROM cycle WHERE " +
                      where + " ORDER BY position, revision",
                  values);
        while (rows.next()) {
            Cycle cycle;
            cycle.name = rows.text(0);
            cycle.revision = rows.integer(1);
            cycle.kind = rows.text(2);
            cycle.setpoint_C = rows.number(3);
            cycle.soak_rule = rows.text(4);
            cycle.soak_base_min = rows.number(5);
            cycle.soak_per_25mm_min = rows.number(6);
            cycle.soak_free_mm = rows.number(7);
            cycle.cooling = rows.text(8);
            cycle.note = rows.text(9);
            cycles.push_back(std::move(cycle));
        }
        if (rows.error()) return *rows.error();
    }
    CycleByRevision by_revision;
    for (Cycle& cycle : cycles) by_revision[{cycle.name, cycle.revision}] = &cycle;
    for (const auto add : {addLists, addCycleLimits})
        if (std::optional<Error> error = add(store, by_revision)) return *error;
    return cycles;
}

void insertLimit(Transaction& transaction, const Cycle& cycle, int revision, size_t position) {
    const CycleLimit& limit = cycle.limits[position];
    transaction.run(
        "INSERT INTO cycle_limit (cycle, revision, position, kind, phase, low, high, margin_K, because, source) "
        "VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?)",
        {cycle.name, revision, int(position), limit.kind, limit.phase, nullable(limit.low), nullable(limit.high),
         limit.margin_K, limit.because, limit.source});
}

void insertList(Transaction& transaction, const Cycle& cycle, int revision, const QString& list,
                const QStringList& entries) {
    for (qsizetype i = 0; i < entries.size(); ++i)
        transaction.run("INSERT INTO cycle_list (cycle, revision, list, position, entry) VALUES (?, ?, ?, ?, ?)",
                        {cycle.name, revision, list, i, entries[i]});
}

/// The state of a revision: that of its last step.
const QString kState =
    "coalesce((SELECT state FROM cycle_step s WHERE s.cycle = c.name AND s.revision = c.revision "
    "ORDER BY position DESC LIMIT 1), 'draft')";

}  // namespace

void replaceFurnace(Transaction& transaction, const Furnace& f, int version) {
    transaction.run(
        "UPDATE furnace SET kind = ?, work_zone_mm = ?, uniformity_class = ?, instrument_type = ?, minimum_C = ?, "
        "maximum_C = ?, controller_fahrenheit = ?, step = ?, surveyed = ?, survey_due = ?, accuracy_tested = ?, "
        "accuracy_due = ?, sensor_installed = ?, thermocouple = ?, thermocouple_class = ?, instrument_K = ?, "
        "swing_K = ?, offset_K = ?, maximum_load_kg = ?, note = ?, version = ? WHERE id = ?",
        furnaceValues(f) + QVariantList{version, f.id});
    for (const char* part : {"survey_point", "furnace_quench"})
        transaction.run(QString("DELETE FROM %1 WHERE furnace = ?").arg(part), {f.id});
    insertFurnaceParts(transaction, f);
}

int insertCycle(Transaction& transaction, const Cycle& cycle) {
    const std::optional<QVariant> last =
        transaction.ask("SELECT coalesce(max(revision), 0) FROM cycle WHERE name = ?", {cycle.name});
    const int revision = last ? last->toInt() + 1 : 1;
    // A later revision keeps its cycle's place in the list.
    transaction.run(
        "INSERT INTO cycle (name, revision, position, kind, setpoint_C, soak_rule, soak_base_min, soak_per_25mm_min, "
        "soak_free_mm, cooling, note) VALUES (?, ?, coalesce((SELECT position FROM cycle WHERE name = ? LIMIT 1), "
        "(SELECT count(*) FROM cycle)), ?, ?, ?, ?, ?, ?, ?, ?)",
        {cycle.name, revision, cycle.name, cycle.kind, cycle.setpoint_C, cycle.soak_rule, cycle.soak_base_min,
         cycle.soak_per_25mm_min, cycle.soak_free_mm, cycle.cooling, cycle.note});
    insertList(transaction, cycle, revision, "grade", cycle.grades);
    insertList(transaction, cycle, revision, "furnace", cycle.furnaces);
    insertList(transaction, cycle, revision, "quench", cycle.quenches);
    for (size_t i = 0; i < cycle.limits.size(); ++i) insertLimit(transaction, cycle, revision, i);
    return revision;
}

void insertStep(Transaction& transaction, const QString& name, int revision, const CycleStep& step) {
    transaction.run(
        "INSERT INTO cycle_step (cycle, revision, position, state, customer, who, at, why) VALUES (?, ?, "
        "(SELECT count(*) + 1 FROM cycle_step WHERE cycle = ? AND revision = ?), ?, ?, ?, ?, ?)",
        {name, revision, name, revision, step.state, step.customer, step.who, step.at, step.why});
}

Result<std::vector<Cycle>> loadCycles(const Store& store, const QString& name) {
    return load(store, "name = ?", {name});
}

Result<Shop> Store::shop() const {
    Rows rows(database(), path_, "reading the shop's rules",
              "SELECT name, band_rule, tight_set_K, tight_computed_K, today FROM shop");
    Shop shop;
    if (rows.next()) shop = {rows.text(0), rows.text(1), rows.number(2), rows.number(3), dayOf(rows.text(4))};
    if (rows.error()) return *rows.error();
    return shop;
}

Result<Done> Store::setShop(const Shop& shop) {
    Transaction transaction(database(), path_, "storing the shop's rules");
    permit(transaction, {}, Right::approve);
    if (shop.band_rule != "root of squares" && shop.band_rule != "added up")
        transaction.fail(
            Error{Fault::input,
                  "the band rule is \"root of squares\" or \"added up\", not \"" + shop.band_rule.toStdString() + "\"",
                  {},
                  {}});
    transaction.run("DELETE FROM shop");
    transaction.run(
        "INSERT INTO shop (id, name, band_rule, tight_set_K, tight_computed_K, today) VALUES (1, ?, ?, ?, ?, ?)",
        {shop.name, shop.band_rule, shop.tight_set_K, shop.tight_computed_K, day(shop.today)});
    record(transaction, {0, day(shop.today), {}, "shop", shop.name, "rules stored", {}, recordText(shop), {}});
    return transaction.commit();
}

Result<std::vector<Furnace>> Store::furnaces() const {
    std::vector<Furnace> furnaces;
    {
        Rows rows(database(), path_, "reading furnaces",
                  "SELECT id, kind, work_zone_mm, uniformity_class, instrument_type, minimum_C, maximum_C, "
                  "controller_fahrenheit, step, surveyed, survey_due, accuracy_tested, accuracy_due, sensor_installed, "
                  "thermocouple, thermocouple_class, instrument_K, swing_K, offset_K, maximum_load_kg, note "
                  "FROM furnace ORDER BY position");
        while (rows.next()) furnaces.push_back(furnaceOf(rows));
        if (rows.error()) return *rows.error();
    }
    std::map<QString, Furnace*> by_id;
    for (Furnace& furnace : furnaces) by_id[furnace.id] = &furnace;
    for (const auto add : {addSurvey, addQuenches})
        if (std::optional<Error> error = add(*this, by_id)) return *error;
    return furnaces;
}

Result<Furnace> Store::furnace(const QString& id) const {
    Result<std::vector<Furnace>> all = furnaces();
    if (!all) return all.error();
    QStringList known;
    for (Furnace& furnace : all.value()) {
        if (furnace.id == id) return std::move(furnace);
        known << furnace.id;
    }
    return notThere("furnace", id, known);
}

Result<Done> Store::storeFurnaces(const std::vector<Furnace>& furnaces) {
    Transaction transaction(database(), path_, "storing furnaces");
    permit(transaction, {}, Right::plan);
    for (const Furnace& furnace : furnaces) {
        transaction.at("furnace " + furnace.id);
        insertFurnace(transaction, furnace);
        record(transaction, {0, {}, {}, "furnace", furnace.id, "stored", {}, recordText(furnace), {}});
    }
    return transaction.commit();
}

Result<std::vector<Quench>> Store::quenches() const {
    Rows rows(database(), path_, "reading quenches",
              "SELECT id, medium, serves, transfer_min_s, transfer_max_s, limits FROM quench ORDER BY position");
    std::vector<Quench> quenches;
    while (rows.next())
        quenches.push_back({rows.text(0), rows.text(1), rows.text(2), rows.number(3), rows.number(4), rows.text(5)});
    if (rows.error()) return *rows.error();
    return quenches;
}

Result<Done> Store::storeQuenches(const std::vector<Quench>& quenches) {
    Transaction transaction(database(), path_, "storing quenches");
    permit(transaction, {}, Right::plan);
    for (const Quench& quench : quenches) {
        transaction.at("quench " + quench.id);
        transaction.run(
            "INSERT INTO quench (id, position, medium, serves, transfer_min_s, transfer_max_s, limits) "
            "VALUES (?, (SELECT count(*) FROM quench), ?, ?, ?, ?, ?)",
            {quench.id, quench.medium, quench.serves, quench.transfer_min_s, quench.transfer_max_s, quench.limits});
        record(transaction, {0, {}, {}, "quench", quench.id, "stored", {}, recordText(quench), {}});
    }
    return transaction.commit();
}

Result<std::vector<Cycle>> Store::cycles() const {
    // The newest revision that is approved or frozen; where there is none, the newest draft.
    return load(*this,
                "revision = (SELECT revision FROM cycle c WHERE c.name = cycle.name AND " + kState +
                    " <> 'withdrawn' ORDER BY " + kState + " IN ('approved', 'frozen') DESC, revision DESC LIMIT 1)",
                {});
}

Result<Cycle> Store::cycle(const QString& name) const {
    Result<std::vector<Cycle>> all = cycles();
    if (!all) return all.error();
    QStringList known;
    for (Cycle& cycle : all.value()) {
        if (cycle.name == name) return std::move(cycle);
        known << cycle.name;
    }
    return notThere("cycle", name, known);
}

Result<std::vector<Cycle>> Store::cyclesFor(const QString& grade_words) const {
    Result<std::vector<Cycle>> all = cycles();
    if (!all) return all;
    Result<std::vector<Grade>> rows = gradeRowsNamed(grade_words);
    if (!rows) return rows.error();
    QStringList names = gradeNamesIn(grade_words);
    for (const Grade& row : rows.value()) names << row.names;
    std::vector<Cycle> fitting;
    for (Cycle& cycle : all.value()) {
        const bool fits = std::any_of(cycle.grades.begin(), cycle.grades.end(),
                                      [&](const QString& grade) { return names.contains(grade, Qt::CaseInsensitive); });
        if (fits) fitting.push_back(std::move(cycle));
    }
    return fitting;
}

Result<Done> Store::storeCycles(const std::vector<Cycle>& cycles) {
    Transaction transaction(database(), path_, "storing cycles");
    permit(transaction, {}, Right::plan);
    for (const Cycle& cycle : cycles) {
        transaction.at("cycle " + cycle.name);
        const int revision = insertCycle(transaction, cycle);
        insertStep(transaction, cycle.name, revision, {"draft", {}, {}, {}, {}});
        record(transaction, {0,
                             {},
                             {},
                             "cycle",
                             QString("%1 revision %2").arg(cycle.name).arg(revision),
                             "drafted",
                             {},
                             recordText(cycle),
                             {}});
    }
    return transaction.commit();
}

}  // namespace soak
