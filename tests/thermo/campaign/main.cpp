// SPDX-License-Identifier: GPL-3.0-or-later
// campaign: is the equilibrium ever wrong? Draws chemistries and temperatures and checks every answer by independent
// means: mass balance, phase rule, a search of every phase from random starts, and other starts of the solver itself.
//
//   campaign --library --count 2000 --threads 2              the grade library alone: part of the test run
//   campaign --set light --library --count 1000              the same for another set and its grades
//   campaign --count 100000 --threads 2 --seed 1             the long form, gas left out
//   campaign --count 100000 --threads 2 --seed 1 --gas       the long form, gas let in
//   campaign --seed 1 --case 4711                            repeats one case
//
// Exit status 1 when anything failed, 2 when the request cannot be understood.
#include <atomic>
#include <chrono>
#include <cstdio>
#include <cstring>
#include <mutex>
#include <string>
#include <thread>

#include "base/folders.h"
#include "base/units.h"
#include "check.h"

namespace soak::campaign {
namespace {

struct Request {
    long count = 2000, one = -1;
    double seconds = 1e9;
    unsigned long seed = 1;
    int threads = 1;
    bool gas = false, library = false;
    std::string set = "ferrous";
};

struct Tally {
    long cases = 0, failures = 0, wrong = 0;
    double balance = 0, proof = -1e30;
    long ofKind[kKinds] = {}, failedOfKind[kKinds] = {}, ofPlace[kPlaces] = {};
    int sets = 0;

    void add(const Outcome& o) {
        const bool failed = !o.failures.empty();
        ++cases;
        failures += failed && !o.wrongMinimum;
        wrong += o.wrongMinimum;
        balance = std::max(balance, o.balance);
        proof = std::max(proof, o.proof);
        sets = std::max(sets, o.sets);
        ++ofKind[static_cast<int>(o.drawn.kind)];
        failedOfKind[static_cast<int>(o.drawn.kind)] += failed;
        ++ofPlace[static_cast<int>(o.drawn.place)];
    }
};

void print(const Request& request, long number, const Outcome& o) {
    for (const auto& words : o.failures) std::printf("%s: %s\n", o.wrongMinimum ? "WRONG" : "FAILED", words.c_str());
    std::string with = o.drawn.graphite ? "graphite" : "";
    if (request.gas) with += with.empty() ? "nitrogen_gas" : ",nitrogen_gas";
    std::printf(
        "  %s, %s %s\n  campaign --set %s --seed %lu%s%s --case %ld\n  soakwright state --wt \"%s\"%s%s --at %.12g\n",
        nameOf(o.drawn.kind), nameOf(o.drawn.place), o.drawn.grade.c_str(), request.set.c_str(), request.seed,
        request.gas ? " --gas" : "", request.library ? " --library" : "", number, wtText(o.drawn).c_str(),
        with.empty() ? "" : " --with ", with.c_str(), celsius(o.T));
    std::fflush(stdout);
}

void print(const Tally& tally, double seconds) {
    std::printf("%ld cases in %.0f s: %ld failures, %ld wrong minima\n", tally.cases, seconds, tally.failures,
                tally.wrong);
    std::printf("largest error of mass %.2g mol/mol; largest driving force found %.2g RT; most phases %d\n",
                tally.balance, tally.proof, tally.sets);
    for (int k = 0; k < kKinds; ++k)
        std::printf("  %-18s %7ld, of which bad %ld\n", nameOf(static_cast<Kind>(k)), tally.ofKind[k],
                    tally.failedOfKind[k]);
    for (int k = 0; k < kPlaces; ++k) std::printf("  %-24s %7ld\n", nameOf(static_cast<Place>(k)), tally.ofPlace[k]);
}

bool read(int argc, char** argv, Request& request) {
    for (int i = 1; i < argc; ++i) {
        const std::string option = argv[i];
        if (option == "--gas") {
            request.gas = true;
            continue;
        }
        if (option == "--library") {
            request.library = true;
            continue;
        }
        if (i + 1 == argc) return false;
        const char* value = argv[++i];
        char* end = nullptr;
        const double number = std::strtod(value, &end);
        if (option == "--set") {
            request.set = value;
            continue;
        }
        if (*end || end == value || number < 0) return false;
        if (option == "--count")
            request.count = static_cast<long>(number);
        else if (option == "--seconds")
            request.seconds = number;
        else if (option == "--seed")
            request.seed = static_cast<unsigned long>(number);
        else if (option == "--threads")
            request.threads = std::max(1, static_cast<int>(number));
        else if (option == "--case")
            request.one = static_cast<long>(number);
        else
            return false;
    }
    return true;
}

int work(const Request& request) {
    auto data = loadDataSet(productPath("thermo/data") / request.set);
    if (!data) {
        std::fprintf(stderr, "%s\n", data.error().text().c_str());
        return 2;
    }
    auto grades = readGradesOf(productPath("db/library"), facts(*data.value()).balance);
    if (grades.empty()) {
        std::fprintf(stderr, "the grade library has no grade for this set, or cannot be read\n");
        return 2;
    }
    Source source = makeSource(data.value(), std::move(grades));
    source.libraryOnly = request.library;
    using Clock = std::chrono::steady_clock;
    const auto start = Clock::now();
    const auto elapsed = [&] { return std::chrono::duration<double>(Clock::now() - start).count(); };
    std::atomic<long> next = request.one >= 0 ? request.one : 0;
    const long end = request.one >= 0 ? request.one + 1 : request.count;
    Tally tally;
    std::mutex guard;
    const auto worker = [&] {
        for (long number; (number = next++) < end && elapsed() < request.seconds;) {
            const Outcome outcome = run(source, request.seed, number, request.gas);
            const std::lock_guard lock(guard);
            tally.add(outcome);
            if (!outcome.failures.empty() || request.one >= 0) print(request, number, outcome);
        }
    };
    std::vector<std::thread> threads;
    for (int t = 1; t < request.threads; ++t) threads.emplace_back(worker);
    worker();
    for (auto& thread : threads) thread.join();
    print(tally, elapsed());
    return tally.failures + tally.wrong > 0 || tally.cases == 0 ? 1 : 0;
}

}  // namespace
}  // namespace soak::campaign

int main(int argc, char** argv) {
    soak::campaign::Request request;
    if (!read(argc, argv, request)) {
        std::fprintf(stderr,
                     "campaign [--count N] [--seconds S] [--seed N] [--threads N] [--gas] [--library] [--set NAME] "
                     "[--case N]\n");
        return 2;
    }
    return soak::campaign::work(request);
}
