// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/grade_study.h"

#include <algorithm>
#include <cmath>
#include <random>
#include <thread>

#include "planner/core/grade_rule.h"
#include "planner/core/limit_making.h"
#include "planner/core/verdict.h"

namespace soak {
namespace {

constexpr double kCut = 0.05;         // share of the samples inside that one cut takes away
constexpr size_t kFewestInside = 20;  // a box with less in it says nothing
constexpr int kMostDraws = 200;       // for one chemistry that keeps the grade's rules
constexpr int kMostRounds = 4;        // of tightening and verifying

Content contentOf(double wt) { return {QString::number(wt, 'g', 6), wt, false, 0, {}}; }

bool keepsRules(const std::map<std::string, double>& wt, const Grade& grade) {
    Analysis analysis;
    for (const auto& [element, amount] : wt) analysis[element] = contentOf(amount);
    return std::none_of(grade.rules.begin(), grade.rules.end(), [&](const QString& rule) {
        return applyRule(rule, analysis).answer == RuleOutcome::Answer::broken;
    });
}

/// The ranges of the elements that the equilibrium knows; a limit without a minimum starts at 0.
Box rangesOf(const Grade& grade, const DataSetFacts& facts) {
    Box box;
    for (const auto& [element, limit] : grade.limits) {
        const bool known = std::find(facts.elements.begin(), facts.elements.end(), element) != facts.elements.end();
        if (!known || element == facts.balance || (!limit.max_wt && !limit.min_wt)) continue;
        const double low = limit.min_wt.value_or(0);
        box[element] = {low, limit.max_wt.value_or(1.1 * low)};
    }
    return box;
}

using Random = std::mt19937_64;

/// Chemistries drawn evenly in a box; one that breaks a rule of the grade is drawn again.
std::vector<std::map<std::string, double>> draw(Random& random, const Box& box, const Grade& grade, int count) {
    std::vector<std::map<std::string, double>> drawn;
    for (int i = 0; i < count; ++i)
        for (int attempt = 0; attempt < kMostDraws; ++attempt) {
            std::map<std::string, double> wt;
            for (const auto& [element, range] : box)
                wt[element] = std::uniform_real_distribution<double>(range.first, range.second)(random);
            if (!keepsRules(wt, grade)) continue;
            drawn.push_back(std::move(wt));
            break;
        }
    return drawn;
}

/// Judges chemistries on all cores; the order of the answers is that of the questions.
class Judging {
public:
    Judging(const StudyQuestion& question, const Shelf& shelf, const std::function<void(int, int)>& progress,
            const std::atomic<bool>* cancelled)
        : question_(question), shelf_(shelf), progress_(progress), cancelled_(cancelled) {
        shelf_.furnaces.clear();  // no advice is wanted for a chemistry that was only drawn
    }

    bool stopped() const { return cancelled_ && *cancelled_; }

    std::vector<StudySample> judge(const std::vector<std::map<std::string, double>>& chemistries) {
        std::vector<StudySample> samples(chemistries.size());
        of_ += static_cast<int>(chemistries.size());
        std::atomic<size_t> next{0};
        const auto work = [&] {
            ReportCache cache;
            for (size_t i = next++; i < chemistries.size() && !stopped(); i = next++) {
                samples[i] = judgeOne(chemistries[i], cache);
                if (progress_) progress_(++done_, of_);
            }
        };
        const int wanted =
            question_.threads > 0 ? question_.threads : static_cast<int>(std::thread::hardware_concurrency());
        std::vector<std::jthread> workers;
        for (int i = 1; i < wanted; ++i) workers.emplace_back(work);
        work();
        workers.clear();  // joins
        return samples;
    }

private:
    StudySample judgeOne(const std::map<std::string, double>& wt, ReportCache& cache) const {
        Job job;
        job.heat.grade = question_.grade.names.value(0);
        for (const auto& [element, amount] : wt) job.heat.analysis[element] = contentOf(amount);
        job.cycle = question_.cycle;
        job.furnace = question_.furnace;
        job.family = question_.grade.family;
        job.keep_sweep = false;
        StudySample sample;
        sample.wt = wt;
        const auto answer = soak::judge(job, shelf_, cache);
        if (!answer) {
            sample.reason = QString::fromStdString(answer.error().text());
            return sample;
        }
        sample.verdict = answer.value().verdict;
        sample.margin_K = answer.value().margin_K;
        sample.reason = whyNot(answer.value());
        return sample;
    }

    /// In few words, so that equal causes can be counted.
    static QString whyNot(const WindowAnswer& answer) {
        if (answer.verdict == Verdict::notComputed) return answer.reason;
        if (answer.verdict == Verdict::noWindow) {
            for (const auto* side : {&answer.floors, &answer.ceilings})
                for (const Limit& limit : *side)
                    if (limit.impossible) return limit.cause + ": no temperature satisfies it";
            return answer.floors.front().cause + " above " + answer.ceilings.front().cause;
        }
        QStringList broken;
        for (const auto* side : {&answer.floors, &answer.ceilings})
            for (const Limit& limit : *side)
                if (const auto margin = marginTo(limit, answer.band); margin && *margin < 0) broken << limit.cause;
        return broken.join(" and ");
    }

    const StudyQuestion& question_;
    Shelf shelf_;
    std::function<void(int, int)> progress_;
    const std::atomic<bool>* cancelled_;
    std::atomic<int> done_{0};
    int of_ = 0;
};

bool inside(const Box& box, const StudySample& sample) {
    return std::all_of(box.begin(), box.end(), [&](const auto& one) {
        const double amount = sample.wt.at(one.first);
        return amount >= one.second.first && amount <= one.second.second;
    });
}

std::vector<const StudySample*> within(const Box& box, const std::vector<StudySample>& samples) {
    std::vector<const StudySample*> found;
    for (const StudySample& sample : samples)
        if (inside(box, sample)) found.push_back(&sample);
    return found;
}

double shareOf(const std::vector<const StudySample*>& samples) {
    if (samples.empty()) return 0;
    const auto works =
        std::count_if(samples.begin(), samples.end(), [](const StudySample* one) { return one->works(); });
    return double(works) / double(samples.size());
}

/// The box with one face moved in past a twentieth of what is inside.
Box cut(const Box& box, const std::string& element, bool low_side, const std::vector<const StudySample*>& samples) {
    std::vector<double> amounts;
    for (const StudySample* one : samples) amounts.push_back(one->wt.at(element));
    std::sort(amounts.begin(), amounts.end());
    const auto away = std::max<size_t>(1, static_cast<size_t>(kCut * double(amounts.size())));
    Box smaller = box;
    if (low_side)
        smaller[element].first = amounts[away];
    else
        smaller[element].second = amounts[amounts.size() - 1 - away];
    return smaller;
}

/// Moves each face back towards the whole: all the way where nothing fails, else to the last sample that works before
/// the first one that fails.
Box putBack(Box box, const Box& whole, const std::vector<StudySample>& samples) {
    for (auto& [element, range] : box)
        for (const bool low_side : {true, false}) {
            Box wider = box;
            const double end = low_side ? whole.at(element).first : whole.at(element).second;
            (low_side ? wider[element].first : wider[element].second) = end;
            const double now = low_side ? range.first : range.second;
            std::vector<std::pair<double, bool>> beyond;  // distance from the face, whether it works
            for (const StudySample* one : within(wider, samples))
                if (!inside(box, *one)) beyond.push_back({std::abs(one->wt.at(element) - now), one->works()});
            std::sort(beyond.begin(), beyond.end());
            const auto fails = std::find_if(beyond.begin(), beyond.end(), [](const auto& one) { return !one.second; });
            const double reach = fails == beyond.end()     ? std::abs(end - now)
                                 : fails == beyond.begin() ? 0
                                                           : std::prev(fails)->first;
            (low_side ? range.first : range.second) = low_side ? now - reach : now + reach;
        }
    return box;
}

/// To the digits that a purchase order carries, inwards.
void roundInwards(Box& box, const Box& whole) {
    for (auto& [element, range] : box) {
        const double width = whole.at(element).second - whole.at(element).first;
        const double digit = width < 0.2 ? 0.001 : 0.01;
        if (range.first > whole.at(element).first) range.first = std::ceil(range.first / digit - 1e-6) * digit;
        if (range.second < whole.at(element).second) range.second = std::floor(range.second / digit + 1e-6) * digit;
    }
}

TightenedLimits limitsOf(const Box& box, const Box& whole) {
    TightenedLimits limits;
    limits.wt = box;
    for (const auto& [element, range] : box) {
        const auto& full = whole.at(element);
        const double width = full.second - full.first;
        if (width <= 0) continue;
        const double share = (range.second - range.first) / width;
        limits.volume_share *= share;
        if (share < 1 - 1e-9) limits.tightened.push_back(element);
    }
    return limits;
}

void summarise(GradeStudy& study, std::vector<StudySample> samples) {
    study.samples = static_cast<int>(samples.size());
    std::map<QString, int> causes;
    for (const StudySample& one : samples) {
        study.works += one.works();
        study.not_computed += one.verdict == Verdict::notComputed;
        if (!one.works()) ++causes[one.reason];
    }
    // E.B. Wilson, J. Am. Stat. Assoc. 22 (1927) 209-212, z = 1.96.
    const double n = std::max(1, study.samples), p = study.works / n, z = 1.96;
    const double middle = (p + z * z / (2 * n)) / (1 + z * z / n);
    const double half = z / (1 + z * z / n) * std::sqrt(p * (1 - p) / n + z * z / (4 * n * n));
    study.share = p, study.share_low = std::max(0.0, middle - half), study.share_high = std::min(1.0, middle + half);
    study.causes.assign(causes.begin(), causes.end());
    std::stable_sort(study.causes.begin(), study.causes.end(),
                     [](const auto& a, const auto& b) { return a.second > b.second; });
    std::stable_sort(samples.begin(), samples.end(), [](const StudySample& a, const StudySample& b) {
        const auto value = [](const StudySample& one) {
            return one.verdict == Verdict::noWindow ? -1e9 : one.margin_K.value_or(1e9);
        };
        return value(a) < value(b);
    });
    for (const StudySample& one : samples)
        if (study.worst.size() < 5 && one.verdict != Verdict::notComputed) study.worst.push_back(one);
}

}  // namespace

double binomialConfidence(int drawn, int failed, double share) {
    double at_most = 0, term = std::pow(1 - share, drawn);
    for (int i = 0; i <= failed; ++i) {
        at_most += term;
        term *= double(drawn - i) / double(i + 1) * share / (1 - share);
    }
    return std::clamp(1 - at_most, 0.0, 1.0);
}

std::optional<Box> largestBox(const Box& whole, const std::vector<StudySample>& samples, double wanted_share) {
    Box box = whole;
    auto held = within(box, samples);
    while (held.size() >= kFewestInside && shareOf(held) < wanted_share) {
        std::optional<Box> best;
        double best_share = -1;
        for (const auto& [element, range] : box) {
            if (range.second <= range.first) continue;
            for (const bool low_side : {true, false}) {
                const Box smaller = cut(box, element, low_side, held);
                const double share = shareOf(within(smaller, samples));
                if (share > best_share) best = smaller, best_share = share;
            }
        }
        if (!best) return std::nullopt;
        box = *best;
        held = within(box, samples);
    }
    if (held.size() < kFewestInside) return std::nullopt;
    return putBack(box, whole, samples);
}

Result<GradeStudy> studyGrade(const StudyQuestion& question, const Shelf& shelf,
                              const std::function<void(int, int)>& progress, const std::atomic<bool>* cancelled) {
    const Family* family = shelf.book.find(question.grade.family);
    if (!family)
        return Error{Fault::input,
                     "the family \"" + question.grade.family.toStdString() + "\" of the grade is not judged",
                     {},
                     {}};
    const Box whole = rangesOf(question.grade, facts(*shelf.data_sets.at(family->data_set)));
    if (whole.empty()) return Error{Fault::input, "the grade has no ranges to draw from", {}, {}};
    Random random(question.seed);
    Judging judging(question, shelf, progress, cancelled);
    auto pool = judging.judge(draw(random, whole, question.grade, question.samples));
    GradeStudy study;
    summarise(study, pool);
    for (int round = 0; round < kMostRounds && question.fresh > 0 && !judging.stopped(); ++round) {
        auto box = largestBox(whole, pool, question.wanted_share);
        if (!box) break;
        roundInwards(*box, whole);
        const auto fresh = judging.judge(draw(random, *box, question.grade, question.fresh));
        TightenedLimits limits = limitsOf(*box, whole);
        limits.fresh = static_cast<int>(fresh.size());
        for (const StudySample& one : fresh) limits.fresh_inside += one.works();
        limits.confidence =
            binomialConfidence(limits.fresh, limits.fresh - limits.fresh_inside, 1 - question.wanted_share);
        if (!study.tightened || limits.confidence > study.tightened->confidence) study.tightened = limits;
        // 0.95 where the number of draws allows it: 299 without a failure; else no failure at all.
        const bool verified = limits.confidence >= 0.95 || limits.fresh_inside == limits.fresh;
        if (verified) break;
        pool.insert(pool.end(), fresh.begin(), fresh.end());
    }
    study.cancelled = judging.stopped();
    return study;
}

}  // namespace soak
