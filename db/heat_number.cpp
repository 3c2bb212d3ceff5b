// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/heat_number.h"

namespace soak {
namespace {

/// What remains of a number when everything that copying damages is taken away.
QString bones(const QString& number) {
    QString bare = number.toUpper();
    bare.remove(' ').remove('-').remove(QChar(0x00A0)).replace('O', '0').replace('I', '1');
    while (bare.startsWith('0') && bare.size() > 1) bare.remove(0, 1);
    return bare;
}

bool oneSlip(const QString& a, const QString& b) {
    if (a.size() != b.size() || a.size() < 4) return false;
    QList<qsizetype> differ;
    for (qsizetype i = 0; i < a.size(); ++i)
        if (a[i] != b[i]) differ << i;
    if (differ.size() == 1) return true;
    return differ.size() == 2 && differ[1] == differ[0] + 1 && a[differ[0]] == b[differ[1]] &&
           a[differ[1]] == b[differ[0]];
}

}  // namespace

QStringList nearNumbers(const QString& number, const QStringList& known) {
    const QString wanted = bones(number);
    QStringList same, slip;
    for (const QString& candidate : known) {
        if (candidate == number) continue;
        const QString bare = bones(candidate);
        if (bare == wanted) same << candidate;
        if (oneSlip(bare, wanted)) slip << candidate;
    }
    return same.isEmpty() ? slip : same;  // a slip of the pen is offered only when nothing closer is there
}

}  // namespace soak
