// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QByteArray>
#include <QString>
#include <QStringList>
#include <vector>

#include "base/result.h"

namespace soak {

class Store;
class Transaction;

/// One change of the store: who did what to which record, when, and why. Written in the transaction of the change
/// itself, never altered, never removed.
struct JournalEntry {
    qint64 number = 0;  ///< 1, 2, 3 ... without a gap
    QString at;         ///< day or time as the caller gave it, ISO 8601; empty when none was given
    QString who;        ///< empty: no name was asked for
    QString what;       ///< "cycle", "furnace", "import", "sheet", "shop", "person", "grade", "columns", "heat"
    QString which;      ///< its name or number
    QString action;     ///< "stored", "approved", "undone", "issued" ...
    QString why;
    QByteArray detail;  ///< the record as it became, or what else is needed to understand the change: JSON, or empty
    QString hash;       ///< over the entry before and this one
};

/// SHA-256 in hex over the previous entry's hash and every field of this one: a changed, missing or exchanged entry
/// breaks every hash behind it. Whoever can rewrite the whole file can rewrite the whole chain: note the last hash
/// elsewhere (`soakwright store check` prints it).
QString journalHash(const QString& previous, const JournalEntry& entry);

/// Appends an entry inside the transaction; number and hash are given here.
void record(Transaction& transaction, JournalEntry entry);

/// Every entry, oldest first; of one kind of record or one record when named.
Result<std::vector<JournalEntry>> journal(const Store& store, const QString& what = {}, const QString& which = {});

/// What is wrong with the chain, in words; empty when it is whole.
Result<QStringList> journalFindings(const Store& store);

}  // namespace soak
