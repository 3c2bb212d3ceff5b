// SPDX-License-Identifier: GPL-3.0-or-later
#include <QCoreApplication>
#include <QGuiApplication>
#include <cstdio>
#include <map>
#include <memory>

#include "commands.h"
#include "output.h"

namespace {

using namespace soak;
using Command = Result<int> (*)(const QStringList&);

const std::map<QString, Command> kCommands{{"state", cli::stateCommand},
                                           {"sweep", cli::sweepCommand},
                                           {"window", cli::windowCommand},
                                           {"triage", cli::triageCommand},
                                           {"sheet", cli::sheetCommand},
                                           {"store", cli::storeCommand},
                                           {"verify", cli::verifyCommand},
                                           {"packet", cli::packetCommand},
                                           {"evidence", cli::evidenceCommand},
                                           {"grade", cli::gradeCommand},
                                           {"load", cli::loadCommand},
                                           {"run", cli::runCommand},
                                           {"look-back", cli::lookBackCommand},
                                           {"trend", cli::trendCommand},
                                           {"import", cli::importCommand},
                                           {"cycle", cli::cycleCommand},
                                           {"help", cli::helpCommand},
                                           {"--help", cli::helpCommand},
                                           {"-h", cli::helpCommand}};

/// 2 for a question that makes no sense, 3 for a failure on the way.
int statusOf(const Error& error) { return error.fault == Fault::input || error.fault == Fault::range ? 2 : 3; }

int fail(const Error& error) {
    std::fprintf(stderr, "soakwright: %s\n", error.text().c_str());
    if (!error.repeat.empty()) std::fprintf(stderr, "  to repeat: %s\n", error.repeat.c_str());
    return statusOf(error);
}

/// Only the sheet needs fonts, and no command needs a display.
std::unique_ptr<QCoreApplication> application(int& argc, char** argv, bool draws) {
    if (!draws) return std::make_unique<QCoreApplication>(argc, argv);
    if (qEnvironmentVariableIsEmpty("QT_QPA_PLATFORM")) qputenv("QT_QPA_PLATFORM", "offscreen");
    return std::make_unique<QGuiApplication>(argc, argv);
}

}  // namespace

int main(int argc, char** argv) {
    const std::string_view word = argc > 1 ? argv[1] : "";
    bool draws = word == "sheet" || word == "packet";
    for (int i = 2; i < argc; ++i) draws = draws || std::string_view(argv[i]) == "--sheets";
    const auto running = application(argc, argv, draws);
    const QStringList given = QCoreApplication::arguments().mid(1);
    if (given.value(0) == "--version") {
        cli::print(QString("soakwright " SOAKWRIGHT_VERSION "\n"));
        return 0;
    }
    const auto command = kCommands.find(given.value(0));
    if (command == kCommands.end())
        return fail({Fault::input,
                     given.isEmpty() ? "no command given; try: soakwright help"
                                     : "unknown command \"" + given[0].toStdString() + "\"; try: soakwright help",
                     {},
                     {}});
    const auto status = command->second(given.mid(1));
    return status ? status.value() : fail(status.error());
}
