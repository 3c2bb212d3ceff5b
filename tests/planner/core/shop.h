// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/window.h"

// Furnaces of the invented demonstration shop, written out so that a test shows its numbers.
namespace soak::shop {

inline const QDate kToday(2025, 4, 2);

inline Furnace furnace(const QString& id) {
    Furnace f;
    f.id = id;
    f.survey_due = f.accuracy_due = QDate(2025, 8, 1);
    if (id == "F1") {
        f.minimum_C = 600, f.maximum_C = 1150, f.step = 5;
        f.survey = {{850, -8, 9}, {1050, -10, 9}, {1120, -11, 10}};
        f.thermocouple = "K", f.thermocouple_class = 2, f.instrument_K = 3, f.swing_K = 4, f.offset_K = 1.7;
    }
    if (id == "F3") {
        f.minimum_C = 150, f.maximum_C = 780;
        f.survey = {{600, -4, 4}, {770, -5, 4}};
        f.thermocouple = "N", f.thermocouple_class = 1, f.instrument_K = 1, f.swing_K = 2, f.offset_K = 0.6;
    }
    if (id == "F4") {
        f.minimum_C = 600, f.maximum_C = 1300, f.step = 5, f.controller_fahrenheit = true;
        f.survey = {{1030, -6, 5}, {1200, -7, 6}};
        f.thermocouple = "S", f.thermocouple_class = 2, f.instrument_K = 1, f.swing_K = 2, f.offset_K = -0.9;
    }
    if (id == "F6") {
        f.minimum_C = 300, f.maximum_C = 1280, f.step = 5;
        f.survey = {{1050, -9, 8}};
        f.survey_due = QDate(2024, 9, 28), f.accuracy_due = QDate(2024, 12, 31);
        f.thermocouple = "R", f.thermocouple_class = 2, f.instrument_K = 1, f.swing_K = 3;
    }
    return f;
}

inline ShopRules rules(const QString& band_rule = "root of squares") { return {band_rule, 5, 10, kToday}; }

}  // namespace soak::shop
