// SPDX-License-Identifier: GPL-3.0-or-later
#include "signed_in.h"

#include <QFile>
#include <cstdio>

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

}  // namespace

Result<QString> firstLine(const QString& path) {
    QFile file(path);
    const bool open = path == "-" ? file.open(stdin, QIODevice::ReadOnly) : file.open(QIODevice::ReadOnly);
    if (!open) return refuse(path + " cannot be read");
    QString line = QString::fromUtf8(file.readLine());
    while (line.endsWith('\n') || line.endsWith('\r')) line.chop(1);
    return line;
}

Result<QDate> workingDay(const Arguments& arguments, const Store& store) {
    const auto given = arguments.dateIfGiven("date");
    if (!given || given.value().isValid()) return given;
    const auto shop = store.shop();
    if (!shop) return shop.error();
    return shop.value().today.isValid() ? shop.value().today : QDate::currentDate();
}

Result<Act> actOf(const Arguments& arguments, const Store& store) {
    const auto day = workingDay(arguments, store);
    if (!day) return day.error();
    const QString who = arguments.text("by");
    const auto roles = rolesAreOn(store);
    if (!roles) return roles.error();
    if (roles.value()) {
        const QString path = arguments.text("password-file");
        if (path.isEmpty()) return refuse("roles are on in this store: --password-file FILE is needed beside --by");
        const auto password = firstLine(path);
        if (!password) return password.error();
        if (const auto person = signIn(store, who, password.value()); !person) return person.error();
    }
    return Act{who, day.value().toString(Qt::ISODate), arguments.text("why")};
}

}  // namespace soak::cli
