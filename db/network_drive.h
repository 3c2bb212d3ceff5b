// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>

namespace soak {

/// Whether a file system of this type (as the system names it: "nfs4", "ext4") lies on another machine. SQLite's
/// write-ahead log needs all programs on one host, and locks on network drives cannot be relied on
/// (sqlite.org/wal.html).
bool isNetworkDrive(const QByteArray& file_system);

}  // namespace soak
