// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QBrush>
#include <QColor>
#include <QString>

namespace soak::desk {

/// A pattern beside the colour, so that a photocopy keeps the difference.
enum class Hatch { none, dots, rising, falling, crossed, level, upright, dense };

/// How one phase is shown, on a light and on a dark ground.
struct PhaseLook {
    int order = 0;  ///< place in a ribbon from the left: matrix first
    bool matrix = false;
    QColor light, dark;
    Hatch hatch = Hatch::none;

    QColor colour(bool on_dark) const { return on_dark ? dark : light; }
};

/// The look of a label such as "M23C6" or "delta ferrite"; spelling of case, space and underscore is free. A label
/// that the table does not know gets a look of its own, the same at every start.
PhaseLook phaseLook(const QString& label);

/// A hatch as a brush. `scale` is the device pixel ratio, so that the lines stay fine on dense screens.
QBrush hatchBrush(Hatch hatch, const QColor& ink, double scale);

/// Black or white, whichever can be read on `ground`.
QColor readableOn(const QColor& ground);
/// True when the palette's ground is dark (there is no other way to ask).
bool isDark(const QColor& ground);

}  // namespace soak::desk
