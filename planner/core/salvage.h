// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <vector>

#include "base/result.h"

namespace soak {

/// What may be done with a load that went wrong; rows of data/salvage.toml.
struct SalvageRule {
    QString wrong;         ///< "cold", "short", "slow quench", "hot", "melting", "above Ae1"
    QStringList families;  ///< "*": every one
    QStringList kinds;     ///< of cycle; "*": every one
    QString text, source;
};
Result<std::vector<SalvageRule>> loadSalvageRules();

/// The texts for what went wrong, those for the family and kind before the general ones.
QStringList salvageFor(const std::vector<SalvageRule>& rules, const QString& wrong, const QString& family,
                       const QString& kind);

}  // namespace soak
