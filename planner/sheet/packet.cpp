// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/packet.h"

#include <QAbstractTextDocumentLayout>
#include <QPainter>
#include <QPdfWriter>
#include <QSaveFile>
#include <QTextDocument>

#include "db/content.h"
#include "planner/core/units_text.h"
#include "planner/sheet/paint.h"

namespace soak {
namespace {

constexpr int kDotsPerInch = 1200;
constexpr double kMargin_mm = 15;

QString cell(const QString& text) { return "<td style='padding:2px 12px 2px 0'>" + text.toHtmlEscaped() + "</td>"; }
QString heading(const QString& text) { return "<h3>" + text.toHtmlEscaped() + "</h3>"; }

QString table(const QStringList& head, const std::vector<QStringList>& rows) {
    QString html = "<table cellspacing='0'><tr>";
    for (const QString& name : head) html += "<th align='left'>" + name.toHtmlEscaped() + "</th>";
    html += "</tr>";
    for (const QStringList& row : rows) {
        html += "<tr>";
        for (const QString& text : row) html += cell(text);
        html += "</tr>";
    }
    return html + "</table>";
}

QString lines(const QStringList& texts) {
    QString html;
    for (const QString& text : texts) html += "<p>" + text.toHtmlEscaped() + "</p>";
    return html;
}

QString both(const TwoUnits& value) {
    const auto one = [](const Quantity& it) { return withUnit(it.value, it.unit, it.decimals); };
    return value.other ? one(value.controller) + " (" + one(*value.other) + ")" : one(value.controller);
}

QString certificateText(const Heat& heat) {
    if (heat.number.isEmpty()) return lines({"The store no longer holds this heat."});
    std::vector<QStringList> rows;
    for (const auto& [element, content] : heat.analysis)
        rows.push_back({QString::fromStdString(element), content.raw, amountText(content), content.remark});
    return lines({"Heat " + heat.number + ", " + heat.grade +
                      (heat.product_form.isEmpty() ? QString() : ", " + heat.product_form) +
                      (heat.analysis_kind.isEmpty() ? QString() : ", " + heat.analysis_kind + " analysis"),
                  "From: " + heat.source}) +
           table({"Element", "as found", "as read", "remark"}, rows);
}

QString windowText(const SheetContent& content) {
    std::vector<QStringList> rows;
    for (const SheetLimit& limit : content.binding)
        rows.push_back({limit.side == Side::floor ? "floor" : "ceiling",
                        limit.temperature ? both(*limit.temperature) : QString("none"), limit.cause,
                        limit.uncertainty ? both(*limit.uncertainty) : QString("set"), limit.source, limit.because});
    return lines({"Verdict: " + word(content.verdict) + ". " + content.verdict_sentence,
                  "Setpoint " + both(content.setpoint) + " in " + content.furnace + "; the metal sees " +
                      both(content.metal_low) + " to " + both(content.metal_high) + " (" + content.band_rule + ").",
                  "Decision rule: " + content.decision_rule + "."}) +
           table({"Side", "Metal", "Binding limit", "Uncertainty", "Source", "because"}, rows);
}

/// Text pages after the sheet's own, each with the sheet's name in its foot.
void addTextPages(QPdfWriter& writer, QPainter& painter, const QString& html, const QString& foot) {
    const double dots_per_mm = kDotsPerInch / 25.4, margin = kMargin_mm * dots_per_mm;
    const QRectF body(margin, margin, writer.width() - 2 * margin, writer.height() - 2.6 * margin);
    QTextDocument document;
    document.documentLayout()->setPaintDevice(&writer);
    QFont font(painter.font());
    font.setPointSizeF(9.5);
    document.setDefaultFont(font);
    document.setPageSize(body.size());
    document.setHtml(html);
    for (int page = 0; page < document.pageCount(); ++page) {
        writer.newPage();
        painter.save();
        painter.translate(body.left(), body.top() - page * body.height());
        document.drawContents(&painter, QRectF(0, page * body.height(), body.width(), body.height()));
        painter.restore();
        painter.setFont(font);
        painter.drawText(QRectF(body.left(), body.bottom() + margin * 0.4, body.width(), margin), Qt::AlignRight,
                         foot + ", " + QString::number(page + 1) + "/" + QString::number(document.pageCount()));
    }
}

Error refused(const QString& path, const QString& why) {
    return Error{Fault::store, why.toStdString(), "", {path.toStdString()}};
}

}  // namespace

QString packetText(const SheetContent& content, const Heat& heat) {
    QString html = "<h2>Job packet, sheet " + content.number.toHtmlEscaped() + " rev " +
                   content.revision.toHtmlEscaped() + "</h2>";
    html += heading("Certificate") + certificateText(heat);
    html += heading("Grade check") +
            lines(QStringList{content.grade_check, content.specification} + content.grade_findings);
    html += heading("Window and decision") + windowText(content);
    html += heading("For information") + lines(content.published + content.remarks);
    html += heading("Not in the equilibrium") + lines({content.left_out.join(", ")});
    html += heading("Versions") + lines({"Program " + content.program_version + "; data " + content.data_set + " " +
                                             content.data_version + "; rules " + content.rules_version,
                                         "Code of the sheet: " + content.qr_payload});
    return html;
}

Result<Done> renderPacket(const SheetContent& content, const Heat& heat, const SheetOptions& options,
                          const QString& path) {
    SheetOptions with_record = options;
    with_record.record_page = true;
    const auto sheet = prepareSheet(content, with_record);
    if (!sheet) return sheet.error();
    QSaveFile file(path);
    if (!file.open(QIODevice::WriteOnly)) return refused(path, file.errorString());
    {
        QPdfWriter writer(&file);
        writer.setTitle("Job packet, " + sheet.value().title);
        writer.setCreator("Soakwright " + content.program_version);
        writer.setResolution(kDotsPerInch);
        writer.setPageSize(sheet.value().paper);
        writer.setPageMargins(QMarginsF(0, 0, 0, 0));
        QPainter painter;
        if (!painter.begin(&writer)) return refused(path, "cannot be written");
        for (size_t page = 0; page < sheet.value().pages.size(); ++page) {
            if (page > 0) writer.newPage();
            painter.save();
            paintPage(painter, sheet.value().pages[page], sheet.value().typesetter, kDotsPerInch / 25.4);
            painter.restore();
        }
        painter.setFont(QFont(sheet.value().typesetter.family(), 10));
        addTextPages(writer, painter, packetText(content, heat), sheet.value().title);
        if (!painter.end()) return refused(path, "cannot be written");
    }
    if (!file.commit()) return refused(path, file.errorString());
    return Done{};
}

}  // namespace soak
