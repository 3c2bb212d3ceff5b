// SPDX-License-Identifier: GPL-3.0-or-later
#include <QApplication>
#include <QCommandLineParser>
#include <QTimer>

#include "heat_model.h"
#include "heat_panel.h"
#include "main_window.h"

namespace {

/// Takes a picture of the window once the answer stands there and every heat has been judged, then leaves.
void photograph(soak::desk::MainWindow& window, const QString& path, bool wants_answer) {
    using namespace soak::desk;
    const auto take = [&window, path, wants_answer] {
        if (window.heats()->model()->isJudging() || (wants_answer && !window.answer())) return;
        QTimer::singleShot(0, &window, [&window, path] {  // after what is still waiting to be laid out
            const bool saved = window.grab().save(path);
            if (!saved) qCritical("%s could not be written", qPrintable(path));
            QCoreApplication::exit(saved ? 0 : 1);
        });
    };
    QObject::connect(&window, &MainWindow::storeShown, &window, take);
    QObject::connect(&window, &MainWindow::answerShown, &window, take);
    QObject::connect(window.heats()->model(), &HeatModel::finished, &window, take);
    QObject::connect(&window, &MainWindow::complained, &window, [](const QString& sentence) {
        qCritical("%s", qPrintable(sentence));
        QCoreApplication::exit(1);
    });
}

}  // namespace

int main(int argc, char** argv) {
    QApplication application(argc, argv);
    QApplication::setApplicationName(QStringLiteral("Soakwright"));
    QApplication::setOrganizationName(QStringLiteral("soakwright"));
    QApplication::setApplicationVersion(QStringLiteral(SOAKWRIGHT_VERSION));

    QCommandLineParser options;
    options.setApplicationDescription(
        QStringLiteral("Plan heat-treatment windows: which setpoint keeps all of this metal right?"));
    options.addHelpOption();
    options.addVersionOption();
    options.addPositionalArgument(QStringLiteral("store"), QStringLiteral("The store to open."),
                                  QStringLiteral("[store]"));
    const QCommandLineOption heat(QStringLiteral("heat"), QStringLiteral("Show this heat."), QStringLiteral("number"));
    const QCommandLineOption cycle(QStringLiteral("cycle"), QStringLiteral("By this cycle."), QStringLiteral("name"));
    const QCommandLineOption furnace(QStringLiteral("furnace"), QStringLiteral("In this furnace."),
                                     QStringLiteral("id"));
    const QCommandLineOption picture(QStringLiteral("screenshot"),
                                     QStringLiteral("Write a picture of the window and leave."),
                                     QStringLiteral("file"));
    options.addOptions({heat, cycle, furnace, picture});
    options.process(application);

    soak::desk::MainWindow window;
    if (options.isSet(picture)) photograph(window, options.value(picture), options.isSet(heat));
    window.show();
    const QStringList stores = options.positionalArguments();
    if (!stores.isEmpty())
        window.openStore(stores.front(), options.value(heat), options.value(cycle), options.value(furnace));
    return QApplication::exec();
}
