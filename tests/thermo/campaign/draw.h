// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <map>
#include <memory>
#include <random>
#include <string>
#include <vector>

#include "data_set.h"
#include "grades.h"

namespace soak::campaign {

using Random = std::mt19937_64;
double uniform(Random& random, double low, double high);

/// Where a chemistry is drawn from.
enum class Kind { grade, corner, outside, trace, absent, pair, single };
inline constexpr int kKinds = 7;
const char* nameOf(Kind kind);

/// Where the temperature stands: anywhere, or on or 1e-6 K beside a phase boundary.
enum class Place { anywhere, onBoundary, below, above };
inline constexpr int kPlaces = 4;
const char* nameOf(Place place);

/// One case; the same seed and number always give the same.
struct Case {
    Kind kind = Kind::grade;
    Place place = Place::anywhere;
    std::string grade;                 ///< id of the grade drawn from, or empty
    std::map<std::string, double> wt;  ///< wt% of all but the balance element
    std::string balance;
    double T = 0;           ///< K; Place other than anywhere: where the search for a boundary begins
    bool graphite = false;  ///< let in
};

/// What a case is drawn from: the library's grades, and the largest contents (wt%) far outside of them.
struct Source {
    std::shared_ptr<const DataSet> data;
    std::vector<Grade> grades;
    std::map<std::string, double> outside;
    double coldest = 0, hottest = 0;  ///< K; temperatures drawn, from below the treatments to above the melt
    bool libraryOnly = false;         ///< only chemistries inside the library's grades and at their corners
};
Source makeSource(std::shared_ptr<const DataSet> data, std::vector<Grade> grades);

Case draw(const Source& source, Random& random);

/// "C=0.05,Cr=18,Fe=bal" with every digit.
std::string wtText(const Case& c);

}  // namespace soak::campaign
