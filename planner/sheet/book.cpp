// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/book.h"

#include <QFile>
#include <filesystem>

namespace soak {
namespace {

lxw_row_t rowOf(const Cell& at) { return lxw_row_t(at.row); }
lxw_col_t columnOf(const Cell& at) { return lxw_col_t(at.column); }

QString letters(int column) {
    QString name;
    for (int rest = column + 1; rest > 0; rest = (rest - 1) / 26) name.prepend(QChar('A' + (rest - 1) % 26));
    return name;
}

}  // namespace

QString Cell::name() const { return letters(column) + QString::number(row + 1); }
QString Cell::fixed() const { return "$" + letters(column) + "$" + QString::number(row + 1); }
QString columnRange(int column, int first_row, int last_row) {
    return Cell{first_row, column}.fixed() + ":" + Cell{last_row, column}.fixed();
}

Book::Book(QString path)
    : path_(std::move(path)), part_(path_ + ".part"), book_(workbook_new(part_.toUtf8().constData())) {
    const auto made = [this](bool bold, const char* number) {
        lxw_format* format = workbook_add_format(book_);
        format_set_font_name(format, "Open Sans");
        format_set_font_size(format, 10);
        format_set_align(format, LXW_ALIGN_VERTICAL_TOP);
        if (bold) format_set_bold(format);
        if (number) format_set_num_format(format, number);
        return format;
    };
    formats_.text = made(false, nullptr);
    formats_.wrapped = made(false, nullptr);
    format_set_text_wrap(formats_.wrapped);
    formats_.title = made(true, nullptr);
    format_set_font_size(formats_.title, 16);
    formats_.note = made(false, nullptr);
    format_set_italic(formats_.note);
    formats_.heading = made(true, nullptr);
    format_set_bottom(formats_.heading, LXW_BORDER_MEDIUM);
    format_set_text_wrap(formats_.heading);
    formats_.strong = made(true, nullptr);
    format_set_text_wrap(formats_.strong);
    formats_.input = made(true, "0");
    format_set_border(formats_.input, LXW_BORDER_THIN);
    formats_.whole = made(false, "0");
    formats_.tenth = made(false, "0.0");
    formats_.clock = made(true, "hh:mm:ss");
    format_set_border(formats_.clock, LXW_BORDER_THIN);
}

Book::~Book() {
    if (book_) lxw_workbook_free(book_);  // nothing has been written yet
}

lxw_worksheet* Book::addSheet(const QString& name) { return workbook_add_worksheet(book_, name.toUtf8().constData()); }

void Book::write(lxw_worksheet* sheet, Cell at, const QString& text, lxw_format* format) {
    if (text.isEmpty())
        worksheet_write_blank(sheet, rowOf(at), columnOf(at), format);
    else
        worksheet_write_string(sheet, rowOf(at), columnOf(at), text.toUtf8().constData(), format);
}

void Book::write(lxw_worksheet* sheet, Cell at, double value, lxw_format* format) {
    worksheet_write_number(sheet, rowOf(at), columnOf(at), value, format);
}

void Book::formula(lxw_worksheet* sheet, Cell at, const QString& formula, double value, lxw_format* format) {
    worksheet_write_formula_num(sheet, rowOf(at), columnOf(at), formula.toUtf8().constData(), format, value);
}

void Book::formula(lxw_worksheet* sheet, Cell at, const QString& formula, const QString& value, lxw_format* format) {
    worksheet_write_formula_str(sheet, rowOf(at), columnOf(at), formula.toUtf8().constData(), format,
                                value.toUtf8().constData());
}

void Book::widths(lxw_worksheet* sheet, std::initializer_list<double> characters) {
    lxw_col_t column = 0;
    for (const double width : characters) {
        worksheet_set_column(sheet, column, column, width, nullptr);
        ++column;
    }
}

void Book::mark(lxw_worksheet* sheet, Cell from, Cell to, const QString& word, uint32_t fill, bool bold) {
    lxw_format* look = workbook_add_format(book_);
    format_set_bg_color(look, fill);
    if (bold) format_set_bold(look);
    const QByteArray quoted = ("\"" + word + "\"").toUtf8();
    lxw_conditional_format rule{};
    rule.type = LXW_CONDITIONAL_TYPE_CELL;
    rule.criteria = LXW_CONDITIONAL_CRITERIA_EQUAL_TO;
    rule.value_string = const_cast<char*>(quoted.constData());  // the library copies it
    rule.format = look;
    worksheet_conditional_format_range(sheet, rowOf(from), columnOf(from), rowOf(to), columnOf(to), &rule);
}

void Book::markWhere(lxw_worksheet* sheet, Cell from, Cell to, const QString& formula, uint32_t fill) {
    lxw_format* look = workbook_add_format(book_);
    format_set_bg_color(look, fill);
    format_set_bold(look);
    const QByteArray text = formula.toUtf8();
    lxw_conditional_format rule{};
    rule.type = LXW_CONDITIONAL_TYPE_FORMULA;
    rule.value_string = const_cast<char*>(text.constData());
    rule.format = look;
    worksheet_conditional_format_range(sheet, rowOf(from), columnOf(from), rowOf(to), columnOf(to), &rule);
}

Result<Done> Book::finish() {
    const lxw_error failed = workbook_close(book_);
    book_ = nullptr;
    std::error_code trouble;
    if (!failed) std::filesystem::rename(part_.toStdString(), path_.toStdString(), trouble);
    if (!failed && !trouble) return Done{};
    QFile::remove(part_);
    return Error{Fault::store,
                 "the workbook could not be written (" + (failed ? lxw_strerror(failed) : trouble.message()) +
                     "); a file that was there is unchanged",
                 "",
                 {path_.toStdString()}};
}

}  // namespace soak
