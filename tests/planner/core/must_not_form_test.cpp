// SPDX-License-Identifier: GPL-3.0-or-later
// Steels and the phases that they are known not to hold at a temperature: tests/published/must_not_form.csv. A
// parameter that is fitted to one steel must not call up a phase in another.
#include <catch2/catch.hpp>

#include "base/folders.h"
#include "base/units.h"
#include "db/csv.h"
#include "thermo/alloy.h"

using namespace soak;

namespace {

constexpr double kThere = 1e-6;  // mole fraction of atoms above which a phase is there

Chemistry chemistryOf(const QString& text) {
    Chemistry chemistry;
    for (const QString& part : text.split(';')) {
        const QStringList sides = part.split('=');
        REQUIRE(sides.size() == 2);
        chemistry.wt[sides[0].toStdString()] = sides[1].toDouble();
    }
    return chemistry;
}

/// Phases of the state that the row forbids, by data key or by label.
QStringList forbidden(const State& state, const QStringList& phases) {
    QStringList found;
    for (const PhaseAmount& phase : state.phases)
        if (phase.mole_fraction > kThere && (phases.contains(QString::fromStdString(phase.name)) ||
                                             phases.contains(QString::fromStdString(phase.label))))
            found << QString::fromStdString(phase.label);
    return found;
}

}  // namespace

TEST_CASE("phases that must not form in a steel do not", "[published]") {
    const auto table = CsvTable::read(QString::fromStdString(productPath("tests/published/must_not_form.csv").string()),
                                      {"row_id", "steel", "composition_wt", "at_C", "phases", "source", "note"});
    REQUIRE(table);
    REQUIRE(table.value().size() >= 20);
    auto data = loadDataSet(productPath("thermo/data/ferrous"));
    REQUIRE(data);
    for (size_t line = 0; line < table.value().size(); ++line) {
        const auto cell = [&](const char* column) { return table.value().text(line, column); };
        CHECK_FALSE(cell("source").isEmpty());
        auto alloy = Alloy::make(data.value(), chemistryOf(cell("composition_wt")));
        REQUIRE(alloy);
        for (const QString& at : cell("at_C").split(';')) {
            const auto state = alloy.value().stateAt(kelvin(at.toDouble()));
            REQUIRE(state);
            INFO(cell("row_id").toStdString() << " " << cell("steel").toStdString() << " at " << at.toStdString());
            CHECK(forbidden(state.value(), cell("phases").split(';')).join(" ").toStdString() == "");
        }
    }
}
