// SPDX-License-Identifier: GPL-3.0-or-later
#include "target.h"

#include <cmath>
#include <cstdint>
#include <cstdio>
#include <cstdlib>

#include "db/certificate.h"

using namespace soak;

namespace {

void demand(bool truth, const char* what) {
    if (truth) return;
    std::fprintf(stderr, "broken promise: %s\n", what);
    std::abort();
}

}  // namespace

void readAsCertificate(const QByteArray& bytes) {
    const Result<Certificate> read = readCertificateText(bytes, "fuzz");
    if (!read) return demand(!read.error().message.empty(), "a refusal says why");
    const Certificate& certificate = read.value();
    demand(certificate.columns.size() == certificate.taken_for.size(),
           "every column is taken for something or kept out");
    demand(size_t(certificate.columns.size()) == certificate.units.size(), "every column has a unit");
    for (const CertificateRow& row : certificate.rows) {
        demand(row.line > 0, "a row has a line");
        for (const auto& [element, content] : row.heat.analysis) {
            demand(!content.wt || (std::isfinite(*content.wt) && *content.wt >= 0),
                   "a content is a number, not negative");
            demand(!content.wt || !content.raw.isEmpty(), "a number comes from a text");
        }
    }
    for (const Heat& heat : certificate.heats()) demand(!heat.number.isEmpty(), "a usable heat has a number");
    certificate.findings();
    certificateSupplier(bytes, "fuzz");
    (void)certificateCells(bytes, "fuzz");
}

#ifdef SOAKWRIGHT_LIBFUZZER
extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    readAsCertificate(QByteArray(reinterpret_cast<const char*>(data), qsizetype(size)));
    return 0;
}
#endif
