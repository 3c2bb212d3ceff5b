// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <filesystem>
#include <map>
#include <optional>
#include <string>
#include <vector>

namespace soak::campaign {

struct Limits {
    std::optional<double> least, most;  ///< wt%
};

/// A grade's composition ranges: all that the campaign needs of the library.
struct Grade {
    std::string id;
    std::map<std::string, Limits> limits;  ///< element -> range; elements without any limit are not listed
};

/// Reads the library's grades.csv; its own reader, so that the engine's tests need no storage. Empty when unreadable.
std::vector<Grade> readGrades(const std::filesystem::path& csv);

}  // namespace soak::campaign
