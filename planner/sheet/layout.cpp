// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/layout.h"

#include <toml++/toml.h>
#include <algorithm>
#include <vector>

namespace soak {
namespace {

struct Size {
    const char* table;
    const char* key;
    double Layout::*member;
    double least, most;  // least: read standing, written with a glove; most: what still leaves a page
};

const std::vector<Size>& sizes() {
    static const std::vector<Size> all = {
        {"leading", "most", &Layout::leading_most, 1.1, 2},   {"leading", "least", &Layout::leading_least, 1.1, 2},
        {"type_pt", "title", &Layout::title_pt, 14, 40},      {"type_pt", "strong", &Layout::strong_pt, 12, 24},
        {"type_pt", "body", &Layout::body_pt, 12, 20},        {"type_pt", "caption", &Layout::caption_pt, 8, 16},
        {"type_pt", "small", &Layout::small_pt, 7, 14},       {"type_pt", "value", &Layout::value_pt, 18, 40},
        {"size_mm", "digit", &Layout::digit_mm, 15, 24},      {"size_mm", "box", &Layout::box_mm, 10, 20},
        {"size_mm", "margin", &Layout::margin_mm, 5, 25},     {"size_mm", "gutter", &Layout::gutter_mm, 20, 50},
        {"size_mm", "gap_most", &Layout::gap_most_mm, 1, 15}, {"size_mm", "gap_least", &Layout::gap_least_mm, 1, 15},
        {"size_mm", "code", &Layout::code_mm, 18, 40},
    };
    return all;
}

const QStringList kSections = {"setpoint", "load",  "heat_up", "soak", "quench",
                               "wrong",    "after", "caution", "why",  "sign"};

Error wrong(const QString& name, const QString& message) {
    return Error{Fault::data, message.toStdString(), "", {name.toStdString()}};
}

QStringList textList(const toml::table& table, const char* key) {
    QStringList list;
    if (const toml::array* array = table[key].as_array())
        for (const auto& entry : *array) list << QString::fromStdString(entry.value_or(std::string())).trimmed();
    return list;
}

QString unknownEntry(const toml::table& table) {
    for (const auto& [key, node] : table) {
        const QString entry = QString::fromStdString(std::string(key.str()));
        if (const toml::table* inner = node.as_table()) {
            for (const auto& [innerKey, value] : *inner) {
                const bool known = std::any_of(sizes().begin(), sizes().end(), [&](const Size& size) {
                    return key.str() == size.table && innerKey.str() == size.key;
                });
                if (!known) return entry + "." + QString::fromStdString(std::string(innerKey.str()));
            }
        } else if (entry != "fonts" && entry != "sections" && entry != "signatures" && entry != "hold_points") {
            return entry;
        }
    }
    return {};
}

}  // namespace

Result<Layout> Layout::parse(const QByteArray& toml, const QString& name) {
    toml::table table;
    try {
        table = toml::parse(std::string_view(toml.constData(), size_t(toml.size())));
    } catch (const toml::parse_error& problem) {
        return wrong(name, QString("line %1: %2")
                               .arg(problem.source().begin.line)
                               .arg(QString::fromStdString(std::string(problem.description()))));
    }
    const QString unknown = unknownEntry(table);
    if (!unknown.isEmpty()) return wrong(name, unknown + " is unknown");

    Layout layout;
    for (const Size& size : sizes()) {
        const QString entry = QString("%1.%2").arg(size.table, size.key);
        const auto value = table[size.table][size.key].value<double>();
        if (!value) return wrong(name, entry + " is missing or not a number");
        if (!(*value >= size.least && *value <= size.most))
            return wrong(name,
                         QString("%1 is %2; write %3 to %4").arg(entry).arg(*value).arg(size.least).arg(size.most));
        layout.*size.member = *value;
    }
    if (layout.gap_least_mm > layout.gap_most_mm) return wrong(name, "size_mm.gap_least is larger than gap_most");
    if (layout.leading_least > layout.leading_most) return wrong(name, "leading.least is larger than leading.most");

    layout.fonts = textList(table, "fonts");
    layout.signatures = textList(table, "signatures");
    layout.sections = textList(table, "sections");
    layout.hold_points = textList(table, "hold_points");
    if (layout.fonts.isEmpty() || layout.fonts.contains("")) return wrong(name, "fonts must name at least one family");
    if (layout.signatures.isEmpty() || layout.signatures.size() > 8 || layout.signatures.contains(""))
        return wrong(name, "signatures must name one to eight boxes");
    for (const QString& hold : layout.hold_points)
        if (!layout.signatures.contains(hold)) return wrong(name, "hold_points: \"" + hold + "\" is no signature");
    QStringList given = layout.sections, wanted = kSections;
    given.sort();
    wanted.sort();
    if (given != wanted) return wrong(name, "sections must name each of these once: " + kSections.join(", "));
    return layout;
}

}  // namespace soak
