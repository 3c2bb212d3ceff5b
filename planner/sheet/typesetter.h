// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QFont>
#include <QString>
#include <QStringList>
#include <vector>

#include "planner/sheet/layout.h"
#include "planner/sheet/page.h"

namespace soak {

/// Millimetres of one point.
inline constexpr double kPoint_mm = 25.4 / 72;
/// Fonts are measured and painted in hundredths of a millimetre, so that a page is the same on every device.
inline constexpr double kUnit_mm = 0.01;

/// Measures and breaks text of one family. Needs a QGuiApplication.
class Typesetter {
public:
    /// `leading`: distance between lines in type sizes. Fault::data when none of the layout's families is installed.
    static Result<Typesetter> of(const Layout& layout, double leading);

    const QString& family() const { return family_; }
    QFont font(Type type) const;
    double width_mm(const QString& text, Type type) const;
    /// Distance from one line to the next.
    double lineHeight_mm(Type type) const { return leading_ * type.size_pt * kPoint_mm; }
    double capHeight_mm(Type type) const;
    /// The size at which a digit is this high.
    double sizeForDigits_pt(double height_mm) const;
    /// All digits of the family have one width.
    bool hasTabularFigures() const;

    /// Broken at spaces; a word that is too long is broken where it must be. Never an empty list.
    /// The first line starts `indent_mm` further right.
    QStringList lines(const QString& text, Type type, double width_mm, double indent_mm = 0) const;

    /// One row a line, so that a text of any length flows over pages.
    std::vector<Row> paragraph(const QString& text, Type type, double x, double width_mm,
                               Align align = Align::left) const;

private:
    QString family_;
    double leading_ = 1.2;
};

/// Rows under each other as one row that is not cut.
Row stacked(const std::vector<Row>& rows, double gap_mm = 0);
double heightOf(const std::vector<Row>& rows);
void append(std::vector<Row>& to, std::vector<Row> rows);
/// An empty strip.
Row space(double height_mm);

}  // namespace soak
