// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/heat_number.h"

#include "words.h"

using namespace soak;

TEST_CASE("a damaged heat number finds the one it may stand for", "[heat_number]") {
    const QStringList known = {"004731", "52E104", "F2407/1", "F2407/3", "D7740", "T-21-0463", "K40217"};
    CHECK(nearNumbers("4731", known) == QStringList{"004731"});
    CHECK(nearNumbers("D 7740", known) == QStringList{"D7740"});
    CHECK(nearNumbers("d7740", known) == QStringList{"D7740"});
    CHECK(nearNumbers("T-21-O463", known) == QStringList{"T-21-0463"});
    CHECK(nearNumbers("D7704", known) == QStringList{"D7740"});
    CHECK(nearNumbers("K40212", known) == QStringList{"K40217"});
    CHECK(nearNumbers("F2407/2", known) == QStringList{"F2407/1", "F2407/3"});
    CHECK(nearNumbers("X9999", known).isEmpty());
    CHECK(nearNumbers("D7740", {"D7740"}).isEmpty());
}
