// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/sheet_notes.h"

#include <catch2/catch.hpp>

using namespace soak;

TEST_CASE("a sheet for aluminium says that melting is final and that water and melt do not meet; steel's does not") {
    const auto notes = loadSheetNotes();
    REQUIRE(notes);
    const QString wrong =
        notesFor(notes.value(), "if wrong", "light-wrought-2xxx", "solution-anneal", "drop bottom, fan").join(' ');
    CHECK(wrong.contains("no later treatment repairs it"));
    CHECK(wrong.contains("no water"));
    CHECK(notesFor(notes.value(), "if wrong", "light-wrought-2xxx", "age", "ageing oven").isEmpty());
    CHECK(notesFor(notes.value(), "if wrong", "austenitic", "solution-anneal", "chamber").isEmpty());
    const auto load = [&](const char* furnace) {
        return notesFor(notes.value(), "load", "light-wrought-2xxx", "solution-anneal", furnace).join(' ');
    };
    CHECK(load("nitrate salt bath, electric").contains("magnesium"));
    CHECK_FALSE(load("drop bottom, fan").contains("magnesium"));
    CHECK(load("drop bottom, fan").contains("hydrogen"));
}
