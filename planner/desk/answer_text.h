// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

#include "ribbon.h"
#include "units.h"

namespace soak::desk {

// The folded parts of the answer as rich text. Every text from the store or a file is escaped.

/// "Inside, 8 K to spare", "Outside by 12 K", "No window", "Not computed"
QString verdictHeadline(const WindowAnswer& answer, const Units& units);
/// Cause, reason, source and the parts of the uncertainty of one limit.
QString limitDetails(const Limit& limit, const Units& units);
/// Amount and composition of every phase at a temperature.
QString phaseTable(const Ribbons& ribbons, double celsius);
/// How the band comes about: its parts, both rules, the one that decides.
QString bandDetails(const Band& band, const Units& units);
QString gradeCheckText(const GradeCheck& check);
/// Lines one under the other, or a sentence when there are none.
QString linesOr(const QStringList& lines, const QString& otherwise);

}  // namespace soak::desk
