// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/journal.h"

#include <QCryptographicHash>

#include "db/sql.h"
#include "db/store.h"

namespace soak {
namespace {

const QString kColumns = "number, at, who, what, which, action, why, detail, hash";

JournalEntry entryOf(const Rows& rows) {
    return {qint64(rows.number(0)), rows.text(1), rows.text(2),          rows.text(3), rows.text(4),
            rows.text(5),           rows.text(6), rows.text(7).toUtf8(), rows.text(8)};
}

}  // namespace

QString journalHash(const QString& previous, const JournalEntry& entry) {
    QCryptographicHash hash(QCryptographicHash::Sha256);
    // Each field with its length before it: "ab","c" and "a","bc" must not hash alike.
    const auto add = [&](const QByteArray& field) {
        hash.addData(QByteArray::number(field.size()) + ':');
        hash.addData(field);
    };
    add(previous.toUtf8());
    add(QByteArray::number(entry.number));
    for (const QString* field : {&entry.at, &entry.who, &entry.what, &entry.which, &entry.action, &entry.why})
        add(field->toUtf8());
    add(entry.detail);
    return QString::fromLatin1(hash.result().toHex());
}

void record(Transaction& transaction, JournalEntry entry) {
    const auto last = transaction.ask("SELECT max(number) FROM journal");
    const auto previous = transaction.ask("SELECT hash FROM journal ORDER BY number DESC LIMIT 1");
    entry.number = (last ? last->toLongLong() : 0) + 1;
    entry.hash = journalHash(previous ? previous->toString() : QString(), entry);
    transaction.run("INSERT INTO journal (" + kColumns + ") VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?)",
                    {entry.number, entry.at, entry.who, entry.what, entry.which, entry.action, entry.why,
                     QString::fromUtf8(entry.detail), entry.hash});
}

Result<std::vector<JournalEntry>> journal(const Store& store, const QString& what, const QString& which) {
    Rows rows(
        store.database(), store.path(), "reading the journal",
        "SELECT " + kColumns + " FROM journal WHERE (? = '' OR what = ?) AND (? = '' OR which = ?) ORDER BY number",
        {what, what, which, which});
    std::vector<JournalEntry> entries;
    while (rows.next()) entries.push_back(entryOf(rows));
    if (rows.error()) return *rows.error();
    return entries;
}

Result<QStringList> journalFindings(const Store& store) {
    const Result<std::vector<JournalEntry>> entries = journal(store);
    if (!entries) return entries.error();
    QString previous;
    qint64 expected = 1;
    for (const JournalEntry& entry : entries.value()) {
        if (entry.number != expected)
            return QStringList{
                QString("the journal has a gap: entry %1 is followed by %2").arg(expected - 1).arg(entry.number)};
        if (entry.hash != journalHash(previous, entry))
            return QStringList{QString("journal entry %1 (%2 %3, %4) is not what was written, or one before it is gone")
                                   .arg(entry.number)
                                   .arg(entry.what, entry.which, entry.action)};
        previous = entry.hash;
        ++expected;
    }
    return QStringList();
}

}  // namespace soak
