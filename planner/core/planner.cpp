// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/planner.h"

#include <algorithm>
#include <cmath>

#include "base/folders.h"
#include "planner/core/band.h"
#include "planner/core/chance.h"
#include "planner/core/cooling.h"
#include "planner/core/coverage.h"
#include "planner/core/grade_check.h"
#include "planner/core/limit_making.h"
#include "planner/core/limits.h"
#include "planner/core/quench_outlook.h"
#include "planner/core/remedies.h"
#include "planner/core/times.h"
#include "planner/core/units_text.h"
#include "planner/core/verdict.h"

namespace soak {
namespace {

constexpr std::size_t kMostReports = 16;  // heats come one after another; a sweep is a few megabytes

bool knows(const DataSetFacts& facts, const std::string& element) {
    return std::find(facts.elements.begin(), facts.elements.end(), element) != facts.elements.end();
}

const Content* contentOf(const Analysis& analysis, const std::string& element) {
    const auto at = analysis.find(element);
    return at == analysis.end() ? nullptr : &at->second;
}

/// What goes into the equilibrium. "Less than" values enter at their bound; each limit then looks at the unsafe end.
Chemistry chemistryOf(const Analysis& analysis, const DataSetFacts& facts) {
    Chemistry chemistry;
    chemistry.balance = facts.balance;
    for (const auto& [element, content] : analysis)
        if (content.wt && element != facts.balance && knows(facts, element)) chemistry.wt[element] = *content.wt;
    return chemistry;
}

/// Kept and grade-checked, but not in the equilibrium; values that stand for "not detected" are said too.
void sayWhatIsLeftOut(WindowAnswer& answer, const Analysis& analysis, const DataSetFacts& facts) {
    for (const auto& [element, content] : analysis) {
        const QString symbol = QString::fromStdString(element);
        if (element == kOthersEach || element == kOthersTotal) continue;  // sums of what is listed one by one
        if (content.wt && !knows(facts, element))
            answer.left_out << symbol + " " + (content.raw.isEmpty() ? QString::number(*content.wt) : content.raw);
        if (!content.wt && !content.raw.trimmed().isEmpty() && knows(facts, element))
            answer.remarks << QString("%1 \"%2\" is no number: computed without %1").arg(symbol, content.raw);
        if (content.wt && content.less_than && knows(facts, element))
            answer.remarks << QString("%1 %2: each limit takes the end that is unsafe for it").arg(symbol, content.raw);
    }
}

/// Elements without which no computed limit is trusted: the family's, and those that the grade requires.
QStringList missingElements(const Analysis& analysis, const Family& family, const Grade* row,
                            const DataSetFacts& facts) {
    QStringList needed = family.needs;
    if (row) {
        for (const auto& [element, limit] : row->limits)
            if (limit.min_wt && *limit.min_wt > 0) needed << QString::fromStdString(element);
        for (const QString& rule : row->rules)
            if (rule.contains(">=")) needed << applyRule(rule, analysis).elements;
    }
    QStringList missing;
    for (const QString& element : needed) {
        const std::string symbol = element.toStdString();
        const Content* content = contentOf(analysis, symbol);
        const bool there = content && content->wt;
        if (!there && symbol != facts.balance && knows(facts, symbol) && !missing.contains(element)) missing << element;
    }
    return missing;
}

/// Which elements of this heat moved a limit to the unsafe side, against the middle of the grade's ranges.
QString driversOf(const Limit& limit, const Analysis& analysis, const Grade& row) {
    struct Push {
        double K;
        QString text;
        bool high;
    };
    std::vector<Push> pushes;
    for (const auto& [element, slope] : limit.K_per_wt) {
        const Content* content = contentOf(analysis, element);
        const auto range = row.limits.find(element);
        if (!content || !content->wt || range == row.limits.end() || !range->second.max_wt) continue;
        const double off_middle = *content->wt - (*range->second.max_wt + range->second.min_wt.value_or(0)) / 2;
        const double unsafe_K = (limit.side == Side::floor ? 1 : -1) * slope * off_middle;
        if (unsafe_K >= 2)
            pushes.push_back({unsafe_K, QString::fromStdString(element) + " " + content->raw, off_middle > 0});
    }
    std::sort(pushes.begin(), pushes.end(), [](const Push& a, const Push& b) { return a.K > b.K; });
    QStringList high, low;
    for (const Push& push : pushes) (push.high ? high : low) << push.text;
    QStringList parts;
    if (!high.isEmpty()) parts << listed(high) + " high for the grade";
    if (!low.isEmpty()) parts << listed(low) + " low for the grade";
    return parts.join(", ");
}

bool speaksOf(const PublishedTreatment& treatment, const Grade& row) {
    const QString& key = treatment.grade_key;
    if (row.id == key || row.id.startsWith(key + "-")) return true;
    const QString name = key.section('-', 1);
    return row.names.contains(name, Qt::CaseInsensitive);
}

QStringList publishedRanges(const Shelf& shelf, const Grade& row, const QString& kind) {
    QStringList lines;
    for (const PublishedTreatment& one : shelf.published) {
        if (one.kind != kind || !speaksOf(one, row)) continue;
        const QString range = one.low_C && one.high_C ? celsiusText(*one.low_C) + " to " + celsiusText(*one.high_C)
                              : one.low_C             ? "at least " + celsiusText(*one.low_C)
                              : one.high_C            ? "at most " + celsiusText(*one.high_C)
                                                      : QString("no temperature");
        lines << range + ", " + one.source + (one.seen == "memory" ? " (from memory)" : "");
    }
    return lines;
}

/// Limits of people and of tables need no equilibrium.
bool needsPhysics(const CycleLimit& limit) {
    static const QStringList without{"specification", "specification_if", "furnace", "quench_delay",
                                     "tempered_hardness"};
    return !without.contains(limit.kind) && !(limit.kind == "avoid" && limit.phase.isEmpty());
}

/// The shop's own soak for the governing section, minutes; nothing when its rule is words only.
std::optional<double> soakByRule_min(const Job& job) {
    const Cycle& cycle = job.cycle;
    if (cycle.soak_per_25mm_min == 0)
        return cycle.soak_base_min > 0 ? std::optional(cycle.soak_base_min) : std::nullopt;
    if (!job.heat.section_mm) return std::nullopt;
    const double minutes =
        cycle.soak_base_min + cycle.soak_per_25mm_min * std::max(0.0, *job.heat.section_mm - cycle.soak_free_mm) / 25;
    return minutes > 0 ? std::optional(minutes) : std::nullopt;
}

/// The quenches that both the cycle and the furnace name, in the cycle's order.
std::vector<Quench> quenchesOf(const Job& job, const Shelf& shelf) {
    std::vector<Quench> shared;
    for (const QString& id : job.cycle.quenches)
        for (const Quench& quench : shelf.quenches)
            if (quench.id == id && job.furnace.quenches.contains(id)) shared.push_back(quench);
    return shared;
}

/// Every limit of the cycle, and the furnace's own range where the cycle does not speak of it.
std::vector<CycleLimit> limitsOf(const Job& job, const Family& family) {
    std::vector<CycleLimit> limits = limitsFor(job.cycle, family);
    const bool has_furnace =
        std::any_of(limits.begin(), limits.end(), [](const CycleLimit& one) { return one.kind == "furnace"; });
    if (!has_furnace && !job.furnace.id.isEmpty()) {
        CycleLimit furnace;
        furnace.kind = "furnace";
        furnace.because = "the furnace is not built or surveyed for more";
        furnace.source = "furnace record";
        limits.push_back(furnace);
    }
    return limits;
}

WindowAnswer begin(const Job& job, const QString& family) {
    WindowAnswer answer;
    answer.heat = job.heat.number;
    answer.grade = job.heat.grade;
    answer.family = family;
    answer.cycle = job.cycle.name;
    answer.kind = job.cycle.kind;
    answer.furnace = job.furnace.id;
    answer.setpoint_C = job.setpoint_C.value_or(job.cycle.setpoint_C);
    answer.program_version = SOAKWRIGHT_VERSION;
    return answer;
}

WindowAnswer notComputed(WindowAnswer answer, const QString& why) {
    answer.verdict = Verdict::notComputed;
    answer.reason = "Not computed: " + why + ".";
    return answer;
}

/// Where the data extrapolate, a computed limit is less sure than its family's published cases show.
void widen(Limit& limit, double by_K) {
    if (limit.model_K <= 0) return;  // set, not computed
    limit.model_K = std::hypot(limit.model_K, by_K);
    limit.uncertainty_K = std::hypot(limit.uncertainty_K, by_K);
}

/// Sweep and limits; what fails on the way is said in the limits themselves.
void computeLimits(WindowAnswer& answer, const Job& job, const Shelf& shelf, const Family& family, const Grade* row,
                   ReportCache& cache) {
    const auto& data = shelf.data_sets.at(family.data_set);
    const DataSetFacts& known = facts(*data);
    sayWhatIsLeftOut(answer, job.heat.analysis, known);
    const auto limits = limitsOf(job, family);
    const Chemistry chemistry = chemistryOf(job.heat.analysis, known);
    answer.chemistry_wt = chemistry.wt;

    LimitContext context;
    context.analysis = &job.heat.analysis;
    context.book = &shelf.book;
    context.family = family.name;
    context.missing = missingElements(job.heat.analysis, family, row, known);
    context.furnace = job.furnace;
    context.reference_C = job.cycle.setpoint_C;
    context.soak_min = soakByRule_min(job);
    if (row) context.grade_names = row->names + row->near_names;
    const bool needs_physics = std::any_of(limits.begin(), limits.end(), needsPhysics);
    const SetUse& use = shelf.book.uses.at(family.data_set);
    context.report_missing = whyNotCovered(job.heat.analysis, known, use);
    if (needs_physics && context.missing.isEmpty() && context.report_missing.isEmpty()) {
        auto report = cache.of(data, chemistry, family.phases, use.from_C, use.to_C);
        if (report)
            context.report = report.value();
        else
            context.report_missing = QString::fromStdString(report.error().text());
    }
    const QStringList extrapolated = extrapolations(chemistry.wt, known, use);
    for (const QString& what : extrapolated) answer.remarks << "extrapolated, uncertainty widened: " + what;
    for (const CycleLimit& limit : limits)
        for (Limit& made : evaluate(limit, context)) {
            if (!extrapolated.isEmpty()) widen(made, shelf.book.least_scatter_K);
            if (row && made.temperature_C && !made.set) made.drivers = driversOf(made, job.heat.analysis, *row);
            (made.side == Side::floor ? answer.floors : answer.ceilings).push_back(std::move(made));
        }
    if (context.report && job.keep_sweep) answer.sweep = context.report->sweep();
    answer.soak =
        soakOf({&answer, &context, job.heat.section_mm, job.heat.product_form, job.furnace.kind, context.soak_min});
    for (const auto& [element, content] : job.heat.analysis)
        if (content.wt && knows(known, element))
            answer.sigma_wt[element] = std::hypot(
                rounding_wt(content), content.less_than ? 0 : shelf.book.laboratory_wt(element, *content.wt));
    if (job.cycle.kind == "harden" || job.cycle.kind == "normalise")
        answer.quench_outlook = quenchOutlook(context, {answer.band.low_C, answer.setpoint_C, answer.band.high_C});
    const auto quenches = quenchesOf(job, shelf);
    answer.cooling = coolingOf(
        {&answer.floors, &limits, &context, answer.band.low_C, job.heat.section_mm, job.heat.product_form, &quenches});
}

/// What the way to the quench and the quench cost in strength, where a C-curve of the grade is published.
void sayQuenchCost(WindowAnswer& answer, const Job& job, const Shelf& shelf, const Grade* row) {
    const auto quenches = quenchesOf(job, shelf);
    const CCurve* curve = row ? shelf.book.quench.curveOf(row->names) : nullptr;
    const Metal* metal = shelf.book.kinetics.metalOf(answer.family);
    if (!curve || !metal || quenches.empty() || !job.heat.section_mm || answer.band.rule.isEmpty()) return;
    const Quench& quench = quenches.front();
    const auto medium = shelf.book.quench.filmOf(quench.medium);
    if (!medium) return;
    const bool round = job.heat.product_form == "bar" || job.heat.product_form == "ring";
    const double air = shelf.book.kinetics.transferOf("still air").convection_W_per_m2K;
    const QuenchCost cost = quenchCost(*curve, *metal, *job.heat.section_mm, round, answer.band.low_C,
                                       quench.transfer_max_s, {20, air, metal->emissivity}, *medium);
    answer.remarks << QString(
                          "quench of %1 in %2: quench factor %3 in the middle of %4, %5 of it on the way; about %6 of "
                          "the strength of temper %7 is kept (rule of thumb: %8)")
                          .arg(row->names.first(), quench.id, number(cost.factor, 1),
                               withUnit(*job.heat.section_mm, "mm"), number(cost.factor_on_the_way, 1),
                               withUnit(std::floor(100 * cost.kept), "%"), curve->temper, curve->source);
}

void sayEvidence(WindowAnswer& answer) {
    QStringList thin;
    for (const auto* side : {&answer.floors, &answer.ceilings})
        for (const Limit& limit : *side) {
            if (!limit.disagreement.isEmpty()) answer.remarks << limit.cause + ": " + limit.disagreement;
            if (!limit.temperature_C || limit.remark.isEmpty()) continue;
            if (limit.remark.startsWith("little evidence"))
                thin << limit.cause;
            else
                answer.remarks << limit.cause + ": " + limit.remark;
        }
    thin.removeDuplicates();
    if (!thin.isEmpty()) answer.remarks << "little evidence behind: " + listed(thin);
}

/// The crew cannot set what the controller does not take.
void sayOffStep(WindowAnswer& answer, const Furnace& furnace) {
    const double off_K = stepUp_C(furnace, answer.setpoint_C) - stepDown_C(furnace, answer.setpoint_C);
    if (furnace.id.isEmpty() || off_K < 1e-6) return;
    answer.remarks << QString("%1 is not on the controller's step of %2")
                          .arg(temperatureText(answer.setpoint_C, furnace.controller_fahrenheit),
                               withUnit(furnace.step, furnace.controller_fahrenheit ? "°F" : "°C"));
}

/// With one element missing: what the ends of its range in the grade would give. Never a verdict.
void sayWhatIf(WindowAnswer& answer, const Job& job, const Shelf& shelf, const Family& family, const Grade& row,
               ReportCache& cache) {
    const DataSetFacts& known = facts(*shelf.data_sets.at(family.data_set));
    const QStringList missing = missingElements(job.heat.analysis, family, &row, known);
    if (missing.size() != 1) return;
    const std::string element = missing.first().toStdString();
    const auto range = row.limits.find(element);
    if (range == row.limits.end() || !range->second.min_wt || !range->second.max_wt) return;
    for (const double wt : {*range->second.min_wt, *range->second.max_wt}) {
        Job supposed = job;
        supposed.keep_sweep = false;
        supposed.heat.analysis[element] = {QString::number(wt), wt, false, 0, "supposed"};
        const auto outcome = judge(supposed, shelf, cache);
        if (outcome)
            answer.remarks << QString("what if %1 were %2 (supposed, no verdict): %3")
                                  .arg(missing.first(), withUnit(wt, "%", 2), outcome.value().reason);
    }
}

}  // namespace

QString familyOf(const Job& job, const Shelf& shelf) {
    if (!job.family.isEmpty()) return job.family;
    const Grade* row = mainRow(job.heat, shelf.grades);
    return row ? row->family : QString();
}

std::vector<CycleLimit> limitsFor(const Cycle& cycle, const Family& family) {
    if (!cycle.limits.empty()) return cycle.limits;
    const FamilyKind* kind = family.find(cycle.kind);
    return kind ? kind->limits : std::vector<CycleLimit>{};
}

Result<Shelf> makeShelf(std::vector<Grade> grades, std::vector<PublishedTreatment> published, ShopRules rules) {
    auto book = loadFamilyBook();
    if (!book) return std::move(book).error();
    Shelf shelf{{}, std::move(grades), std::move(published), std::move(book).value(), std::move(rules), {}, {}};
    for (const Family& family : shelf.book.families) {
        if (shelf.data_sets.count(family.data_set)) continue;
        if (!shelf.book.uses.count(family.data_set))
            return Error{
                Fault::data,
                "planner/core/data/sweep.toml has no row for the data set \"" + family.data_set.toStdString() + "\"",
                {},
                {}};
        auto data = loadDataSet(productPath("thermo/data") / family.data_set.toStdString());
        if (!data) return std::move(data).error();
        shelf.data_sets[family.data_set] = std::move(data).value();
    }
    return shelf;
}

Result<AlloyReport*> ReportCache::of(const std::shared_ptr<const DataSet>& data, const Chemistry& chemistry,
                                     const PhaseChoice& choice, double from_C, double to_C) {
    std::string key = facts(*data).version + " " + std::to_string(from_C) + " " + std::to_string(to_C);
    for (const auto& [element, wt] : chemistry.wt)
        key += " " + element + "=" + QString::number(wt, 'g', 17).toStdString();
    for (const auto& phase : choice.with) key += " +" + phase;
    for (const auto& phase : choice.without) key += " -" + phase;
    if (const auto known = reports_.find(key); known != reports_.end()) return known->second.get();
    auto made = AlloyReport::make(data, chemistry, choice, from_C, to_C);
    if (!made) return std::move(made).error();
    if (reports_.size() >= kMostReports) reports_.clear();
    auto& kept = reports_[key] = std::make_unique<AlloyReport>(std::move(made).value());
    return kept.get();
}

Result<WindowAnswer> judge(const Job& job, const Shelf& shelf, ReportCache& cache) {
    const Grade* row = mainRow(job.heat, shelf.grades);
    WindowAnswer answer = begin(job, familyOf(job, shelf));
    answer.grade_check = checkGrade(job.heat, shelf.grades);
    if (row) answer.published = publishedRanges(shelf, *row, job.cycle.kind);
    if (answer.family.isEmpty())
        return notComputed(answer, "grade \"" + job.heat.grade + "\" is not in the library; name a family");
    const Family* family = shelf.book.find(answer.family);
    if (!family) return notComputed(answer, "the family \"" + answer.family + "\" is not in data/families.toml");
    const DataSetFacts& known = facts(*shelf.data_sets.at(family->data_set));
    answer.data_set = QString::fromStdString(known.name);
    answer.data_version = QString::fromStdString(known.version);
    if (!family->phase_rule.isEmpty()) answer.remarks << family->phase_rule;
    if (limitsFor(job.cycle, *family).empty())
        return notComputed(answer, "the cycle has no limits, and none are known for \"" + job.cycle.kind +
                                       "\" of the family " + answer.family + "; give the cycle its limits");
    const auto notes = [&](const char* place) {
        return notesFor(shelf.book.sheet_notes, place, family->name, job.cycle.kind, job.furnace.kind);
    };
    answer.if_wrong = notes("if wrong");
    answer.load_notes = notes("load");

    auto band = bandOrSetpoint(job.furnace, answer.setpoint_C, shelf.rules);
    if (!band) return std::move(band).error();
    answer.band = std::move(band).value();

    sayOffStep(answer, job.furnace);

    computeLimits(answer, job, shelf, *family, row, cache);
    decide(answer, job.furnace, shelf.rules);
    const bool has_window = answer.verdict != Verdict::notComputed && answer.verdict != Verdict::noWindow;
    if (has_window) {
        answer.suggested_setpoint_C = suggestSetpoint(answer, job.furnace, shelf.rules, job.cycle.setpoint_C);
        decide(answer, job.furnace, shelf.rules);  // again: the reason may name the suggestion
    }
    answer.chance_inside = chanceInside(answer);
    answer.remedies = remediesFor(answer, job.furnace, shelf.furnaces, job.cycle.furnaces, shelf.rules);
    sayQuenchCost(answer, job, shelf, row);
    sayEvidence(answer);
    if (row && answer.verdict == Verdict::notComputed) sayWhatIf(answer, job, shelf, *family, *row, cache);
    return answer;
}

Result<WindowAnswer> atSetpoint(WindowAnswer answer, const Furnace& furnace, const ShopRules& rules,
                                double setpoint_C) {
    auto band = bandOrSetpoint(furnace, setpoint_C, rules);
    if (!band) return std::move(band).error();
    answer.band = std::move(band).value();
    answer.setpoint_C = setpoint_C;
    if (answer.floors.empty() && answer.ceilings.empty()) return answer;
    decide(answer, furnace, rules);
    answer.chance_inside = chanceInside(answer);
    return answer;
}

}  // namespace soak
