// SPDX-License-Identifier: GPL-3.0-or-later
// The back page: what the run leaves behind. Everything on it is filled in by the crew.
#include "planner/sheet/composer.h"

namespace soak {
namespace {

constexpr double kChart_mm = 105, kDiffered_mm = 38;
constexpr int kReadings = 5;

/// A frame with its name inside at the top.
Row named(const Composer& composer, const QStringList& name, double height, bool dashed) {
    Row row{height, {}};
    row.marks.figures.push_back(rectangle(QRectF(0, 0, composer.content_width, height - 1), 0.35));
    row.marks.figures.back().dashed = dashed;
    std::vector<Row> lines;
    for (const QString& text : name)
        append(lines, composer.typesetter.paragraph(text, composer.caption(), 2, composer.content_width - 4));
    Row words = stacked(lines);
    words.marks.move(0, 1);
    row.marks.add(std::move(words.marks));
    return row;
}

}  // namespace

Section recordSection(const Composer& composer) {
    const QString unit = composer.content.setpoint.controller.unit;
    const auto box = [&](const char* key, bool clock) {
        return FillIn{composer.both(key), clock ? FillIn::Hint::clock : FillIn::Hint::nothing, clock ? "" : unit};
    };
    std::vector<Row> rows{named(composer, composer.both("record.attach"), kChart_mm, true), space(1.5)};
    append(rows, composer.say("record.readings", composer.bold(), 0, composer.content_width));
    for (int i = 0; i < kReadings; ++i) {
        std::vector<FillIn> line{box("record.clock", true),
                                 box("record.control", false),
                                 box("record.load", false),
                                 box("record.second", false),
                                 {composer.both("soak.box_initials")}};
        if (i > 0)
            for (FillIn& one : line) one.caption.clear();
        rows.push_back(composer.boxes(line, 0, composer.content_width));
        rows.push_back(space(1));
    }
    rows.push_back(space(1));
    rows.push_back(named(composer, composer.both("record.differed"), kDiffered_mm, false));
    Section section{composer.both("record.heading"), 0, false, false, std::move(rows), true};
    section.new_page = true;
    return section;
}

}  // namespace soak
