// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/sheet_content.h"

#include <algorithm>
#include <cmath>

#include "base/units.h"
#include "planner/core/band.h"
#include "planner/core/cautions.h"
#include "planner/core/fahrenheit_text.h"
#include "planner/core/sheet_issue.h"
#include "planner/core/units_text.h"
#include "planner/core/verdict.h"

namespace soak {
namespace {

constexpr std::size_t kMostCautions = 2;  // what fits on one page beside the work
const QString kLoadSensor = "LT1";

/// Rounds both units on their own, the same safe way.
using Rounding = double (*)(double);
double down(double x) { return std::floor(x + 0.01); }  // a hundredth: 1040.0000001 from a conversion is still 1040
double up(double x) { return std::ceil(x - 0.01); }
double nearest(double x) { return std::round(x); }

class UnitsOf {
public:
    explicit UnitsOf(const Furnace& furnace) : fahrenheit_first_(furnace.controller_fahrenheit) {}

    TwoUnits temperature(double temperature_C, Rounding round) const {
        return both({round(temperature_C), 0, "°C"}, {round(fahrenheit(temperature_C)), 0, "°F"});
    }
    /// A sentence of core's in the controller's unit.
    QString text(const QString& celsius) const { return fahrenheit_first_ ? inFahrenheit(celsius) : celsius; }
    TwoUnits difference(double difference_K, Rounding round) const {
        return both({round(difference_K), 0, "K"}, {round(fahrenheitDifference(difference_K)), 0, "°F"});
    }

private:
    TwoUnits both(const Quantity& in_C, const Quantity& in_F) const {
        return fahrenheit_first_ ? TwoUnits{in_F, in_C} : TwoUnits{in_C, in_F};
    }
    bool fahrenheit_first_;
};

SheetLimit sheetLimit(const Limit& limit, const UnitsOf& units) {
    SheetLimit made{limit.side, units.text(limit.cause), limit.because, limit.source, {}, {}};
    if (!limit.temperature_C && !limit.remark.isEmpty()) made.cause += ": " + units.text(limit.remark);
    if (limit.temperature_C)
        made.temperature = units.temperature(*limit.temperature_C, limit.side == Side::floor ? up : down);
    if (limit.temperature_C && !limit.set) made.uncertainty = units.difference(limit.uncertainty_K, up);
    return made;
}

/// The first of each side: limits are sorted with the binding one first.
std::vector<SheetLimit> bindingLimits(const WindowAnswer& answer, const UnitsOf& units) {
    std::vector<SheetLimit> binding;
    for (const auto* side : {&answer.floors, &answer.ceilings})
        if (!side->empty() && (side->front().temperature_C || side->front().impossible || !side->front().computed))
            binding.push_back(sheetLimit(side->front(), units));
    return binding;
}

const Quench* quenchFor(const SheetRequest& request) {
    for (const QString& id : request.job.cycle.quenches)
        for (const Quench& quench : request.quenches)
            if (quench.id == id && request.job.furnace.quenches.contains(id)) return &quench;
    return nullptr;
}

void fillSoak(SheetContent& sheet, const SheetRequest& request, const UnitsOf& units) {
    const Cycle& cycle = request.job.cycle;
    sheet.soak_sensor = kLoadSensor;
    sheet.soak_start = units.temperature(
        request.answer.low_C ? std::max(*request.answer.low_C, request.answer.band.low_C) : request.answer.band.low_C,
        up);
    const auto& section = request.job.heat.section_mm;
    sheet.soak_formula = cycle.soak_rule;
    if (section && (cycle.soak_base_min > 0 || cycle.soak_per_25mm_min > 0)) {
        const double minutes =
            cycle.soak_base_min + cycle.soak_per_25mm_min * std::max(0.0, *section - cycle.soak_free_mm) / 25;
        sheet.soak_minutes = static_cast<int>(std::ceil(minutes - 1e-9));
        sheet.soak_formula += "; section " + withUnit(*section, "mm");
    } else if (cycle.soak_per_25mm_min == 0 && cycle.soak_base_min > 0) {
        sheet.soak_minutes = static_cast<int>(std::ceil(cycle.soak_base_min));
    }
}

/// One line each for the medium and for the limits that bind here: the cycle's own before the facility's.
void fillQuench(SheetContent& sheet, const SheetRequest& request) {
    const Quench* quench = quenchFor(request);
    if (quench) sheet.quench_medium = quench->id + ", " + quench->medium;
    if (!quench) sheet.cooling = request.job.cycle.cooling;
    if (!request.job.cycle.note.isEmpty())
        sheet.medium_limits << request.job.cycle.note;
    else if (quench && !quench->limits.isEmpty())
        sheet.medium_limits << quench->limits;
    if (quench && quench->transfer_max_s > 0)
        sheet.medium_limits
            << QString("door to fully under took at most %1 when measured").arg(withUnit(quench->transfer_max_s, "s"));
    const CoolingAnswer& cooling = request.answer.cooling;
    if (cooling.allowed_s && quench && quench->transfer_max_s > 0)
        sheet.max_delay = Quantity{std::floor(*cooling.allowed_s + 1e-6), 0, "s"};
}

void fillWhy(SheetContent& sheet, const SheetRequest& request, const UnitsOf& units) {
    const WindowAnswer& answer = request.answer;
    sheet.verdict = answer.verdict;
    // The heading beside it says the verdict's word already.
    sheet.verdict_sentence = units.text(answer.reason.section(": ", 1));
    if (!sheet.verdict_sentence.isEmpty()) sheet.verdict_sentence[0] = sheet.verdict_sentence[0].toUpper();
    if (answer.margin_K) sheet.margin = units.difference(*answer.margin_K, down);
    sheet.binding = bindingLimits(answer, units);
    if (answer.low_C) sheet.window_low = units.temperature(*answer.low_C, up);
    if (answer.high_C) sheet.window_high = units.temperature(*answer.high_C, down);
    sheet.decision_rule = QString(
                              "the whole band fits; margin at least %1 where people set the limit, else %2 or one "
                              "standard uncertainty")
                              .arg(units.text(withUnit(request.rules.tight_set_K, "K")),
                                   units.text(withUnit(request.rules.tight_computed_K, "K")));
    sheet.grade_check = answer.grade_check.verdict;
    for (const Finding& finding : answer.grade_check.findings) {
        const bool worth_paper = finding.fails || finding.source == "suggestion" || finding.text.contains("missing");
        if (worth_paper) sheet.grade_findings << finding.text;
    }
    sheet.left_out = answer.left_out;
    for (QString& element : sheet.left_out) element += QString(QChar(0x2009)) + "%";
    for (const QString& range : answer.published) sheet.published << units.text(range);
    for (const QString& remark : answer.remarks) sheet.remarks << units.text(remark);
}

void fillFurnace(SheetContent& sheet, const SheetRequest& request, const UnitsOf& units) {
    const Furnace& furnace = request.job.furnace;
    const WindowAnswer& answer = request.answer;
    sheet.furnace = furnace.kind.isEmpty() ? furnace.id : furnace.id + ", " + furnace.kind;
    sheet.controller_step = Quantity{furnace.step, furnace.step == std::round(furnace.step) ? 0 : 1,
                                     furnace.controller_fahrenheit ? "°F" : "°C"};
    sheet.setpoint = units.temperature(answer.setpoint_C, nearest);
    sheet.metal_low = units.temperature(answer.band.low_C, down);
    sheet.metal_high = units.temperature(answer.band.high_C, up);
    sheet.band_rule = answer.band.rule;
    if (answer.high_C) sheet.never_above = units.temperature(*answer.high_C, down);
    if (furnace.maximum_load_kg > 0)
        sheet.load_notes << "at most " + withUnit(furnace.maximum_load_kg, "kg") + ", pieces apart";
    sheet.load_notes << answer.load_notes;
    sheet.if_wrong = answer.if_wrong;
    sheet.thermocouple_notes << "compare " + kLoadSensor + " with an independent reading";
    if (!furnace.work_zone_mm.isEmpty()) {
        LoadSketch sketch;
        sketch.round = request.job.heat.product_form != "plate";
        sketch.work_zone = furnace.work_zone_mm + QString(QChar(0x2009)) + "mm";
        sketch.sensors = {{kLoadSensor, "load sensor, slowest piece", true, 0.5, 0.5},
                          {"CT", "control", false, 0.1, 0.9}};
        sheet.sketch = sketch;
    }
}

}  // namespace

QStringList obstaclesToIssue(const WindowAnswer& answer) {
    QStringList obstacles = answer.band.warnings;
    if (answer.band.rule.isEmpty()) obstacles << "no band was computed";
    const bool fits = answer.verdict == Verdict::inside || answer.verdict == Verdict::tight;
    if (!fits) obstacles << "verdict " + word(answer.verdict);
    if (answer.grade_check.verdict != "passes") obstacles << "grade check: " + answer.grade_check.verdict;
    return obstacles;
}

SheetContent makeSheet(const SheetRequest& request) {
    const UnitsOf units(request.job.furnace);
    const Heat& heat = request.job.heat;
    SheetContent sheet;
    sheet.draft = true;
    sheet.draft_reasons = obstaclesToIssue(request.answer);
    if (sheet.draft_reasons.isEmpty()) sheet.draft_reasons << "not released";
    sheet.date = request.rules.today;
    sheet.kind = request.job.cycle.kind;
    sheet.cycle = request.job.cycle.name + " rev " + QString::number(request.job.cycle.revision);
    SheetHeat line{heat.number, heat.grade, heat.product_form, {}, {}};
    if (heat.section_mm) line.section = Quantity{*heat.section_mm, 0, "mm"};
    sheet.heats = {line};
    sheet.specification = request.specification;
    fillFurnace(sheet, request, units);
    fillSoak(sheet, request, units);
    fillQuench(sheet, request);
    fillWhy(sheet, request, units);
    for (const Caution& caution :
         cautionsFor(request.cautions, request.job.cycle, request.answer.family, request.job.furnace,
                     sheet.quench_medium, request.answer.setpoint_C, kMostCautions))
        sheet.cautions.push_back({caution.row_id, caution.severity, caution.text, caution.defers_to});
    sheet.program_version = request.answer.program_version;
    sheet.data_set = request.answer.data_set;
    sheet.data_version = request.answer.data_version;
    sheet.rules_version = "band by " + request.answer.band.rule;
    return sheet;
}

}  // namespace soak
