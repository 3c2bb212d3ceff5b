// SPDX-License-Identifier: GPL-3.0-or-later
#include "measure.h"

#include <time.h>

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <fstream>
#include <limits>

namespace soak::bench {
namespace {

double secondsOf(clockid_t clock) {
    timespec now{};
    clock_gettime(clock, &now);
    return static_cast<double>(now.tv_sec) + 1e-9 * static_cast<double>(now.tv_nsec);
}

double statusLine_MB(const std::string& key) {
    std::ifstream in("/proc/self/status");
    for (std::string line; std::getline(in, line);)
        if (line.rfind(key, 0) == 0) return std::stod(line.substr(key.size() + 1)) / 1024;
    return 0;
}

}  // namespace

double threadSeconds() { return secondsOf(CLOCK_THREAD_CPUTIME_ID); }
double wallSeconds() { return secondsOf(CLOCK_MONOTONIC); }

double leastOf(int repeats, const std::function<void()>& work) {
    double least = std::numeric_limits<double>::infinity();
    for (int k = 0; k < repeats; ++k) {
        const double before = threadSeconds();
        work();
        least = std::min(least, threadSeconds() - before);
    }
    return least;
}

double memoryNow_MB() { return statusLine_MB("VmRSS"); }
double memoryMost_MB() { return statusLine_MB("VmHWM"); }

double order(const std::vector<double>& x, const std::vector<double>& y) {
    double sx = 0, sy = 0, sxx = 0, sxy = 0;
    const auto n = static_cast<double>(x.size());
    for (size_t k = 0; k < x.size(); ++k) {
        const double a = std::log(x[k]), b = std::log(y[k]);
        sx += a, sy += b, sxx += a * a, sxy += a * b;
    }
    return (n * sxy - sx * sy) / (n * sxx - sx * sx);
}

std::optional<double> instructionsOf(const std::string& program, const std::string& arguments) {
    const std::string command =
        "valgrind --tool=callgrind --callgrind-out-file=/dev/null '" + program + "' " + arguments + " 2>&1 >/dev/null";
    FILE* pipe = popen(command.c_str(), "r");
    if (!pipe) return {};
    std::optional<double> count;
    char line[512];
    while (std::fgets(line, sizeof line, pipe)) {
        const std::string text = line;
        if (const auto at = text.find("Collected :"); at != std::string::npos) count = std::stod(text.substr(at + 11));
    }
    pclose(pipe);
    return count;
}

}  // namespace soak::bench
