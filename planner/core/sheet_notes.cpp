// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/sheet_notes.h"

#include <algorithm>

#include "planner/core/tables.h"

namespace soak {
namespace {

template <class Met>
bool noneOrAny(const QStringList& words, Met met) {
    return words.isEmpty() || std::any_of(words.begin(), words.end(), met);
}

}  // namespace

Result<std::vector<SheetNote>> loadSheetNotes() {
    const auto table = readTable("sheet_notes.toml");
    if (!table) return table.error();
    std::vector<SheetNote> notes;
    forEachRow(table.value(), "note", [&](const toml::table& row) {
        notes.push_back({text(row, "place"), texts(row, "families"), texts(row, "kinds"), texts(row, "furnaces"),
                         text(row, "text"), text(row, "source")});
    });
    for (const SheetNote& note : notes)
        if ((note.place != "if wrong" && note.place != "load") || note.text.isEmpty() || note.source.isEmpty())
            return badTable("sheet_notes.toml",
                            "\"" + note.text.toStdString() + "\" lacks its place, its text or its source");
    return notes;
}

QStringList notesFor(const std::vector<SheetNote>& notes, const QString& place, const QString& family,
                     const QString& cycle_kind, const QString& furnace_kind) {
    QStringList found;
    for (const SheetNote& note : notes)
        if (note.place == place &&
            noneOrAny(note.families, [&](const QString& one) { return family.startsWith(one); }) &&
            noneOrAny(note.kinds, [&](const QString& one) { return cycle_kind == one; }) &&
            noneOrAny(note.furnaces,
                      [&](const QString& one) { return furnace_kind.contains(one, Qt::CaseInsensitive); }))
            found << note.text;
    return found;
}

}  // namespace soak
