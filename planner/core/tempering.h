// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <optional>
#include <vector>

#include "base/result.h"

namespace soak {

/// A published tempering or ageing curve: rows of data/hardness_curves.csv that belong together.
struct TemperingCurve {
    struct Point {
        double temper_C = 0, hours = 0, hardness = 0;
    };
    QString grade_key, quench, unit, source, seen;  ///< unit: "HRC" or "HB"
    std::optional<double> austenitise_C;
    std::vector<Point> points;  ///< ascending tempering parameter

    /// Hardness after `hours` at a temperature, along the curve by the tempering parameter; nothing outside it.
    std::optional<double> hardnessAt(double temper_C, double hours) const;
    /// The temperature that gives `hardness` in `hours`, on the falling branch above the secondary peak; nothing where
    /// the curve does not reach it.
    std::optional<double> temperatureFor(double hardness, double hours) const;
    /// How the hardness runs with temperature there, per K (negative).
    double slopeAt(double temper_C, double hours) const;
};

/// P = T (20 + log10 t), T in K, t in hours.
/// J.H. Hollomon, L.D. Jaffe, Trans. AIME 162 (1945) 223-249; 20 is the constant usual for alloy steels.
double temperingParameter(double temper_C, double hours);

/// Reads data/hardness_curves.csv; rows without a plain number ("about 64") are left out. A row without a time counts
/// as one hour, the usual time of such tables.
Result<std::vector<TemperingCurve>> loadTemperingCurves();

/// The curve with the most points among those that carry one of the names and the unit; nullptr when there is none.
const TemperingCurve* curveFor(const std::vector<TemperingCurve>& curves, const QStringList& names,
                               const QString& unit);

}  // namespace soak
