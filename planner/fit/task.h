// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QStringList>
#include <filesystem>
#include <map>
#include <string>
#include <vector>

#include "base/result.h"

namespace soak::fit {

/// A number that is looked for, in the units of the value text it stands in (J/mol, or J/(mol K) before T).
struct Unknown {
    std::string name;
    double start = 0;
    double prior = 0,
           sigma = 0;  ///< what it is expected to be and how far it may sensibly stray: keeps values physical
    double round = 1;  ///< written to this step
};

/// A parameter of the data whose value holds unknowns: "8*Ni_fcc + 22*Mo_bcc + {a} - 40*T".
struct FittedParameter {
    std::string system, phase, text;
    std::vector<std::string> at;
    int order = 0;
};

/// One fit; a file of planner/fit/tasks.
struct Task {
    std::string set = "ferrous", subject, rule;  ///< `rule`: how the rows were split, fixed before looking
    QStringList calibrate, check;                ///< row ids: fitted to, and kept aside to show the error
    std::vector<Unknown> unknowns;
    std::vector<FittedParameter> parameters;
};
/// Fault::data names what is missing or wrong.
Result<Task> readTask(const std::filesystem::path& file);

using Values = std::vector<double>;  ///< one per unknown, in their order

/// The value text with numbers in place of the braces.
std::string valueText(const Task& task, const FittedParameter& parameter, const Values& values);

/// Writes the values into the set's files, in place; the entries become `estimated` and name the rows in `fitted_to`.
Result<Done> writeValues(const Task& task, const std::filesystem::path& set, const Values& values);

}  // namespace soak::fit
