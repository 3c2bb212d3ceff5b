// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <atomic>
#include <cstdint>
#include <functional>

#include "planner/core/planner.h"

namespace soak {

/// Will this cycle, in this furnace, do for any heat of the grade that may be bought?
struct StudyQuestion {
    Grade grade;
    Cycle cycle;
    Furnace furnace;
    int samples = 400;           ///< chemistries drawn evenly over the grade's ranges, rules kept
    int fresh = 300;             ///< drawn anew inside the tightened limits to verify them; 0: none are sought
    double wanted_share = 0.99;  ///< of the chemistries inside the tightened limits
    std::uint64_t seed = 1;
    int threads = 0;  ///< 0: as many as the machine has
};

/// One drawn chemistry and what the cycle does to it.
struct StudySample {
    std::map<std::string, double> wt;
    Verdict verdict = Verdict::notComputed;
    std::optional<double> margin_K;
    QString reason;
    bool works() const { return verdict == Verdict::inside || verdict == Verdict::tight; }
};

/// Limits to write on a purchase order.
struct TightenedLimits {
    std::map<std::string, std::pair<double, double>> wt;  ///< every element of the study
    std::vector<std::string> tightened;                   ///< those whose range is narrower than the grade's
    double volume_share = 1;                              ///< of the grade's range, product over the elements
    int fresh = 0, fresh_inside = 0;                      ///< the verification
    /// That at least `wanted_share` of the heats inside the limits are served: 1 minus the chance of so good a
    /// verification if they were not (exact binomial).
    double confidence = 0;
};

struct GradeStudy {
    int samples = 0, works = 0, not_computed = 0;
    double share = 0, share_low = 0, share_high = 0;  ///< with its 95 % interval (E.B. Wilson 1927)
    std::vector<StudySample> worst;                   ///< at most five, least margin first; no window before all
    std::vector<std::pair<QString, int>> causes;      ///< why the others fail, most frequent first
    std::optional<TightenedLimits> tightened;         ///< nothing: none were sought, or no box was found
    bool cancelled = false;
};

/// Seeded and repeatable whatever the number of threads. `progress(done, of)` is called from worker threads; what is
/// not yet drawn counts in `of` as far as it is known.
Result<GradeStudy> studyGrade(const StudyQuestion& question, const Shelf& shelf,
                              const std::function<void(int, int)>& progress = {},
                              const std::atomic<bool>* cancelled = nullptr);

// ---- the parts, for tests ------------------------------------------------------------------------------------------

using Box = std::map<std::string, std::pair<double, double>>;

/// The largest box found in which at least `wanted_share` of the samples work: faces are cut by a twentieth of what is
/// inside, the cut that leaves the best share first, then put back as far as nothing fails (patient rule induction:
/// J.H. Friedman, N.I. Fisher, Statistics and Computing 9 (1999) 123-143). Nothing when fewer than 20 samples are left.
std::optional<Box> largestBox(const Box& whole, const std::vector<StudySample>& samples, double wanted_share);

/// 1 - P(at most `failed` failures of `drawn` | the share of failures is `share`): exact binomial.
double binomialConfidence(int drawn, int failed, double share);

}  // namespace soak
