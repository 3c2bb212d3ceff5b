// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/triage.h"

#include <algorithm>
#include <thread>

#include "db/store.h"

namespace soak {
namespace {

TriageRow blankRow(const DeliveryItem& item, int index) {
    TriageRow row;
    row.heat = item.heat.number;
    row.grade = item.heat.grade;
    row.findings = item.findings;
    row.item = index;
    return row;
}

TriageRow notComputed(TriageRow row, const QString& why) {
    row.verdict = Verdict::notComputed;
    row.reason = "Not computed: " + why;
    return row;
}

/// The order of help: an answer that fits comes before one that does not, more margin before less, a furnace whose
/// tests are in date before one whose tests are not.
bool betterThan(const WindowAnswer& a, const WindowAnswer& b) {
    if (a.band.may_issue != b.band.may_issue) return a.band.may_issue;
    if (a.verdict != b.verdict) return a.verdict < b.verdict;
    return a.margin_K.value_or(-1e9) > b.margin_K.value_or(-1e9);
}

std::vector<Furnace> furnacesFor(const Cycle& cycle, const TriageQuestion& question) {
    std::vector<Furnace> found;
    for (const Furnace& furnace : question.furnaces) {
        const bool named = furnace.id == question.furnace;
        if (question.furnace.isEmpty() ? cycle.furnaces.contains(furnace.id) : named) found.push_back(furnace);
    }
    return found;
}

TriageRow fill(TriageRow row, WindowAnswer answer) {
    row.furnace = answer.furnace;
    row.verdict = answer.verdict;
    row.margin_K = answer.margin_K;
    row.setpoint_C = answer.setpoint_C;
    row.suggested_setpoint_C = answer.suggested_setpoint_C;
    row.reason = answer.reason;
    row.grade_verdict = answer.grade_check.verdict;
    for (const Finding& finding : answer.grade_check.findings) {
        const bool worth_saying = finding.fails || finding.source == "suggestion" || finding.text.contains("missing");
        if (worth_saying) row.findings << "grade: " + finding.text;
    }
    if (!answer.grade_check.suggested.isEmpty())
        row.findings << "nearest grade: " + answer.grade_check.suggested.join(", ");
    row.answer = std::move(answer);
    return row;
}

TriageRow judgeInBest(const DeliveryItem& item, int index, const Cycle& cycle, const TriageQuestion& question,
                      const Shelf& shelf, ReportCache& cache) {
    TriageRow row = blankRow(item, index);
    row.cycle = cycle.name;
    row.setpoint_C = cycle.setpoint_C;
    std::optional<WindowAnswer> best;
    QString trouble = "no furnace for this cycle";
    for (const Furnace& furnace : furnacesFor(cycle, question)) {
        Job job{item.heat, cycle, furnace, {}, {}, false};
        auto answer = judge(job, shelf, cache);
        if (!answer)
            trouble = QString::fromStdString(answer.error().text());
        else if (!best || betterThan(answer.value(), *best))
            best = std::move(answer).value();
    }
    return best ? fill(std::move(row), std::move(*best)) : notComputed(std::move(row), trouble);
}

std::vector<TriageRow> rowsFor(const DeliveryItem& item, int index, const TriageQuestion& question, const Shelf& shelf,
                               ReportCache& cache) {
    if (!item.held.isEmpty()) return {notComputed(blankRow(item, index), "the row is held: " + item.held)};
    const QStringList names = gradeNamesIn(item.heat.grade);
    std::vector<TriageRow> rows;
    for (const Cycle& cycle : question.cycles) {
        const bool serves =
            std::any_of(names.begin(), names.end(), [&](const QString& name) { return cycle.grades.contains(name); });
        if (serves) rows.push_back(judgeInBest(item, index, cycle, question, shelf, cache));
    }
    if (rows.empty())
        rows.push_back(notComputed(blankRow(item, index), "no standing cycle for grade \"" + item.heat.grade + "\""));
    return rows;
}

int severity(const TriageRow& row) {
    return row.verdict == Verdict::noWindow ? 0 : row.verdict == Verdict::notComputed ? 1 : 2;
}

bool worse(const TriageRow& a, const TriageRow& b) {
    if (severity(a) != severity(b)) return severity(a) < severity(b);
    return severity(a) == 2 && *a.margin_K < *b.margin_K;
}

}  // namespace

std::vector<TriageRow> triage(const TriageQuestion& question, const Shelf& shelf,
                              const std::function<void(int, int)>& progress, const std::atomic<bool>* cancelled) {
    const int total = static_cast<int>(question.delivery.size());
    std::vector<std::vector<TriageRow>> by_item(question.delivery.size());
    std::atomic<int> next{0}, done{0};
    const auto work = [&] {
        ReportCache cache;
        for (int i = next++; i < total; i = next++) {
            const auto index = static_cast<std::size_t>(i);
            const DeliveryItem& item = question.delivery[index];
            by_item[index] = cancelled && *cancelled ? std::vector{notComputed(blankRow(item, i), "cancelled")}
                                                     : rowsFor(item, i, question, shelf, cache);
            if (progress) progress(++done, total);
        }
    };
    const int wanted = question.threads > 0 ? question.threads : static_cast<int>(std::thread::hardware_concurrency());
    std::vector<std::jthread> workers;
    for (int i = 1; i < std::min(wanted, total); ++i) workers.emplace_back(work);
    work();
    workers.clear();  // joins

    std::vector<TriageRow> rows;
    for (auto& answered : by_item)
        for (TriageRow& row : answered) rows.push_back(std::move(row));
    std::stable_sort(rows.begin(), rows.end(), worse);
    return rows;
}

bool needsDecision(const std::vector<TriageRow>& rows) {
    return std::any_of(rows.begin(), rows.end(), [](const TriageRow& row) {
        return row.verdict != Verdict::inside && row.verdict != Verdict::tight;
    });
}

}  // namespace soak
