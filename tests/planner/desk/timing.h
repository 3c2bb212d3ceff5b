// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

namespace soak {

/// Speed is judged as it is shipped: a build under the sanitizers is several times slower and says nothing about it.
#if defined(__SANITIZE_ADDRESS__)
inline constexpr bool kSpeedCounts = false;
#else
inline constexpr bool kSpeedCounts = true;
#endif

}  // namespace soak
