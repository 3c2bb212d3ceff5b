// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/network_drive.h"

#include <QList>

namespace soak {

bool isNetworkDrive(const QByteArray& file_system) {
    static const QList<QByteArray> network = {
        "nfs",        "nfs4",       "cifs",        "smb2",      "smb3",           "smbfs",
        "ncpfs",      "afs",        "ceph",        "davfs",     "lustre",         "glusterfs",
        "fuse.sshfs", "fuse.davfs", "fuse.rclone", "fuse.s3fs", "fuse.glusterfs", "fuse.smbnetfs"};
    return network.contains(file_system.toLower());
}

}  // namespace soak
