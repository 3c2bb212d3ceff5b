// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDialog>
#include <QStringList>
#include <vector>

#include "db/certificate.h"

class QLabel;
class QPushButton;
class QTableWidget;

namespace soak::desk {

/// What a certificate's file was read as, before anything is stored: raw beside read, and every row that is held back
/// with its reason. Heats whose number is stored already are left as they are.
class ImportDialog : public QDialog {
    Q_OBJECT

public:
    ImportDialog(const Certificate& certificate, const QStringList& stored, QWidget* parent = nullptr);
    /// The heats that will be stored when the person agrees.
    const std::vector<Heat>& heats() const { return heats_; }
    QTableWidget* rows() const { return rows_; }
    QTableWidget* findings() const { return findings_; }

private:
    void fillRows(const Certificate& certificate, const QStringList& stored);
    void fillFindings(const Certificate& certificate);
    QString stateOf(const CertificateRow& row, const QStringList& stored) const;
    QString summary(const Certificate& certificate) const;

    std::vector<Heat> heats_;
    int stored_already_ = 0;
    QTableWidget *rows_, *findings_;
};

}  // namespace soak::desk
