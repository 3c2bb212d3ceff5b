// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/csv.h"

#include <QFile>
#include <QFileInfo>
#include <QStringDecoder>
#include <algorithm>

namespace soak {

bool CsvRow::isBlank() const {
    return std::all_of(cells.begin(), cells.end(), [](const QString& cell) { return cell.trimmed().isEmpty(); });
}

QString decodeText(const QByteArray& bytes) {
    const auto marked = QStringConverter::encodingForData(bytes);
    QStringDecoder decoder(marked.value_or(QStringConverter::Utf8));
    QString text = decoder.decode(bytes);
    if (decoder.hasError()) text = QString::fromLatin1(bytes);
    if (text.startsWith(QChar(0xFEFF))) text.remove(0, 1);
    return text;
}

std::vector<CsvRow> parseCsv(const QString& text, QChar separator) {
    std::vector<CsvRow> rows;
    CsvRow row{1, {}};
    QString cell;
    bool quoted = false;
    int line = 1;
    const auto endCell = [&] {
        row.cells << cell;
        cell.clear();
    };
    const auto endRow = [&] {
        endCell();
        rows.push_back(std::move(row));
        row = CsvRow{line, {}};
    };
    for (qsizetype i = 0; i < text.size(); ++i) {
        const QChar c = text[i];
        const QChar next = i + 1 < text.size() ? text[i + 1] : QChar();
        const bool newline = c == '\n' || (c == '\r' && next != '\n');
        if (newline) ++line;
        if (quoted && c == '"' && next == '"') {
            cell += '"';
            ++i;
        } else if (quoted && c == '"') {
            quoted = false;
        } else if (!quoted && c == '"' && cell.trimmed().isEmpty()) {
            cell.clear();
            quoted = true;
        } else if (!quoted && c == separator) {
            endCell();
        } else if (!quoted && newline) {
            endRow();
        } else if (quoted || c != '\r') {
            cell += c;
        }
    }
    if (!cell.isEmpty() || !row.cells.isEmpty()) endRow();
    return rows;
}

Result<QByteArray> readFile(const QString& path) {
    QFile file(path);
    if (!file.open(QIODevice::ReadOnly))
        return Error{Fault::store, (path + " cannot be read: " + file.errorString()).toStdString(), {}, {}};
    return file.readAll();
}

Result<CsvTable> CsvTable::read(const QString& path, const QStringList& needed_columns) {
    Result<QByteArray> bytes = readFile(path);
    if (!bytes) return std::move(bytes).error();
    CsvTable table;
    table.path_ = path;
    for (CsvRow& row : parseCsv(decodeText(bytes.value()), ',')) {
        if (row.isBlank()) continue;
        if (table.columns_.isEmpty()) {
            table.columns_ = row.cells;
            continue;
        }
        table.rows_.push_back(std::move(row));
        if (table.rows_.back().cells.size() != table.columns_.size())
            return table.error(table.rows_.size() - 1, {},
                               QString("%1 cells where the header has %2")
                                   .arg(table.rows_.back().cells.size())
                                   .arg(table.columns_.size()));
    }
    for (qsizetype i = 0; i < table.columns_.size(); ++i) table.index_[table.columns_[i]] = i;
    for (const QString& column : needed_columns)
        if (!table.index_.contains(column))
            return Error{Fault::data, (path + ": the column " + column + " is missing").toStdString(), {}, {}};
    return table;
}

QString CsvTable::text(size_t row, const QString& column) const {
    const auto found = index_.find(column);
    return found == index_.end() ? QString() : rows_[row].cells[found->second].trimmed();
}

Error CsvTable::error(size_t row, const QString& column, const QString& message) const {
    QString place = QString("%1 line %2").arg(QFileInfo(path_).fileName()).arg(line(row));
    if (!column.isEmpty()) place += ", column " + column;
    return Error{Fault::data, message.toStdString(), {}, {place.toStdString()}};
}

Result<std::optional<double>> CsvTable::number(size_t row, const QString& column) const {
    const QString cell = text(row, column);
    if (cell.isEmpty()) return std::optional<double>();
    bool ok = false;
    const double value = cell.toDouble(&ok);
    if (!ok) return error(row, column, "\"" + cell + "\" is not a number");
    return std::optional<double>(value);
}

}  // namespace soak
