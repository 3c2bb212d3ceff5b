// SPDX-License-Identifier: GPL-3.0-or-later
// Power cuts, crowds and full disks: nothing that was reported as stored may be lost, nothing half may remain.
// The long form (200 kills) runs with: store_test "[long]"
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <QSqlQuery>
#include <QTemporaryDir>
#include <csignal>
#include <random>
#include <set>

#include "db/journal.h"
#include "db/network_drive.h"
#include "db/store.h"
#include "words.h"

using namespace soak;

namespace {

const QDate kDay(2025, 4, 2);
constexpr int kHeatsInDelivery = 12;

Heat heatNamed(const QString& number) {
    Heat heat;
    heat.number = number;
    for (const char* element : {"C", "Si", "Mn", "Cr", "Ni", "Mo", "N"})
        heat.analysis[element] = {"0,5", 0.5, false, 0.1, ""};
    return heat;
}

std::vector<Heat> delivery(const QString& name) {
    std::vector<Heat> heats;
    for (int i = 0; i < kHeatsInDelivery; ++i) heats.push_back(heatNamed(QString("%1/%2").arg(name).arg(i)));
    return heats;
}

/// Another process that runs `work`, which writes what it has finished to a pipe.
class Process {
public:
    template <class Work>
    explicit Process(Work work) {
        int ends[2] = {0, 0};
        REQUIRE(pipe(ends) == 0);
        id_ = fork();
        if (id_ == 0) {
            close(ends[0]);
            work(ends[1]);
            _exit(0);
        }
        close(ends[1]);
        from_ = ends[0];
    }
    Process(const Process&) = delete;
    Process& operator=(const Process&) = delete;
    /// All bytes until the process has ended or was killed.
    QByteArray report() {
        QByteArray all;
        char buffer[4096];
        for (ssize_t got = 0; (got = read(from_, buffer, sizeof buffer)) > 0;) all.append(buffer, qsizetype(got));
        waitpid(id_, nullptr, 0);
        close(from_);
        return all;
    }
    void kill() const { ::kill(id_, SIGKILL); }

private:
    pid_t id_ = 0;
    int from_ = 0;
};

void tell(int pipe, const QByteArray& line) {
    if (::write(pipe, line.constData(), size_t(line.size())) != line.size()) _exit(2);
}

/// Stores deliveries and issues sheets for ever, telling each as soon as the store has said that it is safe.
void writeForEver(const QString& path, const QString& name, int pipe) {
    Result<Store> store = Store::open(path);
    if (!store) _exit(1);
    for (int i = 0;; ++i) {
        const QString own = QString("%1-%2").arg(name).arg(i);
        if (store.value().storeHeats(delivery(own), own, kDay)) tell(pipe, "D " + own.toUtf8() + "\n");
        Sheet sheet;
        sheet.content = "{}";
        const Result<Sheet> issued = store.value().issueSheet(sheet, kDay);
        if (issued) tell(pipe, "S " + issued.value().number.toUtf8() + "\n");
    }
}

/// What is told must be there, whole; what is there must be sound.
void checkAgainst(const QString& path, const QStringList& told) {
    const Store store = must(Store::open(path));
    std::map<QString, int> heats;
    for (const Heat& heat : must(store.heats())) ++heats[heat.number.section('/', 0, 0)];
    std::set<QString> sheets;
    for (const Sheet& sheet : must(store.sheets())) sheets.insert(sheet.number);
    for (const QString& line : told) {
        INFO(line.toStdString());
        const QString name = line.mid(2);
        CHECK((line.startsWith('D') ? heats.count(name) > 0 : sheets.count(name) > 0));
    }
    for (const auto& [name, count] : heats) CHECK(count == kHeatsInDelivery);
    CHECK(int(sheets.size()) == (sheets.empty() ? 0 : sheets.rbegin()->section('-', 1).toInt()));  // no number lost
    CHECK(must(store.check()) == QStringList());
}

void killAndCheck(int times, unsigned seed) {
    QTemporaryDir folder;
    const QString path = folder.filePath("a.store");
    must(Store::create(path));
    std::mt19937 random(seed);
    QStringList told;
    for (int i = 0; i < times; ++i) {
        Process writer([&](int pipe) { writeForEver(path, QString("K%1").arg(i), pipe); });
        usleep(useconds_t(20'000 + random() % 150'000));
        writer.kill();
        const QString report = QString::fromUtf8(writer.report());
        // A line that the kill cut short was told all the same only as far as it goes: the last one counts when whole.
        told += report.left(report.lastIndexOf('\n') + 1).split('\n', Qt::SkipEmptyParts);
        if (i % 20 == 19 || i + 1 == times) checkAgainst(path, told);
    }
    CHECK_FALSE(told.isEmpty());
}

}  // namespace

TEST_CASE("a process killed in the middle loses nothing that was stored and leaves nothing half", "[robust]") {
    killAndCheck(qEnvironmentVariableIsEmpty("SOAKWRIGHT_SLOW") ? 8 : 3, 1);
}

TEST_CASE("two hundred kills", "[.long]") { killAndCheck(200, 2); }

TEST_CASE("eight processes write at once, one copies meanwhile, and all of it is there", "[robust]") {
    QTemporaryDir folder;
    const QString path = folder.filePath("a.store"), copy = folder.filePath("copy.store");
    must(Store::create(path));
    constexpr int kDeliveries = 4;
    const auto work = [&](int writer, int pipe) {
        Result<Store> opened = Store::open(path);
        if (!opened) return;
        Store& store = opened.value();
        // A crowded store says so; whoever is told tries again.
        const auto untilStored = [](const auto& attempt) {
            for (int tries = 0; tries < 50; ++tries)
                if (attempt()) return true;
            return false;
        };
        for (int i = 0; i < kDeliveries; ++i) {
            const QString own = QString("W%1-%2").arg(writer).arg(i);
            if (untilStored([&] { return bool(store.storeHeats(delivery(own), own, kDay)); }))
                tell(pipe, "D " + own.toUtf8() + "\n");
            Sheet sheet;
            sheet.content = "{}";
            untilStored([&] {
                const Result<Sheet> issued = store.issueSheet(sheet, kDay);
                if (issued) tell(pipe, "S " + issued.value().number.toUtf8() + "\n");
                return bool(issued);
            });
        }
    };
    std::vector<std::unique_ptr<Process>> writers;
    for (int i = 0; i < 8; ++i) writers.push_back(std::make_unique<Process>([&, i](int pipe) { work(i, pipe); }));
    must(must(Store::open(path, Access::read)).backup(copy));
    QStringList told;
    for (const auto& writer : writers) told += QString::fromUtf8(writer->report()).split('\n', Qt::SkipEmptyParts);
    CHECK(told.size() == 8 * kDeliveries * 2);
    CHECK(std::set<QString>(told.begin(), told.end()).size() == size_t(told.size()));  // no sheet number twice
    checkAgainst(path, told);
    checkAgainst(copy, {});
}

TEST_CASE("a file that may not grow keeps what it had and says so", "[robust]") {
    QTemporaryDir folder;
    const QString path = folder.filePath("a.store");
    must(must(Store::create(path)).storeHeats(delivery("first"), "f", kDay));
    Process limited([&](int pipe) {
        signal(SIGXFSZ, SIG_IGN);
        const rlimit limit{400'000, 400'000};
        if (setrlimit(RLIMIT_FSIZE, &limit) != 0) _exit(1);
        Result<Store> store = Store::open(path);
        if (!store) return tell(pipe, QByteArray::fromStdString(store.error().text()));
        std::vector<Heat> many;
        for (int i = 0; i < 4000; ++i) many.push_back(heatNamed(QString("N%1").arg(i)));
        const Result<int> stored = store.value().storeHeats(many, "f", kDay);
        tell(pipe, stored ? "stored" : QByteArray::fromStdString(stored.error().text()));
    });
    const std::string words = limited.report().toStdString();
    CHECK_THAT(words, Catch::Contains("everything stored earlier is safe") && Catch::Contains(path.toStdString()));
    Store store = must(Store::open(path));
    CHECK(must(store.heats()).size() == kHeatsInDelivery);
    CHECK(must(store.check()).isEmpty());
    must(store.storeHeats(delivery("later"), "f", kDay));
}

TEST_CASE("drives of other machines are told from this machine's", "[robust]") {
    for (const char* type : {"nfs4", "cifs", "smb3", "fuse.sshfs", "NFS"}) CHECK(isNetworkDrive(type));
    for (const char* type : {"ext4", "xfs", "btrfs", "tmpfs", "overlay", "ntfs3", "fuseblk", "apfs"})
        CHECK_FALSE(isNetworkDrive(type));
}
