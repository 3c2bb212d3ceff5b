// SPDX-License-Identifier: GPL-3.0-or-later
#include "system.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <random>
#include <set>

#include "base/units.h"
#include "curvature.h"
#include "data_set.h"

namespace soak {
namespace {

/// A default end-member stands this far above its elements, J per mole of atoms: never stable by accident.
constexpr double kDefaultEndMember = 10000;

constexpr double kNodeStep = 50;  // K between the nodes at which the shape of a phase is looked at
constexpr size_t kNodes = 130;    // from 0 K

int localElement(const std::vector<int>& elements, int index) {
    const auto found = std::lower_bound(elements.begin(), elements.end(), index);
    return found != elements.end() && *found == index ? static_cast<int>(found - elements.begin()) : -1;
}

/// Site-weighted sum of the constituents' reference functions plus the default step.
Function defaultEndMember(const DataSet& data, const PhaseModel& model, const std::vector<int>& members,
                          const std::vector<int>& elements) {
    std::set<double> starts{298.15};
    double atoms = 0;
    for (int c : members) {
        const int e = model.element[static_cast<size_t>(c)];
        if (e < 0) continue;
        atoms += model.sites[static_cast<size_t>(c)];
        for (const auto& piece : data.elements[static_cast<size_t>(elements[static_cast<size_t>(e)])].reference.pieces)
            starts.insert(piece.from);
    }
    Function function;
    for (double start : starts) {
        Function::Piece piece{start, {}};
        piece.coefficients[0] = kDefaultEndMember * atoms;
        for (int c : members) {
            const int e = model.element[static_cast<size_t>(c)];
            if (e < 0) continue;
            const auto& reference = data.elements[static_cast<size_t>(elements[static_cast<size_t>(e)])].reference;
            const Powers& other = reference.coefficientsAt(start);
            for (size_t k = 0; k < kPowers; ++k)
                piece.coefficients[k] += model.sites[static_cast<size_t>(c)] * other[k];
        }
        function.pieces.push_back(piece);
    }
    return function;
}

/// The class of a point: its main constituent on every sublattice.
int kindOf(const PhaseModel& model, const double* y) {
    int kind = 0;
    for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
        const int first = model.start[s], last = model.start[s + 1];
        const int main = static_cast<int>(std::max_element(y + first, y + last) - y) - first;
        kind = kind * (last - first) + main;
    }
    return kind;
}

/// The active part of one phase, or a model of size 0 when a sublattice has no active constituent.
PhaseModel shapeOf(const DataSet& data, int index, const std::vector<int>& elements) {
    const PhaseData& phase = data.phases[static_cast<size_t>(index)];
    PhaseModel model;
    model.data = index;
    model.sublattices = static_cast<int>(phase.sites.size());
    for (size_t s = 0; s < phase.sites.size(); ++s) {
        model.start.push_back(static_cast<int>(model.element.size()));
        for (size_t c = 0; c < phase.constituents[s].size(); ++c) {
            const auto& name = phase.constituents[s][c];
            const int e = name == "Va" ? -1 : localElement(elements, data.elementIndex(name));
            if (e < 0 && name != "Va") continue;
            model.element.push_back(e);
            model.origin.push_back(static_cast<int>(c));
            model.sublattice.push_back(static_cast<int>(s));
            model.sites.push_back(phase.sites[s]);
        }
        if (static_cast<int>(model.element.size()) == model.start.back()) return {};
    }
    model.start.push_back(static_cast<int>(model.element.size()));
    model.size = static_cast<int>(model.element.size());
    assert(model.size <= PhaseModel::kMost);
    if (std::all_of(model.element.begin(), model.element.end(), [](int e) { return e < 0; })) return {};
    if (phase.magnetic) {
        model.antiferro = phase.magnetic->antiferro;
        model.structureFactor = phase.magnetic->p;
    }
    return model;
}

/// Adds one parameter to a polynomial; false when a constituent of it is not active.
bool addTerm(const Parameter& p, const PhaseModel& model, int row, Polynomial& polynomial) {
    std::vector<int> context;
    std::vector<std::vector<int>> mixing;
    for (size_t s = 0; s < p.at.size(); ++s) {
        std::vector<int> members;
        for (int origin : p.at[s]) {
            int found = -1;
            for (int c = model.start[s]; c < model.start[s + 1]; ++c)
                if (model.origin[static_cast<size_t>(c)] == origin) found = c;
            if (found < 0) return false;
            members.push_back(found);
        }
        if (members.size() == 1)
            context.push_back(members[0]);
        else
            mixing.push_back(std::move(members));
    }
    const auto all = [&] {
        std::vector<int> factors = context;
        for (const auto& members : mixing) factors.insert(factors.end(), members.begin(), members.end());
        return factors;
    };
    if (mixing.size() == 1 && mixing[0].size() == 2)
        polynomial.addBinary(row, p.order, context, mixing[0][0], mixing[0][1]);
    else if (mixing.size() == 1 && mixing[0].size() == 3 && p.order >= 0)
        polynomial.addTernary(row, p.order, context, mixing[0][0], mixing[0][1], mixing[0][2]);
    else
        polynomial.addMonomial(row, all());
    return true;
}

}  // namespace

void System::compilePhases(const DataSet& data, std::vector<std::vector<const Function*>>& rows,
                           std::deque<Function>& made) {
    for (size_t index = 0; index < data.phases.size(); ++index) {
        PhaseModel model = shapeOf(data, static_cast<int>(index), elements_);
        if (model.size == 0) continue;
        std::vector<const Function*> functions;
        std::set<std::vector<int>> endMembers;
        firstRow_.push_back(parameters_);
        for (const Parameter& p : data.parameters) {
            if (p.phase != static_cast<int>(index)) continue;
            if (p.kind == ParameterKind::G) {
                const int row = parameters_ + static_cast<int>(functions.size());
                if (!addTerm(p, model, row, model.gibbsTerms)) continue;
                functions.push_back(&p.value);
                std::vector<int> at;
                for (const auto& members : p.at)
                    if (members.size() == 1) at.push_back(members[0]);
                if (at.size() == p.at.size()) endMembers.insert(at);
                continue;
            }
            auto& constants = p.kind == ParameterKind::Tc ? model.curieAt : model.momentAt;
            auto& terms = p.kind == ParameterKind::Tc ? model.curieTerms : model.momentTerms;
            if (addTerm(p, model, static_cast<int>(constants.size()), terms))
                constants.push_back(p.value.pieces.front().coefficients[0]);
        }
        std::vector<int> at(static_cast<size_t>(model.sublattices));
        const auto fill = [&](auto&& self, size_t s, std::vector<int> members) -> void {
            if (s == at.size()) {
                if (endMembers.count(at)) return;
                made.push_back(defaultEndMember(data, model, members, elements_));
                model.gibbsTerms.addMonomial(parameters_ + static_cast<int>(functions.size()), members);
                functions.push_back(&made.back());
                return;
            }
            for (int c = model.start[s]; c < model.start[s + 1]; ++c) {
                at[s] = model.origin[static_cast<size_t>(c)];
                members.push_back(c);
                self(self, s + 1, members);
                members.pop_back();
            }
        };
        fill(fill, 0, {});
        model.gibbsTerms.finish();
        model.curieTerms.finish();
        model.momentTerms.finish();
        model.magnetic = !model.curieTerms.empty() && !model.momentTerms.empty();
        parameters_ += static_cast<int>(functions.size());
        rows.push_back(std::move(functions));
        phases_.push_back(std::move(model));
    }
    firstRow_.push_back(parameters_);
}

System::System(const DataSet& data, const std::vector<int>& elements) : elements_(elements) {
    std::vector<std::vector<const Function*>> rows;
    std::deque<Function> made;  // pointers into it stay
    compilePhases(data, rows, made);
    std::set<double> breaks{0};
    for (const auto& functions : rows)
        for (const Function* f : functions)
            for (size_t k = 1; k < f->pieces.size(); ++k) breaks.insert(f->pieces[k].from);
    breaks_.assign(breaks.begin(), breaks.end());
    for (double from : breaks_) {
        Coefficients block(parameters_, kPowers);
        int row = 0;
        for (const auto& functions : rows)
            for (const Function* f : functions) {
                const Powers& c = f->coefficientsAt(from);
                for (int k = 0; k < kPowers; ++k) block(row, k) = c[static_cast<size_t>(k)];
                ++row;
            }
        ranges_.push_back(std::move(block));
        sampleRanges_.push_back(std::make_unique<SampleRange>());
    }
    makeSamples();
    shapes_ = std::vector<std::atomic<Shape>>(phases_.size() * kNodes);
}

size_t System::rangeOf(double T) const {
    return static_cast<size_t>(std::upper_bound(breaks_.begin(), breaks_.end(), T) - breaks_.begin()) - 1;
}

void System::parametersAt(double T, Eigen::VectorXd& at) const {
    const Powers basis = basisAt(T);
    at.noalias() = ranges_[rangeOf(T)] * Eigen::Map<const Eigen::Matrix<double, kPowers, 1>>(basis.data());
}

void System::slopesAt(double T, Eigen::VectorXd& at) const {
    const Powers basis = basisSlopeAt(T);
    at.noalias() = ranges_[rangeOf(T)] * Eigen::Map<const Eigen::Matrix<double, kPowers, 1>>(basis.data());
}

void System::makeSamples() {
    constexpr double kSoft = 0.03;  // what the other constituents share at a corner
    constexpr int kFew = 4;         // constituents of a sublattice on which every pair that shares it has its own class
    constexpr int kRandom = 40;     // random points of each phase with freedom on it
    std::mt19937_64 random(20250402);
    std::exponential_distribution<double> exponential(1.0);
    std::vector<std::vector<double>> points;
    samples_.firstKind.push_back(0);
    for (size_t p = 0; p < phases_.size(); ++p) {
        const PhaseModel& model = phases_[p];
        samples_.first.push_back(samples_.count());
        int kinds = 1;
        for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s)
            kinds *= model.start[s + 1] - model.start[s];
        // Mixed points have classes of their own: a search must start from every corner, even where a mixture lies
        // lower.
        const auto add = [&](const std::vector<double>& y, int kind) {
            samples_.phase.push_back(static_cast<int>(p));
            samples_.kind.push_back(kind);
            samples_.offset.push_back(static_cast<int>(samples_.y.size()));
            samples_.y.insert(samples_.y.end(), y.begin(), y.end());
        };
        // Corners: every combination of one main constituent per sublattice; then the same with two sharing the largest
        // one.
        const auto corners = [&](auto&& self, size_t s, std::vector<double> y) -> void {
            if (s == static_cast<size_t>(model.sublattices)) return add(y, kindOf(model, y.data()));
            const int first = model.start[s], last = model.start[s + 1], n = last - first;
            for (int main = first; main < last; ++main) {
                for (int c = first; c < last; ++c)
                    y[static_cast<size_t>(c)] = n == 1 ? 1 : c == main ? 1 - kSoft : kSoft / (n - 1);
                self(self, s + 1, y);
            }
        };
        corners(corners, 0, std::vector<double>(static_cast<size_t>(model.size)));
        samples_.firstKind.push_back(samples_.firstKind.back() + kinds);
        if (kinds == 1) continue;
        int& ownKinds = samples_.firstKind.back();
        int next = 2 * kinds;
        const int corner0 = samples_.first.back(), cornerEnd = samples_.count();
        for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
            const int first = model.start[s], last = model.start[s + 1];
            if (last - first < 2) continue;
            for (int k = corner0; k < cornerEnd; ++k) {
                std::vector<double> y(samples_.site(k), samples_.site(k) + model.size);
                const int main = static_cast<int>(std::max_element(y.begin() + first, y.begin() + last) - y.begin());
                for (int other = main + 1; other < last; ++other) {
                    std::vector<double> half = y;
                    const double shared = (half[static_cast<size_t>(main)] + half[static_cast<size_t>(other)]) / 2;
                    half[static_cast<size_t>(main)] = half[static_cast<size_t>(other)] = shared;
                    if (cornerEnd - corner0 <= 60)
                        add(half, last - first <= kFew ? next++ : kinds + kindOf(model, half.data()));
                }
            }
        }
        for (int k = 0; k < kRandom; ++k) {
            std::vector<double> y(static_cast<size_t>(model.size));
            for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
                double sum = 0;
                for (int c = model.start[s]; c < model.start[s + 1]; ++c) {
                    const double e = exponential(random);
                    sum += y[static_cast<size_t>(c)] = std::max(e * e, 1e-3);  // squared: more points near edges
                }
                for (int c = model.start[s]; c < model.start[s + 1]; ++c) y[static_cast<size_t>(c)] /= sum;
            }
            add(y, kinds + kindOf(model, y.data()));
        }
        ownKinds += next - kinds;
    }
    samples_.first.push_back(samples_.count());

    const int count = samples_.count(), elements = elementCount();
    samples_.composition.resize(elements, count);
    samples_.atoms.resize(count);
    samples_.idealEntropy.resize(count);
    samples_.Tc.assign(static_cast<size_t>(count), 0);
    samples_.beta.assign(static_cast<size_t>(count), 0);
    for (int k = 0; k < count; ++k) {
        const PhaseModel& model = phases_[static_cast<size_t>(samples_.phase[static_cast<size_t>(k)])];
        const double* y = samples_.site(k);
        samples_.atoms[k] = model.amounts(y, samples_.composition.col(k).data(), elements);
        samples_.idealEntropy[k] = model.ideal(1.0, y);
        if (!model.magnetic) continue;
        const auto magnetism = model.magnetism(y);
        samples_.Tc[static_cast<size_t>(k)] = magnetism.Tc;
        samples_.beta[static_cast<size_t>(k)] = magnetism.beta;
    }
}

void System::sampleGibbs(double T, Eigen::VectorXd& G) const {
    const size_t range = rangeOf(T);
    SampleRange& kept = *sampleRanges_[range];
    std::call_once(kept.once, [&] {
        kept.coefficients.setZero(samples_.count(), kPowers);
        std::vector<double> weight(static_cast<size_t>(parameters_));
        for (int k = 0; k < samples_.count(); ++k) {
            const auto p = static_cast<size_t>(samples_.phase[static_cast<size_t>(k)]);
            const int first = firstRow_[p], rows = firstRow_[p + 1] - first;
            std::fill(weight.begin() + first, weight.begin() + first + rows, 0.0);
            phases_[p].gibbsTerms.weights(samples_.site(k), weight.data());
            kept.coefficients.row(k).noalias() = Eigen::Map<const Eigen::RowVectorXd>(weight.data() + first, rows) *
                                                 ranges_[range].middleRows(first, rows);
        }
    });
    const Powers basis = basisAt(T);
    G.noalias() = kept.coefficients * Eigen::Map<const Eigen::Matrix<double, kPowers, 1>>(basis.data());
    G += T * samples_.idealEntropy;
    for (int k = 0; k < samples_.count(); ++k)
        if (const auto i = static_cast<size_t>(k); samples_.Tc[i] > 0 && samples_.beta[i] > 0)
            G[k] += magneticGibbs(T, samples_.Tc[i], samples_.beta[i],
                                  phases_[static_cast<size_t>(samples_.phase[i])].structureFactor)
                        .G;
}

System::Shape System::shapeAt(size_t phase, size_t node) const {
    std::atomic<Shape>& kept = shapes_[phase * kNodes + node];
    Shape shape = kept.load(std::memory_order_relaxed);
    if (shape != Shape::unknown) return shape;
    const double T = std::max(kNodeStep * static_cast<double>(node), 1.0);
    Eigen::VectorXd at;
    parametersAt(T, at);
    shape = Shape::convex;
    // From the last sample back: those of mixed compositions, where ridges are, come last.
    for (int k = samples_.first[phase + 1]; k-- > samples_.first[phase] && shape == Shape::convex;)
        if (!soak::isConvex(phases_[phase], at.data(), T, samples_.site(k), elementCount())) shape = Shape::ridged;
    kept.store(shape, std::memory_order_relaxed);
    return shape;
}

bool System::isConvex(size_t phase, double T) const {
    const auto node = static_cast<size_t>(std::max(T, 0.0) / kNodeStep);
    return node + 1 < kNodes && shapeAt(phase, node) == Shape::convex && shapeAt(phase, node + 1) == Shape::convex;
}

}  // namespace soak
