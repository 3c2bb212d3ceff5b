// SPDX-License-Identifier: GPL-3.0-or-later
#include "check.h"

#include <algorithm>
#include <cmath>
#include <sstream>

#include "base/units.h"
#include "equilibrium.h"
#include "proof.h"

namespace soak::campaign {
namespace {

constexpr double kTrace = 1e-9;  // mole fraction below which an element is left out, as the engine's facade does

struct Problem {
    std::shared_ptr<const System> system;
    Eigen::VectorXd b;
    std::vector<char> allowed;
    Solver solver() const { return Solver(system, b, allowed); }
    const std::string& phaseName(const DataSet& data, int phase) const {
        return data.phases[static_cast<size_t>(system->phases()[static_cast<size_t>(phase)].data)].name;
    }
};

/// The systems are compiled here and not taken from the data set's cache: a campaign meets thousands of element sets.
Problem problemOf(const DataSet& data, const Case& c, bool gas) {
    std::vector<double> moles;
    double rest = 100, total = 0;
    for (const auto& [symbol, wt] : c.wt) rest -= wt;
    for (const ElementData& element : data.elements) {
        const auto found = c.wt.find(element.symbol);
        const double wt = element.symbol == c.balance ? rest : found == c.wt.end() ? 0 : found->second;
        moles.push_back(wt / element.mass);
        total += moles.back();
    }
    std::vector<int> present;
    std::vector<double> b;
    for (size_t e = 0; e < moles.size(); ++e)
        if (moles[e] / total > kTrace) {
            present.push_back(static_cast<int>(e));
            b.push_back(moles[e]);
        }
    Problem problem;
    problem.system = std::make_shared<System>(data, present);
    problem.b = Eigen::Map<Eigen::VectorXd>(b.data(), static_cast<Eigen::Index>(b.size()));
    problem.b /= problem.b.sum();
    for (const PhaseModel& model : problem.system->phases()) {
        const PhaseData& phase = data.phases[static_cast<size_t>(model.data)];
        problem.allowed.push_back(!phase.left_out || (phase.structure == "gas" ? gas : c.graphite));
    }
    return problem;
}

std::vector<int> phasesOf(const Point& p) {
    std::vector<int> list;
    for (const PhaseSet& set : p.sets) list.push_back(set.phase);
    std::sort(list.begin(), list.end());
    return list;
}

std::string describe(const DataSet& data, const Problem& problem, const Point& p) {
    std::ostringstream out;
    for (const PhaseSet& set : p.sets) out << " " << problem.phaseName(data, set.phase) << "=" << set.n * set.atoms;
    out.precision(12);
    out << " G=" << p.gibbs;
    return out.str();
}

/// Closes in on a change of phases above T; nothing within 60 K: stays at T.
double boundaryNear(const Problem& problem, double T) {
    Solver solver = problem.solver();
    if (!solver.solve(T)) return T;
    const auto below = phasesOf(solver.point());
    double low = T, high = T + 60;
    if (!solver.solve(high) || phasesOf(solver.point()) == below) return T;
    while (high - low > 1e-8) {
        const double middle = (low + high) / 2;
        if (middle <= low || middle >= high || !solver.solve(middle)) break;
        (phasesOf(solver.point()) == below ? low : high) = middle;
    }
    return (low + high) / 2;
}

class Checks {
public:
    Checks(const DataSet& data, const Problem& problem, Outcome& outcome, Random& random)
        : data_(data), problem_(problem), outcome_(outcome), random_(random) {}

    void all() {
        Solver cold = problem_.solver();
        if (!cold.solveCold(outcome_.T)) return fail("cold start does not converge");
        const Point& p = cold.point();
        outcome_.sets = static_cast<int>(p.sets.size());
        massBalance(p);
        ownSets(p);
        independentProof(p);
        warmAgrees(p);
    }

private:
    void fail(const std::string& words) { outcome_.failures.push_back(words); }
    void wrong(const std::string& words) {
        outcome_.wrongMinimum = true;
        fail(words);
    }
    double RT() const { return kGas * outcome_.T; }
    const PhaseModel& modelOf(const PhaseSet& set) const {
        return problem_.system->phases()[static_cast<size_t>(set.phase)];
    }

    void massBalance(const Point& p) {
        Eigen::VectorXd lack = problem_.b, amounts(lack.size());
        for (const PhaseSet& set : p.sets) {
            modelOf(set).amounts(set.y.data(), amounts.data(), static_cast<int>(amounts.size()));
            lack -= set.n * amounts;
            if (!(set.n >= 0)) fail("negative amount of " + problem_.phaseName(data_, set.phase));
        }
        outcome_.balance = lack.cwiseAbs().maxCoeff();
        if (!(outcome_.balance <= 1e-9)) fail("mass balance off by " + text(outcome_.balance));
        // An absolute margin says nothing about a trace element, so each must also be kept by its own measure.
        const double share = lack.cwiseQuotient(problem_.b).cwiseAbs().maxCoeff();
        if (!(share <= 1e-4)) fail("a trace element's balance is off by " + text(share) + " of its amount");
    }

    /// Phase rule, site fractions, and that every set touches the plane with the energy that it claims.
    void ownSets(const Point& p) {
        const auto most = static_cast<size_t>(problem_.b.size()) + (outcome_.drawn.place != Place::anywhere ? 1 : 0);
        if (p.sets.size() > most) fail("more phases than the phase rule allows:" + describe(data_, problem_, p));
        Eigen::VectorXd at, amounts(problem_.b.size());
        problem_.system->parametersAt(p.T, at);
        double gibbs = 0;
        for (size_t s = 0; s < p.sets.size(); ++s) {
            const PhaseSet& set = p.sets[s];
            const PhaseModel& model = modelOf(set);
            const double G = model.gibbs(at.data(), p.T, set.y.data());
            gibbs += set.n * G;
            const double atoms = model.amounts(set.y.data(), amounts.data(), static_cast<int>(amounts.size()));
            if (!(std::abs(G - amounts.dot(p.mu)) <= 1e-6 * RT() * atoms))
                fail(problem_.phaseName(data_, set.phase) +
                     " does not touch the plane: " + text((G - amounts.dot(p.mu)) / RT() / atoms) + " RT");
            for (size_t t = 0; t < s; ++t)
                if (p.sets[t].phase == set.phase && same(set, p.sets[t]))
                    fail("the same set twice: " + problem_.phaseName(data_, set.phase));
        }
        if (!(std::abs(gibbs - p.gibbs) <= 1e-6 * RT())) fail("total energy is not the sum over the sets");
    }

    bool same(const PhaseSet& a, const PhaseSet& b) const {
        double most = 0;
        for (size_t c = 0; c < static_cast<size_t>(modelOf(a).size); ++c)
            most = std::max(most, std::abs(a.y[c] - b.y[c]));
        return most < 1e-4;
    }

    void independentProof(const Point& p) {
        const Deepest deepest = deepestBelowPlane(*problem_.system, problem_.allowed, p.T, p.mu, random_);
        outcome_.proof = deepest.drivingForce / RT();
        if (outcome_.proof <= 1e-6) return;
        std::ostringstream out;
        out << problem_.phaseName(data_, deepest.phase) << " lies " << outcome_.proof << " RT below the plane at y =";
        for (double y : deepest.y) out << " " << y;
        out << "; found:" << describe(data_, problem_, p);
        wrong(out.str());
    }

    /// From another temperature, in a few steps as a sweep does, and from another composition.
    void warmAgrees(const Point& cold) {
        Solver solver = problem_.solver();
        const double step = uniform(random_, -50, 50);
        const int steps = 1 + static_cast<int>(random_() % 4);
        bool walked = true;
        for (int k = steps; k >= 0 && walked; --k) walked = static_cast<bool>(solver.solve(outcome_.T + k * step));
        const std::string start =
            "in " + std::to_string(steps) + " steps from " + text(celsius(outcome_.T + steps * step)) + " °C";
        if (!walked)
            fail("does not converge " + start);
        else
            compare(cold, solver.point(), start);
        Eigen::VectorXd other = problem_.b;
        for (double& x : other) x *= uniform(random_, 0.7, 1.4);
        solver = problem_.solver();
        solver.setComposition(other / other.sum());
        const bool began = static_cast<bool>(solver.solve(outcome_.T));
        solver.setComposition(problem_.b);
        if (!began || !solver.solve(outcome_.T))
            fail("start from another composition does not converge");
        else
            compare(cold, solver.point(), "from another composition");
    }

    void compare(const Point& cold, const Point& warm, const std::string& start) {
        const std::string both =
            start + "; cold:" + describe(data_, problem_, cold) + "; warm:" + describe(data_, problem_, warm);
        if (!(std::abs(cold.gibbs - warm.gibbs) <= 1e-6 * RT()))
            wrong("another energy by " + text((warm.gibbs - cold.gibbs) / RT()) + " RT " + both);
        else if (outcome_.drawn.place == Place::anywhere && !sameAmounts(cold, warm) && !onBoundary())
            fail("other phases or amounts " + both);
    }

    bool sameAmounts(const Point& a, const Point& b) const {
        std::vector<char> used(b.sets.size(), 0);
        for (const PhaseSet& set : a.sets) {
            size_t t = 0;
            while (t < b.sets.size() && (used[t] || b.sets[t].phase != set.phase ||
                                         std::abs(b.sets[t].n * b.sets[t].atoms - set.n * set.atoms) >= 1e-6))
                ++t;
            if (t == b.sets.size()) return false;
            used[t] = 1;
        }
        return a.sets.size() == b.sets.size();
    }

    /// Amounts are not unique there: the phases differ 0.01 K below and above.
    bool onBoundary() const {
        Solver below = problem_.solver(), above = problem_.solver();
        return below.solveCold(outcome_.T - 0.01) && above.solveCold(outcome_.T + 0.01) &&
               phasesOf(below.point()) != phasesOf(above.point());
    }

    static std::string text(double value) {
        std::ostringstream out;
        out << value;
        return out.str();
    }

    const DataSet& data_;
    const Problem& problem_;
    Outcome& outcome_;
    Random& random_;
};

}  // namespace

Outcome run(const Source& source, unsigned long seed, long number, bool gas) {
    std::seed_seq sequence{seed, static_cast<unsigned long>(number)};
    Random random(sequence);
    Outcome outcome;
    outcome.drawn = draw(source, random);
    const Problem problem = problemOf(*source.data, outcome.drawn, gas);
    outcome.T = outcome.drawn.T;
    if (outcome.drawn.place != Place::anywhere) outcome.T = boundaryNear(problem, outcome.T);
    if (outcome.drawn.place == Place::below) outcome.T -= 1e-6;
    if (outcome.drawn.place == Place::above) outcome.T += 1e-6;
    Checks(*source.data, problem, outcome, random).all();
    return outcome;
}

}  // namespace soak::campaign
