// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/quench_factor.h"

#include <QRegularExpression>
#include <algorithm>
#include <cmath>

#include "base/units.h"
#include "planner/core/tables.h"

namespace soak {
namespace {

constexpr double kLeastStep_s = 0.01;  // thin sheet falls by some kelvin in it
constexpr double kLongest_s = 3600;    // a piece that has not cooled by then was not quenched

CCurve curveFrom(const toml::table& row, double K1) {
    const auto number = [&](std::string_view key) { return numberIn(row, key).value_or(0); };
    CCurve curve;
    curve.grades = texts(row, "grades");
    curve.temper = text(row, "temper");
    curve.K1 = K1;
    curve.K2_s = number("K2");
    curve.K3 = number("K3");
    curve.K4_K = number("K4");
    curve.K5 = number("K5");
    curve.gas = number("R");
    curve.from_C = number("from_C");
    curve.to_C = number("to_C");
    curve.source = text(row, "source");
    return curve;
}

/// "water, 10 m3, 65-95 °C" -> 80; nothing when no temperature stands there.
std::optional<double> middleOf(const QString& medium) {
    static const QRegularExpression range("(\\d+)\\s*[-\\x{2013}]\\s*(\\d+)\\s*°C");
    const auto match = range.match(medium);
    if (!match.hasMatch()) return std::nullopt;
    return (match.captured(1).toDouble() + match.captured(2).toDouble()) / 2;
}

}  // namespace

double CCurve::criticalTime_s(double temperature_C) const {
    const double T = kelvin(temperature_C), under = K4_K - T;
    return -K1 * K2_s * std::exp(K3 * K4_K * K4_K / (gas * T * under * under)) * std::exp(K5 / (gas * T));
}

double CCurve::strengthKept(double quench_factor) const { return std::exp(K1 * quench_factor); }

const CCurve* QuenchBook::curveOf(const QStringList& grade_names) const {
    for (const CCurve& curve : curves)
        for (const QString& name : grade_names)
            if (curve.grades.contains(name)) return &curve;
    return nullptr;
}

std::optional<Surroundings> QuenchBook::filmOf(const QString& medium) const {
    std::vector<const QuenchFilm*> rows;
    for (const QuenchFilm& film : films)
        if (medium.contains(film.medium, Qt::CaseInsensitive)) rows.push_back(&film);
    if (rows.empty()) return std::nullopt;
    const double at_C = middleOf(medium).value_or(rows.front()->temperature_C);
    double h = at_C <= rows.front()->temperature_C ? rows.front()->W_per_m2K : rows.back()->W_per_m2K;
    for (std::size_t i = 0; i + 1 < rows.size(); ++i) {
        const QuenchFilm &low = *rows[i], &high = *rows[i + 1];
        if (at_C < low.temperature_C || at_C > high.temperature_C) continue;
        const double share = (at_C - low.temperature_C) / (high.temperature_C - low.temperature_C);
        h = low.W_per_m2K + share * (high.W_per_m2K - low.W_per_m2K);
    }
    return Surroundings{at_C, h, 0};
}

Result<QuenchBook> loadQuenchBook() {
    const auto table = readTable("quench_factor.toml");
    if (!table) return table.error();
    const double K1 = numberIn(table.value(), "K1").value_or(0);
    QuenchBook book;
    forEachRow(table.value(), "curve", [&](const toml::table& row) { book.curves.push_back(curveFrom(row, K1)); });
    forEachRow(table.value(), "film", [&](const toml::table& row) {
        book.films.push_back({text(row, "medium"), numberIn(row, "temperature_C").value_or(0),
                              numberIn(row, "W_per_m2K").value_or(0), text(row, "source")});
    });
    for (const CCurve& curve : book.curves)
        if (K1 >= 0 || curve.grades.isEmpty() || curve.K2_s <= 0 || curve.gas <= 0 || curve.to_C >= celsius(curve.K4_K))
            return badTable("quench_factor.toml", "curve " + curve.grades.join(", ").toStdString() + " " +
                                                      curve.temper.toStdString() + " lacks a constant");
    return book;
}

QuenchCost quenchCost(const CCurve& curve, const Metal& metal, double section_mm, bool round, double start_C,
                      double transfer_s, const Surroundings& air, const Surroundings& medium) {
    Conduction piece(metal, section_mm, round, start_C);
    QuenchCost cost;
    const auto cool = [&](const Surroundings& around, double longest_s) {
        for (double time_s = 0; time_s < longest_s && piece.middle_C() > curve.from_C;) {
            const double step_s = std::min(std::max(kLeastStep_s, time_s / 200), longest_s - time_s + kLeastStep_s);
            piece.advance(step_s, around);
            time_s += step_s;
            if (piece.middle_C() < curve.to_C && piece.middle_C() > curve.from_C)
                cost.factor += step_s / curve.criticalTime_s(piece.middle_C());
        }
    };
    cool(air, transfer_s);
    cost.factor_on_the_way = cost.factor;
    cool(medium, kLongest_s);
    cost.kept = curve.strengthKept(cost.factor);
    return cost;
}

}  // namespace soak
