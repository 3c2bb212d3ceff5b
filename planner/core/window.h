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

/// What a published relation says of a computed limit; never binds.
struct Opinion {
    QString quantity;               ///< "Ac1", "Ac3", "Ms", "Bs"
    QString name;                   ///< "Andrews 1965"
    double value = 0;               ///< °C
    std::optional<double> scatter;  ///< one standard deviation as published, K
    bool in_range = true;           ///< false: the chemistry lies outside what the relation was made from
    QString outside;                ///< "C 0.90 is above 0.60"
    QString source;
};

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
    std::vector<Opinion> opinions;           ///< published relations on the same temperature, without the margin
    QString disagreement;  ///< where they and the computed value differ by more than both can explain, in words
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

/// A range of temperatures that the metal must cross quickly on the way down (and up), or must not be held in.
struct Crossing {
    QString what;  ///< "sigma", "475 °C embrittlement"
    double low_C = 0, high_C = 0;
    bool computed = false;  ///< the upper end comes from this heat's equilibrium
    QString because, source;
};

/// The way from the furnace to the quench. Stands beside the window and is never part of it: the window covers the
/// soak.
struct CoolingAnswer {
    QString phase;                         ///< what forms first on the way: "M23C6", "sigma", "ferrite"; or empty
    std::optional<double> begins_C;        ///< the highest temperature at which it can form
    std::optional<double> budget_s;        ///< door open to fully under, from physics: see `basis`
    std::optional<double> set_s;           ///< what the cycle, a standard or the shop allows
    std::optional<double> allowed_s;       ///< the smaller of the two
    std::optional<double> transfer_s;      ///< the slowest measured way from this furnace to its quench
    QString quench;                        ///< id of that quench
    bool too_slow = false;                 ///< the measured way is longer than what is allowed
    std::optional<double> needed_K_per_s;  ///< slowest cooling through the range that leaves the boundaries sound
    QString sentence;                      ///< one plain sentence, or empty when nothing can be said
    QString basis;                         ///< where it comes from, in words
    std::vector<Crossing> crossings;
};

/// How long the metal needs, apart from the shop's own rule. Nothing: cannot be said.
struct SoakTime {
    /// From cold into the furnace at setpoint until the middle of the section is within 10 K of it: one piece alone; a
    /// load takes longer.
    std::optional<double> heat_up_min;
    std::optional<double> dissolve_min;  ///< at the coldest metal, for the slowest of what must dissolve
    std::optional<double>
        homogenise_min;              ///< to a tenth of the segregation between dendrites; homogenising cycles only
    std::optional<double> rule_min;  ///< by the shop's rule for the governing section
    bool rule_too_short = false;     ///< the rule gives less than dissolving (and homogenising) needs
    QStringList lines;               ///< one a part, with what is computed and what is a rule of thumb
};

/// What a quench would make of the austenite at one metal temperature: published relations put to the computed
/// composition of the austenite, so rules of thumb. Nothing: no relation speaks for it.
struct QuenchOutlook {
    double from_C = 0;
    double carbon_wt = 0;  ///< in the austenite
    std::optional<double> Ms_C, Mf_C, Bs_C;
    double retained_vol = 0;             ///< vol% of the whole metal left as austenite at 25 °C
    std::optional<double> hardness_HRC;  ///< of the martensite alone
    QString basis;
};

/// Something that would move the verdict, and by how much.
struct Remedy {
    QString what;  ///< "setpoint", "furnace", "chemistry", "specification", "rule", "margin", "certainty", "nothing"
    QString text;  ///< one plain sentence
    std::optional<double> margin_K;  ///< the smaller margin that it would leave
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
    CoolingAnswer cooling;  ///< at the standing setpoint, apart from the verdict
    SoakTime soak;          ///< at the standing setpoint, apart from the verdict
    std::vector<QuenchOutlook>
        quench_outlook;                      ///< hardening and normalising: at coldest metal, setpoint, hottest metal
    std::optional<double> chance_inside;     ///< 0..1: that all metal of the band is inside every limit, see chance.h
    std::vector<Remedy> remedies;            ///< when not inside: what would move it, best first
    std::map<std::string, double> sigma_wt;  ///< one standard deviation of each content: rounding and laboratory
    std::map<std::string, double> chemistry_wt;  ///< what went into the equilibrium, wt%
    QStringList left_out;                        ///< elements kept and grade-checked, not in the equilibrium: "P 0.024"
    QStringList remarks;                         ///< little evidence, what-if, extrapolation
    QStringList if_wrong, load_notes;            ///< lines for the sheet, by family, treatment and furnace
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
