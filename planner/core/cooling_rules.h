// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <optional>
#include <utility>
#include <vector>

#include "base/result.h"

namespace soak {

/// Door open to fully under, by section, as a standard or the trade has it; rows of data/cooling.toml.
struct DelayRule {
    QStringList families;
    double from_mm = 0, to_mm = 0;  ///< holds for from_mm < section <= to_mm
    double seconds = 0;
    QString source;
};

/// A range to cross quickly. With a label, the upper end is where that phase dissolves in this heat.
struct CrossingRule {
    QStringList families;
    QString what, phase;
    double low_C = 0, high_C = 0;
    std::optional<double> least_wt;  ///< only when the heat holds at least this much of `element`
    QString element, because, source;
};

/// When a carbide at a boundary leaves too little of an element beside it, and how long that takes.
struct SensitisationRule {
    QStringList families;
    QString phase, element;
    double least_wt = 0;                            ///< "12 % Cr beside the carbide": below it the boundary corrodes
    double low_C = 0;                               ///< nothing happens in practical times below
    std::vector<std::pair<double, double>> nose_s;  ///< (wt% C, seconds at the nose), ascending C
    QString source;

    /// Seconds before the boundary is sensitised, between the published carbon contents on a logarithmic scale; the
    /// nearest one beyond them.
    double noseAt_s(double carbon_wt) const;
};

struct CoolingRules {
    std::vector<DelayRule> delays;
    std::vector<CrossingRule> crossings;
    std::vector<SensitisationRule> sensitisation;

    const DelayRule* delayFor(const QString& family, double section_mm) const;
    const SensitisationRule* sensitisationOf(const QString& family) const;
};

/// Reads data/cooling.toml. Fault::data names the file and the row.
Result<CoolingRules> loadCoolingRules();

}  // namespace soak
