// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <Eigen/Dense>
#include <atomic>
#include <deque>
#include <memory>
#include <mutex>
#include <vector>

#include "function.h"
#include "phase_model.h"

namespace soak {

class DataSet;

/// The models of every phase that can form from a set of elements, compiled once and shared by threads.
///
/// Besides the models it holds *samples*: a fixed spread of site fractions over every phase. G of all samples at T is
/// one matrix-vector product, so that a cold start sees every corner of every phase for the price of one evaluation,
/// and a proof starts its searches where the samples say that a phase comes near the tangent plane.
class System {
public:
    /// `elements`: indices into the data set, ascending.
    System(const DataSet& data, const std::vector<int>& elements);

    int elementCount() const { return static_cast<int>(elements_.size()); }
    const std::vector<int>& elements() const { return elements_; }
    const std::vector<PhaseModel>& phases() const { return phases_; }
    int parameterCount() const { return parameters_; }

    /// All G parameters at T, J/mol, and their slopes in T. One matrix-vector product each.
    void parametersAt(double T, Eigen::VectorXd& at) const;
    void slopesAt(double T, Eigen::VectorXd& at) const;

    struct Samples {
        Eigen::MatrixXd composition;   ///< elements x count: moles of atoms per formula unit
        Eigen::VectorXd atoms;         ///< moles of atoms per formula unit
        Eigen::VectorXd idealEntropy;  ///< R sum a y ln y, J/K
        std::vector<int> phase;        ///< index into phases()
        std::vector<int>
            kind;  ///< class within the phase: main constituent of every sublattice; corners and mixtures apart
        std::vector<int> offset;  ///< of the sample's site fractions in `y`
        std::vector<double> y;
        std::vector<int> first;        ///< first sample of each phase, and one past the last: phases + 1
        std::vector<int> firstKind;    ///< first class of each phase, and one past the last: phases + 1
        std::vector<double> Tc, beta;  ///< magnetism at the sample, 0 where there is none
        int count() const { return static_cast<int>(phase.size()); }
        const double* site(int sample) const { return y.data() + offset[static_cast<size_t>(sample)]; }
    };
    const Samples& samples() const { return samples_; }
    /// G of every sample at T, J per mole of formula unit.
    void sampleGibbs(double T, Eigen::VectorXd& G) const;
    /// True when G of the phase is convex at all of its samples at the nodes of a grid on either side of T. Such a
    /// phase has one minimum above any plane. It holds for every composition, so it is found once and kept.
    bool isConvex(size_t phase, double T) const;

private:
    using Coefficients = Eigen::Matrix<double, Eigen::Dynamic, kPowers>;
    struct SampleRange {
        std::once_flag once;
        Coefficients coefficients;
    };
    void compilePhases(const DataSet& data, std::vector<std::vector<const Function*>>& rows,
                       std::deque<Function>& made);
    void makeSamples();
    size_t rangeOf(double T) const;

    std::vector<int> elements_;
    std::vector<PhaseModel> phases_;
    std::vector<int> firstRow_;  ///< of each phase in the parameters, and one past the last
    int parameters_ = 0;
    std::vector<double> breaks_;  ///< lower end of each temperature range
    std::vector<Coefficients> ranges_;
    Samples samples_;
    mutable std::vector<std::unique_ptr<SampleRange>> sampleRanges_;
    enum class Shape : char { unknown, convex, ridged };
    Shape shapeAt(size_t phase, size_t node) const;
    mutable std::vector<std::atomic<Shape>> shapes_;  ///< phases x nodes; two threads may find the same one
};

}  // namespace soak
