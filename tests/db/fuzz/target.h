// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>

/// Reads the bytes as a certificate, asks everything of what was read, and aborts when an answer contradicts itself.
void readAsCertificate(const QByteArray& bytes);
