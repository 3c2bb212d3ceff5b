// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QString>
#include <QStringList>

#include "thermo/base/result.h"

namespace soak {

/// Sizes, order and fonts of the page, from one TOML file (templates/layout.toml). Sizes in mm and points as named
/// there. A file is refused, with the entry named, when an entry is missing or unknown, when a size is below the least
/// that can be read or written in at the furnace, or when a section is missing or named twice.
struct Layout {
    QStringList fonts, sections, signatures;
    QStringList hold_points;  ///< of the signatures: the work stops there until they stand
    double title_pt = 0, strong_pt = 0, body_pt = 0, caption_pt = 0, small_pt = 0, value_pt = 0;
    double leading_most = 0, leading_least = 0;  ///< line distance in type sizes
    double digit_mm = 0, box_mm = 0, margin_mm = 0, gutter_mm = 0, gap_most_mm = 0, gap_least_mm = 0, code_mm = 0;

    static Result<Layout> parse(const QByteArray& toml, const QString& name);
};

}  // namespace soak
