// SPDX-License-Identifier: GPL-3.0-or-later
// What stands around the sections: the head of the first page, of the following ones, and the foot of each.
#include "planner/sheet/composer.h"

namespace soak {
namespace {

QString iso(const QDate& date) { return date.isValid() ? date.toString(Qt::ISODate) : QString("____-__-__"); }

QString sheetName(const Composer& composer) {
    const SheetContent& content = composer.content;
    if (content.draft) return composer.text("page.no_number");
    return composer.text("page.sheet", {{"number", content.number}, {"revision", content.revision}});
}

std::vector<Row> identity(const Composer& composer, double width) {
    const SheetContent& content = composer.content;
    const Typesetter& set = composer.typesetter;
    std::vector<Row> rows = set.paragraph(sheetName(composer), composer.strong(), 0, width);
    const auto add = [&](const QString& text) { append(rows, set.paragraph(text, composer.body(), 0, width)); };
    const QString date =
        composer.text(content.draft ? "page.date_of_draft" : "page.date", {{"date", iso(content.date)}});
    if (content.draft) {
        add(date);
        return rows;
    }
    add(date + ", " +
        (content.valid_until.isValid() ? composer.text("page.valid_until", {{"date", iso(content.valid_until)}})
                                       : composer.text("page.valid_withdrawn")));
    if (!content.replaces.isEmpty()) add(composer.text("page.replaces", {{"replaced", content.replaces}}));
    return rows;
}

/// Name over value, side by side.
std::vector<Row> jobRows(const Composer& composer, double whole) {
    const SheetContent& content = composer.content;
    struct Entry {
        const char* key;
        QString value;
        double share;
    };
    std::vector<Entry> entries;
    const auto add = [&](const char* key, const QString& value, double share) {
        if (!value.isEmpty()) entries.push_back({key, value, share});
    };
    add("job.cycle", content.cycle, 0.8);
    add("job.specification", content.specification, 1.2);
    add("job.customer", content.customer, 1.2);
    add("job.order", content.order, 0.8);
    double shares = 0, x = 0;
    for (const Entry& entry : entries) shares += entry.share;
    std::vector<Row> rows;
    for (const Entry& entry : entries) {
        const double width = whole * entry.share / shares;
        const Typesetter& set = composer.typesetter;
        std::vector<Row> cell = set.paragraph(composer.both(entry.key).join(" / "), composer.caption(), x, width - 3);
        append(cell, set.paragraph(entry.value, composer.body(), x, width - 3));
        for (size_t i = 0; i < cell.size(); ++i) {
            if (i == rows.size()) rows.push_back(space(cell[i].height));
            rows[i].height = std::max(rows[i].height, cell[i].height);
            rows[i].marks.add(std::move(cell[i].marks));
        }
        x += width;
    }
    return rows;
}

std::vector<Row> banner(const Composer& composer, const QString& text) {
    std::vector<Row> rows = composer.typesetter.paragraph(text, composer.bold(), 2.5, composer.page_width - 5);
    for (Row& row : rows)
        for (const double x : {0.4, composer.page_width - 0.4})
            row.marks.figures.push_back(line(x, 0, x, row.height, 0.8));
    return rows;
}

}  // namespace

std::vector<Row> firstHead(const Composer& composer) {
    const SheetContent& content = composer.content;
    const Typesetter& set = composer.typesetter;
    const double code = composer.templates.layout.code_mm, width = composer.page_width;
    const bool hasCode = !content.qr_payload.isEmpty() && !content.draft;
    const double beside = hasCode ? width - code - 2 : width, identityWidth = 82, identityX = beside - identityWidth;

    std::vector<Row> left =
        set.paragraph(composer.words().word("kind", content.kind), composer.title(), 0, identityX - 4);
    if (composer.templates.second) {
        const QString second = composer.templates.second->wordOrNothing("kind", content.kind);
        if (!second.isEmpty())
            append(left, set.paragraph(second, {composer.strong().size_pt, false}, 0, identityX - 4));
    }
    std::vector<Row> rows = composer.beside(std::move(left), identity(composer, identityWidth), identityX);
    rows.push_back(space(0.8));
    append(rows, jobRows(composer, beside));
    if (hasCode) {  // beside title and job; filled in by the caller
        rows.front().marks.codes.push_back({QRectF(width - code, 0, code, code), 0, {}});
        rows.back().height += std::max(0.0, code - heightOf(rows));
    }
    if (content.draft) {
        rows.push_back(space(1));
        append(rows, banner(composer, composer.both("page.draft").join(" / ") +
                                          (content.draft_reasons.isEmpty() ? QString(".") : QString(": ")) +
                                          content.draft_reasons.join("; ")));
    }
    const auto unreviewed = [&](const Wording& wording) {
        if (!wording.isDraft()) return;
        QStringList texts{composer.text("page.wording_draft"), wording.text("page.wording_draft")};
        texts.removeDuplicates();
        rows.push_back(space(1));
        append(rows, banner(composer, wording.language() + ": " + texts.join(" / ")));
    };
    unreviewed(composer.words());
    if (composer.templates.second) unreviewed(*composer.templates.second);
    return rows;
}

std::vector<Row> nextHead(const Composer& composer) {
    const SheetContent& content = composer.content;
    const double right = composer.page_width * 0.6;
    QStringList numbers;
    for (const SheetHeat& heat : content.heats) numbers << heat.number;
    constexpr qsizetype shown = 6;
    if (numbers.size() > shown) numbers = numbers.mid(0, shown) << QString(QChar(0x2026));
    const QString what = composer.words().word("kind", content.kind) + " " +
                         composer.words().number(content.setpoint.controller) + ", " + composer.text("page.continued");
    std::vector<Row> left = composer.typesetter.paragraph(what, composer.strong(), 0, right - 4);
    append(left, composer.typesetter.paragraph(numbers.join(", "), composer.caption(), 0, right - 4));
    const std::vector<Row> name =
        composer.typesetter.paragraph(sheetName(composer), composer.strong(), 0, composer.page_width - right);
    return composer.beside(std::move(left), name, right);
}

std::vector<Row> foot(const Composer& composer, int page, int pages) {
    const SheetContent& content = composer.content;
    const double width = composer.page_width, right = width - 30;
    const Typesetter& set = composer.typesetter;
    QStringList lines{composer.text("foot.deference")};
    const QString second = composer.under("foot.deference");
    if (!second.isEmpty()) lines << second;
    lines << content.deference;
    QStringList versions;
    const auto add = [&](const char* key, const char* name, const QString& value) {
        if (!value.isEmpty()) versions << composer.text(key, {{name, value}});
    };
    add("foot.program", "program", content.program_version);
    add("foot.data", "data", (content.data_set + " " + content.data_version).trimmed());
    add("foot.rules", "rules", content.rules_version);
    add("foot.hash", "hash", content.content_hash);
    lines << versions.join(" · ");
    const QString number =
        composer.text("page.number", {{"page", QString::number(page)}, {"pages", QString::number(pages)}});
    const std::vector<Row> place = set.paragraph(number, composer.bold(), 0, width - right, Align::right);
    return composer.beside(set.paragraph(lines.join(" "), composer.small(), 0, right - 2), place, right);
}

}  // namespace soak
