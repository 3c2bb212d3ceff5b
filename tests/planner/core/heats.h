// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include "db/content.h"
#include "db/library.h"
#include "planner/core/window.h"

namespace soak::shop {

/// A heat from "C 0.019, Cr 18.12, W <0.02": every amount as it would be read from a certificate.
inline Heat heat(const QString& number, const QString& grade, const QString& form, const QString& analysis) {
    Heat made;
    made.number = number;
    made.grade = grade;
    made.product_form = form;
    made.analysis_kind = "ladle";
    for (const QString& entry : analysis.split(',')) {
        const QStringList parts = entry.trimmed().split(' ');
        made.analysis[parts[0].toStdString()] = readContent(parts.value(1));
    }
    return made;
}

inline const std::vector<Grade>& library() {
    static const std::vector<Grade> grades = readGrades(libraryFolder()).value();
    return grades;
}

/// All findings in one text, to search in.
inline QString textOf(const GradeCheck& check) {
    QStringList lines;
    for (const Finding& finding : check.findings) lines << finding.element + ": " + finding.text;
    return lines.join('\n');
}

}  // namespace soak::shop
