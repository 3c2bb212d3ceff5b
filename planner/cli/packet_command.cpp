// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "commands.h"
#include "db/store.h"
#include "output.h"
#include "planner/core/sheet_json.h"
#include "planner/sheet/packet.h"

namespace soak::cli {

Result<int> packetCommand(const QStringList& given) {
    const auto read = readArguments(given, {"store", "sheet", "revision", "pdf"}, {});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto path = arguments.required("store"), number = arguments.required("sheet"),
               pdf = arguments.required("pdf");
    if (!path) return path.error();
    if (!number) return number.error();
    if (!pdf) return pdf.error();
    const auto store = Store::open(path.value(), Access::read);
    if (!store) return store.error();
    const auto sheet = store.value().sheet(number.value(), arguments.text("revision"));
    if (!sheet) return sheet.error();
    const auto content = issuedContent(sheet.value());
    if (!content) return content.error();
    const auto heat = store.value().heat(sheet.value().heat);
    const auto written = renderPacket(content.value(), heat ? heat.value() : Heat(), {}, pdf.value());
    if (!written) return written.error();
    print(QString("Packet of sheet %1 rev %2 written to %3\n")
              .arg(content.value().number, content.value().revision, pdf.value()));
    return 0;
}

}  // namespace soak::cli
