// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/schema.h"

#include <QStringList>
#include <vector>

#include "db/sql.h"

namespace soak {
namespace {

// Numbers of heats, cycles and sheets are TEXT everywhere: 004731, 52E104 and F2407/1 must come back as they went in.
// A migration that was released is never edited; a change is a new one at the end.
const std::vector<QStringList>& migrations() {
    static const std::vector<QStringList> list = {
        // 1: the library, the shop, deliveries, issued sheets
        {
            R"(CREATE TABLE shop (
                id INTEGER PRIMARY KEY CHECK (id = 1), name TEXT NOT NULL, band_rule TEXT NOT NULL,
                tight_set_K DOUBLE PRECISION NOT NULL, tight_computed_K DOUBLE PRECISION NOT NULL, today TEXT NOT NULL))",
            R"(CREATE TABLE grade (
                id TEXT PRIMARY KEY, position INTEGER NOT NULL, standard TEXT NOT NULL, edition TEXT NOT NULL,
                family TEXT NOT NULL, seen TEXT NOT NULL, note TEXT NOT NULL))",
            R"(CREATE TABLE grade_name (
                grade TEXT NOT NULL REFERENCES grade (id), position INTEGER NOT NULL, name TEXT NOT NULL,
                near INTEGER NOT NULL, PRIMARY KEY (grade, position)))",
            "CREATE INDEX grade_name_name ON grade_name (name)",
            R"(CREATE TABLE grade_limit (
                grade TEXT NOT NULL REFERENCES grade (id), element TEXT NOT NULL, min_wt DOUBLE PRECISION,
                max_wt DOUBLE PRECISION, min_text TEXT NOT NULL, max_text TEXT NOT NULL, PRIMARY KEY (grade, element)))",
            R"(CREATE TABLE grade_rule (
                grade TEXT NOT NULL REFERENCES grade (id), position INTEGER NOT NULL, rule TEXT NOT NULL,
                PRIMARY KEY (grade, position)))",
            R"(CREATE TABLE treatment (
                id TEXT PRIMARY KEY, position INTEGER NOT NULL, grade_key TEXT NOT NULL, kind TEXT NOT NULL,
                low_C DOUBLE PRECISION, high_C DOUBLE PRECISION, hold_rule TEXT NOT NULL, quench TEXT NOT NULL,
                result TEXT NOT NULL, source TEXT NOT NULL, seen TEXT NOT NULL, note TEXT NOT NULL))",
            "CREATE INDEX treatment_grade_key ON treatment (grade_key)",
            R"(CREATE TABLE caution (
                id TEXT PRIMARY KEY, position INTEGER NOT NULL, applies_to TEXT NOT NULL, severity TEXT NOT NULL,
                text TEXT NOT NULL, defers_to TEXT NOT NULL, source TEXT NOT NULL))",
            R"(CREATE TABLE quench (
                id TEXT PRIMARY KEY, position INTEGER NOT NULL, medium TEXT NOT NULL, serves TEXT NOT NULL,
                transfer_min_s DOUBLE PRECISION NOT NULL, transfer_max_s DOUBLE PRECISION NOT NULL,
                limits TEXT NOT NULL))",
            R"(CREATE TABLE furnace (
                id TEXT PRIMARY KEY, position INTEGER NOT NULL, kind TEXT NOT NULL, work_zone_mm TEXT NOT NULL,
                uniformity_class TEXT NOT NULL, instrument_type TEXT NOT NULL, minimum_C DOUBLE PRECISION NOT NULL,
                maximum_C DOUBLE PRECISION NOT NULL, controller_fahrenheit INTEGER NOT NULL,
                step DOUBLE PRECISION NOT NULL, surveyed TEXT NOT NULL, survey_due TEXT NOT NULL,
                accuracy_tested TEXT NOT NULL, accuracy_due TEXT NOT NULL, sensor_installed TEXT NOT NULL,
                thermocouple TEXT NOT NULL, thermocouple_class INTEGER NOT NULL, instrument_K DOUBLE PRECISION NOT NULL,
                swing_K DOUBLE PRECISION NOT NULL, offset_K DOUBLE PRECISION NOT NULL,
                maximum_load_kg DOUBLE PRECISION NOT NULL, note TEXT NOT NULL))",
            R"(CREATE TABLE survey_point (
                furnace TEXT NOT NULL REFERENCES furnace (id), temperature_C DOUBLE PRECISION NOT NULL,
                coldest_K DOUBLE PRECISION NOT NULL, hottest_K DOUBLE PRECISION NOT NULL,
                PRIMARY KEY (furnace, temperature_C)))",
            R"(CREATE TABLE furnace_quench (
                furnace TEXT NOT NULL REFERENCES furnace (id), position INTEGER NOT NULL,
                quench TEXT NOT NULL REFERENCES quench (id), PRIMARY KEY (furnace, position)))",
            R"(CREATE TABLE cycle (
                name TEXT NOT NULL, revision INTEGER NOT NULL, position INTEGER NOT NULL, kind TEXT NOT NULL,
                setpoint_C DOUBLE PRECISION NOT NULL, soak_rule TEXT NOT NULL, soak_base_min DOUBLE PRECISION NOT NULL,
                soak_per_25mm_min DOUBLE PRECISION NOT NULL, soak_free_mm DOUBLE PRECISION NOT NULL,
                cooling TEXT NOT NULL, note TEXT NOT NULL, PRIMARY KEY (name, revision)))",
            // `list` is "grade", "furnace" or "quench": three short lists of names with one shape
            R"(CREATE TABLE cycle_list (
                cycle TEXT NOT NULL, revision INTEGER NOT NULL, list TEXT NOT NULL, position INTEGER NOT NULL,
                entry TEXT NOT NULL, PRIMARY KEY (cycle, revision, list, position),
                FOREIGN KEY (cycle, revision) REFERENCES cycle (name, revision)))",
            R"(CREATE TABLE cycle_limit (
                cycle TEXT NOT NULL, revision INTEGER NOT NULL, position INTEGER NOT NULL, kind TEXT NOT NULL,
                phase TEXT NOT NULL, low DOUBLE PRECISION, high DOUBLE PRECISION, margin_K DOUBLE PRECISION NOT NULL,
                because TEXT NOT NULL, source TEXT NOT NULL, PRIMARY KEY (cycle, revision, position),
                FOREIGN KEY (cycle, revision) REFERENCES cycle (name, revision)))",
            "CREATE TABLE import (id INTEGER PRIMARY KEY, source TEXT NOT NULL, day TEXT NOT NULL, heats INTEGER NOT "
            "NULL)",
            R"(CREATE TABLE heat (
                id INTEGER PRIMARY KEY, number TEXT NOT NULL UNIQUE, grade TEXT NOT NULL, product_form TEXT NOT NULL,
                section_mm DOUBLE PRECISION, melt_route TEXT NOT NULL, source TEXT NOT NULL,
                import INTEGER NOT NULL REFERENCES import (id)))",
            R"(CREATE TABLE product (
                heat INTEGER NOT NULL REFERENCES heat (id), position INTEGER NOT NULL, form TEXT NOT NULL,
                section_mm DOUBLE PRECISION, source TEXT NOT NULL, PRIMARY KEY (heat, position)))",
            R"(CREATE TABLE analysis (
                id INTEGER PRIMARY KEY, heat INTEGER NOT NULL REFERENCES heat (id), position INTEGER NOT NULL,
                kind TEXT NOT NULL, source TEXT NOT NULL, UNIQUE (heat, position)))",
            R"(CREATE TABLE content (
                analysis INTEGER NOT NULL REFERENCES analysis (id), element TEXT NOT NULL, raw TEXT NOT NULL,
                wt DOUBLE PRECISION, less_than INTEGER NOT NULL, digit_wt DOUBLE PRECISION NOT NULL,
                remark TEXT NOT NULL, PRIMARY KEY (analysis, element)))",
            "CREATE TABLE sheet_counter (year INTEGER PRIMARY KEY, last INTEGER NOT NULL)",
            R"(CREATE TABLE sheet (
                number TEXT NOT NULL, revision TEXT NOT NULL, replaces TEXT NOT NULL, heat TEXT NOT NULL,
                cycle TEXT NOT NULL, cycle_revision INTEGER NOT NULL, furnace TEXT NOT NULL, content TEXT NOT NULL,
                hash TEXT NOT NULL, issued_by TEXT NOT NULL, issued TEXT NOT NULL, status TEXT NOT NULL,
                PRIMARY KEY (number, revision)))",
            // A sheet on the shop floor must stay what it was; only its status may move on.
            R"(CREATE TRIGGER sheet_stays BEFORE DELETE ON sheet
                BEGIN SELECT RAISE(ABORT, 'an issued sheet cannot be removed'); END)",
            R"(CREATE TRIGGER sheet_content_stays BEFORE UPDATE OF number, revision, replaces, heat, cycle,
                cycle_revision, furnace, content, hash, issued_by, issued ON sheet
                BEGIN SELECT RAISE(ABORT, 'an issued sheet cannot be changed'); END)",
        },
        // 2: imports keep their file and can be undone; held rows; what a supplier's columns mean
        {
            "ALTER TABLE import ADD COLUMN supplier TEXT NOT NULL DEFAULT ''",
            "ALTER TABLE import ADD COLUMN analyses INTEGER NOT NULL DEFAULT 0",
            "ALTER TABLE import ADD COLUMN stored_by TEXT NOT NULL DEFAULT ''",
            "ALTER TABLE import ADD COLUMN undone INTEGER NOT NULL DEFAULT 0",
            "ALTER TABLE import ADD COLUMN file_hash TEXT NOT NULL DEFAULT ''",
            // the file as it came, zlib-packed: the raw text of every cell for ever
            "ALTER TABLE import ADD COLUMN file BLOB",
            // an analysis or product that a later import put beside a heat; NULL: it came with the heat
            "ALTER TABLE analysis ADD COLUMN import INTEGER REFERENCES import (id)",
            "ALTER TABLE product ADD COLUMN import INTEGER REFERENCES import (id)",
            // a row that a person must decide about; `analysis` is JSON, element -> {raw, wt, less_than, digit_wt}
            R"(CREATE TABLE held_row (
                import INTEGER NOT NULL REFERENCES import (id), line INTEGER NOT NULL, heat TEXT NOT NULL,
                grade TEXT NOT NULL, kind TEXT NOT NULL, why TEXT NOT NULL, analysis TEXT NOT NULL,
                PRIMARY KEY (import, line)))",
            "CREATE INDEX held_row_heat ON held_row (heat)",
            R"(CREATE TABLE column_choice (
                supplier TEXT NOT NULL, header TEXT NOT NULL, choice TEXT NOT NULL, PRIMARY KEY (supplier, header)))",
        },
        // 3: the journal, people and their roles, the states of cycles, versions of furnaces and grades
        {
            R"(CREATE TABLE journal (
                number INTEGER PRIMARY KEY, at TEXT NOT NULL, who TEXT NOT NULL, what TEXT NOT NULL,
                which TEXT NOT NULL, action TEXT NOT NULL, why TEXT NOT NULL, detail TEXT NOT NULL, hash TEXT NOT NULL))",
            R"(CREATE TRIGGER journal_stays BEFORE DELETE ON journal
                BEGIN SELECT RAISE(ABORT, 'the journal is append-only'); END)",
            R"(CREATE TRIGGER journal_content_stays BEFORE UPDATE ON journal
                BEGIN SELECT RAISE(ABORT, 'the journal is append-only'); END)",
            "CREATE TABLE setting (name TEXT PRIMARY KEY, value TEXT NOT NULL)",
            R"(CREATE TABLE person (
                name TEXT PRIMARY KEY, roles TEXT NOT NULL, active INTEGER NOT NULL, password_hash TEXT NOT NULL))",
            R"(CREATE TABLE cycle_step (
                cycle TEXT NOT NULL, revision INTEGER NOT NULL, position INTEGER NOT NULL, state TEXT NOT NULL,
                customer TEXT NOT NULL, who TEXT NOT NULL, at TEXT NOT NULL, why TEXT NOT NULL,
                PRIMARY KEY (cycle, revision, position),
                FOREIGN KEY (cycle, revision) REFERENCES cycle (name, revision)))",
            R"(CREATE TRIGGER cycle_step_stays BEFORE DELETE ON cycle_step
                BEGIN SELECT RAISE(ABORT, 'what happened to a cycle stays'); END)",
            R"(CREATE TRIGGER cycle_step_content_stays BEFORE UPDATE ON cycle_step
                BEGIN SELECT RAISE(ABORT, 'what happened to a cycle stays'); END)",
            // Every cycle of an earlier store was worked with: its newest revision is approved, older ones are history.
            R"(INSERT INTO cycle_step (cycle, revision, position, state, customer, who, at, why)
                SELECT name, revision, 1,
                CASE WHEN revision = (SELECT max(revision) FROM cycle newer WHERE newer.name = cycle.name)
                THEN 'approved' ELSE 'withdrawn' END,
                '', '', '', 'in use before revisions were controlled' FROM cycle)",
            "ALTER TABLE furnace ADD COLUMN version INTEGER NOT NULL DEFAULT 1",
            "ALTER TABLE grade ADD COLUMN revision INTEGER NOT NULL DEFAULT 1",
        },
    };
    return list;
}

}  // namespace

int latestSchemaVersion() { return int(migrations().size()); }

Result<int> schemaVersion(const QSqlDatabase& database, const QString& path) {
    Rows rows(database, path, "reading its version", "PRAGMA user_version");
    const bool found = rows.next();
    if (rows.error()) return *rows.error();
    return found ? rows.integer(0) : 0;
}

Result<Done> migrate(const QSqlDatabase& database, const QString& path, int version) {
    Transaction transaction(database, path, "bringing it up to date");
    // Read inside the transaction: another process may have done the work while this one waited.
    const std::optional<QVariant> found = transaction.ask("PRAGMA user_version");
    const int present = found ? found->toInt() : 0;
    for (int step = present; step < version; ++step)
        for (const QString& sql : migrations()[size_t(step)]) transaction.run(sql);
    if (present < version) {
        transaction.run(QString("PRAGMA application_id = %1").arg(kApplicationId));
        transaction.run(QString("PRAGMA user_version = %1").arg(version));
    }
    return transaction.commit();
}

}  // namespace soak
