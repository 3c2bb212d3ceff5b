// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDate>
#include <QString>
#include <QStringList>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "db/records.h"
#include "thermo/alloy.h"

namespace soak {

enum class Side { floor, ceiling };
enum class Verdict { inside, tight, outside, noWindow, notComputed };
/// "inside", "tight", "outside", "no window", "not computed"
QString word(Verdict verdict);

/// One temperature that bounds the window, with its cause and its uncertainty.
struct Limit {
    Side side = Side::floor;
    QString kind;     ///< word of limits.h: "dissolved", "fraction", ...
    QString phase;    ///< label, or empty
    QString cause;    ///< in plain words: "sigma dissolved + 20 K", "specification minimum 1040 °C"
    QString because;  ///< why the shop wants it: "sigma left in the metal costs toughness"
    QString source;   ///< "computed", "shop rule", a standard's name
    /// Rounded only when shown, floors up, ceilings down; nothing: does not bind, or not computed.
    std::optional<double> temperature_C;
    bool computed = true;     ///< false: not computed, `remark` says why, and the verdict is "not computed"
    bool impossible = false;  ///< no temperature satisfies it ("no temperature removes it"); the verdict is "no window"
    QString remark;           ///< why it does not bind, was not computed or has no answer; little evidence
    QString drivers;      ///< what in this heat moved it to the unsafe side: "Mo 3.95 and Cr 25.9 high, N 0.205 low"
    double margin_K = 0;  ///< already contained in temperature_C
    double certificate_K = 0, laboratory_K = 0, model_K = 0;  ///< one standard deviation each
    double uncertainty_K = 0;                                 ///< root of the squares of the three
    bool set = false;                        ///< set by people (specification, furnace, code), not computed
    std::map<std::string, double> K_per_wt;  ///< sensitivities, exact; empty when set
};

/// A contribution to the band, signed: low <= 0 <= high for tolerances.
struct BandPart {
    QString name;
    double low_K = 0, high_K = 0;
};

/// What the metal can really see at a setpoint.
struct Band {
    double setpoint_C = 0;
    double added_low_C = 0, added_high_C = 0;  ///< everything added up
    double root_low_C = 0, root_high_C = 0;    ///< root of the squares
    double low_C = 0, high_C = 0;              ///< by the rule that decides
    QString rule;                              ///< "added up" or "root of squares"
    double offset_K = 0;                       ///< true minus read, contained in all of the above
    std::vector<BandPart> parts;
    QStringList warnings;   ///< "survey overdue since 2024-09-28"
    bool may_issue = true;  ///< false: only a draft may be printed
};

struct Finding {
    QString element, text, source;
    bool fails = false;  ///< the grade check fails because of it
};

struct GradeCheck {
    QString verdict;   ///< "passes", "fails", "not checked"
    QString grade_id;  ///< the row that decided
    std::vector<Finding> findings;
    QStringList satisfied;  ///< ids of the rows of this grade that the heat satisfies
    QStringList suggested;  ///< nearest grades when it fails
};

/// The answer for one heat, one cycle, one furnace.
struct WindowAnswer {
    QString heat, grade, family, cycle, kind, furnace;
    std::vector<Limit> floors, ceilings;  ///< binding first
    std::optional<double> low_C, high_C;  ///< the window, metal temperature; nothing when there is none
    Band band;
    double setpoint_C = 0;
    std::optional<double> suggested_setpoint_C;  ///< to the controller's step, where the margins are best
    Verdict verdict = Verdict::notComputed;
    std::optional<double> margin_K;  ///< smaller of the two, negative = outside
    QString reason;                  ///< one or two plain sentences with the two binding causes
    GradeCheck grade_check;
    std::map<std::string, double> chemistry_wt;  ///< what went into the equilibrium, wt%
    QStringList left_out;                        ///< elements kept and grade-checked, not in the equilibrium: "P 0.024"
    QStringList remarks;                         ///< little evidence, what-if, extrapolation
    QStringList published;                       ///< published ranges of the grade, as information
    QString data_set, data_version, program_version;
    std::optional<Sweep> sweep;  ///< for the rail; Kelvin
};

/// The shop's rules that a decision depends on. Defaults as in the store of a new shop.
struct ShopRules {
    QString band_rule = "root of squares";  ///< or "added up"
    double tight_set_K = 5, tight_computed_K = 10;
    QDate today;  ///< the clock is an input, never read here
};

}  // namespace soak
