// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <memory>

#include "planner/core/evidence.h"
#include "thermo/alloy.h"

namespace soak {

/// A word for a phase in a published row, as data key and label: "(W)" is the key ferrite, "copper" a label of
/// austenite.
struct PhaseWord {
    std::string key, label = {},
                     main = {};  ///< an empty label: any label of the key but those that have a word of their own

    bool matches(const std::string& name, const std::string& its_label) const;
    bool matches(const PhaseAmount& phase) const;  ///< and `main`, when given, is the largest content
};
/// Nothing when the data set has no such phase.
std::optional<PhaseWord> phaseWord(const QString& text, const DataSetFacts& facts);

/// "[Nb][C+6/7 N]^0.87" as factors of sums of contents in wt%.
struct ProductFactor {
    std::vector<std::pair<std::string, double>> sum;  ///< element and its weight
    double power = 1;
};
/// Empty when the note does not hold a product of this form.
std::vector<ProductFactor> solubilityProduct(const QString& note);

/// The computed value in the row's unit, or the reason why there is none. `remark` gets what was done on the way.
Result<double> computeRow(const EvidenceRow& row, const std::shared_ptr<const DataSet>& data, QString& remark);

}  // namespace soak
