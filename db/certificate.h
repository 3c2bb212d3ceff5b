// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QString>
#include <QStringList>
#include <vector>

#include "base/result.h"
#include "db/certificate_columns.h"
#include "db/content.h"
#include "db/csv.h"
#include "db/records.h"

namespace soak {

/// What the reader has to say about one cell: {"heat","row","column","raw","read","text"} of the preview.
struct CellFinding {
    QString heat;
    int line = 0;          ///< line of the file, from 1
    QString column;        ///< as the file names it: "Nb/Cb"
    QString raw, read;     ///< read: "0.174 wt%", or empty
    QString text;          ///< in words
    bool refuses = false;  ///< the row is held because of it
    QString stored = {};   ///< in an import: the raw text that the store holds for this cell, or empty
};

/// One analysis row of the file. What could be read of a held row is in `heat` all the same; it must not be used before
/// a person has decided.
struct CertificateRow {
    Heat heat;
    int line = 0;
    QString held;  ///< "line 26, column Cr: the analysis adds up to 265.6 wt% ...", or empty
    std::vector<CellFinding> findings;
    bool usable() const { return held.isEmpty(); }
};

/// A line that is no analysis: unit row, limits, total, repeated header, statement.
struct OtherLine {
    int line = 0;
    QString what;  ///< "units", "limits", "total", "header", "text"
    QString text;
};

/// What a triage must answer: a heat with all its rows brought together, or a row that is held.
struct DeliveryItem {
    Heat heat;
    QString held;          ///< why it cannot be judged, with line and column; or empty
    QStringList findings;  ///< "line 8, column C: \"0,048\" read as 0.048 wt% (decimal comma)"
};

struct Certificate {
    QString file;
    QString supplier, number, date;    ///< as the lines above the header name them, or empty
    std::vector<CertificateRow> rows;  ///< every analysis row of the file, in its order
    std::vector<OtherLine> others;     ///< every other line that is not blank
    QStringList columns;               ///< header as found
    QStringList taken_for;             ///< what each column was taken for: "heat", "grade", "C"; "" = kept out
    std::vector<AmountUnit> units;     ///< of those columns, one each, as header and unit row say

    /// Heats and held rows in the file's order. One item for each usable heat number: the ladle row is the heat's
    /// analysis and a product row beside it in `other_analyses`; the same chemistry again is a second product of one
    /// cast, in `other_products`.
    std::vector<DeliveryItem> delivery() const;
    /// The usable heats of the delivery: what storeHeats takes.
    std::vector<Heat> heats() const;
    /// All rows' findings, in the file's order.
    std::vector<CellFinding> findings() const;
};

/// Reads a comma, semicolon or tab separated file, or a workbook (.xlsx; of its sheets the first that holds a header).
/// `choices` say what a supplier's columns mean and come before what the header says. Fault::store when it cannot be
/// read, Fault::input when no header row with a heat column and elements is found, for a workbook that is damaged, and
/// for another kind of file. A bad row is a held row, never a failed file.
Result<Certificate> readCertificate(const QString& path, const ColumnChoices& choices = {});
/// The same from a file's bytes, or from pasted text; `name` stands in messages.
Result<Certificate> readCertificateText(const QByteArray& bytes, const QString& name,
                                        const ColumnChoices& choices = {});

/// Who sent the file, by its lines above the table; empty when it does not say.
QString certificateSupplier(const QByteArray& bytes, const QString& name);

/// The cells of the file as they stand, for a person who must say where the columns are: the first sheet of a workbook,
/// or the text cut at the separator that gives the most cells.
Result<std::vector<CsvRow>> certificateCells(const QByteArray& bytes, const QString& name);

/// The same, in one line: "line 8, column C: ...".
QString findingText(const CellFinding& finding);

}  // namespace soak
