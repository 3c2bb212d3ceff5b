// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/csv.h"

#include <QFile>
#include <QTemporaryDir>

#include "words.h"

using namespace soak;

TEST_CASE("quoted cells hold separators, quotes and line breaks", "[csv]") {
    const auto rows = parseCsv("a,\"b,c\",\"say \"\"d\"\"\"\r\n\"two\nlines\",,x\nlast", ',');
    REQUIRE(rows.size() == 3);
    CHECK(rows[0].cells == QStringList{"a", "b,c", "say \"d\""});
    CHECK(rows[1].cells == QStringList{"two\nlines", "", "x"});
    CHECK(rows[1].line == 2);
    CHECK(rows[2].cells == QStringList{"last"});
    CHECK(rows[2].line == 4);
}

TEST_CASE("an unclosed quote loses nothing", "[csv]") {
    const auto rows = parseCsv("a;\"b;c\nd", ';');
    REQUIRE(rows.size() == 1);
    CHECK(rows[0].cells == QStringList{"a", "b;c\nd"});
}

TEST_CASE("text is read from UTF-8 with and without mark, UTF-16 and Latin-1", "[csv]") {
    const QString word = QString::fromUtf8("Stück");
    CHECK(decodeText(word.toUtf8()) == word);
    CHECK(decodeText("\xEF\xBB\xBF" + word.toUtf8()) == word);
    CHECK(decodeText(word.toLatin1()) == word);
    CHECK(decodeText(QByteArray("\xFF\xFE"
                                "a\0b\0",
                                6)) == "ab");
}

TEST_CASE("a table with a ragged row is refused with its line", "[csv]") {
    QTemporaryDir folder;
    QFile file(folder.filePath("t.csv"));
    REQUIRE(file.open(QIODevice::WriteOnly));
    file.write("id,x\n1,2\n\n3\n");
    file.close();
    CHECK_THAT(refusal(CsvTable::read(file.fileName(), {"id"})), Catch::Contains("t.csv line 4: 1 cells"));
    CHECK_THAT(refusal(CsvTable::read(file.fileName() + "x", {"id"})), Catch::Contains("cannot be read"));
}
