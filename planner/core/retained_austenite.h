// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

#include "thermo/alloy.h"

namespace soak {

inline constexpr double kQuenchedTo_C = 25;  ///< a quench to room temperature
extern const QString kRetainedAusteniteSource;

/// Start of martensite from the composition of the austenite, °C.
double martensiteStart_C(const std::map<std::string, double>& austenite_wt);

/// vol% of the whole metal that stays austenite when the state is quenched to a temperature.
double retainedAustenite_vol(const State& state, double quenched_to_C);

}  // namespace soak
