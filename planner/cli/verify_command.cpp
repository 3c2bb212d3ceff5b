// SPDX-License-Identifier: GPL-3.0-or-later
#include <QFileInfo>

#include "arguments.h"
#include "commands.h"
#include "output.h"
#include "planner/core/sheet_verify.h"

namespace soak::cli {
namespace {

SheetStanding fromStore(const QString& path, const SheetCode& code) {
    return verifySheet(Store::open(path, Access::read), code);
}

/// The age of a copy is that of its file: nothing writes to a copy but the next one.
SheetStanding fromCopy(const QString& path, const SheetCode& code) {
    const CopyAge age{QFileInfo(path).lastModified(), QDateTime::currentDateTime()};
    return verifySheet(Store::open(path, Access::read), code, age);
}

int statusOf(Standing standing) {
    return standing == Standing::current ? 0 : standing == Standing::cannotConfirm ? 3 : kNeedsDecision;
}

}  // namespace

Result<int> verifyCommand(const QStringList& given) {
    const auto read = readArguments(given, {"store", "copy"}, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const QString store = arguments.text("store"), copy = arguments.text("copy");
    if (arguments.words.size() != 1)
        return Error{Fault::input, "verify needs the code of one sheet: soakwright verify CODE --store FILE", {}, {}};
    if (store.isEmpty() && copy.isEmpty())
        return Error{Fault::input, "verify needs --store FILE, --copy FILE, or both", {}, {}};
    const auto code = readSheetCode(arguments.words.front());
    if (!code) return code.error();

    SheetStanding answer;
    if (!store.isEmpty()) answer = fromStore(store, code.value());
    if (!copy.isEmpty() && answer.standing == Standing::cannotConfirm) answer = fromCopy(copy, code.value());
    if (arguments.has("json"))
        print(Json{{"standing", word(answer.standing).toStdString()},
                   {"number", code.value().number.toStdString()},
                   {"revision", code.value().revision.toStdString()},
                   {"sentence", answer.sentence.toStdString()}});
    else
        print(answer.sentence + "\n");
    return statusOf(answer.standing);
}

}  // namespace soak::cli
