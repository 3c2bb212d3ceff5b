// SPDX-License-Identifier: GPL-3.0-or-later
#include <cmath>

#include "campaign/draw.h"
#include "nlopt_state.h"
#include "support.h"

using namespace soak;
using namespace soak::test;

namespace {

struct Alike {
    std::shared_ptr<const System> system;
    Eigen::VectorXd b;
    std::vector<char> allowed;
};

Alike problemOf(const campaign::Case& c) {
    Alike problem;
    std::vector<int> present;
    std::vector<double> b;
    double rest = 100;
    for (const auto& [element, content] : c.wt) rest -= content;
    for (size_t e = 0; e < ferrous()->elements.size(); ++e) {
        const ElementData& element = ferrous()->elements[e];
        const double content = element.symbol == c.balance  ? rest
                               : c.wt.count(element.symbol) ? c.wt.at(element.symbol)
                                                            : 0;
        if (content < 1e-5) continue;
        present.push_back(static_cast<int>(e));
        b.push_back(content / element.mass);
    }
    problem.system = ferrous()->system(present);
    problem.b = Eigen::Map<Eigen::VectorXd>(b.data(), static_cast<Eigen::Index>(b.size()));
    problem.b /= problem.b.sum();
    for (const PhaseModel& model : problem.system->phases())
        problem.allowed.push_back(!ferrous()->phases[static_cast<size_t>(model.data)].left_out);
    return problem;
}

/// Height over the plane of what the optimiser found, RT per mole of atoms. Its mass balance is not exact; measured
/// from the plane, what is lacking or in excess costs nothing.
double heightOf(const NloptState& state, const Alike& problem, const Point& p) {
    Eigen::VectorXd amounts(problem.b.size());
    double sum = 0;
    for (const PhaseSet& set : state.sets) {
        problem.system->phases()[static_cast<size_t>(set.phase)].amounts(set.y.data(), amounts.data(),
                                                                         static_cast<int>(amounts.size()));
        sum += set.n * (set.gibbs - amounts.dot(p.mu));
    }
    return sum / (kGas * p.T);
}

/// Moves every site fraction by up to a factor, and shares the amounts out anew.
std::vector<PhaseSet> perturbed(const Alike& problem, std::vector<PhaseSet> sets, double strength, Random& random) {
    for (PhaseSet& set : sets) {
        const PhaseModel& model = problem.system->phases()[static_cast<size_t>(set.phase)];
        set.n *= std::exp(uniform(random, -strength, strength));
        for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
            double sum = 0;
            for (auto c = static_cast<size_t>(model.start[s]); c < static_cast<size_t>(model.start[s + 1]); ++c)
                sum += set.y[c] *= std::exp(uniform(random, -strength, strength));
            for (auto c = static_cast<size_t>(model.start[s]); c < static_cast<size_t>(model.start[s + 1]); ++c)
                set.y[c] /= sum;
        }
    }
    return sets;
}

/// The sets and one more, of a phase drawn at random, at random site fractions.
std::vector<PhaseSet> withOneMore(const Alike& problem, std::vector<PhaseSet> sets, Random& random) {
    const auto& models = problem.system->phases();
    PhaseSet set;
    do set.phase = static_cast<int>(random() % models.size());
    while (!problem.allowed[static_cast<size_t>(set.phase)]);
    const PhaseModel& model = models[static_cast<size_t>(set.phase)];
    for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
        const auto from = static_cast<size_t>(model.start[s]), to = static_cast<size_t>(model.start[s + 1]);
        double sum = 0;
        for (size_t c = from; c < to; ++c) sum += set.y[c] = uniform(random, 0.01, 1);
        for (size_t c = from; c < to; ++c) set.y[c] /= sum;
    }
    set.n = 0.02;
    sets.push_back(set);
    return sets;
}

}  // namespace

TEST_CASE("a general-purpose optimiser never finds less energy", "[minimum]") {
    const auto source = campaign::makeSource(ferrous(), campaign::readGrades(productPath("db/library/grades.csv")));
    REQUIRE_FALSE(source.grades.empty());
    campaign::Random drawing(20);
    Random random(21);
    int cases = 0, runs = 0, arrived = 0;
    while (cases < 50) {
        const campaign::Case c = campaign::draw(source, drawing);
        const Alike problem = problemOf(c);
        if (c.kind == campaign::Kind::trace || problem.b.size() < 4) continue;
        ++cases;
        Solver solver(problem.system, problem.b, problem.allowed);
        REQUIRE(solver.solveCold(c.T));
        const Point p = solver.point();
        INFO(campaign::wtText(c) << " at " << celsius(c.T));
        for (int start = 0; start < 4; ++start) {
            const auto sets = start == 0   ? p.sets
                              : start == 1 ? perturbed(problem, p.sets, 0.1, random)
                              : start == 2 ? perturbed(problem, p.sets, 1, random)
                                           : withOneMore(problem, perturbed(problem, p.sets, 0.3, random), random);
            const NloptState state = minimizeWithNlopt(*problem.system, problem.b, p.T, sets);
            const double height = heightOf(state, problem, p);
            INFO("start " << start << ", imbalance " << state.imbalance);
            CHECK(height > -1e-6);
            ++runs;
            arrived += height < 1e-5 && state.imbalance < 1e-6;
        }
    }
    // The optimiser must be a worthy rival: from most starts it comes to the same minimum.
    INFO(arrived << " of " << runs << " runs came to the minimum");
    CHECK(arrived > runs / 2);
}
