// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/sheet_issue.h"

#include <QCryptographicHash>

#include "planner/core/grade_check.h"
#include "planner/core/sheet_json.h"

namespace soak {
namespace {

constexpr int kShownHash = 12;  // as on an issued sheet

}  // namespace

Result<SheetContent> draftSheet(const Store& store, const WindowAnswer& answer, const Job& job,
                                const ShopRules& rules) {
    auto quenches = store.quenches();
    if (!quenches) return std::move(quenches).error();
    auto cautions = store.cautions();
    if (!cautions) return std::move(cautions).error();
    auto grades = store.grades();
    if (!grades) return std::move(grades).error();
    SheetRequest request{answer, job, rules, std::move(quenches).value(), std::move(cautions).value(), {}};
    if (const Grade* row = mainRow(job.heat, grades.value()))
        request.specification = row->edition == "unknown" ? row->standard : row->standard + ":" + row->edition;
    SheetContent content = makeSheet(request);
    content.content_hash =
        QCryptographicHash::hash(sheetJson(content), QCryptographicHash::Sha256).toHex().left(kShownHash);
    return content;
}

Result<SheetContent> issueSheet(Store& store, const WindowAnswer& answer, const Job& job, const ShopRules& rules,
                                const QString& released_by) {
    const QStringList obstacles = obstaclesToIssue(answer);
    if (!obstacles.isEmpty())
        return Error{
            Fault::input,
            ("this sheet may not be issued: " + obstacles.join("; ") + ". A draft can be printed.").toStdString(),
            {},
            {}};
    auto drafted = draftSheet(store, answer, job, rules);
    if (!drafted) return drafted;
    SheetContent content = std::move(drafted).value();

    Sheet sheet;
    sheet.heat = job.heat.number;
    sheet.cycle = job.cycle.name;
    sheet.cycle_revision = job.cycle.revision;
    sheet.furnace = job.furnace.id;
    sheet.content = sheetJson(content);
    sheet.issued_by = released_by;
    const auto stored = store.issueSheet(sheet, rules.today);
    if (!stored) return stored.error();
    return issuedContent(stored.value());
}

}  // namespace soak
