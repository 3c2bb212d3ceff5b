// SPDX-License-Identifier: GPL-3.0-or-later
// Fits the estimated parameters that a task names to its calibration rows and shows the error on both halves:
//   fit_data planner/fit/tasks/duplex.toml            looks only
//   fit_data planner/fit/tasks/duplex.toml --write    writes values and `fitted_to` into thermo/data, and moves the
//   rows
//                                                     from equilibrium_checks.csv to calibration_rows.csv
// A row means what it means to `soakwright evidence`: both compute it with the same function.
#include <QTemporaryDir>
#include <cmath>
#include <cstdio>
#include <fstream>
#include <thread>

#include "base/folders.h"
#include "planner/core/evidence_compute.h"
#include "planner/fit/least_squares.h"
#include "planner/fit/task.h"

namespace fs = std::filesystem;
using namespace soak;
using namespace soak::fit;

namespace {

constexpr double kStepShare = 0.02;  // of an unknown's sigma, for differences
constexpr double kLostRow = 10;      // residual of a row that cannot be computed: far from any fit, but finite

using Rows = std::vector<EvidenceRow>;

Rows rowsOf(const Rows& all, const QStringList& ids) {
    Rows chosen;
    for (const QString& id : ids)
        for (const EvidenceRow& row : all)
            if (row.id == id) chosen.push_back(row);
    return chosen;
}

/// A copy of the data set in which values may be tried.
class Trial {
public:
    Trial(const Task& task, fs::path set) : task_(task), set_(std::move(set)) {
        fs::copy(set_, folder(), fs::copy_options::recursive);
    }
    /// Fills `computed` of the rows with these values in the data.
    Result<Done> compute(const Values& values, Rows& rows) const {
        if (auto done = writeValues(task_, folder(), values); !done) return done;
        auto data = loadDataSet(folder());
        if (!data) return std::move(data).error();
        const auto work = [&](size_t from) {
            for (size_t at = from; at < rows.size(); at += 2) {
                EvidenceRow& row = rows[at];
                const auto computed = computeRow(row, data.value(), row.remark);
                row.computed = computed ? std::optional(computed.value()) : std::nullopt;
            }
        };
        std::thread other(work, 1);
        work(0);
        other.join();
        return Done{};
    }

private:
    fs::path folder() const { return fs::path(scratch_.path().toStdString()) / task_.set; }
    const Task& task_;
    fs::path set_;
    QTemporaryDir scratch_;
};

Eigen::VectorXd residualsOf(const Task& task, const Values& values, const Rows& rows) {
    Eigen::VectorXd r(static_cast<Eigen::Index>(rows.size() + values.size()));
    Eigen::Index at = 0;
    for (const EvidenceRow& row : rows) r[at++] = row.computed ? *row.difference() / row.scatter : kLostRow;
    for (size_t k = 0; k < values.size(); ++k) r[at++] = (values[k] - task.unknowns[k].prior) / task.unknowns[k].sigma;
    return r;
}

void print(const char* title, const Rows& before, const Rows& after) {
    std::printf("\n%s\n", title);
    double was = 0, is = 0;
    for (size_t n = 0; n < after.size(); ++n) {
        const double old_off = before[n].difference().value_or(NAN), off = after[n].difference().value_or(NAN);
        std::printf("  %-7s %-18s %-14s %10.4g  %+10.3g -> %+10.3g  (scatter %.3g)\n", qPrintable(after[n].id),
                    qPrintable(after[n].kind), qPrintable(after[n].phase.left(14)), *after[n].value, old_off, off,
                    after[n].scatter);
        was += std::pow(old_off / after[n].scatter, 2);
        is += std::pow(off / after[n].scatter, 2);
    }
    if (!after.empty())
        std::printf("  root mean square, in units of the rows' scatter: %.2f -> %.2f\n",
                    std::sqrt(was / static_cast<double>(after.size())),
                    std::sqrt(is / static_cast<double>(after.size())));
}

/// Rows that data are fitted to are no evidence any more.
Result<Done> moveRows(const QStringList& ids) {
    const fs::path from = productPath("tests/published/equilibrium_checks.csv");
    const fs::path to = productPath("tests/published/calibration_rows.csv");
    std::ifstream in(from);
    std::string kept, moved;
    for (std::string line; std::getline(in, line);)
        (ids.contains(QString::fromStdString(line.substr(0, line.find(',')))) ? moved : kept) += line + "\n";
    in.close();
    std::ofstream(to, std::ios::app) << moved;
    std::ofstream out(from, std::ios::trunc);
    out << kept;
    return out.good() ? Result<Done>(Done{}) : Error{Fault::store, from.string() + ": not written", {}, {}};
}

Result<Done> run(const fs::path& file, bool write) {
    const auto task = readTask(file);
    if (!task) return task.error();
    const auto all = readEvidence();
    if (!all) return all.error();
    const fs::path set = productPath("thermo/data") / task.value().set;
    const Trial trial(task.value(), set);
    const size_t count = task.value().unknowns.size();
    Eigen::VectorXd start(count), step(count);
    for (size_t k = 0; k < count; ++k) {
        start[static_cast<Eigen::Index>(k)] = task.value().unknowns[k].start;
        step[static_cast<Eigen::Index>(k)] = kStepShare * task.value().unknowns[k].sigma;
    }
    Rows rows = rowsOf(all.value(), task.value().calibrate), aside = rowsOf(all.value(), task.value().check);
    if (rows.size() != static_cast<size_t>(task.value().calibrate.size()) ||
        aside.size() != static_cast<size_t>(task.value().check.size()))
        return Error{Fault::data, "a row that the task names is not in tests/published", {}, {file.string()}};
    const auto valuesOf = [](const Eigen::VectorXd& v) { return Values(v.data(), v.data() + v.size()); };

    Rows before = rows, aside_before = aside;
    for (Rows* half : {&before, &aside_before})
        if (auto done = trial.compute(valuesOf(start), *half); !done) return done;
    const auto solution = leastSquares(
        [&](const Eigen::VectorXd& v) -> Result<Eigen::VectorXd> {
            if (auto done = trial.compute(valuesOf(v), rows); !done) return std::move(done).error();
            return residualsOf(task.value(), valuesOf(v), rows);
        },
        start, step);
    if (!solution) return solution.error();

    std::printf("%s\nsplit: %s\n", task.value().subject.c_str(), task.value().rule.c_str());
    Values values = valuesOf(solution.value().values);
    for (size_t k = 0; k < count; ++k) {
        const Unknown& unknown = task.value().unknowns[k];
        values[k] = std::round(values[k] / unknown.round) * unknown.round;
        std::printf("  %s = %.8g, one standard deviation %.2g (began at %g)\n", unknown.name.c_str(), values[k],
                    solution.value().deviation[static_cast<Eigen::Index>(k)], unknown.start);
    }
    for (Rows* half : {&rows, &aside})
        if (auto done = trial.compute(values, *half); !done) return done;
    print("fitted to (no evidence)", before, rows);
    print("kept aside (evidence)", aside_before, aside);
    if (!write) return Done{};
    if (auto done = writeValues(task.value(), set, values); !done) return done;
    return moveRows(task.value().calibrate);
}

}  // namespace

int main(int count, char** words) {
    const std::vector<std::string> given(words + 1, words + count);
    const bool write = given.size() == 2 && given[1] == "--write";
    if (given.empty() || (given.size() > 1 && !write)) {
        std::fputs("fit_data TASK.toml [--write]\n", stderr);
        return 2;
    }
    const auto done = run(given[0], write);
    if (!done) std::fprintf(stderr, "%s\n", done.error().text().c_str());
    return done ? 0 : 3;
}
