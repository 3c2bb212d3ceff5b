// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/fit/task.h"

#include <toml++/toml.h>
#include <fstream>
#include <regex>
#include <sstream>

namespace soak::fit {
namespace {

Error bad(const std::filesystem::path& file, const std::string& message) {
    return {Fault::data, message, {}, {file.filename().string()}};
}

Result<toml::table> parsed(const std::filesystem::path& file) {
    try {
        return toml::parse_file(file.string());
    } catch (const toml::parse_error& error) {
        return bad(file, std::string(error.description()) + ", line " + std::to_string(error.source().begin.line));
    }
}

std::vector<std::string> textsIn(const toml::node_view<const toml::node>& list) {
    std::vector<std::string> all;
    if (const auto* array = list.as_array())
        for (const auto& item : *array) all.push_back(item.value_or(std::string()));
    return all;
}

QStringList idsIn(const toml::table& table, std::string_view key) {
    QStringList ids;
    for (const std::string& id : textsIn(table[key])) ids << QString::fromStdString(id);
    return ids;
}

template <class Use>
void forEach(const toml::table& table, std::string_view key, Use use) {
    if (const auto* rows = table[key].as_array())
        for (const auto& row : *rows)
            if (const auto* fields = row.as_table()) use(*fields);
}

std::string plainNumber(double value) {
    std::ostringstream out;
    out.precision(10);
    out << value;
    return out.str();
}

/// "+ -12" and "- -12" are not legal value texts.
std::string tidySigns(std::string text) {
    text = std::regex_replace(text, std::regex(R"(\+\s*-)"), "- ");
    text = std::regex_replace(text, std::regex(R"(-\s*-)"), "+ ");
    return text;
}

/// The line (from 0) of the entry in the file, or -1. An entry stands on one line of its own.
long lineOf(const toml::table& table, const FittedParameter& wanted) {
    long line = -1;
    forEach(table, "parameters", [&](const toml::table& entry) {
        if (entry["kind"].value_or(std::string("G")) == "G" && entry["phase"].value_or(std::string()) == wanted.phase &&
            entry["order"].value_or(0) == wanted.order && textsIn(entry["at"]) == wanted.at)
            line = static_cast<long>(entry.source().begin.line) - 1;
    });
    return line;
}

std::string entryWith(const std::string& entry, const std::string& value, const std::string& rows) {
    std::string changed = std::regex_replace(entry, std::regex(R"(value = "[^"]*")"), "value = \"" + value + "\"");
    changed = std::regex_replace(changed, std::regex(R"(, (seen|fitted_to) = "[^"]*")"), "");
    changed = std::regex_replace(changed, std::regex(R"(, estimated = true)"), "");
    return std::regex_replace(changed, std::regex(R"( \},?\s*$)"),
                              ", estimated = true, fitted_to = \"" + rows + "\" },");
}

Result<Done> writeOne(const Task& task, const std::filesystem::path& file, const FittedParameter& parameter,
                      const Values& values) {
    const auto table = parsed(file);
    if (!table) return table.error();
    const long at = lineOf(table.value(), parameter);
    if (at < 0) return bad(file, "it has no such entry of " + parameter.phase + "; write it there first, with value 0");
    std::ifstream in(file);
    std::vector<std::string> lines;
    for (std::string line; std::getline(in, line);) lines.push_back(line);
    in.close();
    std::string& entry = lines[static_cast<size_t>(at)];
    entry = entryWith(entry, valueText(task, parameter, values), task.calibrate.join(" ").toStdString());
    std::ofstream out(file, std::ios::trunc);
    for (const std::string& line : lines) out << line << "\n";
    return out.good() ? Result<Done>(Done{}) : Error{Fault::store, file.string() + ": not written", {}, {}};
}

}  // namespace

Result<Task> readTask(const std::filesystem::path& file) {
    const auto read = parsed(file);
    if (!read) return read.error();
    const toml::table& table = read.value();
    Task task;
    task.set = table["set"].value_or(task.set);
    task.subject = table["subject"].value_or(std::string());
    task.rule = table["rule"].value_or(std::string());
    task.calibrate = idsIn(table, "calibrate");
    task.check = idsIn(table, "check");
    forEach(table, "unknown", [&](const toml::table& row) {
        const double start = row["start"].value_or(0.0);
        task.unknowns.push_back({row["name"].value_or(std::string()), start, row["prior"].value_or(start),
                                 row["sigma"].value_or(0.0), row["round"].value_or(1.0)});
    });
    forEach(table, "parameter", [&](const toml::table& row) {
        task.parameters.push_back({row["system"].value_or(std::string()), row["phase"].value_or(std::string()),
                                   row["text"].value_or(std::string()), textsIn(row["at"]), row["order"].value_or(0)});
    });
    if (task.rule.empty()) return bad(file, "`rule` is missing: say how the rows were split before looking");
    if (task.calibrate.isEmpty() || task.unknowns.empty() || task.parameters.empty())
        return bad(file, "it needs calibrate, [[unknown]] and [[parameter]]");
    for (const Unknown& unknown : task.unknowns)
        if (unknown.sigma <= 0) return bad(file, unknown.name + ": `sigma` must be above 0");
    return task;
}

std::string valueText(const Task& task, const FittedParameter& parameter, const Values& values) {
    std::string text = parameter.text;
    for (size_t k = 0; k < values.size(); ++k) {
        const std::string mark = "{" + task.unknowns[k].name + "}";
        for (size_t at = text.find(mark); at != std::string::npos; at = text.find(mark))
            text.replace(at, mark.size(), plainNumber(values[k]));
    }
    return tidySigns(text);
}

Result<Done> writeValues(const Task& task, const std::filesystem::path& set, const Values& values) {
    for (const FittedParameter& parameter : task.parameters) {
        const auto file = set / "systems" / (parameter.system + ".toml");
        if (auto done = writeOne(task, file, parameter, values); !done) return done;
    }
    return Done{};
}

}  // namespace soak::fit
