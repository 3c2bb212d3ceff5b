// SPDX-License-Identifier: GPL-3.0-or-later
// The sections that the crew works by: setpoint, load, heat up, soak, quench, after.
#include <algorithm>

#include "planner/sheet/composer.h"

namespace soak {
namespace {

using Hint = FillIn::Hint;

/// Column of the one number of a step: minutes, seconds.
constexpr double kValueColumn_mm = 34;

/// The setpoint in digits, its unit, and the other unit smaller, all on one baseline.
Row setpointDigits(const Composer& composer, double width) {
    const Typesetter& set = composer.typesetter;
    const double digit = composer.templates.layout.digit_mm;
    const TwoUnits& setpoint = composer.content.setpoint;
    const Type large{set.sizeForDigits_pt(digit), true}, unit{large.size_pt * 0.5, true};
    const double baseline = digit + 2.5;
    Row row{baseline + 1.8, {}};
    const auto put = [&](double x, const QString& text, Type type) {
        row.marks.texts.push_back(composer.onBaseline(x, baseline, text, type));
        return row.marks.texts.back().at.right();
    };
    double x = put(0, composer.words().digits(setpoint.controller), large);
    x = put(x + 2, setpoint.controller.unit, unit);
    if (setpoint.other) {
        const QString other = composer.words().number(*setpoint.other);
        const double room = width - x - 5;
        if (set.width_mm(other, composer.strong()) <= room) {
            const Type type = set.width_mm(other, composer.value()) <= room ? composer.value() : composer.strong();
            put(x + 5, other, type);
        } else {
            const double height = set.lineHeight_mm(composer.strong());
            row.marks.texts.push_back({QRectF(0, row.height, width, height), other, composer.strong(), Align::left});
            row.height += height;
        }
    }
    return row;
}

/// "1049 to 1071 °C": the unit once.
QString range(const Composer& composer, const Quantity& low, const Quantity& high) {
    return composer.text("metal.range",
                         {{"low", composer.words().digits(low)}, {"high", composer.words().number(high)}});
}

std::vector<Row> metalColumn(const Composer& composer, double width) {
    const SheetContent& content = composer.content;
    const Typesetter& set = composer.typesetter;
    std::vector<Row> rows = composer.say("metal.heading", composer.bold(), 0, width);
    rows.push_back(space(1));
    const QString first = range(composer, content.metal_low.controller, content.metal_high.controller);
    append(rows, set.paragraph(first, composer.fitted(first, composer.value(), width), 0, width));
    if (content.metal_low.other && content.metal_high.other)
        append(rows, set.paragraph("(" + range(composer, *content.metal_low.other, *content.metal_high.other) + ")",
                                   composer.body(), 0, width));
    return rows;
}

/// Framed: the one number that must not be passed.
std::vector<Row> neverAbove(const Composer& composer, double width) {
    if (!composer.content.never_above) return {};
    const QString temperature = composer.words().number(*composer.content.never_above);
    const Type type = composer.fitted(composer.text("metal.never_above", {{"temperature", temperature}}),
                                      composer.strong(), width - 4);
    const std::vector<Row> rows = composer.say("metal.never_above", type, 2, width - 4, {{"temperature", temperature}});
    Row framed = stacked(rows);
    framed.marks.move(0, 1);
    framed.height += 2;
    framed.marks.figures.push_back(rectangle(QRectF(0, 0, width, framed.height), 0.5));
    return {framed};
}

struct Column {
    const char* key;
    double share;
};

/// Cells side by side, each wrapped, cut into rows of one line so that a list of any length flows.
std::vector<Row> tableRow(const Composer& composer, const QStringList& cells, const std::vector<Column>& columns,
                          Type type, double width) {
    std::vector<Row> rows;
    double x = 0;
    for (size_t i = 0; i < columns.size(); ++i) {
        const double room = columns[i].share * width;
        std::vector<Row> cell = composer.typesetter.paragraph(cells[qsizetype(i)], type, x, room - 1.5);
        rows.resize(std::max(rows.size(), cell.size()), space(composer.typesetter.lineHeight_mm(type)));
        for (size_t line = 0; line < cell.size(); ++line) rows[line].marks.add(std::move(cell[line].marks));
        x += room;
    }
    return rows;
}

QStringList heatCells(const Composer& composer, const SheetHeat& heat) {
    const QString grade = heat.product_form.isEmpty() ? heat.grade : heat.grade + ", " + heat.product_form;
    const QString pieces = heat.pieces ? QString::number(*heat.pieces) : QString("____");
    return {heat.number, grade, pieces, heat.section ? composer.words().number(*heat.section) : QString("____")};
}

std::vector<Row> heatTable(const Composer& composer, double width) {
    static const std::vector<Column> columns = {
        {"load.heat", 0.28}, {"load.grade", 0.36}, {"load.pieces", 0.14}, {"load.section", 0.22}};
    QStringList captions;
    for (const Column& column : columns) captions << composer.both(column.key).join(" / ");
    std::vector<Row> rows = tableRow(composer, captions, columns, composer.caption(), width);
    for (const SheetHeat& heat : composer.content.heats) {
        rows.back().height += 0.6;
        rows.back().marks.figures.push_back(line(0, rows.back().height - 0.3, width, rows.back().height - 0.3, 0.2));
        std::vector<Row> cells = tableRow(composer, heatCells(composer, heat), columns, composer.bold(), width);
        append(rows, std::move(cells));
    }
    return rows;
}

QStringList filled(const Composer& composer, const QString& key, const char* name, const QString& value) {
    if (value.isEmpty()) return {};
    QStringList lines{composer.text(key, {{name, value}})};
    const QString second = composer.under(key);
    if (!second.isEmpty()) lines << second;
    return lines;
}

struct Value {
    QStringList caption;
    QString text;
};

/// The one number of a step, large, in line with the boxes that the crew fills in.
Row valueAndBoxes(const Composer& composer, const Value& value, const std::vector<FillIn>& boxes) {
    Row row = composer.boxes(boxes, kValueColumn_mm, composer.content_width - kValueColumn_mm);
    const double room = kValueColumn_mm - 2, box = composer.templates.layout.box_mm;
    std::vector<Row> captions;
    for (const QString& text : value.caption)
        append(captions, composer.typesetter.paragraph(text, composer.caption(), 0, room));
    Row caption = stacked(captions);
    const double above = row.height - box - 0.5;  // of the boxes' captions
    if (caption.height > above) {
        row.marks.move(0, caption.height - above);
        row.height += caption.height - above;
    }
    const double boxTop = row.height - box - 0.5;
    caption.marks.move(0, boxTop - caption.height);
    row.marks.add(std::move(caption.marks));
    const Type type = composer.fitted(value.text, composer.value(), room);
    row.marks.texts.push_back({QRectF(0, boxTop, room, box), value.text, type, Align::left});
    return row;
}

}  // namespace

std::optional<Section> setpointSection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const double right = composer.page_width * 0.58, width = composer.page_width - right, left = right - 6;
    std::vector<Row> rows = composer.say("setpoint.heading", composer.bold(), 0, left);
    rows.push_back(setpointDigits(composer, left));
    const Wording& words = composer.words();
    QString furnace = composer.both("setpoint.furnace").join(" / ") + ": " + content.furnace;
    if (content.controller_step)
        furnace += ", " + composer.text("setpoint.step", {{"step", words.number(*content.controller_step)}});
    append(rows, composer.typesetter.paragraph(furnace, composer.body(), 0, left));

    std::vector<Row> column = metalColumn(composer, width);
    column.push_back(space(1.5));
    append(column, neverAbove(composer, width));
    Section section{{}, 0, true, true, composer.beside(std::move(rows), column, right), false};
    Row& first = section.rows.front();
    if (section.rows.size() == 1) first.marks.figures.push_back(line(right - 3, 0, right - 3, first.height));
    return section;
}

std::optional<Section> loadSection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const QStringList notes = content.load_notes + content.thermocouple_notes;
    const double width = composer.content_width, right = width * 0.58, left = content.sketch ? right - 4 : width;
    std::vector<Row> rows = heatTable(composer, left);
    rows.push_back(space(0.8));
    append(rows, composer.list(notes, composer.body(), 0, left));
    if (content.sketch)
        rows = composer.beside(std::move(rows), {loadSketch(composer, *content.sketch, width - right)}, right);
    return Section{composer.both("load.heading"), 1, false, false, rows, true};
}

std::optional<Section> heatUpSection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const QStringList lines = content.preheat + filled(composer, "heat_up.ramp", "ramp", content.ramp) +
                              filled(composer, "heat_up.atmosphere", "atmosphere", content.atmosphere);
    if (lines.isEmpty()) return {};
    std::vector<Row> rows;
    for (const QString& text : lines)
        append(rows, composer.typesetter.paragraph(text, composer.body(), 0, composer.content_width));
    return Section{composer.both("heat_up.heading"), 1, false, false, rows, false};
}

std::optional<Section> soakSection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const Wording& words = composer.words();
    const double width = composer.content_width;
    const QString temperature = words.number(content.soak_start.controller);
    std::vector<Row> rows =
        content.soak_sensor.isEmpty()
            ? composer.say("soak.start_any", composer.strong(), 0, width, {{"temperature", temperature}})
            : composer.say("soak.start", composer.strong(), 0, width,
                           {{"sensor", content.soak_sensor}, {"temperature", temperature}});
    const QString minutes = content.soak_minutes ? words.number(Quantity{double(*content.soak_minutes), 0, "min"})
                                                 : "___" + QString(QChar(0x2009)) + "min";
    rows.push_back(space(0.8));
    rows.push_back(valueAndBoxes(composer, {composer.both("soak.minutes"), minutes},
                                 {{composer.both("soak.box_start"), Hint::clock, ""},
                                  {composer.both("soak.box_check"), Hint::nothing, content.setpoint.controller.unit},
                                  {composer.both("soak.box_end"), Hint::clock, ""},
                                  {composer.both("soak.box_chart"), Hint::nothing, ""},
                                  {composer.both("soak.box_initials"), Hint::nothing, ""}}));
    if (!content.soak_formula.isEmpty())
        append(rows, composer.typesetter.paragraph(composer.text("soak.formula", {{"formula", content.soak_formula}}),
                                                   composer.small(), 0, width));
    return Section{composer.both("soak.heading"), 1, false, false, rows, false};
}

std::optional<Section> quenchSection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const Wording& words = composer.words();
    const double width = composer.content_width;
    const bool quenched = !content.quench_medium.isEmpty();
    if (!quenched && content.cooling.isEmpty()) return {};

    std::vector<Row> rows;
    if (quenched)
        append(rows, composer.say("quench.medium", composer.strong(), 0, width, {{"medium", content.quench_medium}}));
    if (!content.cooling.isEmpty())
        append(rows, composer.say("quench.cooling", quenched ? composer.body() : composer.strong(), 0, width,
                                  {{"cooling", content.cooling}}));
    append(rows, composer.list(content.medium_limits, composer.body(), 0, width));
    rows.push_back(space(0.8));
    const QString unit = content.setpoint.controller.unit;
    std::vector<FillIn> boxes = {{composer.both("quench.box_out"), Hint::clock, ""},
                                 {composer.both("quench.box_cold"), Hint::clock, ""},
                                 {composer.both("quench.box_initials"), Hint::nothing, ""}};
    if (quenched)
        boxes = {{composer.both("quench.box_door"), Hint::clockSeconds, ""},
                 {composer.both("quench.box_under"), Hint::clockSeconds, ""},
                 {composer.both("quench.box_start"), Hint::nothing, unit},
                 {composer.both("quench.box_peak"), Hint::nothing, unit},
                 {composer.both("quench.box_end"), Hint::nothing, unit}};
    rows.push_back(
        content.max_delay
            ? valueAndBoxes(composer, {composer.both("quench.within"), words.number(*content.max_delay)}, boxes)
            : composer.boxes(boxes, 0, width));
    return Section{composer.both(quenched ? "quench.heading" : "quench.heading_cool"), 1, false, false, rows, false};
}

std::optional<Section> afterSection(const Composer& composer) {
    const SheetContent& content = composer.content;
    const double width = composer.content_width;
    std::vector<Row> rows;
    if (!content.next_step.isEmpty())
        append(rows, composer.say("after.next", composer.bold(), 0, width, {{"step", content.next_step}}));
    for (const QString& check : content.checks)
        append(rows, composer.say("after.check", composer.body(), 0, width, {{"check", check}}));
    if (rows.empty()) return {};
    return Section{composer.both("after.heading"), 1, false, false, rows, false};
}

}  // namespace soak
