// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "commands.h"
#include "db/demo.h"
#include "output.h"

namespace soak::cli {

Result<int> storeCommand(const QStringList& given) {
    const auto arguments = readArguments(given, {}, {"demo", "json"});
    if (!arguments) return arguments.error();
    const QStringList& words = arguments.value().words;
    if (words.size() != 2 || words[0] != "new")
        return Error{Fault::input, "use: soakwright store new FILE [--demo]", {}, {}};
    const auto store = arguments.value().has("demo") ? createDemoShop(words[1]) : createEmpty(words[1]);
    if (!store) return store.error();
    const auto heats = store.value().heats();
    if (!heats) return heats.error();
    if (arguments.value().has("json"))
        print(Json{{"store", words[1].toStdString()}, {"heats", heats.value().size()}});
    else
        print(QString("Made the store %1 with %2 heats.\n").arg(words[1]).arg(heats.value().size()));
    return 0;
}

}  // namespace soak::cli
