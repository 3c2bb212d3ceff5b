// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/chance.h"

#include <random>

#include "planner/core/verdict.h"

namespace soak {
namespace {

constexpr int kDraws = 4000;    // one standard error of the chance: below 1 %
constexpr double kFarAway = 6;  // standard deviations: cannot be met in 4 000 draws

struct Doubtful {
    const Limit* limit = nullptr;
    double margin_K = 0;
};

/// Limits near enough to be in doubt; false when one set by people is broken.
bool collect(const WindowAnswer& answer, std::vector<Doubtful>& doubtful) {
    for (const auto* side : {&answer.floors, &answer.ceilings})
        for (const Limit& limit : *side) {
            const auto margin = marginTo(limit, answer.band);
            if (!margin) continue;
            if (limit.uncertainty_K <= 0 && *margin < 0) return false;
            if (limit.uncertainty_K > 0 && *margin < kFarAway * limit.uncertainty_K)
                doubtful.push_back({&limit, *margin});
        }
    return true;
}

}  // namespace

std::optional<double> chanceInside(const WindowAnswer& answer) {
    if (answer.verdict == Verdict::notComputed) return std::nullopt;
    if (answer.verdict == Verdict::noWindow) return 0;
    std::vector<Doubtful> doubtful;
    if (!collect(answer, doubtful)) return 0;
    if (doubtful.empty()) return 1;
    std::mt19937_64 random(20250402);
    std::normal_distribution<double> normal;
    int inside = 0;
    std::map<std::string, double> error_wt;
    for (int draw = 0; draw < kDraws; ++draw) {
        for (const auto& [element, sigma] : answer.sigma_wt) error_wt[element] = sigma * normal(random);
        bool all = true;
        for (const auto& [limit, margin_K] : doubtful) {
            double moved_K = limit->model_K * normal(random);
            for (const auto& [element, K_per_wt] : limit->K_per_wt)
                if (const auto error = error_wt.find(element); error != error_wt.end())
                    moved_K += K_per_wt * error->second;
            all = all && margin_K + (limit->side == Side::ceiling ? moved_K : -moved_K) > 0;
        }
        inside += all;
    }
    return double(inside) / kDraws;
}

}  // namespace soak
