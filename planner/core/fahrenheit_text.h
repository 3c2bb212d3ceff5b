// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>

namespace soak {

/// A sentence written in Celsius with its temperatures and differences in Fahrenheit, each with the decimals it had:
/// "9 K above 1040 °C" becomes "16 °F above 1904 °F"; "1886 °F (1030 °C)" keeps its Fahrenheit alone.
QString inFahrenheit(const QString& sentence);

}  // namespace soak
