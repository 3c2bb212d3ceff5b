// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/code.h"

#include <qrencode.h>

#include <cerrno>
#include <cstring>
#include <memory>

namespace soak {

Result<CodeMark> codeOf(const QString& payload, QRectF at) {
    const QByteArray bytes = payload.toUtf8();
    const std::unique_ptr<QRcode, void (*)(QRcode*)> code(QRcode_encodeString8bit(bytes.constData(), 0, QR_ECLEVEL_Q),
                                                          &QRcode_free);
    if (!code)
        return Error{Fault::input,
                     "the sheet's identity of " + std::to_string(bytes.size()) +
                         " bytes does not fit a QR code: " + std::strerror(errno),
                     "",
                     {}};
    CodeMark mark{at, code->width, QBitArray(code->width * code->width)};
    for (int i = 0; i < code->width * code->width; ++i) mark.dark.setBit(i, code->data[i] & 1);
    return mark;
}

}  // namespace soak
