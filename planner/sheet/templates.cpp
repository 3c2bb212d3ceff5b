// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/templates.h"

#include <QDir>
#include <QFile>

#include "thermo/base/folders.h"

namespace soak {
namespace {

const QString kBuiltIn = ":/soakwright/templates";

/// Reads `file` from the shop's folder, else the installed folder, else the program itself, and parses it with Kind.
template <class Kind>
Result<Kind> read(const QString& shop_folder, const QString& file, QStringList& notices) {
    QStringList folders;
    if (!shop_folder.isEmpty()) folders << shop_folder;
    folders << QString::fromStdString(productPath("templates").string());
    for (const QString& folder : folders) {
        QFile source(QDir(folder).filePath(file));
        if (!source.exists()) continue;
        Result<Kind> parsed =
            source.open(QIODevice::ReadOnly)
                ? Kind::parse(source.readAll(), source.fileName())
                : Result<Kind>(Error{Fault::data, "cannot be read", "", {source.fileName().toStdString()}});
        if (parsed) return parsed;
        notices << QString::fromStdString(parsed.error().text()) + "; the built-in template is used";
        break;
    }
    QFile builtIn(kBuiltIn + "/" + file);
    if (!builtIn.open(QIODevice::ReadOnly))
        return Error{Fault::input, "there is no template of this name", "", {file.toStdString()}};
    return Kind::parse(builtIn.readAll(), builtIn.fileName());
}

bool isLanguageCode(const QString& language) {
    for (const QChar letter : language)
        if (!letter.isLetter() && letter != '-' && letter != '_') return false;
    return !language.isEmpty();
}

Result<Wording> readWording(const QString& shop_folder, const QString& language, QStringList& notices) {
    if (isLanguageCode(language)) {  // anything else would leave the folder
        auto wording = read<Wording>(shop_folder, "sheet." + language + ".toml", notices);
        if (wording || wording.error().fault != Fault::input) return wording;
    }
    return Error{Fault::input,
                 ("there is no wording for language \"" + language + "\"; there is " + builtInLanguages().join(", ") +
                  ", or a file sheet.<language>.toml in the shop's templates")
                     .toStdString(),
                 "",
                 {}};
}

}  // namespace

QStringList builtInLanguages() {
    QStringList codes;
    for (const QString& file : QDir(kBuiltIn).entryList({"sheet.*.toml"}, QDir::Files, QDir::Name))
        codes << file.section('.', 1, 1);
    return codes;
}

Result<Templates> loadTemplates(const QString& shop_folder, const QString& language, const QString& second_language) {
    Templates templates;
    if (!shop_folder.isEmpty() && !QDir(shop_folder).exists())
        templates.notices << shop_folder + ": there is no such folder; the installed templates are used";
    auto layout = read<Layout>(shop_folder, "layout.toml", templates.notices);
    if (!layout) return std::move(layout).error();
    templates.layout = std::move(layout).value();
    auto wording = readWording(shop_folder, language, templates.notices);
    if (!wording) return std::move(wording).error();
    templates.wording = std::move(wording).value();
    if (!second_language.isEmpty() && second_language != language) {
        auto second = readWording(shop_folder, second_language, templates.notices);
        if (!second) return std::move(second).error();
        templates.second = std::move(second).value();
    }
    return templates;
}

}  // namespace soak
