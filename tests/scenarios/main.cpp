// SPDX-License-Identifier: GPL-3.0-or-later
#define CATCH_CONFIG_RUNNER
#include <QCoreApplication>
#include <catch2/catch.hpp>

int main(int argc, char** argv) {
    const QCoreApplication application(argc, argv);  // the store's driver needs one
    return Catch::Session().run(argc, argv);
}
