// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>

#include "base/units.h"
#include "output.h"
#include "planner/core/units_text.h"
#include "planner/core/verdict.h"

namespace soak::cli {
namespace {

QString percent(double fraction) { return withUnit(100 * fraction, "%", 2).rightJustified(9); }

QString compositionText(const std::map<std::string, double>& wt) {
    std::vector<std::pair<std::string, double>> sorted(wt.begin(), wt.end());
    std::sort(sorted.begin(), sorted.end(), [](const auto& a, const auto& b) { return a.second > b.second; });
    QStringList parts;
    for (const auto& [element, value] : sorted)
        if (value >= 0.0005) parts << QString::fromStdString(element) + " " + QString::number(value, 'g', 4);
    return parts.join(", ");
}

QString line(const QString& left, const QString& right) { return "  " + left.leftJustified(16) + right + "\n"; }

QString limitLine(const Limit& limit) {
    const QString temperature = limit.temperature_C ? shownTemperature(limit) : QString("-");
    QString text = "  " + temperature.rightJustified(8) + "  " + limit.cause;
    if (limit.temperature_C && !limit.set)
        text += QString(", uncertainty %1 (certificate %2, laboratory %3, model %4)")
                    .arg(withUnit(limit.uncertainty_K, "K"), number(limit.certificate_K, 1),
                         number(limit.laboratory_K, 1), number(limit.model_K, 0));
    if (!limit.remark.isEmpty()) text += " (" + limit.remark + ")";
    return text + "\n";
}

/// "published: Ac1 737 °C Andrews 1965, ...; out of range: Grange 1961 (Cr 8.80 is above 2.50)"
QString opinionLine(const Limit& limit) {
    if (limit.opinions.empty()) return {};
    QStringList inside, outside;
    for (const Opinion& one : limit.opinions)
        (one.in_range ? inside : outside)
            << celsiusText(one.value) + " " + one.name + (one.in_range ? QString() : " (" + one.outside + ")");
    QString text = QString(12, ' ') + "published " + limit.opinions.front().quantity + ": ";
    text += inside.isEmpty() ? QString("none in range") : inside.join(", ");
    if (!outside.isEmpty()) text += "; out of range: " + outside.join(", ");
    return text + "\n";
}

QString limitLines(const QString& title, const std::vector<Limit>& limits) {
    QString text = title + "\n";
    for (const Limit& limit : limits) text += limitLine(limit) + opinionLine(limit);
    return text;
}

/// The way to the quench; apart from the verdict.
QString coolingLines(const CoolingAnswer& cooling) {
    QStringList lines;
    if (!cooling.sentence.isEmpty()) lines << cooling.sentence;
    if (!cooling.basis.isEmpty()) lines << "(" + cooling.basis + ")";
    for (const Crossing& one : cooling.crossings)
        lines << QString("cross quickly: %1, %2 to %3: %4 (%5)")
                     .arg(one.what, celsiusText(std::ceil(one.high_C)), celsiusText(std::floor(one.low_C)), one.because,
                          one.source);
    if (cooling.needed_K_per_s)
        lines << QString("slowest sound cooling through the sensitising range: %1, to a factor of two")
                     .arg(*cooling.needed_K_per_s < 0.1 ? withUnit(60 * *cooling.needed_K_per_s, "K/min", 1)
                                                        : withUnit(*cooling.needed_K_per_s, "K/s", 1));
    return lines.isEmpty() ? QString() : "Cooling, not part of the window:\n  " + lines.join("\n  ") + "\n";
}

QString outlookLines(const std::vector<QuenchOutlook>& all) {
    if (all.empty()) return {};
    QString text = "After the quench (rules of thumb; " + all.front().basis + "):\n";
    for (const QuenchOutlook& one : all) {
        QStringList parts{"C in the austenite " + withUnit(one.carbon_wt, "%", 2)};
        if (one.Ms_C) parts << "Ms " + celsiusText(*one.Ms_C);
        if (one.Mf_C) parts << "Mf " + celsiusText(*one.Mf_C);
        if (one.Bs_C) parts << "Bs " + celsiusText(*one.Bs_C);
        parts << "austenite left " + withUnit(one.retained_vol, "vol%");
        if (one.hardness_HRC) parts << "martensite " + withUnit(*one.hardness_HRC, "HRC");
        text += "  from " + celsiusText(one.from_C) + ": " + parts.join(", ") + "\n";
    }
    return text;
}

QString remedyLines(const WindowAnswer& answer) {
    QString text;
    if (answer.chance_inside && *answer.chance_inside < 1 && *answer.chance_inside > 0)
        text += QString("Chance that all of the metal is inside: %1 (certificate, laboratory and model)\n")
                    .arg(withUnit(std::floor(100 * *answer.chance_inside), "%"));
    if (answer.remedies.empty()) return text;
    text += "What would move it:\n";
    for (const Remedy& one : answer.remedies)
        text += "  " + one.what + ": " + one.text +
                (one.margin_K ? " (margin " + withUnit(std::floor(*one.margin_K), "K") + ")" : QString()) + "\n";
    return text;
}

QString bulleted(const QString& title, const QStringList& lines) {
    if (lines.isEmpty()) return {};
    return title + "\n  " + lines.join("\n  ") + "\n";
}

QString gradeText(const GradeCheck& check) {
    QString text =
        "Grade check: " + check.verdict + (check.grade_id.isEmpty() ? "" : " (" + check.grade_id + ")") + "\n";
    for (const Finding& finding : check.findings)
        text += "  " + QString(finding.fails ? "fails: " : "") + finding.text + "\n";
    if (!check.satisfied.isEmpty()) text += "  satisfies " + check.satisfied.join(", ") + "\n";
    if (!check.suggested.isEmpty()) text += "  nearest grades: " + check.suggested.join(", ") + "\n";
    return text;
}

}  // namespace

QString asText(const State& state) {
    QString text = celsiusText(celsius(state.temperature_K), 1) + "\n";
    text += line("phase", "     mass    volume     atoms   wt%");
    for (const PhaseAmount& phase : state.phases)
        text += line(QString::fromStdString(phase.label),
                     percent(phase.mass_fraction) + " " + percent(phase.volume_fraction) + " " +
                         percent(phase.mole_fraction) + "   " + compositionText(phase.wt));
    text += QString("  Gibbs energy %1, largest driving force left %2\n")
                .arg(withUnit(state.gibbs_J_per_mol, "J/mol", 1))
                .arg(QString::number(state.proof_J_per_mol, 'g', 2) + QChar(0x2009) + "J/mol");
    return text;
}

QString asText(const Event& event) {
    return celsiusText(celsius(event.temperature_K), 1).rightJustified(10) + "  " +
           QString::fromStdString(event.label) +
           (event.kind == EventKind::appears ? " appears on heating" : " gone on heating") + "\n";
}

QString asText(const WindowAnswer& answer) {
    QStringList head;
    for (const QString& part : {answer.heat, answer.grade, answer.cycle, answer.furnace})
        if (!part.isEmpty()) head << part;
    QString text = head.join(", ") + (head.isEmpty() ? "" : "\n");
    text += "Verdict: " + word(answer.verdict) + "\n  " + answer.reason + "\n";
    if (!answer.band.rule.isEmpty()) {
        text += QString("Setpoint %1; the metal sees %2 to %3 (%4)\n")
                    .arg(temperatureText(answer.setpoint_C), celsiusText(answer.band.low_C, 1),
                         celsiusText(answer.band.high_C, 1), answer.band.rule);
        if (answer.suggested_setpoint_C)
            text += "Suggested setpoint " + temperatureText(*answer.suggested_setpoint_C) + "\n";
    }
    if (!answer.floors.empty()) text += limitLines("Must be above", answer.floors);
    if (!answer.ceilings.empty()) text += limitLines("Must be below", answer.ceilings);
    text += remedyLines(answer);
    text += outlookLines(answer.quench_outlook);
    text += bulleted("Time, beside the shop's rule:", answer.soak.lines);
    text += coolingLines(answer.cooling);
    text += gradeText(answer.grade_check);
    text += bulleted("Before a sheet may be issued:", answer.band.warnings);
    text += bulleted("Kept, not in the equilibrium:", answer.left_out);
    text += bulleted("Published ranges of the grade, as information:", answer.published);
    text += bulleted("Remarks:", answer.remarks);
    text += "Program " + answer.program_version + ", data " + answer.data_set + " " + answer.data_version + "\n";
    return text;
}

QString asText(const std::vector<TriageRow>& rows) {
    QString text;
    for (const TriageRow& row : rows) {
        const QString margin = row.margin_K ? withUnit(std::floor(*row.margin_K), "K") : QString("-");
        text += row.heat.leftJustified(11) + " " + row.grade.leftJustified(9) + " " + row.cycle.leftJustified(7) + " " +
                row.furnace.leftJustified(3) + " " + word(row.verdict).leftJustified(13) + margin.rightJustified(8) +
                "  " + (row.grade_verdict.isEmpty() ? "" : "grade " + row.grade_verdict) + "\n    " + row.reason + "\n";
        for (const QString& finding : row.findings) text += "    - " + finding + "\n";
    }
    QStringList sets;
    for (const TriageRow& row : rows)
        if (row.answer && !row.answer->data_set.isEmpty())
            sets << row.answer->data_set + " " + row.answer->data_version;
    sets.removeDuplicates();
    sets.sort();
    if (!sets.isEmpty()) text += "Data " + sets.join(", ") + "\n";
    return text;
}

}  // namespace soak::cli
