// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <map>
#include <optional>
#include <vector>

#include "base/result.h"
#include "planner/core/formula.h"

namespace soak {

/// One published diffusivity or thermal property; rows of data/diffusion.csv. In the expression T is kelvin, th °C, R
/// 8.314 J/(mol K); D0 and Q are the row's value1 and value2.
struct PropertyRow {
    QString id, property, species, host, source, seen;
    Formula form;
    double value1 = 0, value2 = 0;
    std::optional<double> from_C, to_C;  ///< range as published

    /// In the row's own SI unit: m2/s, W/(m K), J/(kg K), kg/m3.
    std::optional<double> at(double temperature_C) const;
};

/// A property put together from rows that share a temperature axis; outside their ranges the nearest row serves.
struct Property {
    std::vector<PropertyRow> pieces;
    double at(double temperature_C) const;
};

/// What a family's metal is made of, thermally; rows of data/thermal.toml.
struct Metal {
    QStringList families;
    QString name;  ///< "stainless steel"
    Property conductivity, heat, density;
    double emissivity = 0.8;
    QString source;
};

/// Which diffusivity is used for an element in the matrix of a family.
struct DiffusionChoice {
    QStringList families;
    QString species, matrix;  ///< "austenite", "ferrite"
    PropertyRow row;
};

/// A particle's usual radius before the soak, by label and family, for the time to dissolve it.
struct ParticleBefore {
    QString phase;
    QStringList families;
    double radius_um = 0;
    QString source;
};

/// Heat transfer of a kind of furnace or of still air.
struct Transfer {
    QString word;  ///< a word of the furnace's kind: "vacuum", "fan"; "still air" beside furnaces
    double convection_W_per_m2K = 0;
    QString source;
};

/// Distance over which a product form is segregated before it is homogenised.
struct Spacing {
    QString product_form;  ///< "*": every other
    double spacing_um = 0;
    QString source;
};

struct KineticBook {
    std::vector<Metal> metals;
    std::vector<DiffusionChoice> diffusion;
    std::vector<ParticleBefore> particles;
    std::vector<Transfer> transfers;
    std::vector<Spacing> spacings;

    const Metal* metalOf(const QString& family) const;
    const PropertyRow* diffusionOf(const QString& family, const QString& species, const QString& matrix) const;
    const ParticleBefore* particleOf(const QString& family, const QString& phase) const;
    /// By the words of a furnace's kind; the last row ("*") serves where none is found.
    const Transfer& transferOf(const QString& furnace_kind) const;
    const Spacing& spacingOf(const QString& product_form) const;
};

/// Reads data/thermal.toml and the tables it names. Fault::data names file and row.
Result<KineticBook> loadKinetics();

}  // namespace soak
