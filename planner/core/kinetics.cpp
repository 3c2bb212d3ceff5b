// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/kinetics.h"

#include <QRegularExpression>
#include <algorithm>
#include <functional>

#include "base/units.h"
#include "db/csv.h"
#include "planner/core/tables.h"

namespace soak {
namespace {

using Rows = std::map<QString, PropertyRow>;

/// "797-1415", "-35-800": two ends; words give none.
void readRange(const QString& text, PropertyRow& row) {
    static const QRegularExpression range("^(-?[0-9.]+)-(-?[0-9.]+)$");
    const auto match = range.match(text.trimmed());
    if (!match.hasMatch()) return;
    row.from_C = match.captured(1).toDouble();
    row.to_C = match.captured(2).toDouble();
}

Result<Done> readRows(const QString& file, Rows& rows) {
    const auto read = CsvTable::read(
        QString::fromStdString(tablePath(file.toStdString()).string()),
        {"row_id", "property", "species", "host", "form", "value1", "value2", "range_C", "source", "seen"});
    if (!read) return read.error();
    const CsvTable& table = read.value();
    for (size_t i = 0; i < table.size(); ++i) {
        PropertyRow row;
        row.id = table.text(i, "row_id");
        row.property = table.text(i, "property");
        row.species = table.text(i, "species");
        row.host = table.text(i, "host");
        row.source = table.text(i, "source");
        row.seen = table.text(i, "seen");
        row.value1 = table.text(i, "value1").toDouble();
        row.value2 = table.text(i, "value2").toDouble();
        readRange(table.text(i, "range_C"), row);
        // "table value", "range": a number or two without a formula; value1 is what they say.
        const auto form = Formula::parse(table.text(i, "form"));
        row.form = form ? form.value() : Formula::parse("value1").value();
        rows[row.id] = std::move(row);
    }
    return Done{};
}

/// The rows named in a list, or the name that does not exist.
Property piecesOf(const Rows& rows, const QStringList& ids, QString& unknown) {
    Property property;
    for (const QString& id : ids) {
        const auto at = rows.find(id);
        if (at == rows.end())
            unknown = id;
        else
            property.pieces.push_back(at->second);
    }
    if (property.pieces.empty()) unknown = "(none)";
    return property;
}

template <class Row>
const Row* firstFor(const std::vector<Row>& rows, const QString& family, const std::function<bool(const Row&)>& fits) {
    for (const QString& wanted : {family, QString("*")})
        for (const Row& row : rows)
            if (row.families.contains(wanted) && fits(row)) return &row;
    return nullptr;
}

}  // namespace

std::optional<double> PropertyRow::at(double temperature_C) const {
    return form.value({{"T", kelvin(temperature_C)},
                       {"th", temperature_C},
                       {"R", 8.314},
                       {"D0", value1},
                       {"Q", value2},
                       {"value1", value1}});
}

double Property::at(double temperature_C) const {
    const auto beyond = [&](const PropertyRow& row) {
        return std::max({row.from_C.value_or(temperature_C) - temperature_C,
                         temperature_C - row.to_C.value_or(temperature_C), 0.0});
    };
    const auto nearest = std::min_element(pieces.begin(), pieces.end(),
                                          [&](const auto& a, const auto& b) { return beyond(a) < beyond(b); });
    const double inside_C =
        std::clamp(temperature_C, nearest->from_C.value_or(temperature_C),
                   std::max(nearest->from_C.value_or(temperature_C), nearest->to_C.value_or(temperature_C)));
    return nearest->at(inside_C).value_or(nearest->value1);
}

const Metal* KineticBook::metalOf(const QString& family) const {
    return firstFor<Metal>(metals, family, [](const Metal&) { return true; });
}
const PropertyRow* KineticBook::diffusionOf(const QString& family, const QString& species,
                                            const QString& matrix) const {
    const auto* choice = firstFor<DiffusionChoice>(
        diffusion, family, [&](const DiffusionChoice& one) { return one.species == species && one.matrix == matrix; });
    return choice ? &choice->row : nullptr;
}
const ParticleBefore* KineticBook::particleOf(const QString& family, const QString& phase) const {
    return firstFor<ParticleBefore>(particles, family, [&](const ParticleBefore& one) { return one.phase == phase; });
}
const Transfer& KineticBook::transferOf(const QString& furnace_kind) const {
    for (const Transfer& one : transfers)
        if (furnace_kind.contains(one.word, Qt::CaseInsensitive)) return one;
    return transfers.back();
}

const Spacing& KineticBook::spacingOf(const QString& product_form) const {
    for (const Spacing& one : spacings)
        if (one.product_form == product_form) return one;
    return spacings.back();
}

Result<KineticBook> loadKinetics() {
    const auto table = readTable("thermal.toml");
    if (!table) return table.error();
    Rows rows;
    for (const QString& file : texts(table.value(), "tables"))
        if (auto done = readRows(file, rows); !done) return std::move(done).error();

    KineticBook book;
    QString unknown;
    forEachRow(table.value(), "metal", [&](const toml::table& row) {
        book.metals.push_back(
            {texts(row, "families"), text(row, "name"), piecesOf(rows, texts(row, "conductivity"), unknown),
             piecesOf(rows, texts(row, "heat"), unknown), piecesOf(rows, texts(row, "density"), unknown),
             numberIn(row, "emissivity").value_or(0.8), text(row, "source")});
    });
    forEachRow(table.value(), "diffusion", [&](const toml::table& row) {
        const auto pieces = piecesOf(rows, {text(row, "row")}, unknown);
        if (pieces.pieces.empty()) return;
        book.diffusion.push_back(
            {texts(row, "families"), pieces.pieces.front().species, text(row, "matrix"), pieces.pieces.front()});
    });
    forEachRow(table.value(), "particle", [&](const toml::table& row) {
        book.particles.push_back(
            {text(row, "phase"), texts(row, "families"), numberIn(row, "radius_um").value_or(0), text(row, "source")});
    });
    forEachRow(table.value(), "transfer", [&](const toml::table& row) {
        book.transfers.push_back(
            {text(row, "word"), numberIn(row, "convection_W_per_m2K").value_or(0), text(row, "source")});
    });
    forEachRow(table.value(), "spacing", [&](const toml::table& row) {
        book.spacings.push_back(
            {text(row, "product_form"), numberIn(row, "spacing_um").value_or(0), text(row, "source")});
    });
    if (!unknown.isEmpty()) return badTable("thermal.toml", "no row \"" + unknown.toStdString() + "\" in its tables");
    if (book.transfers.empty() || book.spacings.empty())
        return badTable("thermal.toml", "no transfer or no spacing row");
    return book;
}

}  // namespace soak
