// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QDate>
#include <QString>
#include <QStringList>
#include <functional>
#include <vector>

#include "base/result.h"
#include "db/certificate.h"
#include "db/records.h"

namespace soak {

class Store;

/// Called with the heats done and their total; false stops, and nothing is stored.
using ImportProgress = std::function<bool(int done, int total)>;

/// What an import would store, made before anything is stored: what the preview shows is what happens.
struct ImportPlan {
    QString supplier;       ///< given, or as the file names it
    QByteArray bytes;       ///< the file as it came
    ColumnChoices choices;  ///< in force: remembered for the supplier, then those given
    Certificate certificate;
    std::vector<Heat> new_heats;
    /// Analyses that will stand beside a heat that the store has: `number` and `other_analyses` alone count. The stored
    /// analysis stays the heat's own.
    std::vector<Heat> additions;
    QStringList unchanged;              ///< heats that the store has with the same contents
    std::vector<CellFinding> findings;  ///< the reader's, then what differs from the store
    int heats = 0;                      ///< usable heats of the file
    int analyses = 0;                   ///< their analyses
    int held() const;                   ///< rows that a person must decide about
};

/// An import that was stored.
struct ImportRecord {
    int id = 0;
    QString file, supplier, stored_by;
    QDate day;
    int heats = 0, analyses = 0;  ///< what it added to the store
    bool undone = false;
    QString file_hash;  ///< SHA-256 of the file in hex, or empty
};

/// A row of an imported file that could not be used as it stood.
struct HeldRow {
    int import = 0, line = 0;
    QString file, heat, grade, kind, why;
    Analysis analysis;  ///< what could be read of it: never to be computed with
};

struct ImportOptions {
    QString supplier;       ///< empty: as the file names it
    ColumnChoices choices;  ///< beside those remembered for the supplier
};

/// Reads the file with what is known of its supplier and compares it with the store: new heats, analyses of heats that
/// are stored, cell by cell what differs, numbers that are near to stored ones, the same file again. Changes nothing.
/// Errors as of readCertificateText() and of the store.
Result<ImportPlan> planImport(const Store& store, const QByteArray& bytes, const QString& name,
                              const ImportOptions& options = {});

}  // namespace soak
