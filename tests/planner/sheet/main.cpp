// SPDX-License-Identifier: GPL-3.0-or-later
#define CATCH_CONFIG_RUNNER
#include <QGuiApplication>
#include <catch2/catch.hpp>

int main(int argc, char* argv[]) {
    qputenv("QT_QPA_PLATFORM", "offscreen");  // fonts need an application, not a display
    QGuiApplication application(argc, argv);
    return Catch::Session().run(argc, argv);
}
