// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <optional>

#include "planner/sheet/layout.h"
#include "planner/sheet/wording.h"

namespace soak {

/// What a page is made with.
struct Templates {
    Layout layout;
    Wording wording;
    std::optional<Wording> second;  ///< the language under each line
    QStringList notices;            ///< a shop's template that was refused and why; the built-in one is used instead
};

/// Reads layout.toml and sheet.<language>.toml from the shop's folder; what is not there comes from the installed
/// templates. A file that is refused never stops a print: the copy built into the program is used and a notice says so.
/// Fault::input when there is no wording for a language; the message lists the languages there are.
Result<Templates> loadTemplates(const QString& shop_folder, const QString& language, const QString& second_language);

/// Codes of the built-in languages: "de", "en", "pl", "pt".
QStringList builtInLanguages();

}  // namespace soak
