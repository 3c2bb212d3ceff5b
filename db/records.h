// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QDate>
#include <QString>
#include <QStringList>
#include <QVector>
#include <map>
#include <optional>
#include <string>
#include <vector>

namespace soak {

/// One element of one analysis as it stood on paper and as it was read. The raw text is kept for ever.
struct Content {
    QString raw;               ///< exactly as found: "0,048", "1740 ppm", "<0.01", "nnw."
    std::optional<double> wt;  ///< wt%; for "less than" the bound; nothing when it could not be read
    bool less_than = false;    ///< a censored value: the truth lies between 0 and wt
    double digit_wt = 0;       ///< one unit of the last printed digit, wt%: 0.018 -> 0.001
    QString remark;            ///< how it was converted or why it was refused, or empty
};

/// A certificate's chemistry: element symbol -> content.
using Analysis = std::map<std::string, Content>;

/// A further product of the same cast with the same chemistry: a bar and a plate.
struct Product {
    QString form;
    std::optional<double> section_mm;
    QString source;
};

/// A second analysis of the same cast, such as the product analysis beside the ladle's.
struct OtherAnalysis {
    QString kind;  ///< "ladle" or "product"
    Analysis analysis;
    QString source;
};

struct Heat {
    QString number;        ///< text for ever: leading zeros, slashes and 52E104 survive
    QString grade;         ///< as written on the certificate: "1.4462", "CD3MWCuN"
    QString product_form;  ///< bar, forging, plate, tube, ring, casting; or empty
    std::optional<double> section_mm;
    QString melt_route;
    QString analysis_kind;  ///< "ladle" or "product"
    Analysis analysis;
    QString source;  ///< file and line it came from
    std::vector<OtherAnalysis> other_analyses;
    std::vector<Product> other_products;
};

struct GradeLimit {
    std::optional<double> min_wt, max_wt;
    QString min_text, max_text;  ///< as printed; "balance" as the minimum of the element that takes the rest
};

/// Limits of all elements that a grade does not name, for each of them and for their sum, stand under these words
/// beside the symbols; so may a certificate's own figures.
inline const std::string kOthersEach = "others each", kOthersTotal = "others total";
inline const QString kBalanceText = "balance";

/// One row of the grade library: one grade in one standard and edition.
struct Grade {
    QString id;         ///< "en-1.4462", "en-1.4462-3"
    QStringList names;  ///< exact names; near equivalents are in near_names and never accept a heat
    QStringList near_names;
    QString standard, edition, family;
    std::map<std::string, GradeLimit> limits;  ///< by element symbol, wt%
    QStringList rules;                         ///< "Ti >= 5*C", "PRE = Cr + 3.3*Mo + 16*N >= 40"
    QString seen, note;

    /// The element that takes the rest: iron where the row names none.
    std::string balance() const {
        for (const auto& [element, limit] : limits)
            if (limit.min_text == kBalanceText) return element;
        return "Fe";
    }
};

/// A survey's result at one temperature, signed deviations from setpoint, K.
struct SurveyPoint {
    double temperature_C = 0, coldest_K = 0, hottest_K = 0;
};

struct Furnace {
    QString id, kind, work_zone_mm, uniformity_class, instrument_type;
    double minimum_C = 0, maximum_C = 0;
    bool controller_fahrenheit = false;
    double step = 1;                  ///< in the controller's own unit
    std::vector<SurveyPoint> survey;  ///< ascending temperature
    QDate surveyed, survey_due, accuracy_tested, accuracy_due, sensor_installed;
    QString thermocouple;        ///< letter: K, N, R, S
    int thermocouple_class = 2;  ///< IEC 60584
    double instrument_K = 0, swing_K = 0;
    double offset_K = 0;  ///< true minus read at the last accuracy check, uncorrected; 0 once corrected
    double maximum_load_kg = 0;
    QStringList quenches;  ///< ids of the quench facilities it can reach
    QString note;
};

struct Quench {
    QString id, medium, serves;
    double transfer_min_s = 0, transfer_max_s = 0;  ///< door open to fully under, as measured
    QString limits;                                 ///< what the shop set itself, in words
};

/// One limit of a cycle, as stored and as printed. `kind` is one of the words of planner/core/limits.h.
struct CycleLimit {
    QString kind;                     ///< "dissolved", "fraction", "below_solidus", "specification", "furnace" ...
    QString phase;                    ///< label, for kinds that need one
    std::optional<double> low, high;  ///< vol% for fractions, wt% for contents, degC for specification
    double margin_K = 0;              ///< into the safe side
    QString because, source;
};

struct Cycle {
    QString name;  ///< "SA-300"
    int revision = 1;
    QString kind;        ///< "solution-anneal", "harden", "full-anneal", "normalise", "temper" ...
    QStringList grades;  ///< names as on certificates
    QStringList furnaces;
    double setpoint_C = 0;
    QString soak_rule;         ///< in words
    double soak_base_min = 0;  ///< minutes = base + per_25mm * max(0, section - free_mm)/25
    double soak_per_25mm_min = 0, soak_free_mm = 0;
    QString cooling;  ///< in words
    QStringList quenches;
    std::vector<CycleLimit> limits;
    QString note;
};

/// A published treatment range, shown beside the window, never as its test.
struct PublishedTreatment {
    QString row_id, grade_key, kind;
    std::optional<double> low_C, high_C;
    QString hold_rule, quench, result, source, seen, note;
};

struct Caution {
    QString row_id, applies_to, severity, text, defers_to, source;
};

/// What a standard allows the product analysis to lie past the limit of the cast analysis. Looked up by the limit:
/// holds for from_wt < limit <= to_wt.
struct ProductTolerance {
    QStringList standards;
    QString family, element;
    double from_wt = 0, to_wt = 0;
    std::optional<double> over_max_wt, under_min_wt;  ///< nothing: none stated on that side
    QString seen, note;
};

/// A rule of pyrometry or of the trade: uniformity class, sensor tolerance, test interval, soak, quench delay.
struct FurnaceRule {
    QString row_id, kind, key, applies_to;
    std::optional<double> value;  ///< nothing: the rule is words or a formula
    QString unit, formula, source, seen, note;
};

/// Which grade families an evidence family speaks for.
struct FamilyLink {
    QString evidence_family;
    QStringList grade_families;
};

/// What the shop decided for itself.
struct Shop {
    QString name;
    QString band_rule = "root of squares";  ///< or "added up"
    double tight_set_K = 5, tight_computed_K = 10;
    QDate today;  ///< fixed date of a demonstration store; invalid in a real shop's
};

/// One issued process sheet, kept as it was printed.
struct Sheet {
    QString number;    ///< "2025-0001", given by the store alone; empty before that
    QString revision;  ///< "A", "B" ... given by the store
    QString replaces;  ///< "2025-0001 A", or empty
    QString heat, cycle, furnace;
    int cycle_revision = 1;
    QByteArray content;  ///< JSON: all that is needed to print the same page again
    QString hash;        ///< sheetHash(number, revision, content)
    QString issued_by;
    QDate issued;
    QString status;  ///< "issued", "superseded", "withdrawn"
};

}  // namespace soak
