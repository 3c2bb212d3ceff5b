// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <map>
#include <string>
#include <utility>
#include <vector>

#include "thermo/alloy.h"

namespace soak::desk {

/// One phase at one temperature, as read between two states of a sweep.
struct Reading {
    QString label;
    double volume = 0;                 ///< 0..1
    std::map<std::string, double> wt;  ///< composition of the phase, wt%
};

/// Volume fractions of all phases against temperature, ready to be drawn: straight lines between the states of a
/// sweep, zero at the events where a phase appears or vanishes. Labels stand in the order in which they are drawn.
class Ribbons {
public:
    /// Phases under this share are shown magnified in the minor ribbon.
    static constexpr double kMinorBelow = 0.05;

    Ribbons() = default;
    explicit Ribbons(const Sweep& sweep);

    bool isEmpty() const { return lines_.empty(); }
    double low_C() const { return low_C_; }
    double high_C() const { return high_C_; }
    const std::vector<QString>& labels() const { return labels_; }
    /// Fractions at a temperature, in the order of labels(); all zero outside the sweep.
    std::vector<double> fractionsAt(double celsius) const;
    /// What is there at a temperature, largest first, with compositions. Empty outside the sweep.
    std::vector<Reading> at(double celsius) const;

private:
    using Knot = std::pair<double, double>;  // temperature_C, fraction
    struct Composition {
        double temperature_C;
        std::map<std::string, double> wt;
    };
    void addLabels(const Sweep& sweep);
    void addLine(const Sweep& sweep, const QString& label);
    std::map<std::string, double> compositionAt(size_t line, double celsius) const;

    std::vector<QString> labels_;
    std::vector<std::vector<Knot>> lines_;
    std::vector<std::vector<Composition>> compositions_;
    double low_C_ = 0, high_C_ = 0;
};

}  // namespace soak::desk
