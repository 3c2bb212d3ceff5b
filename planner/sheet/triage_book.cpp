// SPDX-License-Identifier: GPL-3.0-or-later
// The delivery's triage as a workbook: verdicts, limits, charts.
#include <algorithm>
#include <map>

#include "planner/core/verdict.h"
#include "planner/sheet/book.h"
#include "planner/sheet/workbook.h"

namespace soak {
namespace {

// Okabe and Ito's colours, paled so that black text stands on them; the word beside them says the same.
constexpr uint32_t kInside = 0xCCEBE1, kTight = 0xFAE3B8, kOutside = 0xF5CDB0, kNone = 0xD9D9D9;
constexpr int kHead = 3, kFirst = 4;  // rows of both lists
constexpr int kMostCharted = 40;      // more bars than that cannot be told apart on one page

enum Column {
    number,
    heat,
    grade,
    cycle,
    furnace,
    setpoint,
    coldest,
    hottest,
    margin,
    verdict,
    floorAt,
    floorCause,
    ceilingAt,
    ceilingCause,
    suggested,
    gradeCheck,
    reason,
    findings,
    below,
    above,
    columns
};
enum LimitColumn {
    ofRow,
    limitHeat,
    limitCycle,
    side,
    cause,
    at,
    uncertainty,
    wanted,
    spare,
    shortBy,
    source,
    limitColumns
};

const QString kTriage = "Triage", kLimits = "Limits", kSummary = "Summary";

/// A range of one of the two lists, named with its sheet.
QString listed(const QString& sheet, int column, int rows) {
    return sheet + "!" + columnRange(column, kFirst, kFirst + std::max(rows, 1) - 1);
}

struct Lists {
    int rows = 0, limits = 0;
};

const Limit* bindingOf(const std::vector<Limit>& limits) {
    const auto found = std::find_if(limits.begin(), limits.end(), [](const Limit& one) { return one.temperature_C; });
    return found == limits.end() ? nullptr : &*found;
}

/// Only where a window was computed can another setpoint be tried.
bool isLive(const TriageRow& row) { return row.answer && row.margin_K; }

void writeHead(lxw_worksheet* sheet, const Book& book, const QString& title, const QStringList& notes,
               const QStringList& headings) {
    Book::write(sheet, {0, 0}, title, book.formats().title);
    for (int i = 0; i < notes.size() && i < 2; ++i) Book::write(sheet, {1 + i, 0}, notes[i], book.formats().note);
    for (int i = 0; i < headings.size(); ++i) Book::write(sheet, {kHead, i}, headings[i], book.formats().heading);
}

void writeLiveCells(lxw_worksheet* sheet, const Book& book, int at_row, const TriageRow& row, const Lists& lists) {
    const auto cell = [at_row](int column) { return Cell{at_row, column}; };
    const auto& formats = book.formats();
    const Band& band = row.answer->band;
    const QString set = cell(setpoint).name();
    Book::write(sheet, cell(below), band.low_C - row.setpoint_C, formats.tenth);
    Book::write(sheet, cell(above), band.high_C - row.setpoint_C, formats.tenth);
    Book::formula(sheet, cell(coldest), "=" + set + "+" + cell(below).name(), band.low_C, formats.tenth);
    Book::formula(sheet, cell(hottest), "=" + set + "+" + cell(above).name(), band.high_C, formats.tenth);
    const QString mine = listed(kLimits, ofRow, lists.limits) + "," + cell(number).name();
    Book::formula(sheet, cell(margin), "=_xlfn.MINIFS(" + listed(kLimits, spare, lists.limits) + "," + mine + ")",
                  *row.margin_K, formats.tenth);
    Book::formula(sheet, cell(verdict),
                  "=IF(" + cell(margin).name() + "<0,\"outside\",IF(COUNTIFS(" + mine + "," +
                      listed(kLimits, shortBy, lists.limits) + ",\">0\")>0,\"tight\",\"inside\"))",
                  word(row.verdict), formats.strong);
}

void writeRow(lxw_worksheet* sheet, const Book& book, int index, const TriageRow& row, const Lists& lists) {
    const auto& formats = book.formats();
    const auto cell = [index](int column) { return Cell{kFirst + index, column}; };
    Book::write(sheet, cell(number), index + 1, formats.whole);
    const auto text = [&](Column column, const QString& words) {
        Book::write(sheet, cell(column), words, formats.wrapped);
    };
    text(heat, row.heat);
    text(grade, row.grade);
    text(cycle, row.cycle);
    text(furnace, row.furnace);
    if (!row.cycle.isEmpty()) Book::write(sheet, cell(setpoint), row.setpoint_C, formats.input);
    if (isLive(row))
        writeLiveCells(sheet, book, kFirst + index, row, lists);
    else
        Book::write(sheet, cell(verdict), word(row.verdict), formats.strong);
    const auto limit = [&](const std::vector<Limit>& limits, Column where, Column why) {
        const Limit* binding = bindingOf(limits);
        if (!binding) return;
        Book::write(sheet, cell(where), *binding->temperature_C, formats.tenth);
        text(why, binding->cause);
    };
    if (row.answer) {
        limit(row.answer->floors, floorAt, floorCause);
        limit(row.answer->ceilings, ceilingAt, ceilingCause);
    }
    if (row.suggested_setpoint_C) Book::write(sheet, cell(suggested), *row.suggested_setpoint_C, formats.whole);
    text(gradeCheck, row.grade_verdict);
    text(reason, row.reason);
    text(findings, row.findings.join("\n"));
}

/// Limits that bind, with the heat's row in the triage; found there by number, so that sorting breaks nothing.
void writeLimit(lxw_worksheet* sheet, const Book& book, int index, int row_index, const TriageRow& row,
                const Limit& limit, const ShopRules& rules, const Lists& lists) {
    const auto& formats = book.formats();
    const auto cell = [index](int column) { return Cell{kFirst + index, column}; };
    const bool floor = limit.side == Side::floor;
    Book::write(sheet, cell(ofRow), row_index + 1, formats.whole);
    Book::write(sheet, cell(limitHeat), row.heat, formats.text);
    Book::write(sheet, cell(limitCycle), row.cycle, formats.text);
    Book::write(sheet, cell(side), floor ? "floor" : "ceiling", formats.text);
    Book::write(sheet, cell(cause), limit.cause, formats.wrapped);
    Book::write(sheet, cell(at), *limit.temperature_C, formats.tenth);
    if (!limit.set) Book::write(sheet, cell(uncertainty), limit.uncertainty_K, formats.tenth);
    const double needed = neededMargin_K(limit, rules), left = *marginTo(limit, row.answer->band);
    Book::write(sheet, cell(wanted), needed, formats.tenth);
    const QString seen = "INDEX(" + listed(kTriage, floor ? coldest : hottest, lists.rows) + ",MATCH(" +
                         cell(ofRow).name() + "," + listed(kTriage, number, lists.rows) + ",0))";
    Book::formula(sheet, cell(spare), floor ? "=" + seen + "-" + cell(at).name() : "=" + cell(at).name() + "-" + seen,
                  left, formats.tenth);
    Book::formula(sheet, cell(shortBy), "=MAX(0," + cell(wanted).name() + "-" + cell(spare).name() + ")",
                  std::max(0.0, needed - left), formats.tenth);
    Book::write(sheet, cell(source), limit.source, formats.wrapped);
}

template <class Use>
int eachLimit(const std::vector<TriageRow>& rows, const Use& use) {
    int count = 0;
    for (size_t i = 0; i < rows.size(); ++i) {
        if (!isLive(rows[i])) continue;
        for (const auto* limits : {&rows[i].answer->floors, &rows[i].answer->ceilings})
            for (const Limit& limit : *limits)
                if (limit.temperature_C) use(count++, int(i), limit);
    }
    return count;
}

void dress(lxw_worksheet* sheet, int last_column, int rows) {
    const int last = kFirst + std::max(rows, 1) - 1;
    worksheet_autofilter(sheet, kHead, 0, lxw_row_t(last), lxw_col_t(last_column));
    worksheet_freeze_panes(sheet, kFirst, heat + 1);
    worksheet_set_landscape(sheet);
    worksheet_set_paper(sheet, 9);  // A4
    worksheet_fit_to_pages(sheet, 1, 0);
    worksheet_repeat_rows(sheet, kHead, kHead);
}

void markVerdicts(Book& book, lxw_worksheet* sheet, int rows) {
    const Cell from{kFirst, verdict}, to{kFirst + std::max(rows, 1) - 1, verdict};
    book.mark(sheet, from, to, "inside", kInside, false);
    book.mark(sheet, from, to, "tight", kTight, false);
    book.mark(sheet, from, to, "outside", kOutside, true);
    book.mark(sheet, from, to, "no window", kOutside, true);
    book.mark(sheet, from, to, "not computed", kNone, true);
    lxw_conditional_format bars{};
    bars.type = LXW_CONDITIONAL_DATA_BAR;
    bars.data_bar_2010 = LXW_TRUE;
    bars.bar_color = 0x56B4E9;
    bars.bar_negative_color = 0xD55E00;
    worksheet_conditional_format_range(sheet, kFirst, margin, lxw_row_t(to.row), margin, &bars);
}

void chartMargins(Book& book, lxw_worksheet* onto, int rows) {
    lxw_chart* chart = workbook_add_chart(book.handle(), LXW_CHART_BAR);
    const int shown = std::min(rows, kMostCharted);
    const QByteArray names = ("=" + listed(kTriage, heat, shown)).toUtf8(),
                     values = ("=" + listed(kTriage, margin, shown)).toUtf8();
    lxw_chart_series* series = chart_add_series(chart, names.constData(), values.constData());
    chart_series_set_name(series, "Margin, K");
    lxw_chart_fill fill{};
    fill.color = 0x0072B2;
    chart_series_set_fill(series, &fill);
    chart_title_set_name(chart, rows > shown ? "Margin of the worst heats, K" : "Margin, K");
    chart_legend_set_position(chart, LXW_CHART_LEGEND_NONE);
    chart_axis_set_reverse(chart->x_axis);
    chart_axis_set_label_position(chart->x_axis, LXW_CHART_AXIS_LABEL_POSITION_LOW);
    chart_axis_set_name(chart->y_axis, "K inside (positive) or outside (negative)");
    lxw_chart_options options{};
    options.x_scale = 1.6;
    options.y_scale = std::max(1.0, shown * 0.07);
    worksheet_insert_chart_opt(onto, 10, 0, chart, &options);
}

void writeSummary(Book& book, lxw_worksheet* sheet, const std::vector<TriageRow>& rows) {
    Book::write(sheet, {0, 0}, "Summary", book.formats().title);
    Book::write(sheet, {2, 0}, "Verdict", book.formats().heading);
    Book::write(sheet, {2, 1}, "Rows", book.formats().heading);
    int at_row = 3;
    for (const Verdict one :
         {Verdict::inside, Verdict::tight, Verdict::outside, Verdict::noWindow, Verdict::notComputed}) {
        const auto count = std::count_if(rows.begin(), rows.end(), [&](const auto& row) { return row.verdict == one; });
        const Cell name{at_row, 0};
        Book::write(sheet, name, word(one), book.formats().strong);
        Book::formula(sheet, {at_row, 1},
                      "=COUNTIF(" + listed(kTriage, verdict, int(rows.size())) + "," + name.name() + ")", double(count),
                      book.formats().whole);
        ++at_row;
    }
    lxw_chart* chart = workbook_add_chart(book.handle(), LXW_CHART_COLUMN);
    lxw_chart_series* series = chart_add_series(chart, "=Summary!$A$4:$A$8", "=Summary!$B$4:$B$8");
    chart_series_set_name(series, "Rows");
    chart_title_set_name(chart, "Verdicts");
    chart_legend_set_position(chart, LXW_CHART_LEGEND_NONE);
    lxw_chart_options options{};
    options.x_scale = 0.9;
    worksheet_insert_chart_opt(sheet, 1, 8, chart, &options);
    chartMargins(book, sheet, int(rows.size()));
    Book::widths(sheet, {16, 8});
}

}  // namespace

Result<Done> writeTriageWorkbook(const std::vector<TriageRow>& rows, const ShopRules& rules, const QString& path) {
    Book book(path);
    Lists lists{int(rows.size()), 0};
    lists.limits = eachLimit(rows, [](int, int, const Limit&) {});
    lxw_worksheet *triage = book.addSheet(kTriage), *limits = book.addSheet(kLimits),
                  *summary = book.addSheet(kSummary);

    writeHead(triage, book, "Delivery triage, " + rules.today.toString(Qt::ISODate),
              {"Band by " + rules.band_rule +
                   ". Worst first. A framed setpoint may be changed: metal, margin, verdict "
                   "and charts follow, with the furnace's band as wide as here. Judge again before a sheet is issued.",
               "The planner advises; a responsible person decides and signs."},
              {"No.",
               "Heat",
               "Grade",
               "Cycle",
               "Furnace",
               "Setpoint °C",
               "Coldest metal °C",
               "Hottest metal °C",
               "Margin K",
               "Verdict",
               "Floor °C",
               "because",
               "Ceiling °C",
               "because",
               "Suggested °C",
               "Grade check",
               "Reason as planned",
               "Findings",
               "Band below K",
               "Band above K"});
    for (int i = 0; i < lists.rows; ++i) writeRow(triage, book, i, rows[size_t(i)], lists);
    Book::widths(triage, {5, 13, 12, 10, 8, 9, 9, 9, 9, 13, 9, 26, 9, 26, 10, 11, 60, 40, 8, 8});
    dress(triage, columns - 1, lists.rows);
    markVerdicts(book, triage, lists.rows);

    writeHead(limits, book, "Every limit that has a temperature", {"Margins follow the setpoints of the triage."},
              {"No.", "Heat", "Cycle", "Side", "Limit", "Metal °C", "Uncertainty K", "Margin wanted K", "Margin K",
               "Short by K", "Source"});
    eachLimit(rows, [&](int index, int row, const Limit& limit) {
        writeLimit(limits, book, index, row, rows[size_t(row)], limit, rules, lists);
    });
    Book::widths(limits, {5, 13, 10, 9, 44, 10, 11, 11, 10, 10, 30});
    dress(limits, limitColumns - 1, lists.limits);
    const int last = kFirst + std::max(lists.limits, 1) - 1;
    book.markWhere(limits, {kFirst, spare}, {last, spare}, "=AND(ISNUMBER($I5),$I5<0)", kOutside);
    book.markWhere(limits, {kFirst, shortBy}, {last, shortBy}, "=$J5>0", kTight);

    writeSummary(book, summary, rows);
    return book.finish();
}

}  // namespace soak
