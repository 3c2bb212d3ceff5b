// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <optional>
#include <vector>

#include "base/result.h"

namespace soak {

/// How much a published row counts for.
enum class EvidenceClass {
    firm,         ///< measured, compiled or standard, and sure of its source
    unsure,       ///< marked unsure, or itself calculated: shown apart, carries no target
    calibration,  ///< data were fitted to it: never evidence
    shop          ///< the shop's own measurement: shown apart until the shop lets it weigh in, then firm
};
QString word(EvidenceClass weight);

/// One published value and what this program computes for it; a row of the files in tests/published.
struct EvidenceRow {
    // As published.
    QString id, family, composition, quantity, phase, element, unit, how, source, seen, note;
    std::optional<double> at_C, value;
    QString value_text;  ///< as printed, also where it is a list or a constraint
    double scatter = 0;  ///< half width that the literature allows, in `unit`
    // What the program makes of it.
    QString kind;  ///< the quantity, with Ae1, Ae3 and Acm told apart
    EvidenceClass weight = EvidenceClass::firm;
    std::optional<double> computed;  ///< in `unit`
    QString reason;                  ///< why there is no computed value, in words
    QString remark;                  ///< what was done on the way: "B left out of the equilibrium"

    QString dataSet()
        const;  ///< folder of thermo/data that computes it, by the id's first letters or the balance element
    std::optional<double> difference() const;  ///< computed minus published
    bool isJudged() const;                     ///< computed, and the row states its scatter
    bool isHit() const;                        ///< judged, and within twice the row's scatter
};

/// All rows of tests/published, not yet computed. Fault::data or Fault::store names the file.
Result<std::vector<EvidenceRow>> readEvidence();

/// A shop's own rows: a table with the columns row_id, family, composition_wt, quantity, phase, at_C, element, value,
/// unit, scatter, source, note (those of tests/published; how and seen are not asked for). `weigh_in` lets them count
/// as firm. Fault::data names the line of a row that lacks a number, its scatter or its source, or repeats an id.
Result<std::vector<EvidenceRow>> readShopEvidence(const QString& path, bool weigh_in);

/// Fills `computed` or `reason` of every row, on all cores; the outcome does not depend on their number. Fails only
/// when a data set cannot be loaded.
Result<Done> computeEvidence(std::vector<EvidenceRow>& rows);

/// Differences of one family and kind (and unit), for one class of rows.
struct EvidenceGroup {
    QString family, kind, unit;
    EvidenceClass weight = EvidenceClass::firm;
    int count = 0;         ///< computed rows
    int not_computed = 0;  ///< rows without a computed value
    double mean = 0, deviation = 0, worst = 0;
    QString worst_id;

    bool isLittle() const;  ///< fewer than 5 firm rows
};
/// Mean, standard deviation (n - 1; 0 for one row) and the difference of largest size.
EvidenceGroup summarise(const std::vector<const EvidenceRow*>& rows);
/// By family, kind and unit, firm rows before the others.
std::vector<EvidenceGroup> evidenceGroups(const std::vector<EvidenceRow>& rows);

/// The table of data/model_scatter.toml from these rows: for every limit kind of the planner the bias and scatter of
/// the grade families that the rows speak for.
Result<QString> modelScatterTable(const std::vector<EvidenceRow>& rows);

}  // namespace soak
