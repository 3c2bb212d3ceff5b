// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "commands.h"
#include "output.h"
#include "planner/core/sheet_issue.h"
#include "planner/core/shop_floor.h"
#include "planner/sheet/render.h"
#include "planner/sheet/workbook.h"

#include <QDir>
#include <QRegularExpression>

namespace soak::cli {
namespace {

/// A draft sheet for every row that fits, named after heat and cycle; heat numbers may hold what file names must not.
Result<int> writeSheets(const std::vector<TriageRow>& rows, const Store& store, const Shelf& shelf,
                        const QString& folder) {
    if (!QDir().mkpath(folder)) return Error{Fault::store, "cannot make the folder " + folder.toStdString(), {}, {}};
    int written = 0;
    for (const TriageRow& row : rows) {
        if (!row.answer || (row.verdict != Verdict::inside && row.verdict != Verdict::tight)) continue;
        const auto job = jobFrom(store, row.heat, row.cycle, row.furnace);
        if (!job) continue;  // a heat of this file that the store does not hold: the triage row stands, a sheet cannot
        const auto content = draftSheet(store, *row.answer, job.value(), shelf.rules);
        if (!content) return content.error();
        QString name = row.heat + " " + row.cycle + " " + row.furnace;
        name.replace(QRegularExpression("[^A-Za-z0-9 ._-]"), "_");
        const auto rendered = renderPdf(content.value(), {}, folder + "/" + name + ".pdf", nullptr);
        if (!rendered) return rendered.error();
        ++written;
    }
    return written;
}

}  // namespace

Result<int> triageCommand(const QStringList& given) {
    const auto read =
        readArguments(given, {"csv", "store", "furnace", "date", "threads", "band-rule", "sheets", "xlsx"}, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto csv = arguments.required("csv"), path = arguments.required("store");
    if (!csv) return csv.error();
    if (!path) return path.error();
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();
    const auto threads = arguments.numberIfGiven("threads");
    if (!threads) return threads.error();

    auto certificate = readCertificate(csv.value());
    if (!certificate) return std::move(certificate).error();
    auto store = Store::open(path.value(), Access::read);
    if (!store) return std::move(store).error();
    auto shelf = shelfFrom(store.value(), date.value());
    if (!shelf) return std::move(shelf).error();
    if (!arguments.text("band-rule").isEmpty()) shelf.value().rules.band_rule = arguments.text("band-rule");
    auto question = triageFrom(store.value(), certificate.value().delivery(), arguments.text("furnace"));
    if (!question) return std::move(question).error();
    question.value().threads = static_cast<int>(threads.value().value_or(0));

    const auto rows = triage(question.value(), shelf.value());
    if (arguments.has("json")) {
        Json json{{"heats", Json::array()}};
        for (const TriageRow& row : rows) json["heats"].push_back(asJson(row));
        print(json);
    } else {
        print(asText(rows));
    }
    if (const QString folder = arguments.text("sheets"); !folder.isEmpty()) {
        const auto written = writeSheets(rows, store.value(), shelf.value(), folder);
        if (!written) return written.error();
        if (!arguments.has("json")) print(QString("%1 draft sheets written to %2\n").arg(written.value()).arg(folder));
    }
    if (const QString workbook = arguments.text("xlsx"); !workbook.isEmpty()) {
        const auto written = writeTriageWorkbook(rows, shelf.value().rules, workbook);
        if (!written) return written.error();
        if (!arguments.has("json")) print(QString("Workbook written to %1\n").arg(workbook));
    }
    return needsDecision(rows) ? kNeedsDecision : 0;
}

}  // namespace soak::cli
