// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QStringList>
#include <map>
#include <optional>
#include <vector>

#include "db/content.h"

namespace soak {

/// What a person said about one column, remembered for the supplier.
struct ColumnChoice {
    QString taken_for;               ///< "heat", "grade", "form", "section", "route", "kind", an element, "" = kept out
    std::optional<AmountUnit> unit;  ///< decides over header and unit row; nothing: they decide
};
/// By the header's text, trimmed.
using ColumnChoices = std::map<QString, ColumnChoice>;

/// What the columns of a certificate file were taken for.
struct CertificateColumns {
    QStringList names;      ///< header as found
    QStringList taken_for;  ///< "heat", "grade", "form", "section", "route", "kind", an element, or "" = kept out
    std::vector<AmountUnit> units;     ///< of element columns; set by the header and by a unit row
    std::vector<bool> unit_is_chosen;  ///< a person's choice stays whatever a unit row says

    qsizetype indexOf(const QString& meaning) const { return taken_for.indexOf(meaning); }
    bool isElement(qsizetype column) const;
    int elementCount() const;
};

/// Understands a header row: at least a heat column and three elements (one when a person chose columns of it), or
/// nothing. Element names in any case, old ones (Cb), with a unit or the word total behind them ("Al ges.", "N ppm",
/// "N2"). Choices come before what the header says.
std::optional<CertificateColumns> columnsOf(const QStringList& header, const ColumnChoices& choices = {});

/// Everything that a column can be taken for: the words above and the elements.
const QStringList& columnMeanings();

/// "%", "ppm", "0.001 %" and their kin; nothing for another text.
std::optional<AmountUnit> amountUnitOf(const QString& text);
/// The unit as written in a header: "%", "ppm", "0.001 %".
QString amountUnitText(AmountUnit unit);

/// One choice as typed or stored: "N ppm", "Nb", "heat", "" (kept out). Nothing for a word that is no meaning.
std::optional<ColumnChoice> columnChoiceOf(const QString& text);
QString columnChoiceText(const ColumnChoice& choice);

/// A row of units under the header; fills `columns.units`. False when the row is something else.
bool takeUnits(const QStringList& cells, CertificateColumns& columns);

}  // namespace soak
