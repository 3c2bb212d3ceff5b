// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <nlohmann/json.hpp>

#include "planner/core/triage.h"
#include "planner/core/window.h"
#include "thermo/alloy.h"

namespace soak::cli {

using Json = nlohmann::ordered_json;  // fields in the documented order

Json asJson(const State& state);
Json asJson(const Event& event);
Json asJson(const WindowAnswer& answer);
Json asJson(const TriageRow& row);

/// The same for people: a few lines of plain text.
QString asText(const State& state);
QString asText(const Event& event);
QString asText(const WindowAnswer& answer);
QString asText(const std::vector<TriageRow>& rows);

/// One JSON document or one text on standard output.
void print(const Json& json);
void print(const QString& text);

}  // namespace soak::cli
