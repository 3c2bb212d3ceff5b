// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <string>

#include "data_set.h"
#include "equilibrium.h"

namespace soak {

/// The trade's name of a composition set by its composition alone: "MX", "Cr2N", "ferrite". Rules stand in labels.toml.
/// Names that depend on how the metal came there (delta ferrite) are given by the sweep.
const std::string& labelOf(const DataSet& data, const System& system, const PhaseSet& set);

/// The rule for sets of this phase that form from another matrix phase on heating, or nullptr when there is none.
const LabelRule* heatingRule(const DataSet& data, const std::string& phase);

}  // namespace soak
