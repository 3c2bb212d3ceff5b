// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/composer.h"

#include <algorithm>

namespace soak {
namespace {

/// A row taller than this is not kept whole.
constexpr double kTallest_mm = 90;

void addHint(const Composer& composer, const FillIn& fillIn, const QRectF& box, Marks& marks) {
    const double height = box.height();
    const int colons = fillIn.hint == FillIn::Hint::clock ? 1 : fillIn.hint == FillIn::Hint::clockSeconds ? 2 : 0;
    for (int i = 1; i <= colons; ++i) {
        const double x = box.left() + box.width() * i / (colons + 1);
        marks.texts.push_back({QRectF(x - 2, box.top(), 4, height), ":", composer.strong(), Align::centre});
    }
    if (!fillIn.unit.isEmpty())
        marks.texts.push_back({box.adjusted(box.width() / 2, 0, -1.2, 0), fillIn.unit, composer.body(), Align::right});
}

}  // namespace

QString Composer::under(const QString& key) const { return templates.second ? templates.second->underText(key) : ""; }

QStringList Composer::both(const QString& key) const {
    QStringList texts{text(key)};
    const QString second = under(key);
    if (!second.isEmpty() && second != texts.first()) texts << second;
    return texts;
}

QString Composer::word(const QString& group, const QString& stored) const {
    const QString first = words().word(group, stored);
    const QString second = templates.second ? templates.second->wordOrNothing(group, stored) : "";
    return second.isEmpty() || second == first ? first : first + " / " + second;
}

std::vector<Row> Composer::say(const QString& key, Type type, double x, double width, Wording::Values values) const {
    std::vector<Row> rows = typesetter.paragraph(text(key, values), type, x, width);
    const QString second = under(key);
    if (!second.isEmpty())
        append(rows, typesetter.paragraph(second, {std::min(type.size_pt, body().size_pt), false}, x, width));
    return rows;
}

Type Composer::fitted(const QString& text, Type type, double width) const {
    const double fits = type.size_pt * 0.99 * width / typesetter.width_mm(text, type);
    return {std::max(std::min(type.size_pt, fits), body().size_pt), type.bold};
}

std::vector<Row> Composer::list(const QStringList& texts, Type type, double x, double width) const {
    constexpr double indent = 4;
    std::vector<Row> rows;
    for (const QString& item : texts) {
        std::vector<Row> lines = typesetter.paragraph(item, type, x + indent, width - indent);
        Row& first = lines.front();
        first.marks.texts.push_back({QRectF(x, 0, indent, first.height), QString(QChar(0x2013)), type, Align::left});
        append(rows, std::move(lines));
    }
    return rows;
}

Row Composer::boxes(const std::vector<FillIn>& fillIns, double x, double width) const {
    constexpr double gap = 2;
    const double each = (width - gap * double(fillIns.size() - 1)) / double(fillIns.size());
    std::vector<Row> captions;
    double captionHeight = 0;
    for (const FillIn& fillIn : fillIns) {
        std::vector<Row> lines;
        for (const QString& text : fillIn.caption) append(lines, typesetter.paragraph(text, caption(), 0, each));
        captions.push_back(stacked(lines));
        captionHeight = std::max(captionHeight, captions.back().height);
    }
    Row row{captionHeight + templates.layout.box_mm + 0.5, {}};
    for (size_t i = 0; i < fillIns.size(); ++i) {
        const double left = x + double(i) * (each + gap);
        captions[i].marks.move(left, captionHeight - captions[i].height);
        row.marks.add(std::move(captions[i].marks));
        const QRectF box(left, captionHeight + 0.25, each, templates.layout.box_mm);
        row.marks.figures.push_back(rectangle(box, 0.35));
        if (fillIns[i].hold) row.marks.figures.push_back(rectangle(box.adjusted(-0.9, -0.9, 0.9, 0.9), 0.5));
        addHint(*this, fillIns[i], box, row.marks);
    }
    return row;
}

std::vector<Row> Composer::beside(std::vector<Row> left, const std::vector<Row>& right, double right_x) const {
    if (std::max(heightOf(left), heightOf(right)) > kTallest_mm) {
        std::vector<Row> rows = right;
        for (Row& row : rows) row.marks.move(right_x, 0);
        append(rows, std::move(left));
        return rows;
    }
    Row second = stacked(right);
    second.marks.move(right_x, 0);
    Row whole = stacked(left);
    whole.height = std::max(whole.height, second.height);
    whole.marks.add(std::move(second.marks));
    return {whole};
}

TextMark Composer::onBaseline(double x, double baseline, const QString& text, Type type) const {
    const double height = typesetter.lineHeight_mm(type);
    const double top = baseline - (height + typesetter.capHeight_mm(type)) / 2;
    return {QRectF(x, top, typesetter.width_mm(text, type), height), text, type, Align::left};
}

FigureMark line(double x1, double y1, double x2, double y2, double stroke_mm) {
    return {FigureMark::Kind::line, QRectF(QPointF(x1, y1), QPointF(x2, y2)), {}, stroke_mm, -1, false};
}

FigureMark rectangle(QRectF at, double stroke_mm) {
    return {FigureMark::Kind::rectangle, at, {}, stroke_mm, -1, false};
}

Marks verdictMark(Verdict verdict, QRectF at) {
    using Kind = FigureMark::Kind;
    Marks marks;
    const auto add = [&](Kind kind, QRectF where, double stroke, int fill) {
        marks.figures.push_back({kind, where, {}, stroke, fill, false});
    };
    switch (verdict) {
        case Verdict::inside:
            add(Kind::ellipse, at, 0, 0);
            break;
        case Verdict::tight:
            marks.figures.push_back({Kind::polygon,
                                     at,
                                     {at.bottomLeft(), at.bottomRight(), QPointF(at.center().x(), at.top())},
                                     0,
                                     0,
                                     false});
            break;
        case Verdict::outside:
            add(Kind::rectangle, at, 0, 0);
            break;
        case Verdict::noWindow: {
            const double thick = at.height() * 0.3;
            add(Kind::rectangle, QRectF(at.left(), at.top(), at.width(), thick), 0, 0);
            add(Kind::rectangle, QRectF(at.left(), at.bottom() - thick, at.width(), thick), 0, 0);
            break;
        }
        case Verdict::notComputed:
            add(Kind::ellipse, at.adjusted(0.3, 0.3, -0.3, -0.3), 0.6, -1);
            break;
    }
    return marks;
}

Marks severityMark(const QString& severity, QRectF at) {
    using Kind = FigureMark::Kind;
    Marks marks;
    if (severity == "danger" || severity == "warning") {
        const bool filled = severity == "danger";
        const QRectF inner = at.adjusted(0.2, 0.2, -0.2, -0.2);
        marks.figures.push_back({Kind::polygon,
                                 inner,
                                 {inner.bottomLeft(), inner.bottomRight(), QPointF(inner.center().x(), inner.top())},
                                 0.4,
                                 filled ? 0 : 255,
                                 false});
        const double x = at.center().x(), ink = filled ? 255 : 0;
        const double bar = at.width() * 0.11, top = at.top() + at.height() * 0.36, foot = at.top() + at.height() * 0.68;
        marks.figures.push_back({Kind::rectangle, QRectF(x - bar / 2, top, bar, foot - top), {}, 0, int(ink), false});
        marks.figures.push_back(
            {Kind::rectangle, QRectF(x - bar / 2, foot + bar * 0.7, bar, bar), {}, 0, int(ink), false});
    } else {
        const double d = at.width() * 0.3;
        marks.figures.push_back({Kind::ellipse, at.adjusted(d, d, -d, -d), {}, 0, 0, false});
    }
    return marks;
}

}  // namespace soak
