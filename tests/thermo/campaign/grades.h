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
    std::string id, balance = "Fe";
    std::map<std::string, Limits> limits;  ///< element -> range; elements without any limit are not listed
};

/// Reads one of the library's tables of grades; its own reader, so that the engine's tests need no storage. Empty when
/// unreadable.
std::vector<Grade> readGrades(const std::filesystem::path& csv);
/// The grades of every such table in the folder whose balance element is this one.
std::vector<Grade> readGradesOf(const std::filesystem::path& folder, const std::string& balance);

}  // namespace soak::campaign
