// SPDX-License-Identifier: GPL-3.0-or-later
#include <cstdio>

#include "base/units.h"
#include "json_parts.h"

namespace soak::cli {
namespace {

Json opinions(const std::vector<Opinion>& all) {
    Json array = Json::array();
    for (const Opinion& one : all)
        array.push_back({{"quantity", plain(one.quantity)},
                         {"name", plain(one.name)},
                         {"temperature_C", one.value},
                         {"scatter_K", optional(one.scatter)},
                         {"in_range", one.in_range},
                         {"outside", plain(one.outside)},
                         {"source", plain(one.source)}});
    return array;
}

Json asJson(const Limit& limit) {
    return {{"cause", plain(limit.cause)},
            {"temperature_C", optional(limit.temperature_C)},
            {"uncertainty_K", limit.uncertainty_K},
            {"kind", plain(limit.kind)},
            {"phase", plain(limit.phase)},
            {"because", plain(limit.because)},
            {"source", plain(limit.source)},
            {"computed", limit.computed},
            {"set", limit.set},
            {"impossible", limit.impossible},
            {"margin_K", limit.margin_K},
            {"certificate_K", limit.certificate_K},
            {"laboratory_K", limit.laboratory_K},
            {"model_K", limit.model_K},
            {"K_per_wt", Json(limit.K_per_wt)},
            {"opinions", opinions(limit.opinions)},
            {"disagreement", plain(limit.disagreement)},
            {"drivers", plain(limit.drivers)},
            {"remark", plain(limit.remark)}};
}

Json limits(const std::vector<Limit>& all) {
    Json array = Json::array();
    for (const Limit& limit : all) array.push_back(asJson(limit));
    return array;
}

Json asJson(const Band& band) {
    Json parts = Json::array();
    for (const BandPart& part : band.parts)
        parts.push_back({{"name", plain(part.name)}, {"low_K", part.low_K}, {"high_K", part.high_K}});
    return {{"low_C", band.low_C},
            {"high_C", band.high_C},
            {"rule", plain(band.rule)},
            {"added_up", {{"low_C", band.added_low_C}, {"high_C", band.added_high_C}}},
            {"root_of_squares", {{"low_C", band.root_low_C}, {"high_C", band.root_high_C}}},
            {"offset_K", band.offset_K},
            {"parts", parts},
            {"may_issue", band.may_issue},
            {"warnings", list(band.warnings)}};
}

Json asJson(const CoolingAnswer& cooling) {
    Json crossings = Json::array();
    for (const Crossing& one : cooling.crossings)
        crossings.push_back({{"what", plain(one.what)},
                             {"low_C", one.low_C},
                             {"high_C", one.high_C},
                             {"computed", one.computed},
                             {"because", plain(one.because)},
                             {"source", plain(one.source)}});
    return {{"phase", plain(cooling.phase)},
            {"begins_C", optional(cooling.begins_C)},
            {"budget_s", optional(cooling.budget_s)},
            {"set_s", optional(cooling.set_s)},
            {"allowed_s", optional(cooling.allowed_s)},
            {"transfer_s", optional(cooling.transfer_s)},
            {"quench", plain(cooling.quench)},
            {"too_slow", cooling.too_slow},
            {"needed_K_per_s", optional(cooling.needed_K_per_s)},
            {"sentence", plain(cooling.sentence)},
            {"basis", plain(cooling.basis)},
            {"crossings", crossings}};
}

Json asJson(const SoakTime& soak) {
    return {{"heat_up_min", optional(soak.heat_up_min)},       {"dissolve_min", optional(soak.dissolve_min)},
            {"homogenise_min", optional(soak.homogenise_min)}, {"rule_min", optional(soak.rule_min)},
            {"rule_too_short", soak.rule_too_short},           {"lines", list(soak.lines)}};
}

Json outlook(const std::vector<QuenchOutlook>& all) {
    Json array = Json::array();
    for (const QuenchOutlook& one : all)
        array.push_back({{"from_C", one.from_C},
                         {"carbon_wt", one.carbon_wt},
                         {"Ms_C", optional(one.Ms_C)},
                         {"Mf_C", optional(one.Mf_C)},
                         {"Bs_C", optional(one.Bs_C)},
                         {"retained_vol", one.retained_vol},
                         {"hardness_HRC", optional(one.hardness_HRC)},
                         {"basis", plain(one.basis)}});
    return array;
}

Json remedies(const std::vector<Remedy>& all) {
    Json array = Json::array();
    for (const Remedy& one : all)
        array.push_back({{"what", plain(one.what)}, {"text", plain(one.text)}, {"margin_K", optional(one.margin_K)}});
    return array;
}

Json asJson(const GradeCheck& check) {
    Json findings = Json::array();
    for (const Finding& finding : check.findings)
        findings.push_back({{"element", plain(finding.element)},
                            {"text", plain(finding.text)},
                            {"source", plain(finding.source)},
                            {"fails", finding.fails}});
    return {{"verdict", plain(check.verdict)},
            {"findings", findings},
            {"grade_id", plain(check.grade_id)},
            {"satisfied", list(check.satisfied)},
            {"suggested", list(check.suggested)}};
}

}  // namespace

Json asJson(const State& state) {
    Json phases = Json::array();
    for (const PhaseAmount& phase : state.phases)
        phases.push_back({{"name", phase.name},
                          {"label", phase.label},
                          {"mole_fraction", phase.mole_fraction},
                          {"mass_fraction", phase.mass_fraction},
                          {"volume_fraction", phase.volume_fraction},
                          {"wt", Json(phase.wt)}});
    return {{"temperature_C", celsius(state.temperature_K)},
            {"phases", phases},
            {"chemical_potential_J_per_mol", Json(state.chemical_potential_J_per_mol)},
            {"gibbs_J_per_mol", state.gibbs_J_per_mol},
            {"proof_J_per_mol", state.proof_J_per_mol}};
}

Json asJson(const Event& event) {
    return {{"kind", event.kind == EventKind::appears ? "appears" : "vanishes"},
            {"phase", event.label},
            {"temperature_C", celsius(event.temperature_K)},
            {"name", event.phase},
            {"K_per_wt", Json(event.K_per_wt)}};
}

Json asJson(const WindowAnswer& answer) {
    const bool has_window = answer.verdict != Verdict::noWindow && answer.verdict != Verdict::notComputed;
    const bool has_band = !answer.band.rule.isEmpty();
    return {{"heat", plain(answer.heat)},
            {"grade", plain(answer.grade)},
            {"family", plain(answer.family)},
            {"cycle", plain(answer.cycle)},
            {"kind", plain(answer.kind)},
            {"furnace", plain(answer.furnace)},
            {"floors", limits(answer.floors)},
            {"ceilings", limits(answer.ceilings)},
            {"window",
             has_window ? Json{{"low_C", optional(answer.low_C)}, {"high_C", optional(answer.high_C)}} : Json(nullptr)},
            {"band", has_band ? asJson(answer.band) : Json(nullptr)},
            {"setpoint_C", answer.setpoint_C},
            {"suggested_setpoint_C", optional(answer.suggested_setpoint_C)},
            {"verdict", plain(word(answer.verdict))},
            {"margin_K", optional(answer.margin_K)},
            {"grade_check", asJson(answer.grade_check)},
            {"chance_inside", optional(answer.chance_inside)},
            {"cooling", asJson(answer.cooling)},
            {"soak", asJson(answer.soak)},
            {"quench_outlook", outlook(answer.quench_outlook)},
            {"remedies", remedies(answer.remedies)},
            {"reason", plain(answer.reason)},
            {"left_out", list(answer.left_out)},
            {"remarks", list(answer.remarks)},
            {"published", list(answer.published)},
            {"data_set", plain(answer.data_set)},
            {"data_version", plain(answer.data_version)},
            {"program_version", plain(answer.program_version)}};
}

Json asJson(const TriageRow& row) {
    return {{"heat", plain(row.heat)},
            {"grade", plain(row.grade)},
            {"cycle", plain(row.cycle)},
            {"furnace", plain(row.furnace)},
            {"verdict", plain(word(row.verdict))},
            {"margin_K", optional(row.margin_K)},
            {"setpoint_C", row.cycle.isEmpty() ? Json(nullptr) : Json(row.setpoint_C)},
            {"suggested_setpoint_C", optional(row.suggested_setpoint_C)},
            {"reason", plain(row.reason)},
            {"grade_check", plain(row.grade_verdict)},
            {"findings", list(row.findings)},
            {"data_set", row.answer ? plain(row.answer->data_set) : ""},
            {"data_version", row.answer ? plain(row.answer->data_version) : ""}};
}

void print(const Json& json) {
    const std::string text = json.dump(2, ' ', false, Json::error_handler_t::replace) + "\n";
    std::fwrite(text.data(), 1, text.size(), stdout);
}

void print(const QString& text) {
    const QByteArray bytes = text.toUtf8();
    std::fwrite(bytes.data(), 1, static_cast<std::size_t>(bytes.size()), stdout);
}

}  // namespace soak::cli
