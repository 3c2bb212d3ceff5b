// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QImage>
#include <QPageSize>
#include <QPagedPaintDevice>
#include <QString>
#include <QStringList>
#include <vector>

#include "planner/core/sheet_content.h"
#include "planner/sheet/page.h"
#include "planner/sheet/typesetter.h"

namespace soak {

/// All of this needs a QGuiApplication; without a display the platform "offscreen" serves (QT_QPA_PLATFORM=offscreen).

enum class Paper { a4, letter };

struct SheetOptions {
    Paper paper = Paper::a4;
    QString language = "en";
    QString second_language;   ///< printed under each line; empty: one language
    bool record_page = false;  ///< a further page for the chart, readings and what differed from the plan
    QString templates;         ///< the shop's own templates; empty or a file not there: the installed ones
};

/// A sheet laid out: the same pages go to a PDF, a printer, a preview or a picture.
struct PreparedSheet {
    QPageSize paper;
    std::vector<Page> pages;
    Typesetter typesetter;
    QString title;        ///< of the document
    QStringList notices;  ///< for the person at the screen: a shop's template was refused and why
};

/// Lays the page out. Fault::input when a released sheet has no number, a value has no unit, there is no wording for a
/// language, or a part is taller than a page; Fault::data when none of the layout's fonts is installed.
Result<PreparedSheet> prepareSheet(const SheetContent& content, const SheetOptions& options);

/// Prints on a printer, preview or PDF. The device's page size is set to the sheet's. Fault::input when it cannot be.
Result<Done> printSheet(const PreparedSheet& sheet, QPagedPaintDevice& device);

/// One page as a picture on white.
QImage pageImage(const PreparedSheet& sheet, size_t page, double dots_per_inch = 150);

/// Writes the PDF; the file appears whole or not at all, and one that was there stays when writing fails.
/// `notices` receives PreparedSheet::notices.
Result<Done> renderPdf(const SheetContent& content, const SheetOptions& options, const QString& path,
                       QStringList* notices = nullptr);

/// The first page as a picture.
Result<QImage> renderImage(const SheetContent& content, const SheetOptions& options, double dots_per_inch = 150);

}  // namespace soak
