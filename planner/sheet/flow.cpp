// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/flow.h"

#include <algorithm>

namespace soak {
namespace {

/// Lays sections under each other; a new page begins when one is full.
class Flow {
public:
    Flow(const Composer& composer, QSizeF page_mm, double gap)
        : composer_(composer),
          size_(page_mm),
          margin_(composer.templates.layout.margin_mm),
          gap_(gap),
          bottom_(page_mm.height() - margin_ - heightOf(foot(composer, 1, 1)) - 1.5) {
        begin(firstHead(composer));
    }

    void add(const Section& section) {
        const double headingHeight = heightOf(heading(section, false)), rule = gap_ + ruleGap();
        const double whole = std::max(heightOf(section.rows), headingHeight);
        const double start = std::max(section.rows.front().height, headingHeight);
        const double pageRoom = bottom_ - margin_ - heightOf(nextHead(composer_)) - rule;
        const double needed = section.flows || whole > pageRoom ? start : whole;
        if (section.new_page || y_ + rule + needed > bottom_) begin(nextHead(composer_));
        open(section, false);
        for (const Row& row : section.rows) {
            if (y_ + row.height > bottom_ + 1e-6 && !fresh_) {
                close();
                begin(nextHead(composer_));
                open(section, true);
            }
            place(row, section.whole_width ? margin_ : margin_ + composer_.templates.layout.gutter_mm);
            fresh_ = false;
        }
        close();
    }

    std::vector<Page> finish() {
        for (size_t i = 0; i < pages_.size(); ++i) {
            double y = bottom_ + 0.5;
            pages_[i].marks.figures.push_back(line(margin_, y, size_.width() - margin_, y, 0.2));
            y += 1;
            for (Row& row : foot(composer_, int(i) + 1, int(pages_.size()))) {
                row.marks.move(margin_, y);
                pages_[i].marks.add(std::move(row.marks));
                y += row.height;
            }
        }
        return std::move(pages_);
    }

    /// Something did not fit: a row taller than a page, or a foot or head that leaves no room.
    bool overflowed() const { return overflowed_; }

private:
    std::vector<Row> heading(const Section& section, bool continued) const {
        const double width = composer_.templates.layout.gutter_mm - 1;
        if (section.heading.isEmpty()) return {};
        const QString number = section.step > 0 ? QString::number(section.step) + " " : QString();
        std::vector<Row> rows =
            composer_.typesetter.paragraph(number + section.heading.first(), composer_.bold(), 0, width);
        for (const QString& second : section.heading.mid(1))
            append(rows, composer_.typesetter.paragraph(second, composer_.body(), 0, width));
        for (const QString& line : section.note)
            append(rows, composer_.typesetter.paragraph(line, composer_.caption(), 0, width));
        if (continued)
            append(rows,
                   composer_.typesetter.paragraph(composer_.text("page.continued"), composer_.caption(), 0, width));
        return rows;
    }

    void begin(const std::vector<Row>& head) {
        pages_.push_back({size_, {}, {}});
        if (composer_.content.draft) pages_.back().watermarks.push_back({composer_.text("page.draft_mark")});
        y_ = margin_;
        for (const Row& row : head) place(row, margin_);
        overflowed_ = overflowed_ || y_ > bottom_;
    }

    double ruleGap() const { return std::max(gap_ * 0.6, 1.0); }

    void open(const Section& section, bool continued) {
        y_ += gap_;
        const double stroke = section.heavy ? 0.9 : 0.25;
        pages_.back().marks.figures.push_back(line(margin_, y_, size_.width() - margin_, y_, stroke));
        y_ += ruleGap();
        Row beside = stacked(heading(section, continued));
        headingEnd_ = y_ + beside.height;
        beside.marks.move(margin_, y_);
        pages_.back().marks.add(std::move(beside.marks));
        fresh_ = true;
    }

    void close() {
        y_ = std::max(y_, headingEnd_);
        overflowed_ = overflowed_ || y_ > bottom_ + 1e-6;
    }

    void place(const Row& row, double x) {
        Marks marks = row.marks;
        marks.move(x, y_);
        pages_.back().marks.add(std::move(marks));
        y_ += row.height;
    }

    const Composer& composer_;
    QSizeF size_;
    double margin_, gap_, bottom_, y_ = 0, headingEnd_ = 0;
    bool overflowed_ = false, fresh_ = true;
    std::vector<Page> pages_;
};

Flow flowWith(const Composer& composer, const std::vector<Section>& sections, QSizeF page_mm, double gap) {
    Flow flow(composer, page_mm, gap);
    for (const Section& section : sections) flow.add(section);
    return flow;
}

}  // namespace

Result<std::vector<Page>> flow(const Composer& composer, const std::vector<Section>& sections, QSizeF page_mm) {
    const Layout& layout = composer.templates.layout;
    Flow tightest = flowWith(composer, sections, page_mm, layout.gap_least_mm);
    if (tightest.overflowed())
        return Error{
            Fault::input, "a part of the sheet is taller than a page; shorten its text or use smaller type", "", {}};
    std::vector<Page> pages = tightest.finish();
    constexpr int steps = 12;
    for (int i = steps; i > 0; --i) {
        const double gap = layout.gap_least_mm + (layout.gap_most_mm - layout.gap_least_mm) * i / steps;
        Flow wider = flowWith(composer, sections, page_mm, gap);
        if (wider.overflowed()) continue;
        std::vector<Page> roomy = wider.finish();
        if (roomy.size() == pages.size()) return roomy;
    }
    return pages;
}

}  // namespace soak
