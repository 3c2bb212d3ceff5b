// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>

#include "planner/sheet/composer.h"

namespace soak {
namespace {

using Kind = FigureMark::Kind;

struct Grid {
    int columns, rows;
    double cell;  ///< from one piece's centre to the next
    double piece;
    QPointF first;  ///< centre of the lower left piece
    QPointF centre(int column, int row) const { return first + QPointF(column * cell, -row * cell); }
};

/// Pieces on the hearth, as large as the zone allows.
Grid gridIn(const LoadSketch& sketch, const QRectF& zone) {
    const int columns = std::clamp(sketch.columns, 1, 8), rows = std::clamp(sketch.rows, 1, 5);
    const double cell = std::min(zone.width() * 0.94 / columns, zone.height() * 0.9 / rows);
    const double x = zone.center().x() - cell * (columns - 1) / 2;
    return {columns, rows, cell, cell * 0.66, QPointF(x, zone.bottom() - 1.5 - cell / 2)};
}

/// A double arrow across the gap between the first two pieces of the bottom row, carried below the hearth.
void addGap(const Grid& grid, double y, Marks& marks) {
    if (grid.columns < 2) return;
    const double left = grid.centre(0, 0).x() + grid.piece / 2, right = grid.centre(1, 0).x() - grid.piece / 2;
    for (const double x : {left, right}) marks.figures.push_back(line(x, grid.first.y(), x, y + 1, 0.2));
    marks.figures.push_back(line(left - 4, y, left, y, 0.3));
    marks.figures.push_back(line(right, y, right + 4, y, 0.3));
    const auto head = [&](double x, double to) {
        marks.figures.push_back(
            {Kind::polygon, QRectF(), {QPointF(x, y), QPointF(to, y - 0.7), QPointF(to, y + 0.7)}, 0, 0, false});
    };
    head(left, left - 1.6);
    head(right, right + 1.6);
}

FigureMark diamond(QPointF at, double half, bool filled) {
    return {Kind::polygon,
            QRectF(at - QPointF(half, half), QSizeF(2 * half, 2 * half)),
            {at + QPointF(0, -half), at + QPointF(half, 0), at + QPointF(0, half), at + QPointF(-half, 0)},
            0.4,
            filled ? 0 : 255,
            false};
}

/// The sensors' names stand in a column at the right, so that no label covers a piece or another label.
double addSensors(const Composer& composer, std::vector<SheetSensor> sensors, const QRectF& zone, double x,
                  double width, Marks& marks) {
    std::stable_sort(sensors.begin(), sensors.end(), [](const auto& a, const auto& b) { return a.y > b.y; });
    double y = zone.top();
    for (const SheetSensor& sensor : sensors) {
        const QPointF at(zone.left() + std::clamp(sensor.x, 0.0, 1.0) * zone.width(),
                         zone.bottom() - std::clamp(sensor.y, 0.0, 1.0) * zone.height());
        std::vector<Row> rows = composer.typesetter.paragraph(sensor.label, composer.bold(), x, width);
        const double middle = y + rows.front().height / 2;
        QString what = sensor.what;
        if (sensor.decides) what += (what.isEmpty() ? "" : "; ") + composer.both("load.decides").join(" / ");
        if (!what.isEmpty()) append(rows, composer.typesetter.paragraph(what, composer.caption(), x, width));
        Row label = stacked(rows);
        label.marks.move(0, y);
        marks.add(std::move(label.marks));
        marks.figures.push_back(line(at.x(), at.y(), x - 1, middle, 0.2));
        marks.figures.push_back(diamond(at, 1.5, sensor.decides));
        y += label.height + 0.8;
    }
    return y;
}

}  // namespace

Row loadSketch(const Composer& composer, const LoadSketch& sketch, double width) {
    const QRectF zone(0.3, 0.3, std::min(width * 0.56, 40.0), 19);
    Row row;
    row.marks.figures.push_back(rectangle(zone, 0.3));
    row.marks.figures.back().dashed = true;
    const Grid grid = gridIn(sketch, zone);
    for (int column = 0; column < grid.columns; ++column) {
        for (int level = 0; level < grid.rows; ++level) {
            const QPointF centre = grid.centre(column, level);
            const QRectF piece(centre - QPointF(grid.piece, grid.piece) / 2, QSizeF(grid.piece, grid.piece));
            row.marks.figures.push_back({sketch.round ? Kind::ellipse : Kind::rectangle, piece, {}, 0.4, 235, false});
        }
    }
    const double gapLine = zone.bottom() + 1.8;
    if (sketch.spacing) addGap(grid, gapLine, row.marks);
    const double labels = zone.right() + 4;
    const double end = addSensors(composer, sketch.sensors, zone, labels, width - labels, row.marks);

    row.height = std::max(zone.bottom() + 3.2, end);
    std::vector<Row> under;
    if (sketch.spacing)
        append(under, composer.say("load.spacing", composer.bold(), 0, width,
                                   {{"spacing", composer.words().number(*sketch.spacing)}}));
    QString notes = composer.both("load.sketch").join(" / ");
    if (!sketch.work_zone.isEmpty()) notes += ". " + composer.text("load.zone", {{"zone", sketch.work_zone}});
    append(under, composer.typesetter.paragraph(notes, composer.small(), 0, width));
    under.insert(under.begin(), std::move(row));
    return stacked(under);
}

}  // namespace soak
