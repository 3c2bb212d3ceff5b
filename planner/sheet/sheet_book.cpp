// SPDX-License-Identifier: GPL-3.0-or-later
// The process sheet as a workbook, in the order of the work. What the crew writes on paper is a framed cell here.
#include <QRegularExpression>
#include <cmath>

#include "planner/sheet/book.h"
#include "planner/sheet/templates.h"
#include "planner/sheet/workbook.h"

namespace soak {
namespace {

constexpr uint32_t kMissed = 0xF5CDB0;
constexpr double kMinutesOfDay = 1440, kSecondsOfDay = 86400;

/// Names in column A, values in B, the other unit in C, words beside them in D.
class Lines {
public:
    Lines(Book& book, lxw_worksheet* sheet, const Templates& templates)
        : book_(book), sheet_(sheet), words_(templates.wording), second_(templates.second) {}

    int row() const { return row_; }
    Cell value() const { return {row_, 1}; }
    void next() { ++row_; }

    QString name(const QString& key) const {
        const QString first = words_.text(key), second = second_ ? second_->underText(key) : QString();
        return second.isEmpty() || second == first ? first : first + " / " + second;
    }
    void heading(const QString& key) {
        ++row_;
        for (int column = 0; column < 4; ++column)
            Book::write(sheet_, {row_, column}, column ? QString() : name(key), book_.formats().heading);
        ++row_;
    }
    void text(const QString& label, const QString& words) {
        if (words.isEmpty()) return;
        Book::write(sheet_, {row_, 0}, label, book_.formats().text);
        worksheet_merge_range(sheet_, lxw_row_t(row_), 1, lxw_row_t(row_), 3, words.toUtf8().constData(),
                              book_.formats().wrapped);
        worksheet_set_row(sheet_, lxw_row_t(row_), kLine_pt * double(1 + words.size() / kLineLetters), nullptr);
        ++row_;
    }
    /// A value in the controller's unit as a number, with its unit; the other unit as text beside it.
    Cell quantity(const QString& label, const TwoUnits& both, const QString& beside = {}) {
        const Cell at = number(label, both.controller);
        if (both.other) Book::write(sheet_, {at.row, 2}, words_.number(*both.other), book_.formats().text);
        Book::write(sheet_, {at.row, 3}, beside, book_.formats().wrapped);
        return at;
    }
    Cell number(const QString& label, const Quantity& quantity) {
        const Cell at = value();
        Book::write(sheet_, {row_, 0}, label, book_.formats().text);
        Book::write(sheet_, at, quantity.value, unitFormat(quantity));
        ++row_;
        return at;
    }
    Cell formula(const QString& label, const QString& formula, const Quantity& result) {
        const Cell at = value();
        Book::write(sheet_, {row_, 0}, label, book_.formats().text);
        Book::formula(sheet_, at, formula, result.value, unitFormat(result));
        ++row_;
        return at;
    }
    /// An empty framed cell to type in.
    Cell box(const QString& label, lxw_format* format) {
        const Cell at = value();
        Book::write(sheet_, {row_, 0}, label, book_.formats().text);
        Book::write(sheet_, at, QString(), format);
        ++row_;
        return at;
    }
    /// A clock time that appears once the cells it needs are filled in.
    Cell clock(const QString& label, const QString& formula, lxw_format* format) {
        const Cell at = value();
        Book::write(sheet_, {row_, 0}, label, book_.formats().text);
        Book::formula(sheet_, at, formula, QString(), format);
        ++row_;
        return at;
    }
    Book& book() const { return book_; }
    lxw_worksheet* sheet() const { return sheet_; }
    const Wording& words() const { return words_; }

private:
    static constexpr double kLine_pt = 15;
    static constexpr int kLineLetters = 62;

    lxw_format* unitFormat(const Quantity& quantity) const {
        lxw_format* format = workbook_add_format(book_.handle());
        const QString digits = quantity.decimals ? "0." + QString(quantity.decimals, '0') : QString("0");
        format_set_num_format(format, (digits + "\" " + quantity.unit + "\"").toUtf8().constData());
        format_set_bold(format);
        format_set_align(format, LXW_ALIGN_LEFT);
        return format;
    }

    Book& book_;
    lxw_worksheet* sheet_;
    const Wording& words_;
    const std::optional<Wording>& second_;
    int row_ = 0;
};

void writeHead(Lines& lines, const SheetContent& content) {
    const Wording& words = lines.words();
    const QString title =
        words.word("kind", content.kind) + ", " +
        (content.draft ? words.text("page.no_number")
                       : words.text("page.sheet", {{"number", content.number}, {"revision", content.revision}}));
    Book::write(lines.sheet(), {0, 0}, title, lines.book().formats().title);
    worksheet_set_row(lines.sheet(), 0, 26, nullptr);
    lines.next();
    if (content.draft) lines.text(lines.name("page.draft"), content.draft_reasons.join("; "));
    if (!content.draft && !content.replaces.isEmpty())
        lines.text(words.text("page.replaces", {{"replaced", content.replaces}}), " ");
    lines.text(lines.name("job.cycle"), content.cycle);
    lines.text(lines.name("job.specification"), content.specification);
    lines.text(lines.name("job.customer"), content.customer);
    lines.text(lines.name("job.order"), content.order);
    for (const SheetHeat& heat : content.heats)
        lines.text(lines.name("load.heat"), QStringList{heat.number, heat.grade, heat.product_form,
                                                        heat.section ? words.number(*heat.section) : QString()}
                                                .filter(QRegularExpression(".+"))
                                                .join(", "));
    lines.text(lines.name("setpoint.furnace"), content.furnace);
}

struct MetalCells {
    Cell low, high;
};

MetalCells writeMetal(Lines& lines, const SheetContent& content) {
    lines.heading("setpoint.heading");
    const Cell set = lines.quantity(lines.name("setpoint.heading"), content.setpoint);
    const auto follows = [&](const TwoUnits& metal) {
        const double off = metal.controller.value - content.setpoint.controller.value;
        return "=" + set.name() + (off < 0 ? "-" : "+") + QString::number(std::abs(off));
    };
    const QString range = lines.name("metal.heading");
    const Cell low = lines.formula(range + " \u2265", follows(content.metal_low), content.metal_low.controller);
    const Cell high = lines.formula(range + " \u2264", follows(content.metal_high), content.metal_high.controller);
    if (content.never_above)
        lines.quantity(lines.words().text("metal.never_above", {{"temperature", QString()}}).trimmed(),
                       *content.never_above);
    return {low, high};
}

void writeSoak(Lines& lines, const SheetContent& content) {
    const auto& formats = lines.book().formats();
    lines.heading("soak.heading");
    const QString start = lines.words().number(content.soak_start.controller);
    lines.text(lines.name("soak.heading"),
               content.soak_sensor.isEmpty()
                   ? lines.words().text("soak.start_any", {{"temperature", start}})
                   : lines.words().text("soak.start", {{"sensor", content.soak_sensor}, {"temperature", start}}));
    const Cell begun = lines.box(lines.name("soak.box_start"), formats.clock);
    if (!content.soak_minutes) {
        lines.box(lines.name("soak.box_end"), formats.clock);
        return;
    }
    const Cell minutes = lines.number(lines.name("soak.minutes"), {double(*content.soak_minutes), 0, "min"});
    lines.clock(lines.name("soak.box_end"),
                "=IF(ISNUMBER(" + begun.name() + "),MOD(" + begun.name() + "+" + minutes.name() + "/" +
                    QString::number(kMinutesOfDay) + ",1),\"\")",
                formats.clock);
}

/// The delay is counted from the two times; too long is marked.
void writeQuench(Lines& lines, const SheetContent& content) {
    const auto& formats = lines.book().formats();
    lines.heading(content.quench_medium.isEmpty() ? "quench.heading_cool" : "quench.heading");
    lines.text(lines.name("quench.heading"), content.quench_medium);
    lines.text(lines.name("quench.heading_cool"), content.cooling);
    for (const QString& limit : content.medium_limits) lines.text(QString(QChar(0x2013)), limit);
    if (content.quench_medium.isEmpty()) return;
    const Cell door = lines.box(lines.name("quench.box_door"), formats.clock),
               under = lines.box(lines.name("quench.box_under"), formats.clock);
    if (!content.max_delay) return;
    const Cell most = lines.number(lines.name("quench.within"), *content.max_delay);
    const Cell took = lines.clock(lines.name("quench.box_door") + " \u2192 " + lines.name("quench.box_under") + ", s",
                                  "=IF(COUNT(" + door.name() + "," + under.name() + ")=2,ROUND(MOD(" + under.name() +
                                      "-" + door.name() + ",1)*" + QString::number(kSecondsOfDay) + ",0),\"\")",
                                  formats.input);
    lines.book().markWhere(lines.sheet(), took, took,
                           "=AND(ISNUMBER(" + took.fixed() + ")," + took.fixed() + ">" + most.fixed() + ")", kMissed);
}

void writeWhy(Lines& lines, const SheetContent& content, const MetalCells& metal) {
    lines.heading("why.heading");
    lines.text(lines.words().word("verdict", word(content.verdict).replace(' ', '_')), content.verdict_sentence);
    for (const SheetLimit& limit : content.binding) {
        if (!limit.temperature) {
            lines.text(limit.side == Side::floor ? "\u2265" : "\u2264", limit.cause);
            continue;
        }
        const bool floor = limit.side == Side::floor;
        const Cell at = lines.quantity(floor ? "\u2265" : "\u2264", *limit.temperature, limit.cause);
        const double spare = floor ? content.metal_low.controller.value - limit.temperature->controller.value
                                   : limit.temperature->controller.value - content.metal_high.controller.value;
        const bool fahrenheit = content.setpoint.controller.unit == QString("°F");
        const Cell left =
            lines.formula(lines.words().text("why.margin", {{"margin", QString()}}).trimmed(),
                          floor ? "=" + metal.low.name() + "-" + at.name() : "=" + at.name() + "-" + metal.high.name(),
                          {spare, 0, fahrenheit ? "°F" : "K"});
        lines.book().markWhere(lines.sheet(), left, left, "=" + left.fixed() + "<0", kMissed);
    }
    lines.text(lines.words().text("why.rule", {{"rule", QString()}}).trimmed(), content.decision_rule);
    for (const QString& remark : content.remarks) lines.text(QString(QChar(0x2013)), remark);
}

void writeFoot(Lines& lines, const SheetContent& content) {
    lines.heading("wrong.heading");
    lines.text(lines.name("wrong.action"), content.if_wrong.isEmpty() ? " " : content.if_wrong.join("; "));
    lines.heading("caution.heading");
    for (const SheetCaution& caution : content.cautions)
        lines.text(
            lines.name("caution." + (caution.severity == "danger" || caution.severity == "warning" ? caution.severity
                                                                                                   : QString("note"))),
            caution.text + (caution.defers_to.isEmpty() ? QString() : " (" + caution.defers_to + ")"));
    lines.next();
    lines.text(QString(), lines.words().text("foot.deference"));
    lines.text(QString(), "Soakwright " + content.program_version + "; " + content.data_set + " " +
                              content.data_version + "; " + content.rules_version + "; " + content.content_hash);
    if (!content.draft) lines.text(QString(), content.qr_payload);
}

}  // namespace

Result<Done> writeSheetWorkbook(const SheetContent& content, const SheetOptions& options, const QString& path) {
    auto templates = loadTemplates(options.templates, options.language, options.second_language);
    if (!templates) return std::move(templates).error().within("templates");
    Book book(path);
    lxw_worksheet* sheet = book.addSheet("Process sheet");
    Book::widths(sheet, {34, 16, 16, 44});
    worksheet_set_paper(sheet, options.paper == Paper::a4 ? 9 : 1);
    worksheet_fit_to_pages(sheet, 1, 0);
    Lines lines(book, sheet, templates.value());
    writeHead(lines, content);
    const MetalCells metal = writeMetal(lines, content);
    writeSoak(lines, content);
    writeQuench(lines, content);
    writeWhy(lines, content, metal);
    writeFoot(lines, content);
    return book.finish();
}

}  // namespace soak
