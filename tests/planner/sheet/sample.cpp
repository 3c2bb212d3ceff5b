// SPDX-License-Identifier: GPL-3.0-or-later
// Invented data for the page's tests; no number here is a computed result.
#include "sample.h"

namespace soak::sample {

SheetContent solutionAnneal() {
    SheetContent sheet;
    sheet.number = "2025-0412";
    sheet.revision = "B";
    sheet.replaces = "2025-0388 rev A";
    sheet.draft = false;
    sheet.date = QDate(2025, 4, 2);
    sheet.kind = "solution-anneal";
    sheet.cycle = "SA-300 rev 2";
    sheet.heats = {{"K40217", "1.4307", "bar", 14, Quantity{60, 0, "mm"}},
                   {"K40231", "1.4307", "forging", std::nullopt, Quantity{180, 0, "mm"}}};
    sheet.customer = "Quillmere (invented)";
    sheet.order = "4500118662";
    sheet.specification = "EN 10088-3, edition of the order";
    sheet.furnace = "F2, chamber, electric";
    sheet.controller_step = Quantity{1, 0, "°C"};
    sheet.setpoint = celsius(1060, 1940);
    sheet.metal_low = celsius(1049, 1921);
    sheet.metal_high = celsius(1071, 1959);
    sheet.band_rule = "added up";
    sheet.never_above = celsius(1110, 2030);
    sheet.ramp = "as the furnace goes, no hold";
    sheet.soak_sensor = "LT2";
    sheet.soak_start = celsius(1049, 1921);
    sheet.soak_minutes = 72;
    sheet.soak_formula = "30 min, then 1 min per mm over 138 mm of the governing section 180 mm";
    sheet.load_notes = QStringList{"At most 800 kg.", "Pieces do not touch each other or the wall."};
    sheet.thermocouple_notes = QStringList{"LT2 in the thickest forging, hole 40 mm deep, packed tight."};
    LoadSketch sketch;
    sketch.columns = 4;
    sketch.rows = 2;
    sketch.spacing = Quantity{50, 0, "mm"};
    sketch.work_zone = "900 × 1200 × 800 mm";
    sketch.sensors = {{"TC1", "control", false, 0.5, 0.97}, {"LT2", "slowest piece", true, 0.62, 0.25}};
    sheet.sketch = sketch;
    sheet.quench_medium = "water, stirred";
    sheet.medium_limits = QStringList{"Water below 40 °C at the start, below 50 °C at the end."};
    sheet.max_delay = Quantity{60, 0, "s"};
    sheet.next_step = "wash, then inspection";
    sheet.checks = QStringList{"hardness on 3 pieces, at most 215 HB"};
    sheet.cautions = {
        {"c900", "danger", "Hot steel looks like cold steel. Treat every piece as hot.", "site procedure"},
        {"c901", "warning", "Steam rises when the load goes under. Stand back, face shield on.", "site PPE rules"}};
    sheet.verdict = Verdict::inside;
    sheet.verdict_sentence =
        "The coldest metal stays 9 K above the specification minimum and the hottest 39 K below the furnace maximum.";
    sheet.margin = TwoUnits{{9, 0, "K"}, std::nullopt};
    sheet.binding = {{Side::floor, "specification minimum", "", "EN 10088-3", celsius(1040, 1904), std::nullopt},
                     {Side::ceiling, "delta ferrite begins", "hot cracking in forgings", "computed",
                      celsius(1110, 2030), TwoUnits{{12, 0, "K"}, std::nullopt}}};
    sheet.window_low = celsius(1040, 1904);
    sheet.window_high = celsius(1110, 2030);
    sheet.decision_rule = "inside means: the band fits and each margin is at least the shop's";
    sheet.grade_check = "passes";
    sheet.left_out = QStringList{"P 0.034 %", "S 0.006 %"};
    sheet.published = QStringList{"1000 to 1100 °C (EN 10088-3)"};
    sheet.program_version = "0.1.0";
    sheet.data_set = "ferrous";
    sheet.data_version = "1";
    sheet.rules_version = "3";
    sheet.content_hash = "9f2c41d07be3";
    sheet.qr_payload = "SOAKWRIGHT:2025-0412:B:9f2c41d07be3";
    return sheet;
}

SheetContent draft() {
    SheetContent sheet = solutionAnneal();
    sheet.draft = true;
    sheet.draft_reasons = QStringList{"survey of F6 overdue since 2024-09-28"};
    sheet.furnace = "F6, muffle, laboratory";
    sheet.verdict = Verdict::tight;
    sheet.grade_check = "fails";
    sheet.grade_findings = QStringList{"C 0.034 % is above 0.030 % (1.4307, EN 10088-3)"};
    return sheet;
}

SheetContent harden() {
    SheetContent sheet = solutionAnneal();
    sheet.kind = "harden";
    sheet.cycle = "H-D2V rev 1";
    sheet.replaces.clear();
    sheet.heats.clear();
    for (int i = 0; i < 9; ++i)
        sheet.heats.push_back({QString("T-21-046%1").arg(i), "1.2379", "plate", 4 + i, Quantity{25, 0, "mm"}});
    sheet.furnace = "F4, vacuum, 6 bar nitrogen";
    sheet.controller_step = Quantity{5, 0, "°F"};
    const auto fahrenheit = [](double value_F, double value_C) {
        return TwoUnits{{value_F, 0, "°F"}, Quantity{value_C, 0, "°C"}};
    };
    sheet.setpoint = fahrenheit(1885, 1029);
    sheet.metal_low = fahrenheit(1871, 1022);
    sheet.metal_high = fahrenheit(1899, 1037);
    sheet.soak_start = fahrenheit(1871, 1022);
    sheet.never_above = fahrenheit(1940, 1060);
    sheet.preheat = QStringList{"To 1200 °F (649 °C), hold until load sensor and air agree within 25 °F.",
                                "To 1560 °F (849 °C), hold 20 min."};
    sheet.atmosphere = "vacuum below 10 Pa; 1 mbar nitrogen above 1800 °F";
    sheet.quench_medium = "nitrogen, 5 bar";
    sheet.medium_limits = QStringList{"Through 1470 to 1110 °F in at most 180 s at the load sensor."};
    sheet.max_delay.reset();
    sheet.next_step = "temper within 2 h, before the pieces are below 120 °F";
    sheet.cautions = {{"c902", "danger",
                       "After a gas backfill a pocket of nitrogen stays in the chamber. Measure before you lean in.",
                       "confined-space permit"}};
    return sheet;
}

SheetContent overlong() {
    SheetContent sheet = solutionAnneal();
    const QString sentence = "This sentence was made long on purpose so that it must be broken into several lines. ";
    const QString word(160, 'W');
    for (int i = 0; i < 60; ++i)
        sheet.heats.push_back({QString("H-%1/").arg(i) + QString(i % 7 == 0 ? 60 : 4, '0'), "X2CrNiMoN22-5-3 / 1.4462",
                               "forging", 100 + i, Quantity{180.5, 1, "mm"}});
    sheet.specification = sentence + sentence;
    sheet.furnace = "F1 " + sentence.repeated(3);
    sheet.quench_medium = sentence.repeated(20) + word;
    sheet.soak_formula = sentence.repeated(4);
    sheet.soak_sensor = "LT2 " + word;
    sheet.load_notes << sentence.repeated(12) << word;
    sheet.sketch->sensors.clear();
    for (int i = 0; i < 12; ++i)
        sheet.sketch->sensors.push_back(
            {QString("LT%1").arg(i), "a sensor with a long description", i == 3, 0.08 * i, 0.5});
    for (int i = 0; i < 12; ++i)
        sheet.cautions.push_back(
            {QString("c%1").arg(i), i % 2 ? "note" : "danger", sentence.repeated(3), "site rules"});
    sheet.cautions.push_back({"c99", "warning", sentence.repeated(60), ""});
    sheet.verdict_sentence = sentence.repeated(5);
    sheet.grade_findings = QStringList{sentence.repeated(3), word};
    sheet.remarks = QStringList{sentence.repeated(30)};
    sheet.checks << sentence.repeated(6) << sentence;
    sheet.if_wrong << sentence << sentence.repeated(2);
    sheet.deference << sentence;
    return sheet;
}

}  // namespace soak::sample
