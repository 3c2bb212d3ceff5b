// SPDX-License-Identifier: GPL-3.0-or-later
// The sections beside the work: what to do when it goes wrong, cautions, why, signatures.
#include <algorithm>
#include <cmath>

#include "planner/sheet/composer.h"

namespace soak {
namespace {

QString verdictKey(Verdict verdict) {
    switch (verdict) {
        case Verdict::inside:
            return "verdict.inside";
        case Verdict::tight:
            return "verdict.tight";
        case Verdict::outside:
            return "verdict.outside";
        case Verdict::noWindow:
            return "verdict.no_window";
        case Verdict::notComputed:
            return "verdict.not_computed";
    }
    return "verdict.not_computed";
}

TwoUnits magnitude(TwoUnits quantity) {
    quantity.controller.value = std::abs(quantity.controller.value);
    if (quantity.other) quantity.other->value = std::abs(quantity.other->value);
    return quantity;
}

/// A mark of shape with its words beside it.
std::vector<Row> marked(const Composer& composer, Marks mark, const QString& text, double width) {
    const double height = composer.typesetter.lineHeight_mm(composer.bold());
    std::vector<Row> rows = composer.typesetter.paragraph(text, composer.bold(), 6, width - 6);
    mark.move(0, (height - 3.6) / 2);
    rows.front().marks.add(std::move(mark));
    return rows;
}

QString verdictText(const Composer& composer) {
    const SheetContent& content = composer.content;
    const Wording& words = composer.words();
    QString text = composer.both(verdictKey(content.verdict)).join(" / ");
    if (content.margin)
        text += ", " + composer.text(content.margin->controller.value < 0 ? "why.short_by" : "why.margin",
                                     {{"margin", words.number(magnitude(*content.margin))}});
    return text;
}

std::vector<Row> gradeRows(const Composer& composer, double width) {
    const QString stored = composer.content.grade_check;
    const bool passes = stored == "passes", fails = stored == "fails";
    const QString key = passes ? "grade.passes" : fails ? "grade.fails" : "grade.not_checked";
    const Verdict shape = passes ? Verdict::inside : fails ? Verdict::outside : Verdict::notComputed;
    std::vector<Row> rows = marked(composer, verdictMark(shape, QRectF(0, 0, 3.6, 3.6)),
                                   composer.text("why.grade", {{"verdict", composer.both(key).join(" / ")}}), width);
    for (const QString& finding : composer.content.grade_findings)
        append(rows, composer.typesetter.paragraph(finding, composer.small(), 6, width - 6));
    return rows;
}

QString limitText(const Composer& composer, const SheetLimit& limit) {
    const bool floor = limit.side == Side::floor;
    const Wording& words = composer.words();
    QString text = limit.temperature
                       ? composer.text(floor ? "why.floor" : "why.ceiling",
                                       {{"temperature", words.number(*limit.temperature)}, {"cause", limit.cause}})
                       : composer.text(floor ? "why.floor_none" : "why.ceiling_none", {{"cause", limit.cause}});
    if (limit.uncertainty)
        text += "; " + composer.text("why.uncertainty", {{"uncertainty", words.tolerance(*limit.uncertainty)}});
    if (!limit.because.isEmpty()) text += "; " + limit.because;
    if (!limit.source.isEmpty()) text += " [" + limit.source + "]";
    return text;
}

QStringList smallPrint(const Composer& composer) {
    const SheetContent& content = composer.content;
    QStringList lines;
    if (content.window_low && content.window_high)
        lines << composer.text("why.window", {{"low", composer.words().number(*content.window_low)},
                                              {"high", composer.words().number(*content.window_high)}});
    const auto add = [&](const char* key, const char* name, const QString& value) {
        if (!value.isEmpty()) lines << composer.text(key, {{name, value}});
    };
    add("why.band", "rule", composer.word("rule", content.band_rule));
    add("why.rule", "rule", content.decision_rule);
    add("why.left_out", "elements", content.left_out.join(", "));
    add("why.published", "ranges", content.published.join("; "));
    for (const QString& remark : content.remarks) add("why.remark", "remark", remark);
    return lines;
}

std::vector<Row> cautionRows(const Composer& composer, const SheetCaution& caution) {
    constexpr double size = 4.4, left = 6.5;
    const Typesetter& set = composer.typesetter;
    const Type bold = composer.bold(), body = composer.body();
    const QString severity = caution.severity == "danger"    ? "caution.danger"
                             : caution.severity == "warning" ? "caution.warning"
                                                             : "caution.note";
    const QString word = composer.both(severity).join(" / ") + ": ";
    const QString own = composer.words().wordOrNothing("caution_text", caution.id);
    QString text = own.isEmpty() ? caution.text : own;
    if (!caution.defers_to.isEmpty())
        text += " (" + composer.text("caution.defers", {{"procedure", caution.defers_to}}) + ")";
    const double width = composer.content_width - left, indent = set.width_mm(word, bold);

    std::vector<Row> rows;
    for (const QString& lineText : set.lines(text, body, width, indent)) {
        const double x = rows.empty() ? left + indent : left;
        Row row{set.lineHeight_mm(body), {}};
        if (rows.empty()) {
            row.marks = severityMark(caution.severity, QRectF(0, (row.height - size) / 2, size, size));
            row.marks.texts.push_back({QRectF(left, 0, indent, row.height), word, bold, Align::left});
        }
        row.marks.texts.push_back({QRectF(x, 0, composer.content_width - x, row.height), lineText, body, Align::left});
        rows.push_back(std::move(row));
    }
    const QString second =
        composer.templates.second ? composer.templates.second->wordOrNothing("caution_text", caution.id) : QString();
    if (!second.isEmpty()) append(rows, set.paragraph(second, body, left, width));
    return rows;
}

}  // namespace

/// Events in two columns, as each wraps for itself.
std::optional<Section> wrongSection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const Wording& words = composer.words();
    const double column = composer.content_width / 2, room = column - 4;
    std::vector<std::vector<Row>> events;
    const auto add = [&](const QString& key, Wording::Values values = {}) {
        events.push_back(composer.say(key, composer.body(), 0, room, values));
    };
    add("wrong.alarm");
    if (content.never_above) add("wrong.over", {{"temperature", words.number(*content.never_above)}});
    if (content.max_delay) add("wrong.late", {{"delay", words.number(*content.max_delay)}});
    add("wrong.short");
    for (const QString& text : content.if_wrong)
        events.push_back(composer.typesetter.paragraph(text, composer.body(), 0, room));
    std::vector<Row> rows = composer.say("wrong.action", composer.strong(), 0, composer.content_width);
    for (size_t i = 0; i < events.size(); i += 2)
        append(rows, composer.beside(events[i], i + 1 < events.size() ? events[i + 1] : std::vector<Row>(), column));
    return Section{composer.both("wrong.heading"), 0, false, true, rows, false};
}

std::optional<Section> cautionSection(const Composer& composer) {
    if (composer.content.cautions.empty()) return {};
    Section section{composer.both("caution.heading"), 0, false, false, {}, true};
    for (const SheetCaution& caution : composer.content.cautions)  // one caution is not cut
        append(section.rows, composer.beside(cautionRows(composer, caution), {}, 0));
    return section;
}

std::optional<Section> whySection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const double width = composer.content_width, right = width * 0.58;
    const Typesetter& set = composer.typesetter;
    std::vector<Row> verdict =
        marked(composer, verdictMark(content.verdict, QRectF(0, 0, 3.6, 3.6)), verdictText(composer), right - 4);
    std::vector<Row> rows = composer.beside(std::move(verdict), gradeRows(composer, width - right), right);
    if (!content.verdict_sentence.isEmpty())
        append(rows, set.paragraph(content.verdict_sentence, composer.caption(), 0, width));
    for (const SheetLimit& limit : content.binding)
        append(rows, set.paragraph(limitText(composer, limit), composer.caption(), 0, width));
    append(rows, set.paragraph(smallPrint(composer).join("  "), composer.small(), 0, width));
    return Section{composer.both("why.heading"), 0, false, false, rows, true};
}

std::optional<Section> signSection(const Composer& composer) {
    std::vector<FillIn> fillIns;
    for (const QString& who : composer.templates.layout.signatures)
        fillIns.push_back({{composer.word("sign", who)},
                           FillIn::Hint::nothing,
                           {},
                           composer.templates.layout.hold_points.contains(who)});
    Section section{
        composer.both("sign.heading"), 0, false, false, {composer.boxes(fillIns, 0, composer.content_width)}, false};
    if (!composer.templates.layout.hold_points.isEmpty()) section.note = composer.both("sign.hold");
    return section;
}

}  // namespace soak
