// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <map>
#include <vector>

namespace soak {

/// Numbers of `known` that a damaged copy of `number` may stand for: spaces, hyphens or leading zeros lost or added,
/// letter O for zero, upper for lower case, one digit changed, or two neighbours swapped. Never the number itself: an
/// offer to a person, never a replacement.
QStringList nearNumbers(const QString& number, const QStringList& known);

/// The same question put many times to many numbers.
class NumberIndex {
public:
    explicit NumberIndex(const QStringList& known);
    /// Written differently, otherwise the same: "D 7740" and "D7740".
    QStringList sameBut(const QString& number) const;
    /// One digit changed or two neighbours swapped. Heats of one day are numbered so too: weak evidence alone.
    QStringList oneSlipFrom(const QString& number) const;

private:
    QStringList known_;
    std::map<QString, std::vector<qsizetype>> by_bones_;
    std::map<QString, std::vector<qsizetype>> by_pattern_;  ///< bones with one place blanked
};

}  // namespace soak
