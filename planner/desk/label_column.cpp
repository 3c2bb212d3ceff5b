// SPDX-License-Identifier: GPL-3.0-or-later
#include "label_column.h"

#include <algorithm>
#include <numeric>

namespace soak::desk {
namespace {

/// Neighbours that would overlap move as one block, whose place is the mean of its members' wishes.
struct Block {
    double height = 0;  // with the gaps inside
    double wish = 0;    // sum of the tops its members would give the block
    int members = 0;
    double top(double highest, double lowest) const {
        return std::max(highest, std::min(wish / members, lowest - height));
    }
};

}  // namespace

std::vector<double> placeLabels(const std::vector<double>& wanted_middle, const std::vector<double>& height, double top,
                                double bottom, double gap) {
    std::vector<size_t> order(wanted_middle.size());
    std::iota(order.begin(), order.end(), size_t(0));
    std::stable_sort(order.begin(), order.end(),
                     [&](size_t a, size_t b) { return wanted_middle[a] < wanted_middle[b]; });
    std::vector<Block> blocks;
    for (const size_t label : order) {
        Block next{height[label], wanted_middle[label] - height[label] / 2, 1};
        while (!blocks.empty() && blocks.back().top(top, bottom) + blocks.back().height + gap > next.top(top, bottom)) {
            const Block before = blocks.back();
            blocks.pop_back();
            const double shift = before.height + gap;
            next = {shift + next.height, before.wish + next.wish - shift * next.members, before.members + next.members};
        }
        blocks.push_back(next);
    }
    std::vector<double> tops(wanted_middle.size());
    size_t label = 0;
    for (const Block& block : blocks) {
        double at = block.top(top, bottom);
        for (int i = 0; i < block.members; ++i, ++label) {
            tops[order[label]] = at;
            at += height[order[label]] + gap;
        }
    }
    return tops;
}

}  // namespace soak::desk
