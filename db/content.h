// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

#include "db/records.h"

namespace soak {

/// What a column's numbers are in, before they become wt%.
enum class AmountUnit { percent, thousandth, ppm };

/// How a cell of an analysis was understood.
enum class CellKind { number, censored, not_detected, missing, balance, refused };

struct CellReading {
    CellKind kind = CellKind::missing;
    Content content;
    bool unit_in_cell = false;  ///< the cell itself names a unit: "1740 ppm" in a column of wt%
};

/// Reads one cell. Never guesses: what cannot be read stays without a number and carries a remark; `raw` is kept.
///   "0.048" "0,048" "0.82%" "1740 ppm"           number; what was converted is said in the remark
///   "<0.010" "<0,01" "< 1"                       censored: `wt` is the bound, less_than is set
///   "nnw." "n.n." "n.d." "trace" "Spuren"        not detected and no bound given: less_than without a number
///   "" "-" "n.b."                                missing: a dash is not a zero
///   "Rest" "bal."                                the balance element
///   "0.O21" "-0.001" "1.2.3" "1E-3" "1,740 ppm"  refused: letter O (0.021 is offered), an instrument's zero, no
///                                                number, a spreadsheet's form, two readings possible
CellReading readCell(const QString& raw, AmountUnit unit = AmountUnit::percent);

/// The content alone.
inline Content readContent(const QString& raw, AmountUnit unit = AmountUnit::percent) {
    return readCell(raw, unit).content;
}

/// The amount with the digits that were printed: 0.010 wt%, 0.1740 wt% for 1740 ppm; "< 0.010 wt%"; empty without one.
QString amountText(const Content& content);

}  // namespace soak
