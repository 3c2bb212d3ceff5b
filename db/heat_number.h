// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>

namespace soak {

/// Numbers of `known` that a damaged copy of `number` may stand for: spaces, hyphens or leading zeros lost or added,
/// letter O for zero, upper for lower case, one digit changed, or two neighbours swapped. Never the number itself: an
/// offer to a person, never a replacement.
QStringList nearNumbers(const QString& number, const QStringList& known);

}  // namespace soak
