// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "planner/core/alloy_report.h"
#include "planner/core/families.h"
#include "planner/core/window.h"

namespace soak {

// The kinds of limit, as stored in CycleLimit::kind. `phase` is a label, a group of labels ("carbide", "ferrite"), an
// element or a condition; `margin_K` always points into the safe side.
//   dissolved            floor    the highest temperature at which `phase` vanishes on heating, + margin
//   not_yet_formed       ceiling  the lowest temperature above which `phase` forms from the matrix, - margin
//   below_solidus        ceiling  first liquid on heating, - margin
//   below_segregated_solidus  ceiling  the last liquid of the segregated metal on freezing, - margin (thermo/scheil.h)
//   below_stepped_solidus  ceiling  first melting between the dendrites after a lower step of at least `low` hours at
//                                 `high` °C, - margin; `phase` is the arm spacing in um, else that of castings in
//                                 data/thermal.toml (thermo/back_diffusion.h)
//   above_ae1, above_ae3 floor    first austenite, last ferrite on heating, + margin (negative: so far below)
//   below_ae1            ceiling  first austenite on heating, - margin
//   fraction             both     vol% of `phase` at least `low` and at most `high`
//   grain_pinned         ceiling  enough of `phase` to hold a mean grain of `high` um (data/particles.toml for its
//   size) matrix_content       both     wt% of element `phase` in the matrix at least `low` and at most `high`
//   retained_austenite   ceiling  vol% after quenching to 25 °C at most `high`
//   martensite_start     both     Ms of the austenite at least `low` and at most `high`, °C
//   quenched_hardness    both     HRC of the martensite from the carbon of the matrix, at least `low`, at most `high`
//   tempered_hardness    both     HRC (to 70) or HB after the soak, at least `low` and at most `high`, by the published
//                                 curve named in `phase`, or the grade's own
//   specification        both     °C, at least `low` and at most `high`, set by people
//   specification_if     both     the same where the condition in `phase` holds ("Ni + Mn < 1.0"); "unknown Ni, Mn"
//   holds
//                                 when one of them has no value. A condition that cannot be decided counts as holding.
//   furnace              both     the furnace's own range; `low` and `high` narrow it when given
//   avoid                either   not between `low` and `high` °C: a floor when the standing setpoint lies in the upper
//                                 half or above, else a ceiling. With `phase` the upper end is where it dissolves.
//   quench_delay         neither  seconds from door open to fully under, at most `high` (empty: data/cooling.toml by
//                                 section); gives no temperature, see CoolingAnswer
// A kind that is none of these makes the limit "not computed".

/// What a limit is evaluated with.
struct LimitContext {
    AlloyReport* report = nullptr;  ///< nullptr when no physics could be computed; then `report_missing` says why
    QString report_missing;
    const Analysis* analysis = nullptr;
    const FamilyBook* book = nullptr;
    QString family;
    QStringList missing;             ///< elements that computed limits need and the analysis lacks
    Furnace furnace;                 ///< no id: no furnace named
    double reference_C = 0;          ///< the standing setpoint: a fraction may be met in more than one range
    std::optional<double> soak_min;  ///< by the shop's own rule
    QStringList grade_names;         ///< exact and near names of the heat's grade
};

/// One stored limit gives one Limit, or two when it binds from both sides. Never fails: what could not be computed says
/// so in the limit.
std::vector<Limit> evaluate(const CycleLimit& limit, const LimitContext& context);

/// Labels that a group word stands for ("carbide", "ferrite"); a word that is no group stands for itself.
QStringList labelsOf(const QString& phase);

}  // namespace soak
