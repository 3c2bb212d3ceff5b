// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/tempering.h"

#include <QRegularExpression>
#include <algorithm>
#include <cmath>
#include <map>
#include <tuple>

#include "base/units.h"
#include "db/csv.h"
#include "planner/core/tables.h"

namespace soak {
namespace {

constexpr double kConstant = 20;

/// "2 (per 25 mm)", "4", "1-2": the first number; "2+2" and "4+4" are the sum; nothing written: 1.
double hoursIn(const QString& text) {
    static const QRegularExpression number("[0-9.]+");
    double hours = 0;
    const bool summed = text.contains('+');
    for (auto found = number.globalMatch(text); found.hasNext();) {
        hours += found.next().captured().toDouble();
        if (!summed) break;
    }
    return hours > 0 ? hours : 1;
}

double parameterOf(const TemperingCurve::Point& point) { return temperingParameter(point.temper_C, point.hours); }

/// The peak of a curve with secondary hardening; the first point where it only falls.
size_t peakOf(const TemperingCurve& curve) {
    size_t peak = 0;
    for (size_t i = 1; i < curve.points.size(); ++i)
        if (curve.points[i].hardness >= curve.points[peak].hardness) peak = i;
    return peak;
}

double celsiusOfParameter(double parameter, double hours) {
    return celsius(parameter / (kConstant + std::log10(hours)));
}

}  // namespace

double temperingParameter(double temper_C, double hours) { return kelvin(temper_C) * (kConstant + std::log10(hours)); }

std::optional<double> TemperingCurve::hardnessAt(double temper_C, double hours) const {
    const double P = temperingParameter(temper_C, hours);
    for (size_t i = 1; i < points.size(); ++i) {
        const double low = parameterOf(points[i - 1]), high = parameterOf(points[i]);
        if (P < low || P > high) continue;
        const double share = high > low ? (P - low) / (high - low) : 0;
        return points[i - 1].hardness + share * (points[i].hardness - points[i - 1].hardness);
    }
    return std::nullopt;
}

std::optional<double> TemperingCurve::temperatureFor(double hardness, double hours) const {
    for (size_t i = peakOf(*this) + 1; i < points.size(); ++i) {
        const Point &a = points[i - 1], &b = points[i];
        if (hardness > a.hardness || hardness < b.hardness || a.hardness == b.hardness) continue;
        const double share = (a.hardness - hardness) / (a.hardness - b.hardness);
        return celsiusOfParameter(parameterOf(a) + share * (parameterOf(b) - parameterOf(a)), hours);
    }
    return std::nullopt;
}

double TemperingCurve::slopeAt(double temper_C, double hours) const {
    const auto above = hardnessAt(temper_C + 2, hours), below = hardnessAt(temper_C - 2, hours);
    return above && below ? (*above - *below) / 4 : 0;
}

Result<std::vector<TemperingCurve>> loadTemperingCurves() {
    const auto read = CsvTable::read(
        QString::fromStdString(tablePath("hardness_curves.csv").string()),
        {"grade_key", "austenitise_C", "quench", "temper_C", "time_h", "hardness", "unit", "source", "seen"});
    if (!read) return read.error();
    const CsvTable& table = read.value();
    std::map<std::tuple<QString, QString, QString, QString, QString>, TemperingCurve> curves;
    for (size_t row = 0; row < table.size(); ++row) {
        bool has_hardness = false, has_temper = false;
        const double hardness = table.text(row, "hardness").toDouble(&has_hardness);
        const double temper_C = table.text(row, "temper_C").toDouble(&has_temper);
        if (!has_hardness || !has_temper) continue;
        const QString austenitise = table.text(row, "austenitise_C");
        TemperingCurve& curve = curves[{table.text(row, "grade_key"), austenitise, table.text(row, "quench"),
                                        table.text(row, "unit"), table.text(row, "source")}];
        curve.grade_key = table.text(row, "grade_key");
        curve.quench = table.text(row, "quench");
        curve.unit = table.text(row, "unit");
        curve.source = table.text(row, "source");
        curve.seen = table.text(row, "seen");
        if (!austenitise.isEmpty()) curve.austenitise_C = austenitise.toDouble();
        curve.points.push_back({temper_C, hoursIn(table.text(row, "time_h")), hardness});
    }
    std::vector<TemperingCurve> all;
    for (auto& [key, curve] : curves) {
        std::sort(curve.points.begin(), curve.points.end(),
                  [](const auto& a, const auto& b) { return parameterOf(a) < parameterOf(b); });
        if (curve.points.size() >= 2) all.push_back(std::move(curve));
    }
    return all;
}

const TemperingCurve* curveFor(const std::vector<TemperingCurve>& curves, const QStringList& names,
                               const QString& unit) {
    const TemperingCurve* best = nullptr;
    for (const TemperingCurve& curve : curves) {
        if (curve.unit != unit || !names.contains(curve.grade_key, Qt::CaseInsensitive)) continue;
        if (!best || curve.points.size() > best->points.size()) best = &curve;
    }
    return best;
}

}  // namespace soak
