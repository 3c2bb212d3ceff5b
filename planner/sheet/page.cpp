// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/page.h"

#include <iterator>
#include <utility>

namespace soak {
namespace {

template <class T>
void append(std::vector<T>& to, std::vector<T>& from) {
    to.insert(to.end(), std::make_move_iterator(from.begin()), std::make_move_iterator(from.end()));
}

}  // namespace

void Marks::move(double dx, double dy) {
    for (auto& text : texts) text.at.translate(dx, dy);
    for (auto& code : codes) code.at.translate(dx, dy);
    for (auto& figure : figures) {
        figure.at.translate(dx, dy);
        for (auto& corner : figure.corners) corner += QPointF(dx, dy);
    }
}

void Marks::add(Marks other) {
    append(texts, other.texts);
    append(figures, other.figures);
    append(codes, other.codes);
}

}  // namespace soak
