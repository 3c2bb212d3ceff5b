// SPDX-License-Identifier: GPL-3.0-or-later
#include "draw.h"

#include <algorithm>
#include <cmath>
#include <sstream>

namespace soak::campaign {
namespace {

bool chance(Random& random, double share) { return uniform(random, 0, 1) < share; }

template <class List>
const auto& anyOf(const List& list, Random& random) {
    return list[static_cast<size_t>(random() % list.size())];
}

/// A content within the range; open ends and elements that the grade says nothing about included.
double within(const Limits& limits, bool corner, Random& random) {
    const double low = limits.least.value_or(0), high = limits.most.value_or(low * 1.5);
    return corner ? (chance(random, 0.5) ? low : high) : uniform(random, low, high);
}

void drawGrade(const Source& source, bool corner, Case& c, Random& random) {
    const Grade& grade = anyOf(source.grades, random);
    c.grade = grade.id;
    for (const ElementData& element : source.data->elements) {
        if (element.symbol == c.balance) continue;
        const auto limits = grade.limits.find(element.symbol);
        double wt = 0;
        if (limits != grade.limits.end())
            wt = within(limits->second, corner, random);
        else if (chance(random, 0.25))
            wt = std::pow(10, uniform(random, -4, -1));  // residuals that no standard limits
        if (wt > 0) c.wt[element.symbol] = wt;
    }
}

void drawOutside(const Source& source, Case& c, Random& random) {
    const double share = uniform(random, 0.15, 1);
    for (const auto& [element, most] : source.outside)
        if (chance(random, share)) c.wt[element] = chance(random, 0.15) ? most : uniform(random, 0, most);
}

/// Elements at mole fractions from 1e-9 up; wt% follows within a factor of the atomic masses.
void addTraces(const Source& source, Case& c, Random& random) {
    for (const ElementData& element : source.data->elements)
        if (element.symbol != c.balance && chance(random, 0.4))
            c.wt[element.symbol] = 100 * std::pow(10, uniform(random, -8.8, -5)) * element.mass / 50;
}

/// Keeps the balance element at `least` or more by scaling all others.
void leaveRoom(Case& c, double least) {
    double sum = 0;
    for (const auto& [element, wt] : c.wt) sum += wt;
    if (sum > 100 - least)
        for (auto& [element, wt] : c.wt) wt *= (100 - least) / sum;
}

}  // namespace

double uniform(Random& random, double low, double high) {
    return std::uniform_real_distribution<double>(low, high)(random);
}

const char* nameOf(Kind kind) {
    constexpr const char* names[kKinds] = {"inside a grade",  "corner of a grade", "far outside", "traces",
                                           "elements absent", "two elements",      "one element"};
    return names[static_cast<int>(kind)];
}

const char* nameOf(Place place) {
    constexpr const char* names[kPlaces] = {"anywhere", "on a boundary", "1e-6 K below a boundary",
                                            "1e-6 K above a boundary"};
    return names[static_cast<int>(place)];
}

Source makeSource(std::shared_ptr<const DataSet> data, std::vector<Grade> grades) {
    struct Reach {
        double coldest_C, hottest_C;
        std::map<std::string, double> most;
    };
    // By balance element. Carbon and nitrogen as far as a steel's melt could hold them; a set or an element without an
    // entry: half of the alloy.
    const std::map<std::string, Reach> known = {{"Fe",
                                                 {400,
                                                  1600,
                                                  {{"Al", 15},
                                                   {"C", 6},
                                                   {"Co", 20},
                                                   {"Cr", 35},
                                                   {"Cu", 10},
                                                   {"Mn", 30},
                                                   {"Mo", 20},
                                                   {"N", 1},
                                                   {"Nb", 8},
                                                   {"Ni", 40},
                                                   {"Si", 8},
                                                   {"Ti", 8},
                                                   {"V", 12},
                                                   {"W", 20}}}},
                                                {"Al",
                                                 {100,
                                                  900,
                                                  {{"Cu", 50},
                                                   {"Mg", 35},
                                                   {"Si", 26},
                                                   {"Zn", 60},
                                                   {"Fe", 5},
                                                   {"Mn", 5},
                                                   {"Cr", 3},
                                                   {"Ti", 2},
                                                   {"Zr", 1},
                                                   {"Ni", 10}}}}};
    Source source{std::move(data), std::move(grades), {}};
    const auto reach = known.find(source.data->facts.balance);
    source.coldest = 273.15 + (reach == known.end() ? 400 : reach->second.coldest_C);
    source.hottest = 273.15 + (reach == known.end() ? 1600 : reach->second.hottest_C);
    for (const ElementData& element : source.data->elements) {
        if (element.symbol == source.data->facts.balance) continue;
        double most = 50;
        if (reach != known.end())
            if (const auto own = reach->second.most.find(element.symbol); own != reach->second.most.end())
                most = own->second;
        source.outside[element.symbol] = most;
    }
    return source;
}

Case draw(const Source& source, Random& random) {
    Case c;
    c.balance = source.data->facts.balance;
    // Grades weigh most; the rest in equal parts.
    constexpr Kind kinds[] = {Kind::grade,   Kind::grade, Kind::grade,  Kind::corner, Kind::corner, Kind::outside,
                              Kind::outside, Kind::trace, Kind::absent, Kind::pair,   Kind::single};
    constexpr size_t kLibrary = 5;  // the first of them
    c.kind = kinds[random() % (source.libraryOnly ? kLibrary : std::size(kinds))];
    const auto& elements = source.data->elements;
    switch (c.kind) {
        case Kind::grade:
            drawGrade(source, false, c, random);
            break;
        case Kind::corner:
            drawGrade(source, true, c, random);
            break;
        case Kind::outside:
            drawOutside(source, c, random);
            break;
        case Kind::trace:
            if (chance(random, 0.8)) drawGrade(source, false, c, random);
            addTraces(source, c, random);
            break;
        case Kind::absent:
            drawGrade(source, false, c, random);
            for (auto it = c.wt.begin(); it != c.wt.end();) it = chance(random, 0.5) ? c.wt.erase(it) : std::next(it);
            break;
        case Kind::pair: {
            c.balance = anyOf(elements, random).symbol;
            const std::string other = anyOf(elements, random).symbol;
            if (other != c.balance)
                c.wt[other] = chance(random, 0.3) ? std::pow(10, uniform(random, -6, 0)) : uniform(random, 0, 99);
            break;
        }
        case Kind::single:
            c.balance = anyOf(elements, random).symbol;
            break;
    }
    leaveRoom(c, c.kind == Kind::outside ? uniform(random, 1e-6, 30) : 1e-3);
    c.T = uniform(random, source.coldest, source.hottest);
    c.place = chance(random, 0.7) ? Place::anywhere : static_cast<Place>(1 + random() % (kPlaces - 1));
    c.graphite = chance(random, 0.4);
    return c;
}

std::string wtText(const Case& c) {
    std::ostringstream out;
    out.precision(17);
    for (const auto& [element, wt] : c.wt) out << element << "=" << wt << ",";
    out << c.balance << "=bal";
    return out.str();
}

}  // namespace soak::campaign
