// SPDX-License-Identifier: GPL-3.0-or-later
#include <QDir>
#include <catch2/catch.hpp>

#include "planner/sheet/render.h"
#include "sample.h"

using namespace soak;

TEST_CASE("samples are written for the eye", "[samples]") {
    const QByteArray folder = qgetenv("SOAKWRIGHT_SAMPLES");  // a folder of build output, kept to be looked at
    const QString where = folder.isEmpty() ? QDir::tempPath() : QString::fromLocal8Bit(folder);
    const auto write = [&](const SheetContent& content, SheetOptions options, const QString& name) {
        auto done = renderPdf(content, options, where + "/" + name + ".pdf");
        if (!done) FAIL(done.error().text());
    };
    SheetOptions letter;
    letter.paper = Paper::letter;
    write(sample::solutionAnneal(), {}, "sheet-a4");
    write(sample::solutionAnneal(), letter, "sheet-letter");
    write(sample::draft(), {}, "sheet-draft");
    write(sample::harden(), {}, "sheet-fahrenheit");
    write(sample::overlong(), {}, "sheet-overlong");
}
