// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QStringList>
#include <optional>
#include <string>

#include "output.h"

namespace soak::cli {

// What every answer in JSON is put together from.

inline Json optional(const std::optional<double>& value) { return value ? Json(*value) : Json(nullptr); }
inline std::string plain(const QString& text) { return text.toStdString(); }
inline Json list(const QStringList& texts) {
    Json all = Json::array();
    for (const QString& text : texts) all.push_back(plain(text));
    return all;
}

}  // namespace soak::cli
