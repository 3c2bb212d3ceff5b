// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/sheet/page.h"
#include "thermo/base/result.h"

namespace soak {

/// The QR code (ISO/IEC 18004) of a text, error correction level Q: a quarter of the symbol may be oily.
/// Fault::input when the text is too long for one symbol.
Result<CodeMark> codeOf(const QString& payload, QRectF at);

}  // namespace soak
