// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/window.h"

namespace soak {

/// Limit of error of a thermocouple at a reading, K (one side), IEC 60584-1. Fault::data for a type or class that the
/// table below does not hold.
Result<double> thermocoupleTolerance_K(const QString& type, int tolerance_class, double reading_C);

/// Survey deviations at a temperature: linear between survey temperatures, the nearest one beyond them, signs kept.
/// Fault::data when the furnace has no survey.
Result<SurveyPoint> surveyAt(const Furnace& furnace, double temperature_C);

/// What the metal can see at a setpoint in this furnace: survey, thermocouple, instrument and swing, added up and as
/// root of squares around setpoint + offset; `rules.band_rule` decides. Overdue tests make `may_issue` false.
/// Fault::range when the setpoint is outside the furnace's range, with "did you mean °F?" where that would fit.
Result<Band> bandAt(const Furnace& furnace, double setpoint_C, const ShopRules& rules);

/// Setpoints on the controller's own scale (°C or °F), expressed in °C: the nearest at or above, at or below.
double stepUp_C(const Furnace& furnace, double temperature_C);
double stepDown_C(const Furnace& furnace, double temperature_C);
/// One controller step as a difference, K.
double step_K(const Furnace& furnace);

}  // namespace soak
