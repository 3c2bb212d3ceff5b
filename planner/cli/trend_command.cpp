// SPDX-License-Identifier: GPL-3.0-or-later
#include <map>
#include <tuple>

#include "arguments.h"
#include "commands.h"
#include "json_parts.h"
#include "planner/core/shop_floor.h"
#include "planner/core/trend.h"
#include "planner/core/units_text.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {}}; }

using Key = std::tuple<QString, QString, QString>;  // supplier, grade, what
using Points = std::map<Key, std::vector<TrendPoint>>;

/// One delivery: margins by the standing cycles, and the contents asked for.
Result<Done> addDelivery(const QString& word, const Store& store, const Shelf& shelf, const QStringList& elements,
                         Points& points) {
    const QDate date = QDate::fromString(word.section(':', 0, 0), Qt::ISODate);
    const QString supplier = word.section(':', 1, 1), file = word.section(':', 2);
    if (!date.isValid() || supplier.isEmpty() || file.isEmpty())
        return refuse("\"" + word +
                      "\" is no delivery: write DATE:SUPPLIER:FILE, such as 2025-04-02:Northmill:april.csv");
    const auto certificate = readCertificate(file);
    if (!certificate) return certificate.error();
    auto question = triageFrom(store, certificate.value().delivery(), {});
    if (!question) return std::move(question).error();
    for (const TriageRow& row : triage(question.value(), shelf))
        if (row.margin_K)
            points[{supplier, row.grade, "margin in " + row.cycle}].push_back({date, row.heat, *row.margin_K});
    for (const DeliveryItem& item : question.value().delivery)
        for (const QString& element : elements) {
            const auto content = item.heat.analysis.find(element.toStdString());
            if (item.held.isEmpty() && content != item.heat.analysis.end() && content->second.wt)
                points[{supplier, item.heat.grade, element}].push_back({date, item.heat.number, *content->second.wt});
        }
    return Done{};
}

QString asText(const TrendChart& chart) {
    const int decimals = chart.unit == "K" ? 0 : 3;
    QString text = QString("%1, %2, %3: %4 heats, mean %5")
                       .arg(chart.supplier, chart.grade, chart.what)
                       .arg(chart.points.size())
                       .arg(withUnit(chart.mean, chart.unit, decimals));
    if (chart.points.size() < kFewestPoints) return text + ", too few for limits\n";
    text += QString(", usual %1 to %2\n")
                .arg(withUnit(chart.lower, chart.unit, decimals), withUnit(chart.upper, chart.unit, decimals));
    return chart.sentence.isEmpty() ? text : text + "  " + chart.sentence + "\n";
}

Json asJson(const TrendChart& chart) {
    Json points = Json::array();
    for (const TrendPoint& one : chart.points)
        points.push_back(
            {{"date", plain(one.date.toString(Qt::ISODate))}, {"heat", plain(one.heat)}, {"value", one.value}});
    return {{"supplier", plain(chart.supplier)},
            {"grade", plain(chart.grade)},
            {"what", plain(chart.what)},
            {"unit", plain(chart.unit)},
            {"mean", chart.mean},
            {"lower", chart.lower},
            {"upper", chart.upper},
            {"alarms", Json(chart.alarms)},
            {"sentence", plain(chart.sentence)},
            {"points", points}};
}

}  // namespace

Result<int> trendCommand(const QStringList& given) {
    const auto read = readArguments(given, {"store", "elements", "date"}, {"json"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const auto path = arguments.required("store");
    if (!path) return path.error();
    const auto date = arguments.dateIfGiven("date");
    if (!date) return date.error();
    if (arguments.words.isEmpty()) return refuse("no delivery is named: DATE:SUPPLIER:FILE, one or more");
    auto store = Store::open(path.value(), Access::read);
    if (!store) return std::move(store).error();
    auto shelf = shelfFrom(store.value(), date.value());
    if (!shelf) return std::move(shelf).error();
    const QStringList elements =
        arguments.text("elements").isEmpty() ? QStringList{"Cu", "N"} : listIn(arguments.text("elements"));
    Points points;
    for (const QString& word : arguments.words)
        if (auto done = addDelivery(word, store.value(), shelf.value(), elements, points); !done)
            return std::move(done).error();
    Json json{{"charts", Json::array()}};
    QString text;
    for (auto& [key, values] : points) {
        const auto& [supplier, grade, what] = key;
        const TrendChart chart = makeChart(supplier, grade, what, what.startsWith("margin") ? "K" : "wt%", values);
        json["charts"].push_back(asJson(chart));
        text += asText(chart);
    }
    arguments.has("json") ? print(json) : print(text);
    return 0;
}

}  // namespace soak::cli
