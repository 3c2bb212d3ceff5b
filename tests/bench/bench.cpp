// SPDX-License-Identifier: GPL-3.0-or-later
// bench: time of states, sweeps and windows, the ratios that do not depend on the machine, growth, threads and memory.
//
//   bench                     everything, least of 5 repeats
//   bench --repeats N         the same with N repeats
//   bench --instructions      also instruction counts under callgrind (needs valgrind; a few minutes)
//   bench --only nothing|first|cold|warm|sweep STEEL    one work load without measuring, for profilers
#include <algorithm>
#include <cmath>
#include <cstdio>
#include <cstring>
#include <filesystem>
#include <limits>
#include <thread>

#include "alloy.h"
#include "base/folders.h"
#include "base/units.h"
#include "data_set.h"
#include "equilibrium.h"
#include "measure.h"
#include "nlopt_state.h"

namespace soak::bench {
namespace {

using Contents = std::map<std::string, double>;

struct Steel {
    const char* name;
    Contents wt;
};

/// Ten elements each, iron counted.
const std::vector<Steel>& steels() {
    static const std::vector<Steel> list = {{"stainless",
                                             {{"C", 0.05},
                                              {"Cr", 17.2},
                                              {"Ni", 10.8},
                                              {"Mo", 2.1},
                                              {"Mn", 1.4},
                                              {"Si", 0.5},
                                              {"N", 0.03},
                                              {"Cu", 0.3},
                                              {"Ti", 0.35}}},
                                            {"duplex",
                                             {{"C", 0.02},
                                              {"Cr", 22.2},
                                              {"Ni", 5.6},
                                              {"Mo", 3.1},
                                              {"Mn", 1.5},
                                              {"Si", 0.4},
                                              {"N", 0.17},
                                              {"Cu", 0.2},
                                              {"V", 0.05}}},
                                            {"tool",
                                             {{"C", 0.88},
                                              {"Cr", 4.1},
                                              {"Mo", 4.9},
                                              {"V", 1.85},
                                              {"W", 6.2},
                                              {"Si", 0.3},
                                              {"Mn", 0.3},
                                              {"Co", 0.4},
                                              {"N", 0.03}}},
                                            {"low-alloy",
                                             {{"C", 0.3},
                                              {"Cr", 1.1},
                                              {"Mo", 0.3},
                                              {"Ni", 1.0},
                                              {"Mn", 0.8},
                                              {"Si", 0.25},
                                              {"V", 0.08},
                                              {"Al", 0.03},
                                              {"N", 0.008}}}};
    return list;
}

/// Aluminium, for the same states, sweeps and windows on another set.
const std::vector<Steel>& lightAlloys() {
    static const std::vector<Steel> list = {
        {"2024",
         {{"Cu", 4.4}, {"Mg", 1.5}, {"Mn", 0.6}, {"Fe", 0.2}, {"Si", 0.1}, {"Cr", 0.02}, {"Zn", 0.1}, {"Ti", 0.03}}},
        {"7050",
         {{"Zn", 6.2}, {"Mg", 2.25}, {"Cu", 2.3}, {"Zr", 0.11}, {"Fe", 0.1}, {"Si", 0.06}, {"Mn", 0.03}, {"Ti", 0.02}}},
        {"casting",
         {{"Si", 6.5}, {"Cu", 3.5}, {"Mg", 0.3}, {"Fe", 0.5}, {"Mn", 0.3}, {"Zn", 0.3}, {"Ti", 0.1}, {"Ni", 0.05}}}};
    return list;
}

/// From below the treatments to above the melt.
struct Reach {
    double states_from_C, states_to_C, sweep_from_C, sweep_to_C;
};
constexpr Reach kSteel{600, 1500, 500, 1530}, kLight{250, 640, 150, 690};

std::shared_ptr<const DataSet> load(const char* set = "ferrous") {
    auto data = loadDataSet(productPath("thermo/data") / set);
    if (!data) {
        std::fprintf(stderr, "%s\n", data.error().text().c_str());
        std::exit(2);
    }
    return data.value();
}

template <class T>
T must(Result<T> result) {
    if (!result) {
        std::fprintf(stderr, "%s\n  %s\n", result.error().text().c_str(), result.error().repeat.c_str());
        std::exit(1);
    }
    return std::move(result).value();
}

/// Elements and amounts of an alloy, and a solver for it: all phases on but those that the set leaves out.
struct Task {
    std::vector<int> elements;
    Eigen::VectorXd b;
    std::shared_ptr<const System> system;
    std::vector<char> allowed;
    Reach reach = kSteel;
    Solver solver() const { return Solver(system, b, allowed); }
};

Task taskOf(const DataSet& data, const Contents& wt, const Reach& reach = kSteel) {
    Task task;
    task.reach = reach;
    std::vector<double> moles;
    double rest = 100;
    for (const auto& [element, content] : wt) rest -= content;
    for (size_t e = 0; e < data.elements.size(); ++e) {
        const ElementData& element = data.elements[e];
        const auto found = wt.find(element.symbol);
        if (found == wt.end() && element.symbol != data.facts.balance) continue;
        task.elements.push_back(static_cast<int>(e));
        moles.push_back((element.symbol == data.facts.balance ? rest : found->second) / element.mass);
    }
    task.b = Eigen::Map<Eigen::VectorXd>(moles.data(), static_cast<Eigen::Index>(moles.size()));
    task.b /= task.b.sum();
    task.system = data.system(task.elements);
    for (const PhaseModel& model : task.system->phases())
        task.allowed.push_back(!data.phases[static_cast<size_t>(model.data)].left_out);
    return task;
}

std::vector<double> temperatures(double from_C, double to_C, double step) {
    std::vector<double> list;
    for (double at_C = from_C; at_C <= to_C; at_C += step) list.push_back(kelvin(at_C));
    return list;
}

/// Seconds per state from nothing, mean over the treatment range.
double coldSeconds(const Task& task, int repeats) {
    const auto list = temperatures(task.reach.states_from_C, task.reach.states_to_C, 60);
    Solver solver = task.solver();
    return leastOf(repeats,
                   [&] {
                       for (double T : list) must(solver.solveCold(T));
                   }) /
           static_cast<double>(list.size());
}

/// Seconds per state from its neighbour 5 K below, mean over the treatment range.
double warmSeconds(const Task& task, int repeats) {
    const auto list = temperatures(task.reach.states_from_C + 5, task.reach.states_to_C, 5);
    Solver solver = task.solver();
    return leastOf(repeats,
                   [&] {
                       must(solver.solveCold(kelvin(task.reach.states_from_C)));
                       const Point first = solver.point();
                       solver.startFrom(first);
                       for (double T : list) must(solver.solve(T));
                   }) /
           static_cast<double>(list.size());
}

/// Seconds for G, gradient and Hessian of every phase once: what no method can do without.
double bareSeconds(const Task& task, int repeats) {
    Eigen::VectorXd at;
    task.system->parametersAt(1300, at);
    double g[PhaseModel::kMost], H[PhaseModel::kMost * PhaseModel::kMost];
    std::vector<std::vector<double>> sites;
    for (const PhaseModel& model : task.system->phases()) {
        sites.emplace_back(static_cast<size_t>(model.size));
        for (size_t c = 0; c < sites.back().size(); ++c) {
            const auto s = static_cast<size_t>(model.sublattice[c]);
            sites.back()[c] = 1.0 / (model.start[s + 1] - model.start[s]);
        }
    }
    constexpr int kRounds = 200;
    volatile double sink = 0;  // keeps the work from being left out
    return leastOf(repeats,
                   [&] {
                       for (int round = 0; round < kRounds; ++round)
                           for (size_t f = 0; f < sites.size(); ++f)
                               if (task.allowed[f])
                                   sink =
                                       sink + task.system->phases()[f].hessian(at.data(), 1300, sites[f].data(), g, H);
                   }) /
           kRounds;
}

double sweepSeconds(const std::shared_ptr<const DataSet>& data, const Contents& wt, const Reach& reach, int repeats) {
    return leastOf(repeats, [&] {
        Alloy alloy = must(Alloy::make(data, {wt, facts(*data).balance}));
        must(alloy.sweep(kelvin(reach.sweep_from_C), kelvin(reach.sweep_to_C)));
    });
}

/// A whole window: the sweep from below the treatments to the liquidus with every event and its slopes, and the limits
/// that ask for an amount or a content.
double windowSeconds(const std::shared_ptr<const DataSet>& data, const Contents& wt, const Reach& reach, int repeats) {
    const std::string element = wt.count("C") ? "C" : "Mg";  // what hardens
    return leastOf(repeats, [&] {
        Alloy alloy = must(Alloy::make(data, {wt, facts(*data).balance}));
        const Sweep sweep = must(alloy.sweep(kelvin(reach.sweep_from_C), kelvin(reach.sweep_to_C)));
        // The amount of the first state's largest matrix phase half-way, and the element of the matrix half-way.
        const State &low = sweep.states[sweep.states.size() / 3], &high = sweep.states[sweep.states.size() / 2];
        const std::string& label = low.phases.front().label;
        const double a = low.volumeFraction(label), b = high.volumeFraction(label);
        if (std::abs(a - b) > 1e-3)
            must(alloy.temperatureOfFraction(label, (a + b) / 2, low.temperature_K, high.temperature_K));
        const auto c = low.matrixContent(element), d = high.matrixContent(element);
        if (c && d && std::abs(*c - *d) > 1e-6)
            must(alloy.temperatureOfMatrixContent(element, (*c + *d) / 2, low.temperature_K, high.temperature_K));
    });
}

/// Where the solver's cold start stands, for the stable phases: the overall composition as the largest solution phase,
/// which the solver's own hull holds too, and of the others a little each, at the sample that lies lowest over the
/// hull's plane and nearest to the set. All balances hold, else SLSQP does not even set off.
std::vector<PhaseSet> coldStartOf(const Task& task, const Point& p) {
    const auto& samples = task.system->samples();
    std::vector<PhaseSet> sets = p.sets;
    size_t largest = 0;
    for (size_t s = 0; s < sets.size(); ++s)
        if (sets[s].n * sets[s].atoms > sets[largest].n * sets[largest].atoms) largest = s;
    Eigen::VectorXd rest = task.b, amounts(task.b.size());
    for (size_t s = 0; s < sets.size(); ++s) {
        if (s == largest) continue;
        PhaseSet& set = sets[s];
        const auto f = static_cast<size_t>(set.phase);
        const PhaseModel& model = task.system->phases()[f];
        const auto n = static_cast<size_t>(model.size);
        const auto distance = [&](int sample) {
            double sum = 0;
            for (size_t c = 0; c < n; ++c) sum += std::abs(p.sets[s].y[c] - samples.site(sample)[c]);
            return sum;
        };
        int best = samples.first[f];
        for (int k = best; k < samples.first[f + 1]; ++k)
            if (distance(k) < distance(best)) best = k;
        std::copy(samples.site(best), samples.site(best) + n, set.y.begin());
        model.amounts(set.y.data(), amounts.data(), static_cast<int>(amounts.size()));
        const double most = task.b.cwiseQuotient(amounts.cwiseMax(1e-300)).minCoeff();
        set.n = 0.5 * most / static_cast<double>(sets.size());
        rest -= set.n * amounts;
    }
    // The largest set holds the rest: metals by share on the first sublattice, the others over its sites.
    PhaseSet& matrix = sets[largest];
    const PhaseModel& model = task.system->phases()[static_cast<size_t>(matrix.phase)];
    double metal = 0;
    for (int c = model.start[0]; c < model.start[1]; ++c) metal += rest[model.element[static_cast<size_t>(c)]];
    matrix.n = metal / model.sites[0];
    for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
        double filled = 0;
        size_t vacant = PhaseModel::kMost;
        for (auto c = static_cast<size_t>(model.start[s]); c < static_cast<size_t>(model.start[s + 1]); ++c) {
            if (model.element[c] < 0)
                vacant = c;
            else
                filled += matrix.y[c] = rest[model.element[c]] / (matrix.n * model.sites[c]);
        }
        if (vacant < PhaseModel::kMost) matrix.y[vacant] = std::max(1 - filled, 1e-9);
    }
    return sets;
}

/// Energy of the sets over the plane, RT per mole of atoms: what is lacking or in excess of an element costs nothing.
double heightOf(const Task& task, const Point& p, const std::vector<PhaseSet>& sets) {
    Eigen::VectorXd amounts(task.b.size());
    double sum = 0;
    for (const PhaseSet& set : sets) {
        task.system->phases()[static_cast<size_t>(set.phase)].amounts(set.y.data(), amounts.data(),
                                                                      static_cast<int>(amounts.size()));
        sum += set.n * (set.gibbs - amounts.dot(p.mu));
    }
    return sum / (kGas * p.T);
}

void rivalTable(const DataSet& data, int repeats) {
    std::printf(
        "\nNLopt SLSQP on the same G and gradient, stable phases only, from the cold starting point, without proof; "
        "ours\n"
        "with proof, from cold and from a neighbour 5 K below. `short`: energy that SLSQP leaves above ours, RT per "
        "mole\n"
        "of atoms; a run that does not come within 1e-6 RT with all balances held never arrived: its ratio is a "
        "bound.\n");
    std::printf("%-10s %5s %9s %9s %9s %7s %8s %8s %9s %9s\n", "steel", "at C", "cold ms", "warm ms", "NLopt ms",
                "evals", "/cold", "/warm", "short", "imbalance");
    double cold = 1, warm = 1;
    int count = 0, arrived = 0;
    for (const Steel& steel : steels()) {
        const Task task = taskOf(data, steel.wt);
        for (double at_C : {700.0, 800.0, 900.0, 1000.0, 1100.0, 1200.0}) {
            const double T = kelvin(at_C);
            Solver solver = task.solver();
            must(solver.solveCold(T - 5));
            const Point neighbour = solver.point();
            const double ourWarm = leastOf(repeats, [&] {
                solver.startFrom(neighbour);
                must(solver.solve(T));
            });
            const double ourCold = leastOf(repeats, [&] { must(solver.solveCold(T)); });
            const Point p = solver.point();
            const auto start = coldStartOf(task, p);
            test::NloptState state;
            const double rival = leastOf(1, [&] { state = test::minimizeWithNlopt(*task.system, task.b, T, start); });
            const double above = heightOf(task, p, state.sets);
            std::printf("%-10s %5.0f %9.3f %9.3f %9.2f %7d %8.1f %8.1f %9.1g %9.1g\n", steel.name, at_C, 1e3 * ourCold,
                        1e3 * ourWarm, 1e3 * rival, state.evaluations, rival / ourCold, rival / ourWarm, above,
                        state.imbalance);
            arrived += above < 1e-6 && state.imbalance < 1e-8;
            cold *= rival / ourCold;
            warm *= rival / ourWarm;
            ++count;
        }
    }
    std::printf("geometric mean of the ratio: to cold %.1f, to warm %.1f; SLSQP arrived in %d of %d\n",
                std::pow(cold, 1.0 / count), std::pow(warm, 1.0 / count), arrived, count);
}

void stateTable(const std::shared_ptr<const DataSet>& data, const std::vector<Steel>& alloys, const Reach& reach,
                int repeats) {
    std::printf("\nprocessor time, proof included, ms\n%-10s %8s %8s %8s %8s %10s %10s\n", facts(*data).name.c_str(),
                "cold", "warm", "sweep", "window", "bare ms", "warm/bare");
    for (const Steel& steel : alloys) {
        const Task task = taskOf(*data, steel.wt, reach);
        const double warm = warmSeconds(task, repeats), bare = bareSeconds(task, repeats);
        std::printf("%-10s %8.3f %8.4f %8.2f %8.2f %10.4f %10.1f\n", steel.name, 1e3 * coldSeconds(task, repeats),
                    1e3 * warm, 1e3 * sweepSeconds(data, steel.wt, reach, repeats),
                    1e3 * windowSeconds(data, steel.wt, reach, repeats), 1e3 * bare, warm / bare);
    }
}

void growthTable(const DataSet& data, int repeats) {
    // In the order in which steels take them up.
    const std::pair<const char*, double> order15[] = {{"C", 0.08},  {"Cr", 17},  {"Ni", 9},   {"Mn", 1.2}, {"Mo", 1.5},
                                                      {"Si", 0.5},  {"N", 0.03}, {"V", 0.2},  {"Cu", 0.3}, {"Nb", 0.05},
                                                      {"Ti", 0.05}, {"W", 0.3},  {"Co", 0.2}, {"Al", 0.03}};
    std::printf("\ngrowth with the number of elements\n%8s %7s %8s %9s %9s %9s\n", "elements", "phases", "samples",
                "cold ms", "warm ms", "bare ms");
    Contents wt;
    std::vector<double> n, cold, warm;
    for (const auto& [element, content] : order15) {
        wt[element] = content;
        const Task task = taskOf(data, wt);
        if (task.elements.size() < 3) continue;
        n.push_back(static_cast<double>(task.elements.size()));
        cold.push_back(coldSeconds(task, repeats));
        warm.push_back(warmSeconds(task, repeats));
        const auto phases = std::count(task.allowed.begin(), task.allowed.end(), 1);
        std::printf("%8zu %7ld %8d %9.3f %9.4f %9.4f\n", task.elements.size(), static_cast<long>(phases),
                    task.system->samples().count(), 1e3 * cold.back(), 1e3 * warm.back(),
                    1e3 * bareSeconds(task, repeats));
    }
    std::printf("order in the number of elements: cold %.1f, warm %.1f\n", order(n, cold), order(n, warm));
}

void threadTable(const std::shared_ptr<const DataSet>& data) {
    constexpr int kHeats = 48;
    const auto run = [&](int threads) {
        std::vector<std::thread> pool;
        std::vector<double> busy(static_cast<size_t>(threads));
        const double before = wallSeconds();
        for (int t = 0; t < threads; ++t)
            pool.emplace_back([&, t] {
                const double start = threadSeconds();
                for (int heat = t; heat < kHeats; heat += threads) {
                    Contents wt = steels()[static_cast<size_t>(heat) % steels().size()].wt;
                    wt["Mn"] += 0.01 * (heat / 4);
                    Alloy alloy = must(Alloy::make(data, {wt, "Fe"}));
                    must(alloy.sweep(kelvin(500), kelvin(1530)));
                }
                busy[static_cast<size_t>(t)] = threadSeconds() - start;
            });
        for (auto& thread : pool) thread.join();
        double sum = 0;
        for (double b : busy) sum += b;
        return std::pair{wallSeconds() - before, sum};
    };
    const auto [one, oneBusy] = run(1);
    const auto [two, twoBusy] = run(2);
    std::printf(
        "\n%d heats' sweeps: 1 thread %.2f s (%.2f s of processor), 2 threads %.2f s (%.2f s): gain %.2f; "
        "by processor time %.2f\n",
        kHeats, one, oneBusy, two, twoBusy, one / two, 2 * oneBusy / twoBusy);
}

void startUp(int repeats) {
    std::printf("start-up: load %.1f ms", 1e3 * leastOf(repeats, [] { static_cast<void>(load()); }));
    const auto data = load();
    const Task task = taskOf(*data, steels()[0].wt);
    std::printf(", compile ten elements %.1f ms", 1e3 * leastOf(repeats, [&] { System(*data, task.elements); }));
    std::vector<int> all;
    for (size_t e = 0; e < data->elements.size(); ++e) all.push_back(static_cast<int>(e));
    std::printf(", all %zu %.1f ms\n", all.size(), 1e3 * leastOf(repeats, [&] { System(*data, all); }));
}

void memory() {
    const double before = memoryNow_MB();
    const auto data = load();
    Alloy alloy = must(Alloy::make(data, {steels()[2].wt, "Fe"}));
    must(alloy.sweep(kelvin(500), kelvin(1530)));
    std::printf("memory of one worker: %.1f MB with its data (%.1f MB program alone)\n", memoryMost_MB(), before);
}

/// One work load, for profilers and instruction counts.
int only(const std::string& what, const std::string& name) {
    const auto data = load();
    for (const Steel& steel : steels()) {
        if (steel.name != name) continue;
        const Task task = taskOf(*data, steel.wt);
        if (what == "first") must(task.solver().solveCold(kelvin(600)));  // where the warm states set off
        if (what == "cold") coldSeconds(task, 1);
        if (what == "warm") warmSeconds(task, 1);
        if (what == "sweep") sweepSeconds(data, steel.wt, kSteel, 1);
        return 0;
    }
    return 2;
}

void instructionTable() {
    const std::string self = std::filesystem::read_symlink("/proc/self/exe").string();
    std::printf("\ninstructions, millions, start-up taken off\n%-10s %9s %9s %9s\n", "steel", "cold", "warm", "sweep");
    for (const Steel& steel : steels()) {
        const auto count = [&](const char* what) {
            return instructionsOf(self, std::string("--only ") + what + " " + steel.name);
        };
        const auto base = count("nothing");  // load and compile
        if (!base) {
            std::printf("valgrind is not installed\n");
            return;
        }
        const auto millions = [&](const char* what, double from, double states) {
            return (count(what).value_or(0) - from) / 1e6 / states;
        };
        std::printf("%-10s %9.2f %9.3f %9.1f\n", steel.name, millions("cold", *base, 16),
                    millions("warm", count("first").value_or(0), 180), millions("sweep", *base, 1));
    }
}

}  // namespace
}  // namespace soak::bench

int main(int argc, char** argv) {
    using namespace soak::bench;
    int repeats = 5;
    bool instructions = false;
    for (int i = 1; i < argc; ++i) {
        const std::string option = argv[i];
        if (option == "--instructions")
            instructions = true;
        else if (option == "--repeats" && i + 1 < argc)
            repeats = std::max(1, std::atoi(argv[++i]));
        else if (option == "--only" && i + 2 < argc)
            return only(argv[i + 1], argv[i + 2]);
        else {
            std::fprintf(stderr, "bench [--repeats N] [--instructions] [--only cold|warm|sweep STEEL]\n");
            return 2;
        }
    }
    memory();
    startUp(repeats);
    const auto data = load();
    stateTable(data, steels(), kSteel, repeats);
    stateTable(load("light"), lightAlloys(), kLight, repeats);
    rivalTable(*data, repeats);
    growthTable(*data, repeats);
    threadTable(data);
    if (instructions) instructionTable();
    return 0;
}
