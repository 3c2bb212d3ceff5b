// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/heat_number.h"

#include <set>

namespace soak {
namespace {

constexpr qsizetype kShortestForSlips = 4;  // shorter numbers are all one slip from each other

/// What remains of a number when everything that copying damages is taken away.
QString bones(const QString& number) {
    QString bare = number.toUpper();
    bare.remove(' ').remove('-').remove(QChar(0x00A0)).replace('O', '0').replace('I', '1');
    while (bare.startsWith('0') && bare.size() > 1) bare.remove(0, 1);
    return bare;
}

/// The number with each place blanked in turn: two numbers that share a pattern differ in that place at most.
QStringList patterns(const QString& bare) {
    QStringList all;
    for (qsizetype i = 0; i < bare.size() && bare.size() >= kShortestForSlips; ++i) {
        all << bare;
        all.back()[i] = QChar(0);
    }
    return all;
}

}  // namespace

NumberIndex::NumberIndex(const QStringList& known) : known_(known) {
    for (qsizetype i = 0; i < known_.size(); ++i) {
        const QString bare = bones(known_[i]);
        by_bones_[bare].push_back(i);
        for (const QString& pattern : patterns(bare)) by_pattern_[pattern].push_back(i);
    }
}

QStringList NumberIndex::sameBut(const QString& number) const {
    QStringList same;
    if (const auto found = by_bones_.find(bones(number)); found != by_bones_.end())
        for (const qsizetype i : found->second)
            if (known_[i] != number) same << known_[i];
    return same;
}

QStringList NumberIndex::oneSlipFrom(const QString& number) const {
    const QString bare = bones(number);
    std::set<qsizetype> found;  // in the order of `known`
    for (const QString& pattern : patterns(bare))
        if (const auto like = by_pattern_.find(pattern); like != by_pattern_.end())
            found.insert(like->second.begin(), like->second.end());
    for (qsizetype i = 0; i + 1 < bare.size() && bare.size() >= kShortestForSlips; ++i) {
        QString swapped = bare;
        std::swap(swapped[i], swapped[i + 1]);
        if (swapped == bare) continue;
        if (const auto like = by_bones_.find(swapped); like != by_bones_.end())
            found.insert(like->second.begin(), like->second.end());
    }
    QStringList slips;
    for (const qsizetype i : found)
        if (bones(known_[i]) != bare) slips << known_[i];
    return slips;
}

QStringList nearNumbers(const QString& number, const QStringList& known) {
    const NumberIndex index(known);
    const QStringList same = index.sameBut(number);
    return same.isEmpty() ? index.oneSlipFrom(number) : same;  // a slip is offered only when nothing closer is there
}

}  // namespace soak
