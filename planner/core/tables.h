// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <toml++/toml.h>

#include <QString>
#include <QStringList>
#include <filesystem>
#include <optional>
#include <string>
#include <vector>

#include "base/result.h"

namespace soak {

// Reading the planner's own tables, planner/core/data/*.toml. Include from .cpp files only.

std::filesystem::path tablePath(const std::string& file);
Error badTable(const std::string& file, const std::string& message);
/// Fault::data names the file and the line that cannot be read.
Result<toml::table> readTable(const std::string& file);

QString text(const toml::table& row, std::string_view key);
std::optional<double> numberIn(const toml::table& row, std::string_view key);
QStringList texts(const toml::table& row, std::string_view key);
std::vector<std::string> words(const toml::table& row, std::string_view key);

/// Calls `use` for every table in the array `key`.
template <class Use>
void forEachRow(const toml::table& table, std::string_view key, Use use) {
    if (const auto* rows = table[key].as_array())
        for (const auto& row : *rows)
            if (const auto* fields = row.as_table()) use(*fields);
}

}  // namespace soak
