// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "db/records.h"
#include "planner/sheet/render.h"

namespace soak {

/// The job packet for an auditor, one PDF: the issued sheet with its record page, and behind it what it rests on, which
/// is the certificate's analysis as found and as read, the grade check, the limits with their sources, the decision
/// rule and the versions. A heat without a number is one that the store no longer holds; the packet then says so.
/// Errors as renderPdf.
Result<Done> renderPacket(const SheetContent& content, const Heat& heat, const SheetOptions& options,
                          const QString& path);

/// The pages behind the sheet, as rich text.
QString packetText(const SheetContent& content, const Heat& heat);

}  // namespace soak
