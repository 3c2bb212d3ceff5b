// SPDX-License-Identifier: GPL-3.0-or-later
#include "arguments.h"
#include "chemistry_list.h"
#include "commands.h"
#include "data_choice.h"
#include "db/library.h"
#include "output.h"
#include "planner/core/plausible.h"
#include "planner/core/shop_floor.h"

namespace soak::cli {
namespace {

const QStringList kValued{"wt",      "family", "kind",     "grade", "form",      "heat", "cycle",
                          "furnace", "store",  "setpoint", "date",  "band-rule", "set"};

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

/// Grades, published ranges and rules: the store's when one is named, else the library's and a new shop's.
Result<Shelf> shelfFor(const Arguments& arguments, const Store* store) {
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();
    if (store) return shelfFrom(*store, date.value());
    auto grades = readGrades(libraryFolder());
    if (!grades) return std::move(grades).error();
    auto treatments = readTreatments(libraryFolder());
    if (!treatments) return std::move(treatments).error();
    ShopRules rules;
    rules.today = date.value();
    return makeShelf(std::move(grades).value(), std::move(treatments).value(), rules);
}

/// The family's own limits for one kind of treatment, as a cycle.
Result<Cycle> cycleOfFamily(const Family& family, const QString& kind_name) {
    const FamilyKind* kind = kind_name.isEmpty() ? &family.kinds.front() : family.find(kind_name);
    if (!kind) {
        Cycle unknown;  // the answer will say that no limits are known for this kind
        unknown.kind = kind_name;
        return unknown;
    }
    Cycle cycle;
    cycle.kind = kind->name;
    cycle.setpoint_C = kind->reference_C;
    cycle.limits = kind->limits;
    return cycle;
}

Result<Heat> typedHeat(const Arguments& arguments, QString* balance) {
    const auto text = arguments.required("wt");
    if (!text) return refuse("--wt or --heat is needed");
    const auto typed = readChemistry(text.value());
    if (!typed) return typed.error();
    *balance = typed.value().balance;
    Heat heat;
    heat.analysis = typed.value().analysis;
    heat.grade = arguments.text("grade");
    heat.product_form = arguments.text("form");
    return heat;
}

/// The set named by --set takes the place of the family's own; a written balance element must be the set's.
Result<Done> chooseFamilyData(const Arguments& arguments, const Family& family, const QString& balance, Shelf& shelf) {
    auto& data = shelf.data_sets.at(family.data_set);
    if (!arguments.text("set").isEmpty()) {
        auto named = chooseDataSet(arguments, balance);
        if (!named) return std::move(named).error();
        data = std::move(named).value();
    }
    const QString of_set = QString::fromStdString(facts(*data).balance);
    if (!balance.isEmpty() && balance != of_set)
        return refuse("the family \"" + family.name + "\" is judged with data for alloys of " + of_set + ", not of " +
                      balance);
    return Done{};
}

/// Names in the store and typed values together make the question.
Result<Job> jobFor(const Arguments& arguments, Shelf& shelf, const Store* store) {
    Job job;
    QString balance;
    for (const QString& name : {QString("heat"), QString("cycle"), QString("furnace")})
        if (!arguments.text(name).isEmpty() && !store) return refuse("--" + name + " needs --store");
    auto heat = arguments.text("heat").isEmpty() ? typedHeat(arguments, &balance) : store->heat(arguments.text("heat"));
    if (!heat) return std::move(heat).error();
    job.heat = std::move(heat).value();
    job.family = arguments.text("family");
    if (!job.family.isEmpty() && !shelf.book.find(job.family)) {
        QStringList known;
        for (const Family& family : shelf.book.families) known << family.name;
        return refuse("--family: \"" + job.family + "\" is not judged; there are " + known.join(", "));
    }
    if (!arguments.text("cycle").isEmpty()) {
        auto cycle = store->cycle(arguments.text("cycle"));
        if (!cycle) return std::move(cycle).error();
        job.cycle = std::move(cycle).value();
    } else {
        const QString name = familyOf(job, shelf);
        const Family* family = shelf.book.find(name);
        if (!family)
            return refuse(name.isEmpty() ? QString("--family, --grade or --cycle is needed")
                                         : "the family \"" + name + "\" is not in data/families.toml; name a --cycle");
        auto cycle = cycleOfFamily(*family, arguments.text("kind"));
        if (!cycle) return std::move(cycle).error();
        job.cycle = std::move(cycle).value();
    }
    if (!arguments.text("furnace").isEmpty()) {
        auto furnace = store->furnace(arguments.text("furnace"));
        if (!furnace) return std::move(furnace).error();
        job.furnace = std::move(furnace).value();
    }
    if (const Family* family = shelf.book.find(familyOf(job, shelf)))
        if (auto fits = chooseFamilyData(arguments, *family, balance, shelf); !fits) return std::move(fits).error();
    return job;
}

}  // namespace

Result<int> windowCommand(const QStringList& given) {
    const auto read = readArguments(given, kValued, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    std::optional<Store> store;
    if (const QString path = arguments.text("store"); !path.isEmpty()) {
        auto opened = Store::open(path, Access::read);
        if (!opened) return std::move(opened).error();
        store.emplace(std::move(opened).value());
    }
    auto shelf = shelfFor(arguments, store ? &*store : nullptr);
    if (!shelf) return std::move(shelf).error();
    if (!arguments.text("band-rule").isEmpty()) shelf.value().rules.band_rule = arguments.text("band-rule");
    auto job = jobFor(arguments, shelf.value(), store ? &*store : nullptr);
    if (!job) return std::move(job).error();
    const auto setpoint_C = arguments.numberIfGiven("setpoint");
    if (!setpoint_C) return setpoint_C.error();
    job.value().setpoint_C = setpoint_C.value();
    if (setpoint_C.value() && job.value().furnace.id.isEmpty())
        if (auto plausible = checkSetpoint(*setpoint_C.value()); !plausible)
            return std::move(plausible).error().within("--setpoint");

    ReportCache cache;
    const auto answer = judge(job.value(), shelf.value(), cache);
    if (!answer) return answer.error();
    arguments.has("json") ? print(asJson(answer.value())) : print(asText(answer.value()));
    return 0;
}

}  // namespace soak::cli
