// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QString>
#include <QStringList>
#include <optional>
#include <vector>

#include "base/result.h"
#include "db/records.h"

namespace soak {

/// What a column's numbers are in, before they become wt%.
enum class AmountUnit { percent, thousandth, ppm };

/// Reads one cell of an analysis. Never guesses: what cannot be read stays empty with a remark; `raw` is kept as found.
///   "0.048" "0,048" "0.82%" "1740 ppm" "<0.010" "<0,01" "< 1"      a number; the last two kinds are censored
///   "nnw." "n.n." "n.d." "trace" "Spuren"                          not detected, no bound given: no number
///   "" "-"                                                         no value; a dash is not a zero
///   "0.O21"                                                        letter O: refused, the remark offers 0.021
///   "-0.001"                                                       an instrument's zero: refused
Content readContent(const QString& raw, AmountUnit unit = AmountUnit::percent);

/// What became of a cell, for the preview: {"heat","row","column","raw","read","text"}.
struct CellFinding {
    QString heat;
    int line = 0;          ///< line of the file, from 1
    QString column;        ///< as the file names it: "Nb/Cb"
    QString raw, read;     ///< read: "0.174 wt%", or empty
    QString text;          ///< in words
    bool refuses = false;  ///< the row is held because of it
};

/// One analysis row of the file. `held` says why it cannot be used; what could be read is in `heat` all the same.
struct CertificateRow {
    Heat heat;
    int line = 0;
    QString column;  ///< the column that holds it back, or empty
    QString held;    ///< "Cr 252.0: the analysis adds up to 284.7 %", or empty
    std::vector<CellFinding> findings;
    bool usable() const { return held.isEmpty(); }
};

/// A line that is not an analysis: header, unit row, Min, Max, total, page break, statement.
struct OtherLine {
    int line = 0;
    QString what;  ///< "units", "limits", "total", "repeated header", "text"
    QString text;
};

struct Certificate {
    QString file;
    std::vector<CertificateRow> rows;  ///< every analysis row of the file, in its order
    std::vector<OtherLine> others;     ///< every other line that is not blank
    QStringList columns;               ///< header as found
    QStringList taken_for;             ///< what each column was taken for: "heat", "grade", "C", "" = kept out

    /// The usable heats, one per number: the ladle row is the heat's analysis, the product row is beside it in
    /// `other_analyses`; a second product of the same cast is in `other_products`.
    std::vector<Heat> heats() const;
    /// The first row of each heat number and every held row: what a triage must answer.
    std::vector<CellFinding> findings() const;
};

/// Reads a comma or semicolon file (UTF-8 or Latin-1). Fault::input when no header row with a heat column and elements
/// is found; a bad row is a held row, never a failed file.
Result<Certificate> readCertificate(const QString& path);
Result<Certificate> readCertificateText(const QByteArray& bytes, const QString& name);

}  // namespace soak
