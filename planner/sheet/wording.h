// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QHash>
#include <QString>
#include <QStringList>
#include <initializer_list>
#include <utility>

#include "planner/core/sheet_content.h"
#include "thermo/base/result.h"

namespace soak {

/// The texts of one language, from one TOML file (templates/sheet.<language>.toml). Immutable.
/// A file is refused, with the key named, when a text is missing, unknown, empty, or has not exactly the placeholders
/// of its key: a translation must neither lose a number nor invent one.
class Wording {
public:
    using Values = std::initializer_list<std::pair<const char*, QString>>;

    /// `name` is the file's name, for messages. Fault::data when the file is not as above.
    static Result<Wording> parse(const QByteArray& toml, const QString& name);

    const QString& language() const { return language_; }
    /// Nobody has reviewed the texts; the sheet says so.
    bool isDraft() const { return draft_; }

    /// The text of `key` ("soak.start") with its placeholders filled in. Values are inserted as they are, braces
    /// included.
    QString text(const QString& key, Values values = {}) const;
    /// What stands under the text of `key` when this is the second language: its twin without placeholders, or the text
    /// itself when it has none, or nothing.
    QString underText(const QString& key) const;
    /// A word of the shop's data ("solution-anneal") in this language, or as stored, with its first letter raised.
    QString word(const QString& group, const QString& stored) const;
    /// As word(), or an empty text when this language has no such word.
    QString wordOrNothing(const QString& group, const QString& stored) const;

    /// "1060 °C": true minus sign, thin space, this language's decimal mark.
    QString number(const Quantity& quantity) const;
    /// The digits alone: "1060".
    QString digits(const Quantity& quantity) const;
    /// "1060 °C (1940 °F)"
    QString number(const TwoUnits& quantity) const;
    /// As number(), for a tolerance: "± 12 K".
    QString tolerance(const TwoUnits& quantity) const;

private:
    QString language_, decimal_mark_ = ".";
    bool draft_ = false;
    QHash<QString, QString> texts_;
};

/// Every key that a wording must have, for the test of the templates.
QStringList wordingKeys();

}  // namespace soak
