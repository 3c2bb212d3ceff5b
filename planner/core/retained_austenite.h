// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

#include "planner/core/relations.h"
#include "thermo/alloy.h"

namespace soak {

inline constexpr double kQuenchedTo_C = 25;  ///< a quench to room temperature
extern const QString kRetainedAusteniteSource;

/// Start of martensite from the composition of the austenite, °C.
double martensiteStart_C(const std::map<std::string, double>& austenite_wt);

/// HRC of martensite from the carbon of the state's austenite, by a relation in C (ASTM A255); carbon outside the
/// relation's range counts at its end, and metal without austenite stays at the lower end.
double quenchedHardness_HRC(const State& state, const Relation& relation);

/// vol% of the whole metal that stays austenite when the state is quenched to a temperature.
double retainedAustenite_vol(const State& state, double quenched_to_C);

}  // namespace soak
