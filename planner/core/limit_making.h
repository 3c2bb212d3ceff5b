// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/limits.h"

namespace soak {

// Shared by the kinds of limit: from a stored limit and an event of the sweep to a Limit with cause and uncertainty.

inline constexpr double kPresent = 1e-9;  ///< mole fraction below which a phase counts as absent: rounding of zero

/// A limit with its words and no temperature yet; the margin is added to the cause.
Limit blankLimit(const CycleLimit& limit, Side side, const QString& cause);
Limit notComputed(Limit limit, const QString& why);
Limit notBinding(Limit limit, const QString& why);
Limit impossible(Limit limit, const QString& why);

/// How an amount runs with temperature at its limit, and on which side of the limit the metal must be.
struct Slope {
    double volume_percent_per_K = 0;
    bool at_least = false;
};

/// The limit at an event: margin, the unsafe end of "less than" values, and the three parts of its uncertainty.
Limit limitAt(Limit limit, const Event& event, const LimitContext& context, const Slope& slope = {});

/// Published relations on the temperature of `event` beside a limit, and where they disagree with it.
void addOpinions(Limit& limit, const Event& event, const QString& quantity, const LimitContext& context);

/// One standard deviation of a content by its rounding on the certificate, wt%.
double rounding_wt(const Content& content);

/// How many states come before the first liquid: amounts mean nothing to a furnace once the metal melts.
std::size_t solidStates(const Sweep& sweep);

// The kinds; which words they serve stands in limits.h.
std::vector<Limit> dissolvedLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> notYetFormedLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> solidusLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> segregatedSolidusLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> steppedSolidusLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> firstAusteniteLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> lastFerriteLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> fractionLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> matrixContentLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> grainPinnedLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> retainedAusteniteLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> martensiteStartLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> quenchedHardnessLimit(const CycleLimit& limit, const LimitContext& context);
std::vector<Limit> temperedHardnessLimit(const CycleLimit& limit, const LimitContext& context);

}  // namespace soak
