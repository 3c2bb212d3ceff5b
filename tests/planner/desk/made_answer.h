// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <algorithm>
#include <utility>

#include "planner/core/window.h"
#include "thermo/base/units.h"

namespace soak::made {

// Hand-made answers for the desk's tests: every number is invented, and only the desk's own work is judged by them.

inline PhaseAmount phase(const std::string& label, double volume, std::map<std::string, double> wt) {
    PhaseAmount amount;
    amount.name = amount.label = label;
    amount.volume_fraction = amount.mass_fraction = amount.mole_fraction = volume;
    amount.wt = std::move(wt);
    return amount;
}

/// A duplex steel as a picture: ferrite grows with temperature, sigma and M23C6 vanish, liquid comes at 1420 °C.
inline Sweep duplexSweep() {
    Sweep sweep;
    for (double at_C = 600; at_C <= 1500; at_C += 10) {
        State state;
        state.temperature_K = kelvin(at_C);
        const double liquid = std::clamp((at_C - 1420) / 80, 0.0, 1.0);
        const double sigma = at_C < 960 ? 0.30 * std::min(1.0, (960 - at_C) / 200) : 0;
        const double carbide = at_C < 905 ? 0.012 * std::min(1.0, (905 - at_C) / 150) : 0;
        const double nitride = at_C < 1015 ? 0.021 * std::min(1.0, (1015 - at_C) / 260) : 0;
        const double solid = 1 - liquid - sigma - carbide - nitride;
        const double ferrite = solid * std::clamp(0.42 + (at_C - 1000) * 0.0011, 0.02, 1.0);
        const auto add = [&](const char* label, double volume, std::map<std::string, double> wt) {
            if (volume > 0) state.phases.push_back(phase(label, volume, std::move(wt)));
        };
        add("ferrite", ferrite, {{"Fe", 66.0}, {"Cr", 24.3}, {"Ni", 4.4}, {"Mo", 3.6}, {"N", 0.03}});
        add("austenite", solid - ferrite, {{"Fe", 67.0}, {"Cr", 21.1}, {"Ni", 6.9}, {"Mo", 2.5}, {"N", 0.28}});
        add("sigma", sigma, {{"Fe", 58.0}, {"Cr", 31.0}, {"Mo", 7.5}, {"Ni", 3.0}});
        add("M23C6", carbide, {{"Cr", 62.0}, {"Fe", 20.0}, {"Mo", 12.0}, {"C", 5.2}});
        add("Cr2N", nitride, {{"Cr", 84.0}, {"Fe", 3.0}, {"N", 11.6}});
        add("liquid", liquid, {{"Fe", 66.0}, {"Cr", 22.4}, {"Ni", 5.7}, {"Mo", 3.2}});
        std::sort(state.phases.begin(), state.phases.end(),
                  [](const auto& a, const auto& b) { return a.volume_fraction > b.volume_fraction; });
        state.matrixLabels = {"austenite", "ferrite"};
        sweep.states.push_back(std::move(state));
    }
    const auto event = [&](EventKind kind, const char* label, double at_C) {
        Event happening;
        happening.kind = kind;
        happening.phase = happening.label = label;
        happening.temperature_K = kelvin(at_C);
        sweep.events.push_back(happening);
    };
    event(EventKind::vanishes, "M23C6", 905);
    event(EventKind::vanishes, "sigma", 960);
    event(EventKind::vanishes, "Cr2N", 1015);
    event(EventKind::appears, "liquid", 1420);
    return sweep;
}

inline Limit limit(Side side, const QString& cause, double at_C, double uncertainty_K = 0) {
    Limit made;
    made.side = side;
    made.cause = cause;
    made.temperature_C = at_C;
    made.uncertainty_K = uncertainty_K;
    made.set = uncertainty_K == 0;
    made.source = made.set ? QStringLiteral("shop rule") : QStringLiteral("computed");
    return made;
}

/// The band and the verdict at another setpoint, invented but lawful: -11/+11 K around it.
inline WindowAnswer at(WindowAnswer answer, double setpoint_C) {
    answer.setpoint_C = answer.band.setpoint_C = setpoint_C;
    answer.band.low_C = setpoint_C - 11;
    answer.band.high_C = setpoint_C + 11;
    const double margin = std::min(answer.band.low_C - *answer.low_C, *answer.high_C - answer.band.high_C);
    answer.margin_K = margin;
    answer.verdict = margin < 0 ? Verdict::outside : margin < 5 ? Verdict::tight : Verdict::inside;
    return answer;
}

inline WindowAnswer duplex() {
    WindowAnswer answer;
    answer.heat = QStringLiteral("D7718");
    answer.grade = QStringLiteral("1.4462");
    answer.family = QStringLiteral("duplex");
    answer.cycle = QStringLiteral("SA-22");
    answer.kind = QStringLiteral("solution-anneal");
    answer.furnace = QStringLiteral("F2");
    answer.floors = {limit(Side::floor, QStringLiteral("Cr2N dissolved + 15 K"), 1030.4, 14),
                     limit(Side::floor, QStringLiteral("specification minimum 1020 °C"), 1020),
                     limit(Side::floor, QStringLiteral("sigma dissolved + 20 K"), 980.2, 12),
                     limit(Side::floor, QStringLiteral("ferrite at least 40 %"), 970.6, 9)};
    answer.floors[0].because = QStringLiteral("nitrides left in the metal cost toughness and corrosion resistance");
    answer.floors[0].K_per_wt = {{"N", 1450.0}, {"Cr", 9.5}, {"Ni", -4.0}, {"Mo", 6.0}, {"Mn", -3.1}, {"Si", 2.0}};
    answer.ceilings = {limit(Side::ceiling, QStringLiteral("ferrite at most 60 %"), 1152.3, 11),
                       limit(Side::ceiling, QStringLiteral("furnace maximum 1200 °C"), 1200),
                       limit(Side::ceiling, QStringLiteral("below solidus - 40 K"), 1380, 16)};
    answer.ceilings[0].because = QStringLiteral("ferrite above 60 vol% costs toughness");
    answer.ceilings[0].K_per_wt = {{"N", 610.0}, {"Cr", -22.0}, {"Ni", 30.0}, {"Mo", -19.0}, {"C", 580.0}};
    answer.low_C = 1030.4;
    answer.high_C = 1152.3;
    answer.suggested_setpoint_C = 1091;
    answer.band.rule = QStringLiteral("root of squares");
    answer.grade_check.verdict = QStringLiteral("passes");
    answer.grade_check.grade_id = QStringLiteral("en-1.4462-3");
    answer.left_out = QStringList{QStringLiteral("P 0.024"), QStringLiteral("S 0.001")};
    answer.published = QStringList{QStringLiteral("1020 to 1100 °C, water (invented row)")};
    answer.reason = QStringLiteral("Binding floor: Cr2N dissolved + 15 K. Binding ceiling: ferrite at most 60 %.");
    answer.sweep = duplexSweep();
    return at(answer, 1050);
}

}  // namespace soak::made
