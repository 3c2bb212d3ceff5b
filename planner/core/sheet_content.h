// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDate>
#include <QString>
#include <QStringList>
#include <optional>
#include <vector>

#include "planner/core/window.h"

namespace soak {

/// Everything one printed process sheet shows, decided by core: values rounded the safe way (floors up, ceilings down,
/// setpoint to the controller's step), causes and cautions chosen. The sheet room adds wording, layout and number
/// format and decides nothing. A value that does not exist is an empty optional or an empty text: its line is then left
/// out, or printed as a blank to fill in by hand where the crew needs one.

/// A number as it is to be printed. The decimal mark belongs to the language of the page.
struct Quantity {
    double value = 0;
    int decimals = 0;
    QString unit;  ///< "°C", "°F", "K", "min", "s", "mm", "kg", "%"; never empty
};

/// One temperature (or difference) in the controller's own unit first, then in the other. Both already rounded.
struct TwoUnits {
    Quantity controller;
    std::optional<Quantity> other;
};

struct SheetHeat {
    QString number;  ///< text for ever
    QString grade, product_form;
    std::optional<int> pieces;        ///< nothing: a blank to fill in
    std::optional<Quantity> section;  ///< governing section
};

/// One limit that binds, in words.
struct SheetLimit {
    Side side = Side::floor;
    QString cause;                        ///< "specification minimum", "sigma dissolved + 20 K"
    QString because;                      ///< why the shop wants it, or empty
    QString source;                       ///< "computed", "shop rule", a standard's name
    std::optional<TwoUnits> temperature;  ///< nothing: no temperature satisfies it, or not computed (cause says why)
    std::optional<TwoUnits> uncertainty;  ///< one standard deviation; nothing for limits that are set
};

struct SheetCaution {
    QString id;        ///< row of the cautions table: a template may translate the text by it
    QString severity;  ///< "danger", "warning", "note"
    QString text;
    QString defers_to;  ///< the procedure or law that decides: "site salt-bath procedure"
};

/// A place in the work zone, seen from the door: x from left 0 to right 1, y from floor 0 to top 1.
struct SheetSensor {
    QString label;         ///< "LT2"
    QString what;          ///< "load sensor, slowest piece", "control"
    bool decides = false;  ///< the soak starts by this one: drawn filled
    double x = 0.5, y = 0.5;
};

/// Enough to draw how pieces stand and where the sensors go. Not to scale.
struct LoadSketch {
    int columns = 3, rows = 2;        ///< pieces drawn across and up
    bool round = true;                ///< bars and rings as circles, plate and blocks as rectangles
    std::optional<Quantity> spacing;  ///< least clear gap between pieces
    std::vector<SheetSensor> sensors;
    QString work_zone;  ///< "900 × 1200 × 800 mm", or empty
};

struct SheetContent {
    // What paper this is. A draft has no number, whatever `number` says.
    QString number;    ///< "2025-0412"
    QString revision;  ///< "B"
    QString replaces;  ///< "2025-0388 rev A", or empty
    bool draft = true;
    QStringList draft_reasons;  ///< "survey of F6 overdue since 2024-09-28"
    QDate date;                 ///< of issue, or of the draft
    QDate valid_until;          ///< invalid: until withdrawn

    // The work
    QString kind;   ///< word of the cycle: "solution-anneal", "harden" ...; the template translates it
    QString cycle;  ///< "SA-300 rev 1"
    std::vector<SheetHeat> heats;
    QString customer, order;  ///< may be empty
    QString specification;    ///< with edition

    // The furnace
    QString furnace;  ///< "F2, chamber, electric"
    std::optional<Quantity> controller_step;
    TwoUnits setpoint;
    TwoUnits metal_low, metal_high;       ///< what the metal sees at the setpoint: the band by the rule that decides
    QString band_rule;                    ///< "root of squares", "added up"; translated as rule.<words with hyphens>
    std::optional<TwoUnits> never_above;  ///< the over-temperature that means stop, tag, call
    QStringList preheat;                  ///< one step a line, in order; may be empty
    QString ramp, atmosphere;             ///< may be empty

    // Soak
    QString soak_sensor;              ///< the one that counts: "LT2"
    TwoUnits soak_start;              ///< the soak starts when that sensor reads this
    std::optional<int> soak_minutes;  ///< computed for the governing section; nothing: a blank and the rule
    QString soak_formula;             ///< small print: "30 min + 1 min per mm over 25 mm; section 60 mm"

    // Load
    QStringList load_notes;          ///< "at most 800 kg", "pieces do not touch"
    QStringList thermocouple_notes;  ///< "load sensor in the slowest piece, at mid-length"
    std::optional<LoadSketch> sketch;

    // Quench and after
    QString quench_medium;              ///< "water"; empty: cooling says how
    QString cooling;                    ///< the cycle's own words: "air, still", or empty
    QStringList medium_limits;          ///< "below 40 °C at start, below 50 °C at end"
    std::optional<Quantity> max_delay;  ///< door opening to fully under
    QString next_step;                  ///< "temper within 2 h", or empty
    QStringList checks;                 ///< "hardness 3 pieces per load, at most 215 HB"

    QStringList if_wrong;                ///< lines of this cycle after the template's own STOP, TAG, CALL
    std::vector<SheetCaution> cautions;  ///< worst first

    // Why
    Verdict verdict = Verdict::notComputed;
    QString verdict_sentence;         ///< one plain sentence
    std::optional<TwoUnits> margin;   ///< a difference; negative = outside
    std::vector<SheetLimit> binding;  ///< the binding floor and the binding ceiling
    std::optional<TwoUnits> window_low, window_high;
    QString decision_rule;       ///< how uncertainty was used
    QString grade_check;         ///< "passes", "fails", "not checked"
    QStringList grade_findings;  ///< in words, failing ones first
    QStringList left_out;        ///< elements kept, not in the equilibrium: "P 0.024 %"
    QStringList published;       ///< published ranges with source, as information
    QStringList remarks;         ///< little evidence, what-if values, extrapolation

    // Where it came from
    QString program_version, data_set, data_version, rules_version;
    QString content_hash;   ///< of the values above, hexadecimal
    QString qr_payload;     ///< the sheet's identity; empty: no QR code
    QStringList deference;  ///< lines after the template's own deference line
};

}  // namespace soak
