// SPDX-License-Identifier: GPL-3.0-or-later
#include <cmath>
#include <cstdio>

#include "arguments.h"
#include "commands.h"
#include "json_parts.h"
#include "planner/core/grade_study.h"
#include "planner/core/shop_floor.h"
#include "planner/core/units_text.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

QString percent(double share) { return withUnit(100 * share, "%", 1); }

Result<Grade> gradeNamed(const Shelf& shelf, const QString& id) {
    QStringList alike;
    for (const Grade& grade : shelf.grades) {
        if (grade.id == id) return grade;
        if (grade.id.contains(id, Qt::CaseInsensitive) || grade.names.contains(id)) alike << grade.id;
    }
    return refuse("--grade: no row \"" + id + "\" in the grade library" +
                  (alike.isEmpty() ? "" : "; there are " + alike.join(", ")));
}

QString rangeText(const std::string& element, const std::pair<double, double>& range) {
    const int decimals = range.second < 0.2 ? 3 : 2;
    return QString("%1 %2 to %3")
        .arg(QString::fromStdString(element), number(range.first, decimals), number(range.second, decimals));
}

QString chemistryText(const std::map<std::string, double>& wt) {
    QStringList parts;
    for (const auto& [element, amount] : wt)
        parts << QString::fromStdString(element) + " " + number(amount, amount < 0.2 ? 3 : 2);
    return parts.join(", ");
}

QString asText(const GradeStudy& study, const StudyQuestion& question) {
    QString text = QString("%1, %2 at %3 in %4: serves %5 of %6 drawn chemistries, %7 (95 %: %8 to %9)\n")
                       .arg(question.grade.id, question.cycle.name, temperatureText(question.cycle.setpoint_C),
                            question.furnace.id)
                       .arg(study.works)
                       .arg(study.samples)
                       .arg(percent(study.share), percent(study.share_low), percent(study.share_high));
    if (study.cancelled) text += "Cancelled before the end.\n";
    if (study.not_computed > 0) text += QString("  %1 could not be computed\n").arg(study.not_computed);
    for (const auto& [cause, count] : study.causes) text += QString("  %1 fail: %2\n").arg(count).arg(cause);
    text += "Worst corners:\n";
    for (const StudySample& one : study.worst)
        text += "  " + (one.margin_K ? withUnit(std::floor(*one.margin_K), "K") : word(one.verdict)) + ": " +
                chemistryText(one.wt) + "\n";
    if (!study.tightened) return text + "No tightened limits were found.\n";
    const TightenedLimits& limits = *study.tightened;
    if (limits.tightened.empty()) {
        text += "The grade's own limits need no tightening";
    } else {
        text += "Tightened limits for the purchase order, wt%:\n";
        for (const std::string& element : limits.tightened)
            text += "  " + rangeText(element, limits.wt.at(element)) + "\n";
        text += QString("  they keep %1 of the grade's volume").arg(percent(limits.volume_share));
    }
    return text + QString("; %1 of %2 chemistries drawn anew are served: at least %3 with confidence %4\n")
                      .arg(limits.fresh_inside)
                      .arg(limits.fresh)
                      .arg(percent(question.wanted_share), percent(limits.confidence));
}

Json asJson(const GradeStudy& study, const StudyQuestion& question) {
    Json worst = Json::array(), causes = Json::array();
    for (const StudySample& one : study.worst)
        worst.push_back({{"verdict", plain(word(one.verdict))},
                         {"margin_K", optional(one.margin_K)},
                         {"reason", plain(one.reason)},
                         {"wt", Json(one.wt)}});
    for (const auto& [cause, count] : study.causes) causes.push_back({{"cause", plain(cause)}, {"count", count}});
    Json tightened(nullptr);
    if (study.tightened) {
        Json wt = Json::object();
        for (const auto& [element, range] : study.tightened->wt)
            wt[element] = {{"low", range.first}, {"high", range.second}};
        tightened = {{"wt", wt},
                     {"tightened", Json(study.tightened->tightened)},
                     {"volume_share", study.tightened->volume_share},
                     {"fresh", study.tightened->fresh},
                     {"fresh_inside", study.tightened->fresh_inside},
                     {"confidence", study.tightened->confidence}};
    }
    return {{"grade", plain(question.grade.id)},
            {"cycle", plain(question.cycle.name)},
            {"furnace", plain(question.furnace.id)},
            {"seed", question.seed},
            {"samples", study.samples},
            {"works", study.works},
            {"not_computed", study.not_computed},
            {"share", study.share},
            {"share_low", study.share_low},
            {"share_high", study.share_high},
            {"causes", causes},
            {"worst", worst},
            {"tightened", tightened}};
}

Result<Done> readCounts(const Arguments& arguments, StudyQuestion& question) {
    const auto count = [&](const QString& name, int& into, int least) -> Result<Done> {
        const auto given = arguments.numberIfGiven(name);
        if (!given) return given.error();
        if (!given.value()) return Done{};
        if (*given.value() < least || *given.value() > 1e6 || *given.value() != std::floor(*given.value()))
            return refuse("--" + name + ": a whole number from " + QString::number(least) + " to 1000000 is needed");
        into = static_cast<int>(*given.value());
        return Done{};
    };
    int seed = 1;
    for (const auto& done : {count("samples", question.samples, 20), count("fresh", question.fresh, 0),
                             count("threads", question.threads, 0), count("seed", seed, 0)})
        if (!done) return done.error();
    question.seed = static_cast<std::uint64_t>(seed);
    return Done{};
}

}  // namespace

Result<int> gradeCommand(const QStringList& given) {
    const auto read = readArguments(
        given, {"grade", "cycle", "furnace", "store", "samples", "fresh", "seed", "threads", "date", "band-rule"},
        {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto id = arguments.required("grade"), path = arguments.required("store"),
               cycle_name = arguments.required("cycle"), furnace_name = arguments.required("furnace");
    for (const auto* needed : {&id, &path, &cycle_name, &furnace_name})
        if (!*needed) return needed->error();
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();
    auto store = Store::open(path.value(), Access::read);
    if (!store) return std::move(store).error();
    auto shelf = shelfFrom(store.value(), date.value());
    if (!shelf) return std::move(shelf).error();
    if (!arguments.text("band-rule").isEmpty()) shelf.value().rules.band_rule = arguments.text("band-rule");
    StudyQuestion question;
    auto grade = gradeNamed(shelf.value(), id.value());
    if (!grade) return std::move(grade).error();
    auto cycle = store.value().cycle(cycle_name.value());
    if (!cycle) return std::move(cycle).error();
    auto furnace = store.value().furnace(furnace_name.value());
    if (!furnace) return std::move(furnace).error();
    question.grade = std::move(grade).value();
    question.cycle = std::move(cycle).value();
    question.furnace = std::move(furnace).value();
    if (auto done = readCounts(arguments, question); !done) return std::move(done).error();

    const bool quiet = arguments.has("json");
    const auto study = studyGrade(question, shelf.value(), [quiet](int done, int of) {
        if (!quiet && (done % 20 == 0 || done == of)) std::fprintf(stderr, "\r%d of %d", done, of);
    });
    if (!quiet) std::fputs("\n", stderr);
    if (!study) return study.error();
    quiet ? print(asJson(study.value(), question)) : print(asText(study.value(), question));
    return 0;
}

}  // namespace soak::cli
