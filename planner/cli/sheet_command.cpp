// SPDX-License-Identifier: GPL-3.0-or-later
#include "commands.h"
#include "output.h"
#include "planner/core/sheet_issue.h"
#include "planner/core/shop_floor.h"
#include "planner/sheet/render.h"
#include "planner/sheet/workbook.h"
#include "signed_in.h"

namespace soak::cli {
namespace {

const QStringList kValued{"store", "heat",      "cycle", "furnace", "pdf",      "xlsx",      "setpoint",     "date",
                          "paper", "band-rule", "issue", "second",  "language", "templates", "password-file"};

Result<Paper> paperIn(const Arguments& arguments) {
    const QString paper = arguments.text("paper").toLower();
    if (paper.isEmpty() || paper == "a4") return Paper::a4;
    if (paper == "letter") return Paper::letter;
    return Error{Fault::input, "--paper: \"" + paper.toStdString() + "\" is neither a4 nor letter", {}, {}};
}

Result<SheetOptions> optionsIn(const Arguments& arguments) {
    const auto paper = paperIn(arguments);
    if (!paper) return paper.error();
    SheetOptions options;
    options.paper = paper.value();
    if (!arguments.text("language").isEmpty()) options.language = arguments.text("language");
    options.second_language = arguments.text("second");
    options.templates = arguments.text("templates");
    options.record_page = arguments.has("record");
    return options;
}

Result<Job> jobIn(const Arguments& arguments, const Store& store) {
    const auto heat = arguments.required("heat"), cycle = arguments.required("cycle"),
               furnace = arguments.required("furnace");
    if (!heat) return heat.error();
    if (!cycle) return cycle.error();
    if (!furnace) return furnace.error();
    auto job = jobFrom(store, heat.value(), cycle.value(), furnace.value());
    if (!job) return job;
    const auto setpoint_C = arguments.numberIfGiven("setpoint");
    if (!setpoint_C) return setpoint_C.error();
    job.value().setpoint_C = setpoint_C.value();
    return job;
}

}  // namespace

Result<int> sheetCommand(const QStringList& given) {
    const auto read = readArguments(given, kValued, {"json", "record"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto path = arguments.required("store");
    if (!path) return path.error();
    const QString pdf = arguments.text("pdf"), xlsx = arguments.text("xlsx");
    if (pdf.isEmpty() && xlsx.isEmpty())
        return Error{Fault::input, "sheet needs --pdf FILE, --xlsx FILE, or both", {}, {}};
    const auto options = optionsIn(arguments);
    if (!options) return options.error();
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();

    const QString released_by = arguments.text("issue");
    auto store = Store::open(path.value(), released_by.isEmpty() ? Access::read : Access::write);
    if (!store) return std::move(store).error();
    auto shelf = shelfFrom(store.value(), date.value());
    if (!shelf) return std::move(shelf).error();
    if (!arguments.text("band-rule").isEmpty()) shelf.value().rules.band_rule = arguments.text("band-rule");
    const auto job = jobIn(arguments, store.value());
    if (!job) return job.error();

    if (!released_by.isEmpty()) {
        Arguments who = arguments;
        who.values["by"] = released_by;
        if (const auto act = actOf(who, store.value()); !act) return act.error();
    }

    ReportCache cache;
    const auto answer = judge(job.value(), shelf.value(), cache);
    if (!answer) return answer.error();
    const auto content = released_by.isEmpty()
                             ? draftSheet(store.value(), answer.value(), job.value(), shelf.value().rules)
                             : issueSheet(store.value(), answer.value(), job.value(), shelf.value().rules, released_by);
    if (!content) return content.error();
    QStringList notices;
    if (!pdf.isEmpty()) {
        const auto rendered = renderPdf(content.value(), options.value(), pdf, &notices);
        if (!rendered) return rendered.error();
    }
    if (!xlsx.isEmpty()) {
        const auto written = writeSheetWorkbook(content.value(), options.value(), xlsx);
        if (!written) return written.error();
    }

    const SheetContent& sheet = content.value();
    if (arguments.has("json"))
        print(Json{{"pdf", pdf.toStdString()},
                   {"draft", sheet.draft},
                   {"number", sheet.number.toStdString()},
                   {"revision", sheet.revision.toStdString()},
                   {"verdict", word(answer.value().verdict).toStdString()},
                   {"draft_reasons", sheet.draft_reasons.join("; ").toStdString()}});
    else
        print(QString("%1 written to %2. %3\n")
                  .arg(sheet.draft ? QString("Draft") : "Sheet " + sheet.number + " rev " + sheet.revision,
                       pdf.isEmpty() ? xlsx : pdf, answer.value().reason));
    for (const QString& notice : notices) print(notice + "\n");
    return 0;
}

}  // namespace soak::cli
