// SPDX-License-Identifier: GPL-3.0-or-later
#include "label.h"

namespace soak {
namespace {

bool matches(const LabelRule& rule, const DataSet& data, const System& system, const PhaseSet& set) {
    const PhaseModel& model = system.phases()[static_cast<size_t>(set.phase)];
    const auto content = [&](const std::string& symbol) {
        double sum = 0;
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c) {
            const int e = model.element[c];
            if (e >= 0 &&
                data.elements[static_cast<size_t>(system.elements()[static_cast<size_t>(e)])].symbol == symbol)
                sum += model.sites[c] * set.y[c];
        }
        return sum;
    };
    if (rule.filled_above) {
        double vacant = 0;
        for (size_t c = 0; c < static_cast<size_t>(model.size); ++c)
            if (model.element[c] < 0) vacant += set.y[c];
        if (1 - vacant <= *rule.filled_above) return false;
    }
    if (!rule.main.empty()) {
        const double most = content(rule.main);
        for (int e : system.elements())
            if (const auto& symbol = data.elements[static_cast<size_t>(e)].symbol;
                symbol != rule.main && content(symbol) >= most)
                return false;
    }
    return rule.exceeds_this.empty() || content(rule.exceeds_this) > content(rule.exceeds_other);
}

}  // namespace

const std::string& labelOf(const DataSet& data, const System& system, const PhaseSet& set) {
    const PhaseData& phase = data.phases[static_cast<size_t>(system.phases()[static_cast<size_t>(set.phase)].data)];
    for (const LabelRule& rule : data.labels)
        if (!rule.from_matrix_on_heating && rule.phase == phase.name && matches(rule, data, system, set))
            return rule.label;
    return phase.label;
}

const LabelRule* heatingRule(const DataSet& data, const std::string& phase) {
    for (const LabelRule& rule : data.labels)
        if (rule.from_matrix_on_heating && rule.phase == phase) return &rule;
    return nullptr;
}

}  // namespace soak
