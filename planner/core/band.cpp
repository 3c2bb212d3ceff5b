// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/band.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

/// Limits of error, the larger of `fixed_K` and `slope` * (reading - `from_C`) + `base_K`.
struct ToleranceRow {
    QStringView type;
    int tolerance_class;
    double fixed_K, base_K, slope, from_C, valid_to_C;
};
// Source: IEC 60584-1:2013, tolerance classes (from memory; K, N, R, S class 2 agree with the demonstration shop's
// page).
constexpr ToleranceRow kTolerances[] = {
    {u"K", 1, 1.5, 0, 0.004, 0, 1000},    {u"K", 2, 2.5, 0, 0.0075, 0, 1200},   {u"N", 1, 1.5, 0, 0.004, 0, 1000},
    {u"N", 2, 2.5, 0, 0.0075, 0, 1200},   {u"R", 1, 1.0, 1, 0.003, 1100, 1600}, {u"R", 2, 1.5, 0, 0.0025, 0, 1600},
    {u"S", 1, 1.0, 1, 0.003, 1100, 1600}, {u"S", 2, 1.5, 0, 0.0025, 0, 1600},
};

Error refuse(Fault fault, const QString& message) { return {fault, message.toStdString(), {}, {}}; }

double between(double from, double to, double share) { return from + (to - from) * share; }

/// Adds one line to the warnings and blocks issue.
void block(Band& band, const QString& warning) {
    band.warnings << warning;
    band.may_issue = false;
}

void checkDates(Band& band, const Furnace& furnace, QDate today) {
    if (!today.isValid()) return block(band, "no date given: whether survey and accuracy test are in date is unknown");
    const auto check = [&](QDate due, const QString& what) {
        if (!due.isValid()) block(band, "no due date on record for the " + what + " of " + furnace.id);
        if (due.isValid() && due < today) block(band, what + " overdue since " + due.toString(Qt::ISODate));
    };
    check(furnace.survey_due, "survey");
    check(furnace.accuracy_due, "accuracy test");
}

/// Sums the parts both ways. A survey whose coldest point is above setpoint shifts the band, it is no tolerance.
void addUp(Band& band) {
    double shift_low = band.offset_K, shift_high = band.offset_K, low = 0, high = 0, low2 = 0, high2 = 0;
    for (const BandPart& part : band.parts) {
        shift_low += std::max(part.low_K, 0.0);
        shift_high += std::min(part.high_K, 0.0);
        const double down = std::min(part.low_K, 0.0), up = std::max(part.high_K, 0.0);
        low += down;
        high += up;
        low2 += down * down;
        high2 += up * up;
    }
    band.added_low_C = band.setpoint_C + shift_low + low;
    band.added_high_C = band.setpoint_C + shift_high + high;
    band.root_low_C = band.setpoint_C + shift_low - std::sqrt(low2);
    band.root_high_C = band.setpoint_C + shift_high + std::sqrt(high2);
}

Result<Done> checkRange(const Furnace& furnace, double setpoint_C) {
    if (setpoint_C >= furnace.minimum_C && setpoint_C <= furnace.maximum_C) return Done{};
    const double if_fahrenheit_C = celsiusFromFahrenheit(setpoint_C);
    QString message =
        QString("%1 is outside the range of furnace %2, %3 to %4")
            .arg(celsiusText(setpoint_C), furnace.id, celsiusText(furnace.minimum_C), celsiusText(furnace.maximum_C));
    if (if_fahrenheit_C >= furnace.minimum_C && if_fahrenheit_C <= furnace.maximum_C)
        message +=
            QString("; did you mean %1? That is %2").arg(withUnit(setpoint_C, "°F"), celsiusText(if_fahrenheit_C));
    return refuse(Fault::range, message);
}

/// Rounds on the controller's own scale. A thousandth of a step of slack, so that 1030 °C stays on 1886 °F.
double onScale(const Furnace& furnace, double temperature_C, double (*round)(double), double slack) {
    const double step = furnace.step > 0 ? furnace.step : 1;
    const double own = furnace.controller_fahrenheit ? fahrenheit(temperature_C) : temperature_C;
    const double on_step = round(own / step + slack) * step;
    return furnace.controller_fahrenheit ? celsiusFromFahrenheit(on_step) : on_step;
}

}  // namespace

Result<double> thermocoupleTolerance_K(const QString& type, int tolerance_class, double reading_C) {
    for (const ToleranceRow& row : kTolerances) {
        if (row.type != type || row.tolerance_class != tolerance_class) continue;
        if (reading_C > row.valid_to_C)
            return refuse(Fault::data, QString("thermocouple type %1 class %2 has no tolerance above %3 in IEC 60584-1")
                                           .arg(type)
                                           .arg(tolerance_class)
                                           .arg(celsiusText(row.valid_to_C)));
        return std::max(row.fixed_K, row.base_K + row.slope * (reading_C - row.from_C));
    }
    return refuse(Fault::data,
                  QString("no tolerance on record for thermocouple type \"%1\" class %2; known are K, N, R "
                          "and S in class 1 or 2 (IEC 60584-1)")
                      .arg(type)
                      .arg(tolerance_class));
}

Result<SurveyPoint> surveyAt(const Furnace& furnace, double temperature_C) {
    const auto& survey = furnace.survey;
    if (survey.empty())
        return refuse(Fault::data, "furnace " + furnace.id + " has no temperature uniformity survey on record");
    const auto above = std::find_if(survey.begin(), survey.end(),
                                    [&](const SurveyPoint& point) { return point.temperature_C >= temperature_C; });
    SurveyPoint at = above == survey.end() ? survey.back() : *above;
    if (above != survey.end() && above != survey.begin()) {
        const SurveyPoint& below = *(above - 1);
        const double share = (temperature_C - below.temperature_C) / (above->temperature_C - below.temperature_C);
        at.coldest_K = between(below.coldest_K, above->coldest_K, share);
        at.hottest_K = between(below.hottest_K, above->hottest_K, share);
    }
    at.temperature_C = temperature_C;
    return at;
}

Result<Band> bandAt(const Furnace& furnace, double setpoint_C, const ShopRules& rules) {
    const QString place = "furnace " + furnace.id;
    if (auto in_range = checkRange(furnace, setpoint_C); !in_range) return std::move(in_range).error();
    const auto survey = surveyAt(furnace, setpoint_C);
    if (!survey) return survey.error();
    const auto tolerance = thermocoupleTolerance_K(furnace.thermocouple, furnace.thermocouple_class, setpoint_C);
    if (!tolerance) return Error(tolerance.error()).within(place.toStdString());

    Band band;
    band.setpoint_C = setpoint_C;
    band.offset_K = furnace.offset_K;
    band.parts = {{"survey", survey.value().coldest_K, survey.value().hottest_K},
                  {"thermocouple", -tolerance.value(), tolerance.value()},
                  {"instrument", -furnace.instrument_K, furnace.instrument_K},
                  {"control swing", -furnace.swing_K, furnace.swing_K}};
    addUp(band);
    const bool added = rules.band_rule == "added up";
    if (!added && rules.band_rule != "root of squares")
        return refuse(Fault::input,
                      "unknown band rule \"" + rules.band_rule + "\"; use \"added up\" or \"root of squares\"");
    band.rule = rules.band_rule;
    band.low_C = added ? band.added_low_C : band.root_low_C;
    band.high_C = added ? band.added_high_C : band.root_high_C;
    checkDates(band, furnace, rules.today);
    return band;
}

double stepUp_C(const Furnace& furnace, double temperature_C) {
    return onScale(
        furnace, temperature_C, [](double x) { return std::ceil(x); }, -1e-3);
}
double stepDown_C(const Furnace& furnace, double temperature_C) {
    return onScale(
        furnace, temperature_C, [](double x) { return std::floor(x); }, 1e-3);
}
double step_K(const Furnace& furnace) {
    const double step = furnace.step > 0 ? furnace.step : 1;
    return furnace.controller_fahrenheit ? step / fahrenheitDifference(1) : step;
}

}  // namespace soak
