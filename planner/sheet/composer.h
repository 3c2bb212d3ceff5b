// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <optional>
#include <vector>

#include "planner/sheet/templates.h"
#include "planner/sheet/typesetter.h"

namespace soak {

/// One part of the page: a heading in the gutter and rows beside it, or rows across the whole width.
struct Section {
    QStringList heading;       ///< first language, then the second
    int step = 0;              ///< its number when its place in the order matters
    bool whole_width = false;  ///< no gutter: the setpoint
    bool heavy = false;        ///< thick rules: what must not be missed
    std::vector<Row> rows;     ///< at least one
    bool flows = false;        ///< may begin on one page and end on the next even when it would fit on one
    bool new_page = false;     ///< begins on a page of its own
    QStringList note = {};     ///< under the heading, in the size of captions
};

struct FillIn {
    enum class Hint { nothing, clock, clockSeconds };
    QStringList caption;
    Hint hint = Hint::nothing;
    QString unit = {};  ///< printed at the right end of the box
    bool hold = false;  ///< double frame: stop until it is signed
};

/// What every section is composed with. All widths in mm; rows start at x = 0.
struct Composer {
    const SheetContent& content;
    const Templates& templates;
    const Typesetter& typesetter;
    double page_width = 0;     ///< between the margins
    double content_width = 0;  ///< beside the gutter

    Type title() const { return {templates.layout.title_pt, true}; }
    Type strong() const { return {templates.layout.strong_pt, true}; }
    Type bold() const { return {templates.layout.body_pt, true}; }
    Type body() const { return {templates.layout.body_pt, false}; }
    Type caption() const { return {templates.layout.caption_pt, false}; }
    Type small() const { return {templates.layout.small_pt, false}; }
    Type value() const { return {templates.layout.value_pt, true}; }

    const Wording& words() const { return templates.wording; }
    QString text(const QString& key, Wording::Values values = {}) const { return words().text(key, values); }
    /// The text of `key` in the second language, numbers left out; empty when there is none.
    QString under(const QString& key) const;
    /// First and second language, for headings and captions without placeholders.
    QStringList both(const QString& key) const;
    /// A word of the shop's data in both languages, with a slash between: "Solution anneal / Lösungsglühen".
    QString word(const QString& group, const QString& stored) const;

    /// A sentence, with the second language under it.
    std::vector<Row> say(const QString& key, Type type, double x, double width, Wording::Values values = {}) const;
    /// Lines with a dash in front, each wrapped on its own.
    std::vector<Row> list(const QStringList& texts, Type type, double x, double width) const;
    /// As large as `type` or as fits the width in one line, but not under the body's size.
    Type fitted(const QString& text, Type type, double width) const;
    /// Boxes of equal width from x on, captions above them.
    Row boxes(const std::vector<FillIn>& fillIns, double x, double width) const;
    /// Left and right beside each other as one uncut row; when one is too tall for that, the right comes first.
    std::vector<Row> beside(std::vector<Row> left, const std::vector<Row>& right, double right_x) const;
    /// Text standing on a baseline.
    TextMark onBaseline(double x, double baseline, const QString& text, Type type) const;
};

FigureMark line(double x1, double y1, double x2, double y2, double stroke_mm = 0.25);
FigureMark rectangle(QRectF at, double stroke_mm = 0.25);

/// Marks of shape, told apart without colour; `at` is a square.
Marks verdictMark(Verdict verdict, QRectF at);
Marks severityMark(const QString& severity, QRectF at);

// The sections, by their names in layout.toml. Nothing: there is nothing to say.
std::optional<Section> setpointSection(const Composer& composer);
std::optional<Section> loadSection(const Composer& composer);
std::optional<Section> heatUpSection(const Composer& composer);
std::optional<Section> soakSection(const Composer& composer);
std::optional<Section> quenchSection(const Composer& composer);
std::optional<Section> afterSection(const Composer& composer);
std::optional<Section> wrongSection(const Composer& composer);
std::optional<Section> cautionSection(const Composer& composer);
std::optional<Section> whySection(const Composer& composer);
std::optional<Section> signSection(const Composer& composer);

/// The back page: a place for the recorder's chart, readings, and what differed from the plan.
Section recordSection(const Composer& composer);

/// The load as seen from the door: pieces, the gap between them, sensors with their names.
Row loadSketch(const Composer& composer, const LoadSketch& sketch, double width);

/// Head of the first page, head of the following ones, and foot of each.
std::vector<Row> firstHead(const Composer& composer);
std::vector<Row> nextHead(const Composer& composer);
std::vector<Row> foot(const Composer& composer, int page, int pages);

}  // namespace soak
