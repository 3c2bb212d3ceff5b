// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QStringList>
#include <optional>
#include <vector>

#include "db/content.h"

namespace soak {

/// What the columns of a certificate file were taken for.
struct CertificateColumns {
    QStringList names;      ///< header as found
    QStringList taken_for;  ///< "heat", "grade", "form", "section", "route", "kind", an element, or "" = kept out
    std::vector<AmountUnit> units;  ///< of element columns; set by the header and by a unit row

    qsizetype indexOf(const QString& meaning) const { return taken_for.indexOf(meaning); }
    bool isElement(qsizetype column) const;
    int elementCount() const;
};

/// Understands a header row: at least a heat column and three elements, or nothing.
/// Element names in any case, old ones (Cb), with a unit or the word total behind them ("Al ges.", "N ppm", "N2").
std::optional<CertificateColumns> columnsOf(const QStringList& header);

/// A row of units under the header; fills `columns.units`. False when the row is something else.
bool takeUnits(const QStringList& cells, CertificateColumns& columns);

}  // namespace soak
