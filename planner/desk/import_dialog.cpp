// SPDX-License-Identifier: GPL-3.0-or-later
#include "import_dialog.h"

#include <QDialogButtonBox>
#include <QFileInfo>
#include <QHeaderView>
#include <QLabel>
#include <QPushButton>
#include <QTableWidget>
#include <QVBoxLayout>
#include <algorithm>

#include "db/heat_number.h"

namespace soak::desk {
namespace {

/// Elements of the rows in the order of the file.
QStringList elementsOf(const Certificate& certificate) {
    QStringList elements;
    for (const QString& name : certificate.taken_for) {
        const bool present =
            std::any_of(certificate.rows.begin(), certificate.rows.end(),
                        [&](const CertificateRow& row) { return row.heat.analysis.count(name.toStdString()) > 0; });
        if (present && !elements.contains(name)) elements << name;
    }
    return elements;
}

QTableWidget* table(const QStringList& headers, const QString& name) {
    auto* made = new QTableWidget(0, int(headers.size()));
    made->setHorizontalHeaderLabels(headers);
    made->setEditTriggers(QAbstractItemView::NoEditTriggers);
    made->setSelectionBehavior(QAbstractItemView::SelectRows);
    made->setTabKeyNavigation(false);
    made->setAlternatingRowColors(true);
    made->verticalHeader()->hide();
    made->setAccessibleName(name);
    return made;
}

void put(QTableWidget* into, int row, int column, const QString& text, const QString& hint = {}) {
    auto* item = new QTableWidgetItem(text);
    item->setToolTip(hint);
    into->setItem(row, column, item);
}

}  // namespace

ImportDialog::ImportDialog(const Certificate& certificate, const QStringList& stored, QWidget* parent)
    : QDialog(parent) {
    setWindowTitle(tr("Import %1").arg(QFileInfo(certificate.file).fileName()));
    for (const Heat& heat : certificate.heats())
        if (stored.contains(heat.number))
            ++stored_already_;
        else
            heats_.push_back(heat);
    fillRows(certificate, stored);
    fillFindings(certificate);
    auto* text = new QLabel(summary(certificate));
    text->setWordWrap(true);
    auto* buttons = new QDialogButtonBox(QDialogButtonBox::Cancel);
    const QString offer = heats_.size() == 1 ? tr("&Store 1 heat") : tr("&Store %1 heats").arg(heats_.size());
    QPushButton* agree = buttons->addButton(offer, QDialogButtonBox::AcceptRole);
    agree->setEnabled(!heats_.empty());
    agree->setDefault(true);
    for (QAbstractButton* button : buttons->buttons()) button->setMinimumHeight(32);
    connect(buttons, &QDialogButtonBox::accepted, this, &QDialog::accept);
    connect(buttons, &QDialogButtonBox::rejected, this, &QDialog::reject);
    auto* column = new QVBoxLayout(this);
    column->addWidget(text);
    column->addWidget(rows_, 3);
    column->addWidget(new QLabel(tr("What the reader had to say, cell by cell")));
    column->addWidget(findings_, 2);
    column->addWidget(buttons);
    resize(980, 620);
}

QString ImportDialog::summary(const Certificate& certificate) const {
    const auto held = std::count_if(certificate.rows.begin(), certificate.rows.end(),
                                    [](const CertificateRow& row) { return !row.usable(); });
    QStringList parts{tr("Analysis rows found: %1.").arg(certificate.rows.size())};
    if (held > 0) parts << tr("Held back, each with its reason: %1; nothing is repaired.").arg(held);
    if (stored_already_ > 0) parts << tr("Heats stored already, which stay as they are: %1.").arg(stored_already_);
    if (!certificate.others.empty())
        parts << tr("Other lines (headings, limits, totals): %1.").arg(certificate.others.size());
    return parts.join(QLatin1Char(' '));
}

QString ImportDialog::stateOf(const CertificateRow& row, const QStringList& stored) const {
    if (!row.usable()) return tr("held: %1").arg(row.held);
    if (stored.contains(row.heat.number)) return tr("stored already");
    const QStringList near = nearNumbers(row.heat.number, stored);
    return near.isEmpty() ? tr("will be stored") : tr("will be stored; is it %1?").arg(near.join(tr(" or ")));
}

void ImportDialog::fillRows(const Certificate& certificate, const QStringList& stored) {
    const QStringList elements = elementsOf(certificate);
    rows_ = table(QStringList{tr("Line"), tr("Heat"), tr("Grade"), tr("Analysis"), tr("State")} + elements,
                  tr("Rows of the file"));
    rows_->setRowCount(int(certificate.rows.size()));
    for (int i = 0; i < rows_->rowCount(); ++i) {
        const CertificateRow& row = certificate.rows[size_t(i)];
        const QString state = stateOf(row, stored);
        put(rows_, i, 0, QString::number(row.line));
        put(rows_, i, 1, row.heat.number);
        put(rows_, i, 2, row.heat.grade);
        put(rows_, i, 3, row.heat.analysis_kind);
        put(rows_, i, 4, state, state);
        for (int k = 0; k < elements.size(); ++k) {
            const auto found = row.heat.analysis.find(elements[k].toStdString());
            if (found == row.heat.analysis.end()) continue;
            const Content& content = found->second;
            const QString read = content.wt ? (content.less_than ? QStringLiteral("< ") : QString()) +
                                                  QString::number(*content.wt, 'g', 6) + QStringLiteral(" wt%")
                                            : tr("not read");
            put(rows_, i, 5 + k, content.raw, tr("Found “%1”, read as %2. %3").arg(content.raw, read, content.remark));
        }
    }
    rows_->resizeColumnsToContents();
    rows_->setColumnWidth(4, std::min(rows_->columnWidth(4), 260));
}

void ImportDialog::fillFindings(const Certificate& certificate) {
    findings_ = table({tr("Line"), tr("Heat"), tr("Column"), tr("Found"), tr("Read as"), tr("Remark")}, tr("Findings"));
    std::vector<CellFinding> all;
    for (const CertificateRow& row : certificate.rows) all.insert(all.end(), row.findings.begin(), row.findings.end());
    findings_->setRowCount(int(all.size()));
    for (int i = 0; i < findings_->rowCount(); ++i) {
        const CellFinding& finding = all[size_t(i)];
        const QStringList cells{
            QString::number(finding.line), finding.heat, finding.column, finding.raw, finding.read, finding.text};
        for (int k = 0; k < cells.size(); ++k) put(findings_, i, k, cells[k], cells[k]);
    }
    findings_->resizeColumnsToContents();
    findings_->horizontalHeader()->setStretchLastSection(true);
}

}  // namespace soak::desk
