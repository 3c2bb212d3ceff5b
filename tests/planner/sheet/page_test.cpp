// SPDX-License-Identifier: GPL-3.0-or-later
#include "look.h"
#include "sample.h"

using namespace soak;

namespace {

SheetOptions on(Paper paper, const QString& second = "", bool record_page = false) {
    SheetOptions options;
    options.record_page = record_page;
    options.paper = paper;
    options.second_language = second;
    return options;
}

std::vector<PreparedSheet> everyKind() {
    return {prepared(sample::solutionAnneal()),
            prepared(sample::solutionAnneal(), on(Paper::letter)),
            prepared(sample::solutionAnneal(), on(Paper::a4, "de")),
            prepared(sample::draft()),
            prepared(sample::harden(), on(Paper::letter, "pl", true)),
            prepared(sample::overlong()),
            prepared(sample::overlong(), on(Paper::letter, "pt"))};
}

const TextMark* find(const Page& page, const QString& text) {
    for (const TextMark& mark : page.marks.texts)
        if (mark.text.contains(text)) return &mark;
    return nullptr;
}

/// Height of the dark ink inside a region of a picture, mm.
double inkHeight_mm(const QImage& image, QRectF region_mm, double dots_per_mm) {
    const QRect region = QRectF(region_mm.topLeft() * dots_per_mm, region_mm.size() * dots_per_mm).toRect();
    int first = -1, last = -1;
    for (int y = region.top(); y <= region.bottom(); ++y) {
        bool dark = false;
        for (int x = region.left(); x <= region.right() && !dark; ++x) dark = qGray(image.pixel(x, y)) < 128;
        if (dark && first < 0) first = y;
        if (dark) last = y;
    }
    return first < 0 ? 0 : (last - first + 1) / dots_per_mm;
}

}  // namespace

TEST_CASE("a usual sheet is one page on A4 and on Letter", "[sheet]") {
    for (const Paper paper : {Paper::a4, Paper::letter}) {
        const PreparedSheet sheet = prepared(sample::solutionAnneal(), on(paper));
        REQUIRE(sheet.pages.size() == 1);
        CHECK(sheet.notices.isEmpty());
        CHECK(textOf(sheet).contains("page 1 of 1"));
    }
}

TEST_CASE("the setpoint's digits are at least 15 mm high, in the controller's own unit", "[sheet]") {
    // 15 mm: read at 2 to 3 m, character height about distance / 200 (common practice).
    for (const auto& [content, digits] :
         {std::pair(sample::solutionAnneal(), "1060"), std::pair(sample::harden(), "1885")}) {
        const PreparedSheet sheet = prepared(content);
        const TextMark* mark = find(sheet.pages[0], digits);
        REQUIRE(mark);
        CHECK(sheet.typesetter.capHeight_mm(mark->type) >= 15);
        const double dots_per_mm = 8;
        const QImage image = pageImage(sheet, 0, dots_per_mm * 25.4);
        const QRectF one(mark->at.left(), mark->at.center().y() - 11, mark->at.width() / 4, 22);  // the digit 1
        CHECK(inkHeight_mm(image, one, dots_per_mm) >= 15);
    }
}

TEST_CASE("what the crew reads is 12 points or more, what it fills in is 10 mm or more", "[sheet]") {
    const PreparedSheet sheet = prepared(sample::solutionAnneal());
    for (const char* text : {"Soak starts when", "72", "Quench in", "60", "Water below", "1049 to 1071", "Never above",
                             "Stop. Tag. Call.", "Alarm", "Hot steel", "K40217", "Pieces do not touch", "Furnace"}) {
        INFO(text);
        const TextMark* mark = find(sheet.pages[0], text);
        REQUIRE(mark);
        CHECK(mark->type.size_pt >= 12);
    }
    int boxes = 0;
    for (const FigureMark& mark : sheet.pages[0].marks.figures) {
        if (mark.kind != FigureMark::Kind::rectangle || mark.stroke_mm != 0.35) continue;  // boxes to write in
        ++boxes;
        CHECK(mark.at.height() >= 10);
        CHECK(mark.at.width() >= 20);
    }
    CHECK(boxes == 5 + 5 + 6);  // soak, quench, signatures
}

TEST_CASE("the hold points have a double frame and say what it means", "[sheet]") {
    const PreparedSheet sheet = prepared(sample::solutionAnneal());
    const auto frames = std::count_if(
        sheet.pages[0].marks.figures.begin(), sheet.pages[0].marks.figures.end(),
        [](const FigureMark& mark) { return mark.kind == FigureMark::Kind::rectangle && mark.at.height() == 11.8; });
    CHECK(frames == 3);  // loaded, soak started, quenched
    CHECK(textOf(sheet).contains("Double frame"));
}

TEST_CASE("the record page follows the sheet: chart, readings, what differed", "[sheet]") {
    const PreparedSheet sheet = prepared(sample::solutionAnneal(), on(Paper::a4, "", true));
    REQUIRE(sheet.pages.size() == 2);
    const QString text = textOf(sheet.pages[1]);
    for (const char* words : {"Sheet 2025-0412 rev B", "Attach the recorder chart here", "Second reading",
                              "What differed from the plan", "page 2 of 2"})
        CHECK(text.contains(words));
    const auto dashed = std::find_if(sheet.pages[1].marks.figures.begin(), sheet.pages[1].marks.figures.end(),
                                     [](const FigureMark& mark) { return mark.dashed; });
    REQUIRE(dashed != sheet.pages[1].marks.figures.end());
    CHECK(dashed->at.height() >= 100);  // a recorder's strip is 100 mm wide (common practice)
}

TEST_CASE("nothing leaves the page and no two texts touch, whatever the content", "[sheet]") {
    for (const PreparedSheet& sheet : everyKind()) {
        for (const Page& page : sheet.pages) {
            const QRectF paper(QPointF(5, 5), page.size_mm - QSizeF(10, 10));
            std::vector<QRectF> inks;
            for (const TextMark& mark : page.marks.texts) {
                if (mark.text.trimmed().isEmpty()) continue;
                const QRectF ink = inkOf(mark, sheet.typesetter);
                INFO(mark.text);
                CHECK(paper.contains(ink));
                CHECK(ink.right() <= mark.at.right() + 0.3);  // side bearing of the last letter
                for (const QRectF& other : inks) CHECK_FALSE(ink.intersects(other));
                inks.push_back(ink);
            }
            for (const FigureMark& mark : page.marks.figures)
                if (mark.kind != FigureMark::Kind::polygon || !mark.at.isNull())
                    CHECK(paper.contains(mark.at.adjusted(0, 0, 1e-3, 1e-3).normalized()));
            for (const CodeMark& mark : page.marks.codes) {
                CHECK(paper.contains(mark.at));
                for (const QRectF& ink : inks) CHECK_FALSE(ink.intersects(mark.at));
            }
        }
    }
}

TEST_CASE("content that does not fit flows to further pages and loses no word", "[sheet]") {
    const SheetContent content = sample::overlong();
    const PreparedSheet sheet = prepared(content);
    const qsizetype pages = qsizetype(sheet.pages.size());
    REQUIRE(pages > 2);
    const QString word = "purpose";
    qsizetype wanted = (content.specification + content.furnace + content.quench_medium + content.soak_formula +
                        content.verdict_sentence)
                           .count(word);
    for (const QStringList& list :
         {content.load_notes, content.grade_findings, content.remarks, content.checks, content.if_wrong})
        wanted += list.join(' ').count(word);
    for (const SheetCaution& caution : content.cautions) wanted += caution.text.count(word);
    wanted += pages * content.deference.join(' ').count(word);
    CHECK(textOf(sheet).count(word) == wanted);
    CHECK(textOf(sheet).count('W') >= 4 * 160);  // the unbreakable words, broken
    for (qsizetype i = 0; i < pages; ++i) {
        const QString text = textOf(sheet.pages[size_t(i)]);
        CHECK(text.contains(QString("page %1 of %2").arg(i + 1).arg(pages)));
        CHECK(text.contains("Sheet 2025-0412 rev B"));
        if (i > 0) CHECK(text.contains("continued"));
    }
    CHECK(textOf(sheet).contains("H-59/"));
}

TEST_CASE("a part that is taller than a page is refused, not cut", "[sheet]") {
    SheetContent content = sample::solutionAnneal();
    content.specification = QString("word ").repeated(2000);
    const auto sheet = prepareSheet(content, {});
    REQUIRE_FALSE(sheet);
    CHECK(sheet.error().fault == Fault::input);
    CHECK(sheet.error().message.find("taller than a page") != std::string::npos);
}

TEST_CASE("a draft says DRAFT across every page, why, and has no number", "[sheet]") {
    SheetContent content = sample::overlong();
    content.draft = true;
    content.draft_reasons = QStringList{"survey of F6 overdue since 2024-09-28"};
    for (const SheetContent& draft : {sample::draft(), content}) {
        const PreparedSheet sheet = prepared(draft);
        const QString text = textOf(sheet);
        CHECK_FALSE(text.contains(draft.number));
        CHECK_FALSE(text.contains(draft.replaces));
        CHECK_FALSE(sheet.title.contains(draft.number));
        CHECK(text.contains("survey of F6 overdue since 2024-09-28"));
        for (const Page& page : sheet.pages) {
            REQUIRE(page.watermarks.size() == 1);
            CHECK(page.watermarks[0].text == QString("DRAFT"));
            CHECK(page.marks.codes.empty());
        }
    }
    for (const Page& page : prepared(sample::solutionAnneal()).pages) CHECK(page.watermarks.empty());
}

TEST_CASE("the watermark covers most of the page and leaves the text readable", "[sheet]") {
    const PreparedSheet draft = prepared(sample::draft());
    const QImage image = pageImage(draft, 0, 50);
    PreparedSheet bare = draft;
    bare.pages[0].marks = {};
    const QImage mark = pageImage(bare, 0, 50);
    int left = mark.width(), right = 0, darkest = 255;
    for (int y = 0; y < mark.height(); ++y) {
        for (int x = 0; x < mark.width(); ++x) {
            const int grey = qGray(mark.pixel(x, y));
            darkest = std::min(darkest, grey);
            if (grey == 255) continue;
            left = std::min(left, x);
            right = std::max(right, x);
        }
    }
    CHECK(right - left > mark.width() * 0.6);
    CHECK(darkest >= 128);  // a copier's black and white at half keeps the text and drops the mark's grey
    CHECK(image != mark);
}

TEST_CASE("the page is black, white and grey only", "[sheet]") {
    for (const PreparedSheet& sheet : everyKind()) {
        for (const Page& page : sheet.pages)
            for (const FigureMark& mark : page.marks.figures)
                CHECK((mark.fill_grey == -1 || mark.fill_grey == 0 || mark.fill_grey >= 225));  // copies as white
        const QImage image = pageImage(sheet, 0, 60);
        bool coloured = false;
        for (int y = 0; y < image.height(); ++y) {
            for (int x = 0; x < image.width(); ++x) {
                const QRgb pixel = image.pixel(x, y);
                coloured = coloured || qRed(pixel) != qGreen(pixel) || qGreen(pixel) != qBlue(pixel);
            }
        }
        CHECK_FALSE(coloured);
    }
}

TEST_CASE("every verdict has its word and a mark that differs in black and white", "[sheet]") {
    std::vector<QImage> pictures;
    const std::pair<Verdict, const char*> words[] = {{Verdict::inside, "Inside"},
                                                     {Verdict::tight, "Tight"},
                                                     {Verdict::outside, "Outside"},
                                                     {Verdict::noWindow, "No window"},
                                                     {Verdict::notComputed, "Not computed"}};
    for (const auto& [verdict, word] : words) {
        SheetContent content = sample::solutionAnneal();
        content.verdict = verdict;
        content.margin.reset();
        const PreparedSheet sheet = prepared(content);
        const TextMark* mark = nullptr;
        for (const TextMark& text : sheet.pages[0].marks.texts)
            if (text.text == QString(word)) mark = &text;
        INFO(word);
        REQUIRE(mark);
        const double dots_per_mm = 10;
        const QRectF place(mark->at.left() - 6, mark->at.top(), 5, mark->at.height());
        const QImage image = pageImage(sheet, 0, dots_per_mm * 25.4);
        pictures.push_back(
            image.copy(QRectF(place.topLeft() * dots_per_mm, place.size() * dots_per_mm).toAlignedRect()));
    }
    for (size_t i = 0; i < pictures.size(); ++i) {
        for (size_t j = i + 1; j < pictures.size(); ++j) {
            int different = 0;
            for (int y = 0; y < std::min(pictures[i].height(), pictures[j].height()); ++y)
                for (int x = 0; x < std::min(pictures[i].width(), pictures[j].width()); ++x)
                    different += (qGray(pictures[i].pixel(x, y)) < 128) != (qGray(pictures[j].pixel(x, y)) < 128);
            INFO(words[i].second << " and " << words[j].second);
            CHECK(different > 100);  // of about 1300 dots of a mark: more than 1 mm2
        }
    }
}

TEST_CASE("the window and the grade check are two answers", "[sheet]") {
    const QString text = textOf(prepared(sample::draft()));
    CHECK(text.contains("Tight"));
    CHECK(text.contains("Grade check: fails"));
}

TEST_CASE("texts are printed as they are: no markup, no placeholder, no hidden direction", "[sheet]") {
    SheetContent content = sample::solutionAnneal();
    content.heats[0].number = "<b>&%1";
    content.quench_medium = "{sensor} &water<br/>";
    content.load_notes = QStringList{QString("ab") + QChar(0x202E) + "cd\tef\ngh" + QChar(0)};
    const QString text = textOf(prepared(content));
    CHECK(text.contains("<b>&%1"));
    CHECK(text.contains("Quench in {sensor} &water<br/>."));
    CHECK(text.contains("abcd ef gh"));
}

TEST_CASE("a released sheet without a number, and a value without a unit, are refused", "[sheet]") {
    SheetContent numberless = sample::solutionAnneal();
    numberless.number.clear();
    const auto first = prepareSheet(numberless, {});
    REQUIRE_FALSE(first);
    CHECK(first.error().message.find("needs a number") != std::string::npos);

    SheetContent unitless = sample::solutionAnneal();
    unitless.never_above->controller.unit.clear();
    const auto second = prepareSheet(unitless, {});
    REQUIRE_FALSE(second);
    CHECK(second.error().message == "over-temperature has no unit");
}

TEST_CASE("what does not exist leaves no trace, what the crew must write leaves a blank", "[sheet]") {
    SheetContent content = sample::solutionAnneal();
    content.ramp.clear();
    content.sketch.reset();
    content.never_above.reset();
    content.max_delay.reset();
    content.soak_minutes.reset();
    content.quench_medium.clear();
    content.cooling = "still air";
    content.cautions.clear();
    content.next_step.clear();
    content.checks.clear();
    const QString text = textOf(prepared(content));
    for (const char* gone : {"Heat up", "Never above", "Anything over", "Quench", "Cautions", "After"}) {
        INFO(gone);
        CHECK_FALSE(text.contains(QString(gone) + "\n"));
        CHECK_FALSE(text.contains(QString(gone) + " "));
    }
    CHECK(text.contains("Cool: still air"));
    CHECK(text.contains(QString("___") + QChar(0x2009) + "min"));
}

TEST_CASE("in two languages each sentence stands twice and each number once", "[sheet]") {
    const PreparedSheet sheet = prepared(sample::solutionAnneal(), on(Paper::a4, "de"));
    const QString text = textOf(sheet);
    CHECK(text.contains("Soak starts when load sensor LT2 reads 1049"));
    CHECK(text.contains("Das Halten beginnt, wenn dieser"));
    CHECK(text.count(QString("1049") + QChar(0x2009)) == 1);
    CHECK(text.count(QString("60") + QChar(0x2009) + "s") == 2);  // the limit, and what to do when it is passed
    CHECK(text.count(QString("72") + QChar(0x2009) + "min") == 1);
    CHECK(text.contains("Solution anneal"));
    CHECK(text.contains(QString::fromUtf8("Lösungsglühen")));
}
