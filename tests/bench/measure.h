// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <functional>
#include <optional>
#include <string>
#include <vector>

namespace soak::bench {

/// Seconds of processor time that this thread has used: other programs on the machine do not count.
double threadSeconds();
double wallSeconds();

/// The least processor time of `repeats` runs, s: what disturbs a run only ever adds to it.
double leastOf(int repeats, const std::function<void()>& work);

/// Memory held now and at most so far, MB; 0 where the system does not tell.
double memoryNow_MB();
double memoryMost_MB();

/// Slope of log(y) against log(x): the order of growth.
double order(const std::vector<double>& x, const std::vector<double>& y);

/// Instructions of `program arguments` counted by callgrind; nothing without valgrind.
std::optional<double> instructionsOf(const std::string& program, const std::string& arguments);

}  // namespace soak::bench
