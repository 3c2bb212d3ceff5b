// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <QStringList>
#include <map>
#include <string>
#include <vector>

#include "db/records.h"
#include "thermo/alloy.h"

namespace soak {

/// What the planner knows of one family of grades; rows of data/families.toml.
struct Family {
    QString name;        ///< as in the grade library: "duplex"
    QString data_set;    ///< folder under thermo/data: "ferrous"
    PhaseChoice phases;  ///< phases asked for or left out by the family's rule
    QString phase_rule;  ///< that rule in words, with its source
    std::map<QString, QStringList>
        needs;  ///< limit kind -> elements without which it is not computed; "*" = every kind
    std::map<QString, std::vector<CycleLimit>> limits;  ///< cycle kind -> limits when no cycle is given
    std::map<QString, double> reference_C;  ///< cycle kind -> usual temperature of the trade, to start looking from
};

/// Scatter of computed minus published for one family and kind of limit; rows of data/model_scatter.toml.
struct ModelScatter {
    double mean_K = 0, scatter_K = 0;
    int rows = 0;
    QString source;
};

/// Between-laboratory scatter of an analysis: one standard deviation = floor_wt + relative * content.
struct LaboratoryScatter {
    double floor_wt = 0, relative = 0;
};

/// The planner's own tables, read once and shared between threads.
struct FamilyBook {
    std::vector<Family> families;
    std::map<std::pair<QString, QString>, ModelScatter> scatter;  ///< (family, limit kind)
    std::map<std::string, LaboratoryScatter> laboratory;          ///< by element; "*" = every other
    std::map<QString, std::pair<double, double>> sweep_C;         ///< data set -> lowest and highest temperature swept

    const Family* find(const QString& name) const;
    /// Nothing known about the pair: a wide scatter that says so.
    ModelScatter scatterOf(const QString& family, const QString& kind) const;
    double laboratory_wt(const std::string& element, double content_wt) const;
};
/// Reads planner/core/data; Fault::data names the file and the entry.
Result<FamilyBook> loadFamilyBook();

}  // namespace soak
