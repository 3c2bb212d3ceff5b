// SPDX-License-Identifier: GPL-3.0-or-later
#include "data_set.h"

#include <toml++/toml.h>
#include <algorithm>
#include <cstdint>
#include <fstream>
#include <set>
#include <sstream>

#include "system.h"

namespace soak {
namespace fs = std::filesystem;
namespace {

Error wrong(const fs::path& file, const std::string& entry, const std::string& what) {
    return {Fault::data, what, "", {file.filename().string() + (entry.empty() ? "" : ", " + entry)}};
}

Result<toml::table> readToml(const fs::path& file) {
    try {
        return toml::parse_file(file.string());
    } catch (const toml::parse_error& failure) {
        return wrong(file, "line " + std::to_string(failure.source().begin.line),
                     "not readable: " + std::string(failure.description()));
    }
}

std::vector<std::string> texts(const toml::node_view<const toml::node>& list) {
    std::vector<std::string> out;
    if (const auto* array = list.as_array())
        for (const auto& item : *array) out.push_back(item.value_or(std::string()));
    return out;
}

std::vector<std::string> splitCommas(const std::string& text) {
    std::vector<std::string> out;
    std::istringstream stream(text);
    for (std::string part; std::getline(stream, part, ',');) out.push_back(part);
    return out;
}

/// FNV-1a over the bytes of all files, in the order of their names: the set's version.
class Fingerprint {
public:
    void add(const fs::path& file) {
        std::ifstream stream(file, std::ios::binary);
        for (char c; stream.get(c);) hash_ = (hash_ ^ static_cast<unsigned char>(c)) * 1099511628211ULL;
    }
    std::string text() const {
        std::ostringstream out;
        out << std::hex << (hash_ & 0xffffffffffffULL);
        return out.str();
    }

private:
    std::uint64_t hash_ = 1469598103934665603ULL;
};

/// Reads one set; every step returns what is wrong, naming file and entry.
class Loader {
public:
    Loader(fs::path folder, DataSet& data) : folder_(std::move(folder)), data_(data) {}

    Result<Done> load() {
        for (auto step : {&Loader::functions, &Loader::elements, &Loader::phases, &Loader::labels, &Loader::volumes,
                          &Loader::systems}) {
            auto done = (this->*step)();
            if (!done) return std::move(done).error().within("data set " + folder_.filename().string());
        }
        data_.facts.name = folder_.filename().string();
        data_.facts.version = fingerprint_.text();
        data_.facts.parameters = static_cast<int>(data_.parameters.size());
        return Done{};
    }

private:
    Result<toml::table> open(const fs::path& file) {
        fingerprint_.add(file);
        return readToml(file);
    }

    Result<Done> functions() {
        const fs::path file = folder_ / "functions.toml";
        auto table = open(file);
        if (!table) return std::move(table).error();
        std::map<std::string, std::vector<RangeText>> waiting;
        for (const auto& [key, node] : table.value()) {
            const std::string name(key.str());
            if (name == "sources") continue;
            auto ranges = rangesOf(file, name, toml::node_view<const toml::node>(node));
            if (!ranges) return std::move(ranges).error();
            waiting[name] = std::move(ranges).value();
        }
        return resolve(file, std::move(waiting));
    }

    Result<std::vector<RangeText>> rangesOf(const fs::path& file, const std::string& name,
                                            const toml::node_view<const toml::node>& node) {
        const auto* list = node["ranges"].as_array();
        if (!list || list->empty()) return wrong(file, name, "it has no ranges");
        std::vector<RangeText> ranges;
        for (const auto& item : *list) {
            const toml::node_view<const toml::node> range(item);
            const auto from = range["from"].value<double>();
            const auto value = range["value"].value<std::string>();
            if (!from || !value) return wrong(file, name, "a range lacks `from` or `value`");
            if (!ranges.empty() && *from <= ranges.back().from)
                return wrong(file, name,
                             "the range from " + std::to_string(*from) + " K does not lie above the one before");
            ranges.push_back({*from, *value});
        }
        if (ranges.front().from > 298.15)
            return wrong(file, name, "a gap below " + std::to_string(ranges.front().from) + " K");
        const auto upto = node["upto"].value<double>();
        if (!upto || *upto <= ranges.back().from)
            return wrong(file, name, "`upto` is missing or lies below the last range");
        return ranges;
    }

    /// Functions may name each other in any order; each round reads those whose names are all known.
    Result<Done> resolve(const fs::path& file, std::map<std::string, std::vector<RangeText>> waiting) {
        while (!waiting.empty()) {
            const size_t before = waiting.size();
            for (auto it = waiting.begin(); it != waiting.end();) {
                bool ready = true;
                for (const auto& range : it->second) {
                    auto names = namesIn(range.value);
                    if (!names) return std::move(names).error().within(file.filename().string() + ", " + it->first);
                    for (const auto& name : names.value()) {
                        if (!functions_.count(name) && !waiting.count(name))
                            return wrong(file, it->first, "no function is named " + name);
                        ready = ready && functions_.count(name);
                    }
                }
                if (!ready) {
                    ++it;
                    continue;
                }
                auto function = readFunction(it->second, functions_);
                if (!function) return std::move(function).error().within(file.filename().string() + ", " + it->first);
                functions_[it->first] = std::move(function).value();
                it = waiting.erase(it);
            }
            if (waiting.size() == before) return wrong(file, waiting.begin()->first, "the function refers to itself");
        }
        return Done{};
    }

    Result<Done> elements() {
        const fs::path file = folder_ / "elements.toml";
        auto table = open(file);
        if (!table) return std::move(table).error();
        const auto order = texts(std::as_const(table.value())["order"]);
        if (order.empty()) return wrong(file, "order", "no elements are listed");
        for (const auto& symbol : order) {
            const auto entry = std::as_const(table.value())[symbol];
            const auto mass = entry["mass"].value<double>();
            const auto name = entry["function"].value<std::string>();
            if (!mass || *mass <= 0 || !name) return wrong(file, symbol, "`mass` or `function` is missing");
            const auto function = functions_.find(*name);
            if (function == functions_.end()) return wrong(file, symbol, "no function is named " + *name);
            data_.elements.push_back({symbol, *mass, function->second});
            data_.facts.elements.push_back(symbol);
        }
        return Done{};
    }

    Result<Done> phases() {
        const fs::path file = folder_ / "phases.toml";
        auto table = open(file);
        if (!table) return std::move(table).error();
        for (const auto& [key, node] : table.value()) {
            const toml::node_view<const toml::node> entry(node);
            PhaseData phase;
            phase.name = phase.label = std::string(key.str());
            phase.structure = entry["structure"].value_or(std::string());
            if (const auto* sites = entry["sites"].as_array())
                for (const auto& site : *sites) phase.sites.push_back(site.value_or(0.0));
            if (const auto* lists = entry["constituents"].as_array())
                for (const auto& list : *lists)
                    phase.constituents.push_back(texts(toml::node_view<const toml::node>(list)));
            if (phase.sites.empty() || phase.sites.size() != phase.constituents.size())
                return wrong(file, phase.name, "`sites` and `constituents` do not have the same number of sublattices");
            for (const auto& list : phase.constituents) {
                std::set<std::string> once;
                for (const auto& name : list) {
                    if (name != "Va" && data_.elementIndex(name) < 0)
                        return wrong(file, phase.name, "the constituent " + name + " is not an element of this set");
                    if (!once.insert(name).second)
                        return wrong(file, phase.name, name + " stands twice on one sublattice");
                }
            }
            for (double site : phase.sites)
                if (site <= 0) return wrong(file, phase.name, "a number of sites is not positive");
            if (const auto magnetic = entry["magnetic"]) {
                phase.magnetic = MagneticData{magnetic["antiferro"].value_or(0.0), magnetic["p"].value_or(0.0)};
                if (phase.magnetic->antiferro >= 0 || phase.magnetic->p <= 0)
                    return wrong(file, phase.name, "`antiferro` must be negative and `p` positive");
            }
            data_.facts.phases.push_back(phase.name);
            data_.phases.push_back(std::move(phase));
        }
        return Done{};
    }

    Result<Done> labels() {
        const fs::path file = folder_ / "labels.toml";
        auto table = open(file);
        if (!table) return std::move(table).error();
        const toml::table& top = table.value();
        data_.matrix = texts(top["matrix"]);
        data_.facts.balance = top["balance"].value_or(std::string());
        if (data_.elementIndex(data_.facts.balance) < 0)
            return wrong(file, "balance", "\"" + data_.facts.balance + "\" is not an element of this set");
        for (const auto& name : texts(top["leave_out"])) {
            const int phase = data_.phaseIndex(name);
            if (phase < 0) return wrong(file, "leave_out", "no phase is named " + name);
            data_.phases[static_cast<size_t>(phase)].left_out = true;
            data_.facts.left_out.push_back(name);
        }
        if (const auto* names = top["names"].as_table())
            for (const auto& [key, node] : *names) {
                const int phase = data_.phaseIndex(key.str());
                if (phase < 0) return wrong(file, "names", "no phase is named " + std::string(key.str()));
                data_.phases[static_cast<size_t>(phase)].label = node.value_or(std::string());
            }
        if (const auto* rules = top["rule"].as_array())
            for (const auto& node : *rules) {
                const toml::node_view<const toml::node> entry(node);
                LabelRule rule;
                rule.phase = entry["phase"].value_or(std::string());
                rule.label = entry["label"].value_or(std::string());
                if (data_.phaseIndex(rule.phase) < 0)
                    return wrong(file, "rule " + rule.label, "no phase is named " + rule.phase);
                rule.filled_above = entry["filled_above"].value<double>();
                rule.main = entry["main"].value_or(std::string());
                const auto pair = texts(entry["exceeds"]);
                if (!pair.empty() && pair.size() != 2)
                    return wrong(file, "rule " + rule.label, "`exceeds` takes two elements");
                if (pair.size() == 2) rule.exceeds_this = pair[0], rule.exceeds_other = pair[1];
                for (const auto& element : {rule.main, rule.exceeds_this, rule.exceeds_other})
                    if (!element.empty() && data_.elementIndex(element) < 0)
                        return wrong(file, "rule " + rule.label, element + " is not an element of this set");
                rule.from_matrix_on_heating = entry["from_matrix_on_heating"].value_or(false);
                rule.unless_beside = texts(entry["unless_beside"]);
                data_.labels.push_back(std::move(rule));
            }
        return Done{};
    }

    Result<Done> volumes() {
        const fs::path file = folder_ / "volumes.toml";
        auto table = open(file);
        if (!table) return std::move(table).error();
        for (auto& phase : data_.phases) {
            const auto entry = std::as_const(table.value())[phase.name];
            const auto other = entry["other"].value<double>();
            if (!other) return wrong(file, phase.name, "the phase has no volume (`other` is missing)");
            for (const auto& element : data_.elements)
                phase.volume_cm3[element.symbol] = entry[element.symbol].value_or(*other);
        }
        return Done{};
    }

    Result<Done> systems() {
        std::vector<fs::path> files;
        for (const auto& entry : fs::directory_iterator(folder_ / "systems"))
            if (entry.path().extension() == ".toml") files.push_back(entry.path());
        std::sort(files.begin(), files.end());
        std::set<std::string> present;
        for (const auto& file : files) {
            const size_t first = data_.parameters.size();
            auto table = open(file);
            if (!table) return std::move(table).error();
            const auto system = texts(std::as_const(table.value())["system"]);
            const auto* list = table.value()["parameters"].as_array();
            if (system.empty() || !list) return wrong(file, "", "`system` or `parameters` is missing");
            const std::set<std::string> members(system.begin(), system.end());
            for (size_t i = 0; i < list->size(); ++i) {
                auto done = parameter(file, i + 1, toml::node_view<const toml::node>(*list->get(i)), members,
                                      std::as_const(table.value())["sources"]);
                if (!done) return std::move(done).error();
            }
            const auto own = data_.parameters.begin() + static_cast<std::ptrdiff_t>(first);
            if (std::any_of(own, data_.parameters.end(), isAssessed)) present.insert(file.stem().string());
        }
        listGaps(present);
        return Done{};
    }

    /// More than a guess: published, or fitted to measurements. A binary of guesses alone counts as not assessed.
    static bool isAssessed(const Parameter& p) {
        return !p.estimated || !p.fitted_to.empty() || p.source.rfind("estimate", 0) != 0;
    }

    Result<Done> parameter(const fs::path& file, size_t number, const toml::node_view<const toml::node>& entry,
                           const std::set<std::string>& members, const toml::node_view<const toml::node>& sources) {
        const std::string phaseName = entry["phase"].value_or(std::string());
        const auto at = texts(entry["at"]);
        std::string called = "entry " + std::to_string(number) + " (" + phaseName;
        for (const auto& part : at) called += " : " + part;
        called += ")";

        Parameter p;
        p.place = file.filename().string() + ", " + called;
        p.phase = data_.phaseIndex(phaseName);
        if (p.phase < 0) return wrong(file, called, "no phase is named \"" + phaseName + "\"");
        const PhaseData& phase = data_.phases[static_cast<size_t>(p.phase)];
        if (at.size() != phase.sites.size())
            return wrong(file, called,
                         "it names " + std::to_string(at.size()) + " sublattices, the phase has " +
                             std::to_string(phase.sites.size()));
        for (size_t s = 0; s < at.size(); ++s) {
            std::vector<int> mixing;
            for (const auto& name : splitCommas(at[s])) {
                const auto& list = phase.constituents[s];
                const auto found = std::find(list.begin(), list.end(), name);
                if (found == list.end())
                    return wrong(file, called,
                                 "\"" + name + "\" is no constituent of sublattice " + std::to_string(s + 1));
                if (name != "Va" && !members.count(name))
                    return wrong(file, called, name + " does not belong to the system of this file");
                mixing.push_back(static_cast<int>(found - list.begin()));
            }
            if (mixing.empty()) return wrong(file, called, "sublattice " + std::to_string(s + 1) + " is empty");
            if (!std::is_sorted(mixing.begin(), mixing.end()) ||
                std::adjacent_find(mixing.begin(), mixing.end()) != mixing.end())
                return wrong(file, called, "constituents must stand once each, in alphabetical order");
            p.at.push_back(std::move(mixing));
        }
        const std::string kind = entry["kind"].value_or(std::string("G"));
        if (kind != "G" && kind != "Tc" && kind != "beta") return wrong(file, called, "unknown kind \"" + kind + "\"");
        p.kind = kind == "G" ? ParameterKind::G : kind == "Tc" ? ParameterKind::Tc : ParameterKind::beta;
        p.order = entry["order"].value_or(0);
        if (auto why = shapeFault(p); !why.empty()) return wrong(file, called, why);
        const auto value = entry["value"].value<std::string>();
        if (!value) return wrong(file, called, "`value` is missing");
        auto function = readFunction({{298.15, *value}}, functions_);
        if (!function) return std::move(function).error().within(file.filename().string() + ", " + called);
        p.value = std::move(function).value();
        if (p.kind != ParameterKind::G)
            for (size_t k = 1; k < kPowers; ++k)
                if (p.value.pieces.front().coefficients[k] != 0)
                    return wrong(file, called, kind + " must not depend on T");
        const std::string source = entry["source"].value_or(std::string());
        p.source = sources[source].value_or(std::string());
        if (p.source.empty()) return wrong(file, called, "the source \"" + source + "\" is not listed in [sources]");
        p.estimated = entry["estimated"].value_or(false);
        p.fitted_to = entry["fitted_to"].value_or(std::string());
        if (!once_.insert({p.phase, static_cast<int>(p.kind), p.at, p.order}).second)
            return wrong(file, called,
                         "the same parameter (order " + std::to_string(p.order) + ") stands twice in the set");
        data_.facts.estimated += p.estimated;
        data_.parameters.push_back(std::move(p));
        return Done{};
    }

    /// Which forms the models know: end-members, one sublattice mixing (2: any order, 3: orders -1..2), two mixing by
    /// pairs.
    static std::string shapeFault(const Parameter& p) {
        size_t pairs = 0, triples = 0, more = 0;
        for (const auto& mixing : p.at) {
            pairs += mixing.size() == 2;
            triples += mixing.size() == 3;
            more += mixing.size() > 3;
        }
        if (more || triples > 1 || (triples && pairs) || pairs > 2) return "this way of mixing is not modelled";
        if (triples ? (p.order < -1 || p.order > 2) : p.order < 0 || p.order > 9)
            return "unknown order " + std::to_string(p.order);
        if ((pairs == 2 || pairs + triples == 0) && p.order != 0) return "only order 0 is known here";
        return {};
    }

    void listGaps(const std::set<std::string>& present) {
        const auto& symbols = data_.facts.elements;
        for (size_t a = 0; a < symbols.size(); ++a)
            for (size_t b = a + 1; b < symbols.size(); ++b)
                if (!present.count(symbols[a] + "-" + symbols[b]) && !present.count(symbols[b] + "-" + symbols[a]))
                    data_.facts.gaps.push_back("no assessed binary " + symbols[a] + "-" + symbols[b]);
        for (size_t f = 0; f < data_.phases.size(); ++f) {
            const PhaseData& phase = data_.phases[f];
            std::vector<size_t> index(phase.sites.size(), 0);
            for (bool more = true; more;) {
                std::vector<std::vector<int>> at;
                std::string text;
                for (size_t s = 0; s < index.size(); ++s) {
                    at.push_back({static_cast<int>(index[s])});
                    text += (s ? ":" : "") + phase.constituents[s][index[s]];
                }
                if (!once_.count({static_cast<int>(f), 0, at, 0}))
                    data_.facts.gaps.push_back("end-member by default: " + phase.name + " " + text);
                more = false;
                for (size_t s = 0; s < index.size() && !more; ++s) {
                    if (++index[s] < phase.constituents[s].size())
                        more = true;
                    else
                        index[s] = 0;
                }
            }
        }
    }

    using Key = std::tuple<int, int, std::vector<std::vector<int>>, int>;
    fs::path folder_;
    DataSet& data_;
    std::map<std::string, Function> functions_;
    std::set<Key> once_;
    Fingerprint fingerprint_;
};

template <class List, class Name>
int indexOf(const List& list, std::string_view wanted, Name name) {
    for (size_t i = 0; i < list.size(); ++i)
        if (name(list[i]) == wanted) return static_cast<int>(i);
    return -1;
}

}  // namespace

DataSet::DataSet() = default;
DataSet::~DataSet() = default;

int DataSet::elementIndex(std::string_view symbol) const {
    return indexOf(elements, symbol, [](const ElementData& e) -> const std::string& { return e.symbol; });
}

int DataSet::phaseIndex(std::string_view name) const {
    return indexOf(phases, name, [](const PhaseData& p) -> const std::string& { return p.name; });
}

std::shared_ptr<const System> DataSet::system(const std::vector<int>& wanted) const {
    const std::lock_guard lock(guard_);
    auto& kept = compiled_[wanted];
    if (!kept) kept = std::make_shared<const System>(*this, wanted);
    return kept;
}

Result<std::shared_ptr<const DataSet>> loadDataSet(const fs::path& folder) {
    std::error_code ignored;
    if (!fs::is_directory(folder / "systems", ignored))
        return Error{Fault::data,
                     "no data set lies in " + folder.string() + " (a folder with elements.toml, phases.toml, systems/)",
                     "",
                     {}};
    auto data = std::make_shared<DataSet>();
    auto done = Loader(folder, *data).load();
    if (!done) return std::move(done).error();
    return std::shared_ptr<const DataSet>(std::move(data));
}

const DataSetFacts& facts(const DataSet& data) { return data.facts; }

}  // namespace soak
