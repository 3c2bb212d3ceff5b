// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <optional>
#include <vector>

#include "base/result.h"
#include "planner/core/conduction.h"

namespace soak {

/// A published C-curve: how long the metal may stay at a temperature before strength is lost; rows of
/// data/quench_factor.toml.
struct CCurve {
    QStringList grades;
    QString temper;
    double K1 = 0, K2_s = 0, K3 = 0, K4_K = 0, K5 = 0, gas = 8.314;  ///< K3, K5 in the energy unit of `gas`
    double from_C = 0, to_C = 0;                                     ///< nothing is lost outside, as published
    QString source;

    /// Seconds at a temperature that cost as much as K1 says of one quench factor. J.W. Evancho, J.T. Staley, Metall.
    /// Trans. 5 (1974) 43-47.
    double criticalTime_s(double temperature_C) const;
    /// Share of the attainable strength that is kept, 0..1.
    double strengthKept(double quench_factor) const;
};

/// Heat transfer from metal to a quench medium at its mean temperature.
struct QuenchFilm {
    QString medium;
    double temperature_C = 0, W_per_m2K = 0;
    QString source;
};

struct QuenchBook {
    std::vector<CCurve> curves;
    std::vector<QuenchFilm> films;  ///< of one medium in rising temperature

    /// The first curve of a grade by one of its exact names; nullptr when none is published.
    const CCurve* curveOf(const QStringList& grade_names) const;
    /// By the medium's words, "water, 10 m3, 65-95 °C": its kind and the middle of the range in it. Nothing when no
    /// row speaks of the medium.
    std::optional<Surroundings> filmOf(const QString& medium) const;
};
/// Reads data/quench_factor.toml. Fault::data names the row.
Result<QuenchBook> loadQuenchBook();

/// What the way to the quench and the quench itself cost, in the middle of the section.
struct QuenchCost {
    double factor_on_the_way = 0, factor = 0;  ///< until fully under; in all
    double kept = 1;                           ///< share of the attainable strength
};
/// `start_C`: the coldest metal; `transfer_s`: door open to fully under, still air `air`.
QuenchCost quenchCost(const CCurve& curve, const Metal& metal, double section_mm, bool round, double start_C,
                      double transfer_s, const Surroundings& air, const Surroundings& medium);

}  // namespace soak
