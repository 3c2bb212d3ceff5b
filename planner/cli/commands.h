// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QStringList>

#include "base/result.h"

namespace soak::cli {

// One function per word of the command. Each reads its own options, prints its answer and returns the exit status; an
// Error is printed by main and gives status 2 for what was asked wrongly, 3 for everything else.

/// Triage: at least one row is outside, has no window or is not computed; import: a row is held; store check: a
/// finding; verify: the sheet is not the current one; run, look-back and load: something does not fit.
inline constexpr int kNeedsDecision = 1;

Result<int> stateCommand(const QStringList& given);
Result<int> sweepCommand(const QStringList& given);
Result<int> windowCommand(const QStringList& given);
Result<int> triageCommand(const QStringList& given);
Result<int> importCommand(const QStringList& given);
Result<int> sheetCommand(const QStringList& given);
Result<int> packetCommand(const QStringList& given);
Result<int> verifyCommand(const QStringList& given);
Result<int> evidenceCommand(const QStringList& given);
Result<int> cycleCommand(const QStringList& given);
Result<int> gradeCommand(const QStringList& given);
Result<int> loadCommand(const QStringList& given);
Result<int> runCommand(const QStringList& given);
Result<int> lookBackCommand(const QStringList& given);
Result<int> trendCommand(const QStringList& given);
Result<int> storeCommand(const QStringList& given);
Result<int> helpCommand(const QStringList& given);

}  // namespace soak::cli
