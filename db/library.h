// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <vector>

#include "base/result.h"
#include "db/records.h"

namespace soak {

/// Readers of the published tables in db/library. Each refuses a row that is wrong (shape, number, twice the same id,
/// minimum above maximum), naming file, line and column. `folder` is productPath("db/library") as a rule.
Result<std::vector<Grade>> readGrades(const QString& folder);
Result<std::vector<PublishedTreatment>> readTreatments(const QString& folder);
Result<std::vector<Caution>> readCautions(const QString& folder);
Result<std::vector<ProductTolerance>> readProductTolerances(const QString& folder);
Result<std::vector<FurnaceRule>> readFurnaceRules(const QString& folder);
Result<std::vector<FamilyLink>> readFamilyMap(const QString& folder);

/// db/library of the running product.
QString libraryFolder();

}  // namespace soak
