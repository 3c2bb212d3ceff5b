// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QString>
#include <QStringList>
#include <map>
#include <optional>
#include <vector>

#include "base/result.h"

namespace soak {

/// One record of a separated-values file. A quoted cell may hold separators, quotes (doubled) and line breaks.
struct CsvRow {
    int line = 0;  ///< line of the file at which the record begins, from 1
    QStringList cells;
    bool isBlank() const;
};

/// Text of a file whatever its encoding: UTF-8 or UTF-16 by their marks, UTF-8 when valid, else Windows/Latin-1.
QString decodeText(const QByteArray& bytes);

/// Never fails: a quote that is never closed runs to the end of the text, and the cell shows it.
std::vector<CsvRow> parseCsv(const QString& text, QChar separator);

/// A table with one header row in which every row has as many cells as the header.
class CsvTable {
public:
    /// Fault::store when the file cannot be read, Fault::data for a ragged row or a column missing.
    static Result<CsvTable> read(const QString& path, const QStringList& needed_columns);

    const QStringList& columns() const { return columns_; }
    const QString& path() const { return path_; }
    size_t size() const { return rows_.size(); }
    int line(size_t row) const { return rows_[row].line; }
    QString text(size_t row, const QString& column) const;
    /// "grades.csv line 12, column C_max: ..."
    Error error(size_t row, const QString& column, const QString& message) const;
    /// An empty cell is no value; anything but a number is an error.
    Result<std::optional<double>> number(size_t row, const QString& column) const;

private:
    QString path_;
    QStringList columns_;
    std::map<QString, qsizetype> index_;
    std::vector<CsvRow> rows_;
};

/// All bytes of a file, or a Fault::store error that names it.
Result<QByteArray> readFile(const QString& path);

}  // namespace soak
