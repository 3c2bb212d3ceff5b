// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"

#include <QRegularExpression>

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

}  // namespace

QString Arguments::text(const QString& name) const {
    const auto at = values.find(name);
    return at == values.end() ? QString() : at->second;
}

Result<QString> Arguments::required(const QString& name) const {
    const auto at = values.find(name);
    if (at == values.end() || at->second.isEmpty()) return refuse("--" + name + " is needed");
    return at->second;
}

Result<double> Arguments::number(const QString& name) const {
    const auto given = required(name);
    if (!given) return given.error();
    bool ok = false;
    const double value = given.value().toDouble(&ok);
    if (ok && std::isfinite(value)) return value;
    static const QRegularExpression with_unit("^\\s*[-+]?[0-9.]+\\s*(°?[CFK])\\s*$",
                                              QRegularExpression::CaseInsensitiveOption);
    const QString advice =
        with_unit.match(given.value()).hasMatch() ? "; temperatures are in °C and carry no unit here" : "";
    return refuse("--" + name + ": \"" + given.value() + "\" is no number" + advice);
}

Result<std::optional<double>> Arguments::numberIfGiven(const QString& name) const {
    if (!values.count(name)) return std::optional<double>();
    const auto given = number(name);
    if (!given) return given.error();
    return std::optional<double>(given.value());
}

Result<QDate> Arguments::dateIfGiven(const QString& name) const {
    if (!values.count(name)) return QDate();
    const QDate date = QDate::fromString(text(name), Qt::ISODate);
    if (!date.isValid()) return refuse("--" + name + ": \"" + text(name) + "\" is no date; write it as 2025-04-02");
    return date;
}

Result<Arguments> readArguments(const QStringList& given, const QStringList& valued, const QStringList& flags) {
    Arguments arguments;
    for (qsizetype i = 0; i < given.size(); ++i) {
        if (!given[i].startsWith("--")) {
            arguments.words << given[i];
            continue;
        }
        const QString name = given[i].mid(2).section('=', 0, 0);
        const bool joined = given[i].contains('=');
        if (flags.contains(name) && !joined) {
            arguments.flags << name;
        } else if (valued.contains(name)) {
            if (!joined && i + 1 >= given.size()) return refuse("--" + name + " lacks its value");
            arguments.values[name] = joined ? given[i].section('=', 1) : given[++i];
        } else {
            return refuse("unknown option --" + name + "; known here: --" + (valued + flags).join(", --"));
        }
    }
    return arguments;
}

QStringList listIn(const QString& text) {
    static const QRegularExpression separator("[,;]");
    QStringList words;
    for (const QString& word : text.split(separator, Qt::SkipEmptyParts)) words << word.trimmed();
    return words;
}

}  // namespace soak::cli
