// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <xlsxwriter.h>

#include <QDate>
#include <QString>
#include <initializer_list>

#include "thermo/base/result.h"

namespace soak {

/// A cell by row and column, from 0. "B7" and "$B$7" are what formulas call it.
struct Cell {
    int row = 0, column = 0;
    QString name() const;
    QString fixed() const;
};
/// "$B$5:$B$40" of one column.
QString columnRange(int column, int first_row, int last_row);

/// One workbook (Office Open XML, ISO/IEC 29500). What is written goes to a file beside `path`, which takes its place
/// when finish() succeeds; without finish() nothing is left behind.
class Book {
public:
    explicit Book(QString path);
    ~Book();
    Book(const Book&) = delete;
    Book& operator=(const Book&) = delete;

    lxw_workbook* handle() const { return book_; }
    lxw_worksheet* addSheet(const QString& name);

    // Formats: one each, made once.
    struct Formats {
        lxw_format *text, *wrapped, *title, *note, *heading, *strong, *input, *whole, *tenth, *clock;
    };
    const Formats& formats() const { return formats_; }

    // Cells of `sheet`. A formula carries the value computed by the planner, so that a reader which does not
    // recalculate shows the same.
    static void write(lxw_worksheet* sheet, Cell at, const QString& text, lxw_format* format);
    static void write(lxw_worksheet* sheet, Cell at, double value, lxw_format* format);
    static void formula(lxw_worksheet* sheet, Cell at, const QString& formula, double value, lxw_format* format);
    static void formula(lxw_worksheet* sheet, Cell at, const QString& formula, const QString& value,
                        lxw_format* format);
    static void widths(lxw_worksheet* sheet, std::initializer_list<double> characters);
    /// Cells that hold `word` get this look; the word stays, so that a print without colour says the same.
    void mark(lxw_worksheet* sheet, Cell from, Cell to, const QString& word, uint32_t fill, bool bold);
    /// As mark(), for a comparison such as "<0".
    void markWhere(lxw_worksheet* sheet, Cell from, Cell to, const QString& formula, uint32_t fill);

    /// Fault::store names the file and the reason.
    Result<Done> finish();

private:
    QString path_, part_;
    lxw_workbook* book_;
    Formats formats_{};
};

}  // namespace soak
