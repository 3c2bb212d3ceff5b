// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDate>
#include <QString>
#include <QStringList>
#include <map>
#include <optional>

#include "base/result.h"

namespace soak::cli {

/// "--at 1050" and "--json", read against what a command knows.
struct Arguments {
    std::map<QString, QString> values;
    QStringList flags, words;  ///< words: what stands without "--"

    bool has(const QString& flag) const { return flags.contains(flag); }
    QString text(const QString& name) const;
    /// Fault::input when it is not given.
    Result<QString> required(const QString& name) const;
    /// A plain number. Fault::input names the option and what stood there.
    Result<double> number(const QString& name) const;
    Result<std::optional<double>> numberIfGiven(const QString& name) const;
    Result<QDate> dateIfGiven(const QString& name) const;
};

/// Fault::input for an option that is not among `valued` or `flags`, or lacks its value.
Result<Arguments> readArguments(const QStringList& given, const QStringList& valued, const QStringList& flags);

/// "graphite,chi" or "graphite; chi"
QStringList listIn(const QString& text);

}  // namespace soak::cli
