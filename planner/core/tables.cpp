// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/tables.h"

#include "base/folders.h"

namespace soak {

std::filesystem::path tablePath(const std::string& file) { return productPath("planner/core/data") / file; }

Error badTable(const std::string& file, const std::string& message) {
    return {Fault::data, "planner/core/data/" + file + ": " + message, {}, {}};
}

Result<toml::table> readTable(const std::string& file) {
    try {
        return toml::parse_file(tablePath(file).string());
    } catch (const toml::parse_error& error) {
        return badTable(file, std::string(error.description()) + " (line " + std::to_string(error.source().begin.line) +
                                  "); restore the file from the distribution");
    }
}

QString text(const toml::table& row, std::string_view key) {
    return QString::fromStdString(row[key].value_or(std::string()));
}
std::optional<double> numberIn(const toml::table& row, std::string_view key) { return row[key].value<double>(); }

QStringList texts(const toml::table& row, std::string_view key) {
    QStringList all;
    if (const auto* list = row[key].as_array())
        for (const auto& item : *list) all << QString::fromStdString(item.value_or(std::string()));
    return all;
}
std::vector<std::string> words(const toml::table& row, std::string_view key) {
    std::vector<std::string> all;
    for (const QString& word : texts(row, key)) all.push_back(word.toStdString());
    return all;
}

}  // namespace soak
