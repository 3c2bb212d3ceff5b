// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <cstdlib>
#include <filesystem>

namespace soak {

/// Where the product's own files lie (assessed data, grade library, templates, published values).
/// `relative` is the path in the source tree, such as "thermo/data/ferrous". Looked for, in this order:
///   1. $SOAKWRIGHT_HOME, when set;
///   2. ../share/soakwright beside the running program (an installed copy);
///   3. the source tree that the program was built from.
/// Returns the path in the first of these that holds it, or the last candidate, so that a message can name it.
inline std::filesystem::path productPath(const std::filesystem::path& relative) {
    namespace fs = std::filesystem;
    std::error_code ignored;
    if (const char* home = std::getenv("SOAKWRIGHT_HOME"); home && *home) return fs::path(home) / relative;
    const fs::path program = fs::read_symlink("/proc/self/exe", ignored);
    const fs::path installed = program.parent_path().parent_path() / "share" / "soakwright" / relative;
    if (fs::exists(installed, ignored)) return installed;
    return fs::path(SOAKWRIGHT_SOURCE_DIR) / relative;
}

}  // namespace soak
