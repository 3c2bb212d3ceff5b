// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QString>
#include <vector>

#include "base/result.h"
#include "db/csv.h"

namespace soak {

/// One sheet of a workbook as rows of text, each cell as a reader of the sheet sees it: 0.02 under the format 0.000 is
/// "0.020", 4731 under 000000 is "004731". Dates stay numbers: no certificate column that is read holds one.
struct XlsxSheet {
    QString name;
    std::vector<CsvRow> rows;  ///< `line` is the sheet's own row number
};

/// Whether the bytes are a zip file, which a workbook of this form is.
bool isZip(const QByteArray& bytes);

/// Reads the sheets of an Office Open XML workbook (ECMA-376) in the workbook's order. Fault::input for what is no
/// workbook, is encrypted or damaged, or unpacks to more than 256 MB or five million cells.
Result<std::vector<XlsxSheet>> readXlsx(const QByteArray& bytes, const QString& name);

}  // namespace soak
