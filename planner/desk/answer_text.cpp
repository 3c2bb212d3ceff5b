// SPDX-License-Identifier: GPL-3.0-or-later
#include "answer_text.h"

#include <QCoreApplication>
#include <algorithm>
#include <cmath>

namespace soak::desk {
namespace {

QString tr(const char* text) { return QCoreApplication::translate("soak::desk::answer", text); }

QString row(const QString& name, const QString& value) {
    return QStringLiteral("<tr><td style='padding-right:12px'>%1</td><td align='right'>%2</td></tr>").arg(name, value);
}

/// Elements that reach 0.01 wt% in some phase, those that the metal holds most of first.
QStringList elementsOf(const std::vector<Reading>& phases) {
    std::map<QString, double> most, held;
    for (const Reading& phase : phases)
        for (const auto& [element, wt] : phase.wt) {
            const QString symbol = QString::fromStdString(element);
            most[symbol] = std::max(most[symbol], wt);
            held[symbol] += phase.volume * wt;
        }
    QStringList elements;
    for (const auto& [symbol, wt] : most)
        if (wt >= 0.01) elements << symbol;
    std::stable_sort(elements.begin(), elements.end(),
                     [&](const QString& a, const QString& b) { return held[a] > held[b]; });
    return elements;
}

QString cell(const QString& text) {
    return QStringLiteral("<td align='right' style='white-space:nowrap'>%1</td>").arg(text);
}

QString content(double wt) {
    if (wt < 0.001) return QStringLiteral("–");
    return number(wt, wt >= 10 ? 1 : wt >= 0.1 ? 2 : 3);
}

}  // namespace

QString verdictHeadline(const WindowAnswer& answer, const Units& units) {
    const QString spare = answer.margin_K ? units.difference(std::abs(*answer.margin_K)) : QString();
    switch (answer.verdict) {
        case Verdict::inside:
            return spare.isEmpty() ? tr("Inside") : tr("Inside, %1 to spare").arg(spare);
        case Verdict::tight:
            return spare.isEmpty() ? tr("Tight") : tr("Tight, %1 to spare").arg(spare);
        case Verdict::outside:
            return spare.isEmpty() ? tr("Outside") : tr("Outside by %1").arg(spare);
        case Verdict::noWindow:
            return tr("No window");
        case Verdict::notComputed:
            break;
    }
    return tr("Not computed");
}

QString limitDetails(const Limit& limit, const Units& units) {
    QString text = QStringLiteral("<b>") + units.sentence(limit.cause).toHtmlEscaped() + QStringLiteral("</b>");
    if (!limit.because.isEmpty()) text += QStringLiteral("<br>") + tr("Why: %1").arg(limit.because.toHtmlEscaped());
    if (!limit.drivers.isEmpty())
        text += QStringLiteral("<br>") + tr("In this heat: %1").arg(limit.drivers.toHtmlEscaped());
    if (!limit.remark.isEmpty()) text += QStringLiteral("<br>") + units.sentence(limit.remark).toHtmlEscaped();
    if (!limit.source.isEmpty()) text += QStringLiteral("<br>") + tr("Source: %1").arg(limit.source.toHtmlEscaped());
    if (limit.margin_K != 0)
        text += QStringLiteral("<br>") +
                tr("A margin of %1 into the safe side is contained.").arg(units.difference(limit.margin_K));
    if (limit.uncertainty_K > 0)
        text += QStringLiteral("<br>") +
                tr("Standard uncertainty %1: certificate rounding %2, laboratory %3, model %4.")
                    .arg(units.difference(limit.uncertainty_K), units.difference(limit.certificate_K),
                         units.difference(limit.laboratory_K), units.difference(limit.model_K));
    return text;
}

QString phaseTable(const Ribbons& ribbons, double celsius) {
    const auto phases = ribbons.at(celsius);
    if (phases.empty()) return tr("No equilibrium was computed at this temperature.");
    // One column a phase: there are few of them and many elements, and the panel is narrow.
    QString names = QStringLiteral("<tr><td></td>"),
            shares = QStringLiteral("<tr><td>") + tr("vol%") + QStringLiteral("</td>");
    for (const Reading& phase : phases) {
        names += cell(phase.label.toHtmlEscaped());
        shares += cell(percent(phase.volume).chopped(2));
    }
    const QString end = QStringLiteral("</tr>");
    QString text = QStringLiteral("<table cellspacing='0' cellpadding='3'>") + names + end + shares + end;
    for (const QString& element : elementsOf(phases)) {
        text += QStringLiteral("<tr><td>%1</td>").arg(element);
        for (const Reading& phase : phases) {
            const auto found = phase.wt.find(element.toStdString());
            text += cell(content(found == phase.wt.end() ? 0 : found->second));
        }
        text += end;
    }
    return text + QStringLiteral("</table>") + tr("Elements in wt% of each phase, at equilibrium.");
}

QString bandDetails(const Band& band, const Units& units) {
    QString text = QStringLiteral("<table cellspacing='0' cellpadding='2'>");
    for (const BandPart& part : band.parts)
        text += row(part.name.toHtmlEscaped(),
                    units.signedDifference(part.low_K) + QStringLiteral(" / ") + units.signedDifference(part.high_K));
    if (band.offset_K != 0) text += row(tr("true minus read, uncorrected"), units.signedDifference(band.offset_K));
    const auto both = [&](double low_C, double high_C) {
        return tr("%1 to %2").arg(units.temperature(low_C), units.temperature(high_C));
    };
    text += row(tr("added up"), both(band.added_low_C, band.added_high_C));
    text += row(tr("root of squares"), both(band.root_low_C, band.root_high_C));
    return text + QStringLiteral("</table>") + tr("The shop's rule decides: %1.").arg(band.rule.toHtmlEscaped());
}

QString gradeCheckText(const GradeCheck& check) {
    QStringList lines;
    for (const Finding& finding : check.findings) {
        QString line = finding.text.toHtmlEscaped();
        if (finding.fails) line = QStringLiteral("<b>%1</b>").arg(line);
        if (!finding.source.isEmpty()) line += QStringLiteral(" <i>(%1)</i>").arg(finding.source.toHtmlEscaped());
        lines << line;
    }
    const auto add = [&lines](const QString& sentence, const QStringList& names) {
        if (!names.isEmpty()) lines << sentence.arg(names.join(QStringLiteral(", ")).toHtmlEscaped());
    };
    add(tr("Row that decided: %1."), check.grade_id.isEmpty() ? QStringList() : QStringList{check.grade_id});
    add(tr("Satisfied: %1."), check.satisfied);
    add(tr("Nearest grades: %1. A person decides."), check.suggested);
    return lines.join(QStringLiteral("<br>"));
}

QString linesOr(const QStringList& lines, const QString& otherwise) {
    QStringList escaped;
    for (const QString& line : lines) escaped << line.toHtmlEscaped();
    return escaped.isEmpty() ? otherwise : escaped.join(QStringLiteral("<br>"));
}

}  // namespace soak::desk
