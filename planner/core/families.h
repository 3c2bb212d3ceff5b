// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <map>
#include <string>
#include <vector>

#include "db/records.h"
#include "planner/core/cooling_rules.h"
#include "planner/core/kinetics.h"
#include "planner/core/quench_factor.h"
#include "planner/core/relations.h"
#include "planner/core/salvage.h"
#include "planner/core/sheet_notes.h"
#include "planner/core/tempering.h"
#include "thermo/alloy.h"
#include "thermo/scheil.h"

namespace soak {

/// A treatment of a family, and what to look for when no cycle is given; rows of data/families.toml (the usual ones)
/// and data/treatments.toml (all others).
struct FamilyKind {
    QString name;            ///< cycle kind: "solution-anneal"
    double reference_C = 0;  ///< usual in the trade, to start looking from
    std::vector<CycleLimit> limits;
    QString basis;  ///< the published ranges that the limits rest on, or empty
};

/// What the planner knows of one family of grades; rows of data/families.toml.
struct Family {
    QString name;                   ///< as in the grade library: "duplex"
    QString data_set;               ///< folder under thermo/data: "ferrous"
    PhaseChoice phases;             ///< phases asked for or left out by the family's rule
    QString phase_rule;             ///< that rule in words, with its source
    QStringList needs;              ///< elements without which no computed limit is trusted
    std::vector<FamilyKind> kinds;  ///< the usual one first

    const FamilyKind* find(const QString& kind) const;
};

/// Scatter of computed minus published for one family and kind of limit; rows of data/model_scatter.toml.
struct ModelScatter {
    double mean = 0, scatter = 0;  ///< K, or vol% when `in_volume_percent`
    bool in_volume_percent = false;
    int rows = 0;  ///< published values behind it
    QString source;
};

/// Between-laboratory scatter of an analysis: one standard deviation = floor_wt + relative * content.
struct LaboratoryScatter {
    double floor_wt = 0, relative = 0;
};

/// What a data set serves; a table of data/sweep.toml.
struct SetUse {
    double from_C = 0, to_C = 0;                ///< lowest and highest temperature swept
    std::map<std::string, double> left_out_wt;  ///< most that may stay out of the equilibrium; "*" = every other
    std::map<std::string, double> most_wt;      ///< most that the set is meant for
};

/// Radius of the particles that hold grains, for a family and a label; rows of data/particles.toml.
struct ParticleSize {
    QString phase;
    QStringList families;  ///< "*": every other
    double radius_um = 0;
    QString source;
};

/// How the melts of a data set freeze; rows of data/segregation.toml.
struct Segregation {
    FreezingChoice freezing;
    QString source;
};

/// The planner's own tables, read once and shared between threads.
struct FamilyBook {
    std::vector<Family> families;
    std::map<std::pair<QString, QString>, ModelScatter>
        scatter;  ///< (family or every one of a set, "dissolved(sigma)" or "dissolved")
    double unknown_scatter_K = 0, least_scatter_K = 0;    ///< without a row; with fewer than 5
    std::map<std::string, LaboratoryScatter> laboratory;  ///< by element; "*" = every other
    std::map<QString, SetUse> uses;                       ///< by data set
    std::map<QString, Segregation> segregation;           ///< by data set
    RelationBook relations;                               ///< published relations, as second opinions
    CoolingRules cooling;                                 ///< what may form on the way to the quench
    KineticBook kinetics;                                 ///< diffusion, conduction, heat transfer
    std::vector<TemperingCurve> tempering;                ///< published hardness after tempering and ageing
    std::vector<SalvageRule> salvage;                     ///< what may be done with a load that went wrong
    std::vector<SheetNote> sheet_notes;                   ///< lines for the sheet by family, treatment and furnace
    QuenchBook quench;                                    ///< C-curves and films of the quench
    std::vector<ParticleSize> particles;                  ///< sizes of particles that hold grains

    const Family* find(const QString& name) const;
    /// The row for this family, kind and phase, the nearest general one, or a wide scatter that says so.
    ModelScatter scatterOf(const QString& family, const QString& kind, const QString& phase) const;
    double laboratory_wt(const std::string& element, double content_wt) const;
    /// nullptr when no size is known for the label.
    const ParticleSize* particleOf(const QString& family, const QString& phase) const;
};
/// The word under which model_scatter.toml keeps what holds for every family of a data set: "* ferrous".
QString everyFamilyOf(const QString& data_set);

/// Reads planner/core/data; Fault::data names the file and the entry.
Result<FamilyBook> loadFamilyBook();

}  // namespace soak
