// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/render.h"

#include <QPageLayout>
#include <QPainter>
#include <QPdfWriter>
#include <QSaveFile>

#include "planner/sheet/code.h"
#include "planner/sheet/flow.h"
#include "planner/sheet/paint.h"

namespace soak {
namespace {

using SectionMaker = std::optional<Section> (*)(const Composer&);

SectionMaker makerOf(const QString& name) {
    static const QHash<QString, SectionMaker> makers = {
        {"setpoint", setpointSection}, {"load", loadSection},   {"heat_up", heatUpSection}, {"soak", soakSection},
        {"quench", quenchSection},     {"after", afterSection}, {"wrong", wrongSection},    {"caution", cautionSection},
        {"why", whySection},           {"sign", signSection},
    };
    return makers.value(name);
}

/// Sections in the layout's order; those of the work are numbered.
std::vector<Section> sectionsOf(const Composer& composer) {
    std::vector<Section> sections;
    int step = 0;
    for (const QString& name : composer.templates.layout.sections) {
        std::optional<Section> section = makerOf(name)(composer);
        if (!section || section->rows.empty()) continue;
        if (section->step > 0) section->step = ++step;
        sections.push_back(std::move(*section));
    }
    return sections;
}

Error refused(const QString& message) { return Error{Fault::input, message.toStdString(), "", {"sheet"}}; }

/// The first value without a unit, in words, or nothing.
QString valueWithoutUnit(const SheetContent& content) {
    const auto lacks = [](const Quantity& quantity) { return quantity.unit.trimmed().isEmpty(); };
    const auto either = [&](const TwoUnits& both) {
        return lacks(both.controller) || (both.other && lacks(*both.other));
    };
    const auto some = [&](const auto& maybe, const auto& test) { return maybe && test(*maybe); };
    if (either(content.setpoint)) return "setpoint";
    if (either(content.metal_low) || either(content.metal_high)) return "metal temperatures";
    if (either(content.soak_start)) return "soak start";
    if (some(content.never_above, either)) return "over-temperature";
    if (some(content.margin, either)) return "margin";
    if (some(content.window_low, either) || some(content.window_high, either)) return "window";
    if (some(content.controller_step, lacks)) return "controller step";
    if (some(content.max_delay, lacks)) return "quench delay";
    if (content.sketch && some(content.sketch->spacing, lacks)) return "spacing";
    for (const SheetLimit& limit : content.binding)
        if (some(limit.temperature, either) || some(limit.uncertainty, either)) return "limit " + limit.cause;
    for (const SheetHeat& heat : content.heats)
        if (some(heat.section, lacks)) return "section of heat " + heat.number;
    return {};
}

/// Draws the code into the place that the head kept for it.
Result<Done> fillCode(const SheetContent& content, std::vector<Page>& pages) {
    for (Page& page : pages) {
        for (CodeMark& mark : page.marks.codes) {
            auto code = codeOf(content.qr_payload, mark.at);
            if (!code) return std::move(code).error();
            mark = code.value();
        }
    }
    return Done{};
}

QString titleOf(const Composer& composer) {
    const SheetContent& content = composer.content;
    return content.draft ? composer.text("page.no_number")
                         : composer.text("page.sheet", {{"number", content.number}, {"revision", content.revision}});
}

Result<PreparedSheet> layOut(const SheetContent& content, const Templates& templates, const SheetOptions& options,
                             double leading) {
    const Layout& layout = templates.layout;
    auto typesetter = Typesetter::of(layout, leading);
    if (!typesetter) return std::move(typesetter).error().within("sheet");
    const QPageSize paper(options.paper == Paper::a4 ? QPageSize::A4 : QPageSize::Letter);
    const QSizeF size_mm = paper.size(QPageSize::Millimeter);
    const double width = size_mm.width() - 2 * layout.margin_mm;
    const Composer composer{content, templates, typesetter.value(), width, width - layout.gutter_mm};
    std::vector<Section> sections = sectionsOf(composer);
    if (options.record_page) sections.push_back(recordSection(composer));
    auto pages = flow(composer, sections, size_mm);
    if (!pages) return std::move(pages).error().within("sheet");
    auto coded = fillCode(content, pages.value());
    if (!coded) return std::move(coded).error().within("sheet");
    return PreparedSheet{paper, std::move(pages).value(), typesetter.value(), titleOf(composer), templates.notices};
}

}  // namespace

Result<PreparedSheet> prepareSheet(const SheetContent& content, const SheetOptions& options) {
    if (!content.draft && (content.number.trimmed().isEmpty() || content.revision.trimmed().isEmpty()))
        return refused("a released sheet needs a number and a revision; print a draft instead");
    const QString unitless = valueWithoutUnit(content);
    if (!unitless.isEmpty()) return refused(unitless + " has no unit");

    auto templates = loadTemplates(options.templates, options.language, options.second_language);
    if (!templates) return std::move(templates).error().within("templates");
    const Layout& layout = templates.value().layout;
    auto sheet = layOut(content, templates.value(), options, layout.leading_most);
    if (!sheet || sheet.value().pages.size() == (options.record_page ? 2 : 1)) return sheet;
    auto closer = layOut(content, templates.value(), options, layout.leading_least);
    return closer && closer.value().pages.size() < sheet.value().pages.size() ? closer : sheet;
}

Result<Done> printSheet(const PreparedSheet& sheet, QPagedPaintDevice& device) {
    if (!device.setPageSize(sheet.paper) || !device.setPageOrientation(QPageLayout::Portrait))
        return refused("the printer does not take " + sheet.paper.name());
    device.setPageMargins(QMarginsF(0, 0, 0, 0), QPageLayout::Millimeter);
    QPainter painter;
    if (!painter.begin(&device)) return refused("the printer or file cannot be written");
    // A printer that keeps margins of its own starts its page inside them: undo that, so that a millimetre is a
    // millimetre.
    const double dots_per_mm = device.logicalDpiX() / 25.4;
    const QMarginsF kept = device.pageLayout().margins(QPageLayout::Millimeter);
    for (size_t i = 0; i < sheet.pages.size(); ++i) {
        if (i > 0 && !device.newPage()) return refused("page " + QString::number(i + 1) + " cannot be started");
        painter.save();
        painter.translate(-kept.left() * dots_per_mm, -kept.top() * dots_per_mm);
        paintPage(painter, sheet.pages[i], sheet.typesetter, dots_per_mm);
        painter.restore();
    }
    return painter.end() ? Result<Done>(Done{}) : refused("the printer or file cannot be written");
}

QImage pageImage(const PreparedSheet& sheet, size_t page, double dots_per_inch) {
    assert(page < sheet.pages.size());
    const double dots_per_mm = dots_per_inch / 25.4;
    const QSizeF size = sheet.pages[page].size_mm * dots_per_mm;
    QImage image(size.toSize(), QImage::Format_RGB32);
    image.fill(Qt::white);
    QPainter painter(&image);
    paintPage(painter, sheet.pages[page], sheet.typesetter, dots_per_mm);
    return image;
}

Result<Done> renderPdf(const SheetContent& content, const SheetOptions& options, const QString& path,
                       QStringList* notices) {
    auto sheet = prepareSheet(content, options);
    if (!sheet) return std::move(sheet).error();
    if (notices) *notices = sheet.value().notices;
    QSaveFile file(path);
    if (!file.open(QIODevice::WriteOnly)) return refused(path + ": " + file.errorString());
    {
        QPdfWriter writer(&file);
        writer.setTitle(sheet.value().title);
        writer.setCreator("Soakwright " + content.program_version);
        writer.setResolution(1200);
        auto printed = printSheet(sheet.value(), writer);
        if (!printed) return std::move(printed).error().within(path.toStdString());
    }
    if (!file.commit()) return refused(path + ": " + file.errorString());
    return Done{};
}

Result<QImage> renderImage(const SheetContent& content, const SheetOptions& options, double dots_per_inch) {
    auto sheet = prepareSheet(content, options);
    if (!sheet) return std::move(sheet).error();
    return pageImage(sheet.value(), 0, dots_per_inch);
}

}  // namespace soak
