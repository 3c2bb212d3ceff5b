// SPDX-License-Identifier: GPL-3.0-or-later
// The command as scripts use it: fields, exit status, refusals.
#include <QFile>
#include <QProcess>
#include <QTemporaryDir>
#include <catch2/catch.hpp>
#include <nlohmann/json.hpp>
#include <set>

#include "base/folders.h"

using Json = nlohmann::json;

namespace {

struct Run {
    int status = -1;
    QString out, err;
    Json json() const { return Json::parse(out.toStdString()); }
};

Run soakwright(const QStringList& arguments) {
    QProcess process;
    process.start(SOAKWRIGHT_COMMAND, arguments);
    REQUIRE(process.waitForFinished(120000));
    return {process.exitStatus() == QProcess::NormalExit ? process.exitCode() : -1,
            QString::fromUtf8(process.readAllStandardOutput()), QString::fromUtf8(process.readAllStandardError())};
}

/// One demonstration store for all tests of this file; each run of the binary makes its own.
const QString& demoStore() {
    static const QTemporaryDir folder;
    static const QString path = [] {
        const QString file = folder.filePath("demo.soak");
        REQUIRE(soakwright({"store", "new", file, "--demo"}).status == 0);
        return file;
    }();
    return path;
}

QString productFile(const char* relative) { return QString::fromStdString(soak::productPath(relative).string()); }

}  // namespace

TEST_CASE("version and help") {
    CHECK(soakwright({"--version"}).out.startsWith("soakwright " SOAKWRIGHT_VERSION));
    const Run help = soakwright({"help"});
    CHECK(help.status == 0);
    for (const char* word :
         {"state", "sweep", "window", "triage", "sheet", "store new", "grade", "load", "run", "look-back", "trend"})
        CHECK(help.out.contains(word));
    CHECK(soakwright({}).status == 2);
    CHECK(soakwright({"anneal"}).status == 2);
    CHECK(soakwright({"state", "--wt", "C=0.1", "--at", "900", "--colour", "red"}).status == 2);
}

TEST_CASE("state: the documented fields, amounts that add up") {
    const Run run = soakwright({"state", "--wt", "C=0.05,Cr=18,Ni=10", "--at", "1050", "--json"});
    REQUIRE(run.status == 0);
    const Json state = run.json();
    CHECK(state["temperature_C"].get<double>() == Approx(1050));
    CHECK(state["proof_J_per_mol"].get<double>() < 0.02);
    CHECK(state["gibbs_J_per_mol"].get<double>() < 0);
    CHECK(state["chemical_potential_J_per_mol"].contains("Cr"));
    double moles = 0, mass = 0, volume = 0;
    for (const Json& phase : state["phases"]) {
        for (const char* field : {"name", "label", "mole_fraction", "mass_fraction", "volume_fraction", "wt"})
            CHECK(phase.contains(field));
        moles += phase["mole_fraction"].get<double>();
        mass += phase["mass_fraction"].get<double>();
        volume += phase["volume_fraction"].get<double>();
    }
    CHECK(moles == Approx(1).margin(1e-9));
    CHECK(mass == Approx(1).margin(1e-9));
    CHECK(volume == Approx(1).margin(1e-9));
}

TEST_CASE("the balance element chooses the data set, which every answer names with its version") {
    const auto setOf = [](const QStringList& arguments) {
        const Run run = soakwright(arguments + QStringList{"--json"});
        INFO(run.err.toStdString());
        REQUIRE(run.status == 0);
        CHECK(run.json()["data_version"].get<std::string>().size() == 12);
        return run.json()["data_set"].get<std::string>();
    };
    CHECK(setOf({"state", "--wt", "C=0.4,Cr=1", "--at", "850"}) == "ferrous");
    CHECK(setOf({"state", "--wt", "Cu=4.4,Mg=1.5,Al=bal", "--at", "495"}) == "light");
    CHECK(setOf({"state", "--wt", "Al=94.1,Cu=4.4,Mg=1.5", "--at", "495"}) == "light");  // more than half is the base
    CHECK(setOf({"state", "--wt", "Cu=4.4,Mg=1.5", "--set", "light", "--at", "495"}) == "light");
    CHECK(setOf({"sweep", "--wt", "Mg=0.7,Si=0.4,Al=bal", "--from", "450", "--to", "560"}) == "light");
    CHECK(setOf({"window", "--wt", "Mg=0.7,Si=0.4,Fe=0.2,Al=bal", "--family", "light-wrought-6xxx"}) == "light");
    const Run nickel = soakwright({"state", "--wt", "Cr=20,Ni=bal", "--at", "900"});
    CHECK(nickel.status == 2);
    CHECK(nickel.err.contains("no data set for alloys of Ni"));
    const Run tin = soakwright(
        {"window", "--wt", "Sn=6.2,Cu=1,Mg=0.1,Si=0.4,Fe=0.4,Al=bal", "--family", "light-cast-AlCu", "--json"});
    REQUIRE(tin.status == 0);
    CHECK(tin.json()["verdict"] == "not computed");
    CHECK_THAT(tin.json()["reason"].get<std::string>(), Catch::Contains("Sn 6.2 % is not in the data set"));
}

TEST_CASE("lists take commas or semicolons, decimal commas between semicolons, and a written balance") {
    const double plain =
        soakwright({"state", "--wt", "C=0.05,Cr=18,Ni=10", "--at", "1050", "--json"}).json()["gibbs_J_per_mol"];
    for (const char* list :
         {"C=0.05;Cr=18;Ni=10", "Fe=bal,Ni=10,Cr=18,C=0.05", "C=0,05; Cr=18,0; Ni=10", " C = 0.05 , Cr=18,Ni=10"}) {
        const Run run = soakwright({"state", "--wt", list, "--at", "1050", "--json"});
        INFO(list << run.err.toStdString());
        REQUIRE(run.status == 0);
        CHECK(run.json()["gibbs_J_per_mol"].get<double>() == Approx(plain).margin(1e-6));
    }
}

TEST_CASE("phases can be left out and let in") {
    const QStringList question{"state", "--wt", "C=1.2,Si=2.5", "--at", "700", "--json"};
    const auto has = [](const Json& state, const char* name) {
        for (const Json& phase : state["phases"])
            if (phase["name"] == name) return true;
        return false;
    };
    CHECK(has(soakwright(question).json(), "cementite"));
    CHECK_FALSE(has(soakwright(question).json(), "graphite"));
    CHECK(has(soakwright(question + QStringList{"--with", "graphite"}).json(), "graphite"));
    CHECK_FALSE(has(soakwright(question + QStringList{"--without", "cementite"}).json(), "cementite"));
}

TEST_CASE("a wrong question is refused with status 2 and a message that helps") {
    struct Wrong {
        const char *list, *at, *says;
    };
    for (const Wrong& wrong : {Wrong{"C=0.05,Xx=1", "1000", "Xx"},
                               {"C=0.05,N=1740ppm", "1000", "N=0.174"},
                               {"C=0.05%,Cr=18", "1000", "wt%"},
                               {"Cr=60,Ni=50", "1000", "110"},
                               {"C=-0.01", "1000", "C"},
                               {"C=0.0I8", "1000", "C"},
                               {"C=0,05,Cr=18", "1000", "C=0.05"},
                               {"C=0.05,C=0.06", "1000", "twice"},
                               {"C0.05", "1000", "form"},
                               {"C=0.05", "1922", "did you mean 1922"},
                               {"C=0.05", "-300", "outside"},
                               {"C=0.05", "1050C", "°C"},
                               {"C=0.05", "warm", "warm"},
                               {"Cu=20,Zr=bal", "700", "Zr"}}) {
        const Run run = soakwright({"state", "--wt", wrong.list, "--at", wrong.at, "--json"});
        INFO(wrong.list << " at " << wrong.at << ": " << run.err.toStdString());
        CHECK(run.status == 2);
        CHECK(run.out.isEmpty());
        CHECK(run.err.contains(wrong.says));
    }
    CHECK(soakwright({"sweep", "--wt", "C=0.1", "--from", "900", "--to", "800"}).status == 2);
    CHECK(soakwright({"state", "--wt", "C=0.1", "--at", "900", "--set", "nowhere"}).status == 2);
}

TEST_CASE("sweep: states in order and events between them") {
    const Run run = soakwright({"sweep", "--wt", "C=0.4,Mn=0.8", "--from", "600", "--to", "900", "--json"});
    REQUIRE(run.status == 0);
    const Json sweep = run.json();
    REQUIRE(sweep["states"].size() > 3);
    CHECK(sweep["states"].front()["temperature_C"].get<double>() == Approx(600));
    CHECK(sweep["states"].back()["temperature_C"].get<double>() == Approx(900));
    bool austenite_appears = false;
    for (const Json& event : sweep["events"]) {
        CHECK((event["kind"] == "appears" || event["kind"] == "vanishes"));
        const double at = event["temperature_C"];
        CHECK((at >= 600 && at <= 900));
        austenite_appears = austenite_appears || (event["kind"] == "appears" && event["phase"] == "austenite");
    }
    CHECK(austenite_appears);
}

TEST_CASE("window of a typed chemistry: the documented fields") {
    const Run run = soakwright(
        {"window", "--wt", "C=0.02,Cr=18.1,Ni=8.1,Mn=1.6,Si=0.4,N=0.07", "--family", "austenitic", "--json"});
    REQUIRE(run.status == 0);
    const Json answer = run.json();
    for (const char* field : {"floors", "ceilings", "window", "band", "setpoint_C", "suggested_setpoint_C", "verdict",
                              "grade_check", "reason"})
        CHECK(answer.contains(field));
    REQUIRE_FALSE(answer["floors"].empty());
    for (const char* field : {"cause", "temperature_C", "uncertainty_K"}) CHECK(answer["floors"][0].contains(field));
    for (const char* field : {"low_C", "high_C", "rule"}) CHECK(answer["band"].contains(field));
    CHECK(answer["window"]["low_C"].get<double>() < answer["window"]["high_C"].get<double>());
    CHECK(answer["verdict"] == "inside");
    CHECK(answer["grade_check"]["verdict"] == "not checked");
}

TEST_CASE("window refuses what it cannot judge, and says so") {
    CHECK(soakwright({"window", "--wt", "C=0.02,Cr=18", "--family", "cheese"}).status == 2);
    CHECK(soakwright({"window", "--wt", "C=0.02,Cr=18"}).status == 2);
    CHECK(soakwright({"window", "--heat", "K40217", "--cycle", "SA-300", "--furnace", "F2"}).status == 2);
    const Run aluminium = soakwright({"window", "--wt", "Al=bal,Cu=4", "--family", "austenitic"});
    CHECK(aluminium.status == 2);
    CHECK(aluminium.err.contains("not of Al"));
    const Run fahrenheit =
        soakwright({"window", "--wt", "C=0.02,Cr=18,Ni=8", "--family", "austenitic", "--setpoint", "1886"});
    CHECK(fahrenheit.status == 2);
    CHECK(fahrenheit.err.contains("did you mean"));
    const Run temper =
        soakwright({"window", "--wt", "C=0.4,Mn=0.8", "--family", "low-alloy", "--kind", "temper", "--json"});
    CHECK(temper.status == 0);
    CHECK(temper.json()["verdict"] == "inside");
    CHECK(temper.json()["ceilings"][0]["kind"] == "below_ae1");
    const Json opinion = temper.json()["ceilings"][0]["opinions"][0];
    for (const char* field : {"quantity", "name", "temperature_C", "scatter_K", "in_range", "outside", "source"})
        CHECK(opinion.contains(field));
    const Run unknown =
        soakwright({"window", "--wt", "C=0.4,Mn=0.8", "--family", "low-alloy", "--kind", "polish", "--json"});
    CHECK(unknown.json()["verdict"] == "not computed");
    CHECK(unknown.json()["window"].is_null());
    CHECK(QString::fromStdString(unknown.json()["reason"]).contains("no limits"));
}

TEST_CASE("window from the store, by names") {
    const QStringList names{"window",  "--store", demoStore(), "--heat", "K40217",
                            "--cycle", "SA-300",  "--furnace", "F2",     "--json"};
    const Run run = soakwright(names);
    REQUIRE(run.status == 0);
    CHECK(run.json()["grade_check"]["verdict"] == "passes");
    CHECK(run.json()["band"]["rule"] == "root of squares");
    CHECK(soakwright(QStringList(names).replaceInStrings("K40217", "K99999")).status == 2);
    const Run elsewhere = soakwright(QStringList(names).replaceInStrings(demoStore(), "/nowhere/at.all"));
    CHECK(elsewhere.status == 3);
    CHECK(elsewhere.err.contains("no such file"));
}

/// The header and the first rows of the demonstration delivery: plain heats, a grade that fails, a held row.
QString shortDelivery(const QTemporaryDir& folder, int rows) {
    QFile whole(productFile("db/demo/heats.csv")), part(folder.filePath("delivery.csv"));
    REQUIRE((whole.open(QIODevice::ReadOnly) && part.open(QIODevice::WriteOnly)));
    for (int i = 0; i <= rows; ++i) part.write(whole.readLine());
    return part.fileName();
}

TEST_CASE("triage answers every row, worst first, and its status says that someone must decide") {
    const QTemporaryDir folder;
    const QString csv = shortDelivery(folder, 7);
    const Run run = soakwright({"triage", "--csv", csv, "--store", demoStore(), "--json"});
    CHECK(run.status == 1);
    const Json rows = run.json()["heats"];
    std::set<std::string> heats;
    double last = -1e9;
    for (const Json& row : rows) {
        for (const char* field : {"heat", "cycle", "furnace", "verdict", "margin_K", "reason", "findings"})
            REQUIRE(row.contains(field));
        heats.insert(row["heat"].get<std::string>());
        CHECK_FALSE(row["reason"].get<std::string>().empty());
        if (row["margin_K"].is_null()) continue;
        CHECK(row["margin_K"].get<double>() >= last);
        last = row["margin_K"].get<double>();
    }
    CHECK(heats.size() == 7);
    CHECK(heats.count("K40390"));  // its Ti is negative: held, and answered all the same
    const QString all_good = shortDelivery(folder, 5);
    CHECK(soakwright({"triage", "--csv", all_good, "--store", demoStore(), "--furnace", "F2"}).status == 0);
    CHECK(soakwright({"triage", "--csv", "/nowhere.csv", "--store", demoStore()}).status == 3);
}

TEST_CASE("sheet: a draft, an issued sheet, and one that is blocked") {
    const QTemporaryDir folder;
    const auto sheet = [&](const QString& furnace, const QString& pdf, const QStringList& more) {
        return soakwright(QStringList{"sheet", "--store", demoStore(), "--heat", "K40217", "--cycle", "SA-300",
                                      "--furnace", furnace, "--pdf", folder.filePath(pdf), "--json"} +
                          more);
    };
    const Run draft = sheet("F2", "draft.pdf", {});
    REQUIRE(draft.status == 0);
    CHECK(draft.json()["draft"] == true);
    CHECK(draft.json()["number"] == "");
    CHECK(QFile(folder.filePath("draft.pdf")).size() > 5000);

    const Run issued = sheet("F2", "issued.pdf", {"--issue", "planner on duty", "--paper", "letter"});
    REQUIRE(issued.status == 0);
    CHECK(issued.json()["draft"] == false);
    CHECK(issued.json()["revision"] == "A");
    CHECK(issued.json()["number"].get<std::string>().rfind("2025-", 0) == 0);

    const Run blocked = sheet("F6", "blocked.pdf", {"--issue", "planner on duty"});
    CHECK(blocked.status == 2);
    CHECK(blocked.err.contains("survey overdue since 2024-09-28"));
    CHECK_FALSE(QFile::exists(folder.filePath("blocked.pdf")));
    CHECK(sheet("F2", "x.pdf", {"--paper", "napkin"}).status == 2);
}

TEST_CASE("store new refuses to write over anything") {
    const QTemporaryDir folder;
    const QString file = folder.filePath("own.soak");
    CHECK(soakwright({"store", "new", file}).status == 0);
    CHECK(soakwright({"store", "new", file}).status != 0);
    CHECK(soakwright({"store", "old", file}).status == 2);
}

TEST_CASE("import: preview changes nothing, an import is stored and undone as one") {
    const QTemporaryDir folder;
    const QString store = folder.filePath("shop.soak"), mill = productFile("db/demo/cert-export.csv");
    REQUIRE(QFile::copy(demoStore(), store));
    const Run preview = soakwright({"import", mill, "--store", store, "--preview", "--json"});
    REQUIRE(preview.status == 0);
    const Json json = preview.json();
    CHECK(json["heats"] == 15);
    CHECK(json["analyses"] == 30);
    CHECK(json["import"].is_null());
    std::set<std::string> differing;
    for (const Json& finding : json["findings"]) {
        for (const char* field : {"heat", "row", "column", "raw", "read", "text"}) CHECK(finding.contains(field));
        const std::string text = finding["text"];
        if (text.find("this file") != std::string::npos && text.find("grade") == std::string::npos)
            differing.insert(finding["heat"].get<std::string>() + " " + finding["column"].get<std::string>());
    }
    CHECK(differing == std::set<std::string>{"D7731 N2", "D7745 Mo", "D7745 N2", "D8820 Cr"});
    CHECK(soakwright({"import", mill, "--store", store, "--preview", "--json"}).out == preview.out);

    const Run stored = soakwright({"import", mill, "--store", store, "--json"});
    REQUIRE(stored.status == 0);
    const int id = stored.json()["import"];
    const Run undone = soakwright({"import", "--undo", QString::number(id), "--store", store});
    CHECK(undone.status == 0);
    CHECK(undone.out.contains("is taken back"));
    CHECK(soakwright({"import", mill, "--store", store, "--preview", "--json"}).out == preview.out);

    CHECK(soakwright({"import", productFile("db/demo/heats.csv"), "--store", store, "--preview"}).status == 1);
    CHECK(soakwright({"import", mill, "--store", store, "--columns", "N2=colour"}).status == 2);
    CHECK(soakwright({"import", "--store", store}).status == 2);
    // ppm said to be percent: every row adds up to far more than 100 %, and is held.
    const Run columns = soakwright({"import", mill, "--store", store, "--preview", "--json", "--columns", "N2=N %"});
    CHECK(columns.status == 1);
    CHECK(columns.json()["heats"] == 0);
}

TEST_CASE("load: charges with their setpoints, and heats that cannot be named") {
    const QStringList base{"load", "--store", demoStore(), "--furnace", "F2"};
    const Run run = soakwright(base + QStringList{"--heats", "K40217:SA-300, 503118:SA-300", "--json"});
    REQUIRE(run.status == 0);
    const Json plan = run.json();
    REQUIRE(plan["groups"].size() == 1);
    for (const char* field : {"heats", "setpoint_C", "low_C", "high_C", "margin_K", "lower_by", "upper_by", "soak_min"})
        CHECK(plan["groups"][0].contains(field));
    CHECK(plan["groups"][0]["heats"].size() == 2);
    CHECK(soakwright(base + QStringList{"--heats", "K40217:SA-XX"}).status == 2);
    CHECK(soakwright(base).status == 2);
}

TEST_CASE("run: the record of a chart against the window, and times that cannot be read") {
    QTemporaryDir folder;
    QFile log(folder.filePath("chart.csv"));
    REQUIRE(log.open(QIODevice::WriteOnly));
    log.write("time,sensor,read_C\n10:05,CT,1060\n10:05,LT1,900\n11:20,LT1,1060\n14:00,CT,1060\n14:00,LT1,1060\n");
    log.close();
    const QStringList base{"run",       "--store", demoStore(), "--heat",       "K40217",       "--cycle", "SA-300",
                           "--furnace", "F2",      "--log",     log.fileName(), "--soak-start", "10:05"};
    const Run early = soakwright(base + QStringList{"--json"});
    CHECK(early.status == 1);
    CHECK(early.json()["fits"] == false);
    CHECK(early.json()["soak_min"].get<double>() == 160);
    CHECK(QString::fromStdString(early.json()["sentence"]).contains("too early"));
    const Run bad = soakwright(base + QStringList{"--door", "noon"});
    CHECK(bad.status == 2);
    CHECK(bad.err.contains("noon"));
}

TEST_CASE("look-back and trend: empty answers are answers, wrong words are refused") {
    const Run none = soakwright({"look-back", "--store", demoStore(), "--furnace", "F1", "--error", "9", "--json"});
    CHECK(none.status == 0);
    CHECK(none.json()["loads"].empty());
    CHECK(soakwright({"look-back", "--store", demoStore(), "--furnace", "F9", "--error", "9"}).status == 2);
    CHECK(soakwright({"trend", "--store", demoStore()}).status == 2);
    CHECK(soakwright({"trend", "--store", demoStore(), "april.csv"}).err.contains("DATE:SUPPLIER:FILE"));
    CHECK(soakwright({"grade", "--store", demoStore(), "--grade", "1.4462", "--cycle", "SA-22", "--furnace", "F2"})
              .err.contains("en-1.4462"));
}
