// SPDX-License-Identifier: GPL-3.0-or-later
#include "grades.h"

#include <charconv>
#include <fstream>
#include <set>

namespace soak::campaign {
namespace {

/// One line of comma-separated values; quoted cells may hold commas.
std::vector<std::string> cellsOf(const std::string& line) {
    std::vector<std::string> cells(1);
    bool quoted = false;
    for (char c : line) {
        if (c == '"')
            quoted = !quoted;
        else if (c == ',' && !quoted)
            cells.emplace_back();
        else if (c != '\r')
            cells.back() += c;
    }
    return cells;
}

std::optional<double> numberIn(const std::string& cell) {
    double value = 0;
    const auto [end, error] = std::from_chars(cell.data(), cell.data() + cell.size(), value);
    return error == std::errc{} && end == cell.data() + cell.size() ? std::optional(value) : std::nullopt;
}

}  // namespace

std::vector<Grade> readGrades(const std::filesystem::path& csv) {
    std::vector<Grade> grades;
    std::ifstream in(csv);
    std::string line;
    if (!std::getline(in, line)) return grades;
    const auto head = cellsOf(line);
    while (std::getline(in, line)) {
        const auto cells = cellsOf(line);
        Grade grade;
        grade.id = cells[0];
        for (size_t c = 0; c < std::min(cells.size(), head.size()); ++c) {
            if (head[c] == "balance") grade.balance = cells[c];
            const auto cut = head[c].rfind('_');
            const auto value = numberIn(cells[c]);
            if (cut == std::string::npos || !value) continue;
            if (head[c].substr(cut) == "_min") grade.limits[head[c].substr(0, cut)].least = value;
            if (head[c].substr(cut) == "_max") grade.limits[head[c].substr(0, cut)].most = value;
        }
        if (!grade.limits.empty()) grades.push_back(std::move(grade));
    }
    return grades;
}

std::vector<Grade> readGradesOf(const std::filesystem::path& folder, const std::string& balance) {
    std::set<std::filesystem::path> tables;  // in a fixed order: the same seed draws the same cases everywhere
    for (const auto& entry : std::filesystem::directory_iterator(folder))
        if (entry.path().filename().string().rfind("grades", 0) == 0) tables.insert(entry.path());
    std::vector<Grade> grades;
    for (const auto& table : tables)
        for (Grade& grade : readGrades(table))
            if (grade.balance == balance) grades.push_back(std::move(grade));
    return grades;
}

}  // namespace soak::campaign
