// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/sheet_verify.h"

#include <QStringList>

#include "planner/core/units_text.h"

namespace soak {
namespace {

const QString kThinking = " Do not start the load by it: ask whoever released it.";

QString ageText(const CopyAge& copy) {
    const qint64 minutes = std::max<qint64>(0, copy.taken.secsTo(copy.now) / 60);
    const QString ago = minutes < 120    ? withUnit(double(minutes), "min")
                        : minutes < 2880 ? withUnit(double(minutes / 60), "h")
                                         : QString("%1 days").arg(minutes / 1440);
    return QString("last contact %1, %2 ago").arg(copy.taken.toString("yyyy-MM-dd hh:mm"), ago);
}

SheetStanding say(const SheetCode& code, Standing standing, const QString& sentence) {
    return {standing, code, sentence};
}

}  // namespace

QString word(Standing standing) {
    switch (standing) {
        case Standing::current:
            return "current";
        case Standing::superseded:
            return "superseded";
        case Standing::withdrawn:
            return "withdrawn";
        case Standing::different:
            return "different";
        case Standing::cannotConfirm:
            break;
    }
    return "cannot confirm";
}

Result<SheetCode> readSheetCode(const QString& code) {
    const QStringList parts = code.trimmed().split(':');
    const bool shaped = parts.size() == 4 && parts[0].compare("soakwright", Qt::CaseInsensitive) == 0 &&
                        !parts[1].isEmpty() && !parts[2].isEmpty() && !parts[3].isEmpty();
    if (shaped) return SheetCode{parts[1], parts[2].toUpper(), parts[3].toLower()};
    return Error{Fault::input,
                 "\"" + code.trimmed().left(80).toStdString() +
                     "\" is not the code of a sheet; it reads soakwright:NUMBER:REVISION:HASH",
                 {},
                 {}};
}

SheetStanding verifySheet(const Result<Store>& store, const SheetCode& code, const std::optional<CopyAge>& copy) {
    const QString name = "Sheet " + code.number + " rev " + code.revision;
    const QString seen = copy ? " (" + ageText(*copy) + ")" : QString();
    const auto unsure = [&](const QString& why) {
        return say(code, Standing::cannotConfirm, name + " cannot be confirmed" + seen + ": " + why + "." + kThinking);
    };
    if (!store) return unsure(QString::fromStdString(store.error().text()));
    const Result<Sheet> newest = store.value().sheet(code.number);
    const Result<Sheet> stored = store.value().sheet(code.number, code.revision);
    if (!stored || !newest) return unsure(QString::fromStdString((stored ? newest : stored).error().text()));
    const Sheet& sheet = stored.value();
    if (sheet.hash != code.hash)
        return say(code, Standing::different,
                   name + " in the store has another content than this paper" + seen + "." + kThinking);
    if (newest.value().revision != sheet.revision)
        return say(code, Standing::superseded,
                   name + " is superseded by rev " + newest.value().revision + " of " +
                       newest.value().issued.toString(Qt::ISODate) + seen + ". Take it away and print the new one.");
    if (sheet.status != "issued")
        return say(code, sheet.status == "superseded" ? Standing::superseded : Standing::withdrawn,
                   name + " is " + sheet.status + seen + "." + kThinking);
    if (copy) return unsure("it was current when this copy of the store was taken");
    return say(code, Standing::current,
               name + " is current: issued " + sheet.issued.toString(Qt::ISODate) + " by " + sheet.issued_by +
                   ", heat " + sheet.heat + ", furnace " + sheet.furnace + ".");
}

}  // namespace soak
