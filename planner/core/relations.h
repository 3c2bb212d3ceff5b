// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <map>
#include <optional>
#include <vector>

#include "db/records.h"
#include "planner/core/formula.h"
#include "planner/core/window.h"

namespace soak {

/// A published relation between chemistry and a temperature (or hardness, or size), with the range it was made from.
/// Rows of data/critical_formulas.csv; names in the expression are wt%, and T is kelvin.
struct Relation {
    struct Range {
        std::optional<double> low_wt, high_wt;
    };
    QString id;        ///< "AC1_ANDREWS"
    QString quantity;  ///< "Ac1", "Ms"
    QString unit, source, seen, worked_example;
    Formula formula;
    std::map<QString, Range> range;  ///< by element, as far as the published words give numbers
    std::optional<double> scatter;   ///< one standard deviation where published, in the unit
};

/// Which relations speak for which families; rows of data/opinions.toml.
struct OpinionRule {
    QString quantity;
    QStringList families;
    std::vector<std::pair<QString, QString>> relations;  ///< (id, "Andrews 1965")
    std::map<QString, Relation::Range> range;            ///< where the paper states none in numbers
};

struct RelationBook {
    std::map<QString, Relation> relations;
    std::vector<OpinionRule> rules;

    /// What the published relations say of `quantity` for this chemistry; those out of their range say so and count
    /// nothing. Empty when none speaks for the family.
    std::vector<Opinion> opinionsOn(const QString& quantity, const QString& family, const Formula::Values& wt) const;
};

/// Reads data/critical_formulas.csv and data/opinions.toml. Fault::data names the file and the row.
Result<RelationBook> loadRelations();

/// wt% by symbol of everything that an analysis holds; "less than" values at their bound.
Formula::Values amountsOf(const Analysis& analysis);

/// "C 0.1-0.55 Mn<=1.7" as ranges; words that are no ranges are passed over.
std::map<QString, Relation::Range> rangesIn(const QString& validity);
/// "C 0.90 is above 0.60", or empty when every element with a range is inside it.
QString outOfRange(const std::map<QString, Relation::Range>& range, const Formula::Values& wt);

/// The middle of the opinions that are in range; nothing without one.
std::optional<double> medianOf(const std::vector<Opinion>& opinions);

}  // namespace soak
