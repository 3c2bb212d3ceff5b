// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <vector>

#include "base/result.h"

namespace soak {

/// A line that a family, a treatment or a furnace brings to the sheet; rows of data/sheet_notes.toml.
struct SheetNote {
    QString place;  ///< "if wrong" or "load"
    QStringList families, kinds, furnaces;
    QString text, source;
};
/// Fault::data names the file and the row.
Result<std::vector<SheetNote>> loadSheetNotes();

/// The texts for one place of one sheet, in the table's order.
QStringList notesFor(const std::vector<SheetNote>& notes, const QString& place, const QString& family,
                     const QString& cycle_kind, const QString& furnace_kind);

}  // namespace soak
