// SPDX-License-Identifier: GPL-3.0-or-later
#include <QSaveFile>
#include <algorithm>

#include "arguments.h"
#include "commands.h"
#include "output.h"
#include "planner/core/evidence_targets.h"
#include "planner/core/units_text.h"

namespace soak::cli {
namespace {

int decimals(const QString& unit) { return unit == "degC" || unit == "vol%" || unit == "HRC" ? 1 : 3; }

QString figure(const std::optional<double>& value, const QString& unit, bool sign = false) {
    if (!value) return "-";
    return (sign && *value > 0 ? "+" : "") + number(*value, decimals(unit));
}

QString unitText(const QString& unit) { return unit == "degC" ? QStringLiteral("°C") : unit; }
QString differenceUnit(const QString& unit) { return unit == "degC" ? QStringLiteral("K") : unit; }

QString elided(const QString& text, int width) {
    return text.size() <= width ? text.leftJustified(width) : text.left(width - 1) + QStringLiteral("…");
}

QString subject(const EvidenceRow& row) {
    QStringList parts{row.kind};
    if (row.kind == row.quantity && !row.phase.isEmpty()) parts << row.phase;
    if (!row.element.isEmpty() && row.kind.contains(QChar('_'))) parts << row.element;
    if (row.at_C) parts << "at " + number(*row.at_C) + QStringLiteral(" °C");
    return parts.join(" ");
}

QString rowText(const EvidenceRow& row) {
    const QString published = row.value ? figure(row.value, row.unit) : row.value_text;
    QString text = row.id.leftJustified(7) + elided(subject(row), 44) + published.rightJustified(10) +
                   figure(row.computed, row.unit).rightJustified(10) +
                   figure(row.difference(), row.unit, true).rightJustified(9) + "  " +
                   unitText(row.unit).leftJustified(14) + word(row.weight).leftJustified(12) +
                   (!row.computed ? ""
                    : row.isHit() ? ""
                                  : "miss") +
                   "\n";
    text += "       " + row.composition + "\n       " + row.source + " (" + row.how + ", seen: " + row.seen + ")\n";
    if (!row.reason.isEmpty()) text += "       not computed: " + row.reason + "\n";
    if (!row.remark.isEmpty()) text += "       " + row.remark + "\n";
    return text;
}

QString groupText(const EvidenceGroup& group) {
    QString text = "  " + elided(group.family, 26) + elided(group.kind, 20) +
                   QString::number(group.count).rightJustified(5) +
                   QString::number(group.not_computed).rightJustified(7);
    if (group.count > 0) {
        text += figure(group.mean, group.unit, true).rightJustified(10) +
                (group.count > 1 ? figure(group.deviation, group.unit) : QString("-")).rightJustified(10) +
                figure(group.worst, group.unit, true).rightJustified(10) + "  " +
                differenceUnit(group.unit).leftJustified(14) + group.worst_id.leftJustified(7);
        if (group.isLittle()) text += " little evidence";
    }
    return text + "\n";
}

QString summaryText(const std::vector<EvidenceGroup>& groups) {
    QString text;
    for (const auto& [weight, title] :
         {std::pair{EvidenceClass::firm, "Firm rows"},
          {EvidenceClass::unsure, "Unsure or calculated rows: for the trend only"},
          {EvidenceClass::shop, "The shop's own rows: shown apart; --weigh-own lets them count as firm"},
          {EvidenceClass::calibration, "Calibration rows: data were fitted to them, no evidence"}}) {
        if (std::none_of(groups.begin(), groups.end(), [&](const auto& group) { return group.weight == weight; }))
            continue;
        text += QString("\n%1\n  ").arg(title) + QString("family").leftJustified(26) +
                QString("kind").leftJustified(20) +
                " rows  left      mean  st. dev.     worst  unit          worst row\n";
        for (const EvidenceGroup& group : groups)
            if (group.weight == weight) text += groupText(group);
    }
    return text;
}

QString targetsText(const std::vector<EvidenceTarget>& targets) {
    QString text;
    for (const EvidenceTarget& target : targets) {
        if (target.reached.count + target.unsure == 0) continue;
        text += "  " + elided(target.what, 50) + QString::number(target.reached.count).rightJustified(5) +
                figure(target.reached.mean, target.unit, true).rightJustified(9) +
                figure(target.reached.deviation, target.unit).rightJustified(9) + " / " +
                figure(std::max(target.deviation, target.own_scatter), target.unit) +
                figure(target.reached.worst, target.unit, true).rightJustified(9) + " / " +
                figure(target.worst, target.unit) + "  " + differenceUnit(target.unit) + "  " +
                (target.isLittle() ? "too little evidence"
                 : target.isMet()  ? "met"
                                   : "missed") +
                (target.missed.isEmpty() ? "" : ": " + target.missed.join(" "));
        if (target.unsure > 0) text += QString("; %1 of %2 unsure rows hit").arg(target.unsure_hits).arg(target.unsure);
        text += "\n";
    }
    if (text.isEmpty()) return {};
    return "\nTargets on firm rows" +
           QString("rows     mean  st. dev. / target   worst / target\n").rightJustified(80) + text;
}

QString asText(const std::vector<EvidenceRow>& rows, const std::vector<EvidenceTarget>& targets) {
    QString text =
        QString("row    ") + QString("quantity").leftJustified(44) + " published  computed     diff.  unit\n";
    for (const EvidenceRow& row : rows) text += rowText(row);
    text += summaryText(evidenceGroups(rows));
    text += targetsText(targets);
    const auto computed = std::count_if(rows.begin(), rows.end(), [](const auto& row) { return row.computed; });
    const auto judged = std::count_if(rows.begin(), rows.end(), [](const auto& row) { return row.isJudged(); });
    const auto hits = std::count_if(rows.begin(), rows.end(), [](const auto& row) { return row.isHit(); });
    return text +
           QString(
               "\n%1 published rows: %2 computed, %5 not. %3 of the %4 that state a scatter lie within twice of it.\n"
               "\"left\" counts rows without a computed value; a difference is computed minus published.\n")
               .arg(rows.size())
               .arg(computed)
               .arg(hits)
               .arg(judged)
               .arg(static_cast<qsizetype>(rows.size()) - computed);
}

Json jsonNumber(const std::optional<double>& value) { return value ? Json(*value) : Json(nullptr); }

Json asJson(const EvidenceRow& row) {
    Json json;
    json["row"] = row.id.toStdString();
    json["family"] = row.family.toStdString();
    json["kind"] = row.kind.toStdString();
    json["composition_wt"] = row.composition.toStdString();
    json["phase"] = row.phase.toStdString();
    json["element"] = row.element.toStdString();
    json["at_C"] = jsonNumber(row.at_C);
    json["value"] = row.value ? Json(*row.value) : Json(row.value_text.toStdString());
    json["computed"] = jsonNumber(row.computed);
    json["difference"] = jsonNumber(row.difference());
    json["unit"] = row.unit.toStdString();
    json["scatter"] = row.scatter;
    json["weight"] = word(row.weight).toStdString();
    json["unsure"] = row.weight == EvidenceClass::unsure;
    json["used_for_calibration"] = row.weight == EvidenceClass::calibration;
    json["reason"] = row.reason.toStdString();
    json["remark"] = row.remark.toStdString();
    json["source"] = row.source.toStdString();
    json["how"] = row.how.toStdString();
    json["seen"] = row.seen.toStdString();
    json["note"] = row.note.toStdString();
    return json;
}

Json asJson(const EvidenceGroup& group) {
    return Json{{"weight", word(group.weight).toStdString()},
                {"family", group.family.toStdString()},
                {"kind", group.kind.toStdString()},
                {"unit", differenceUnit(group.unit).toStdString()},
                {"count", group.count},
                {"not_computed", group.not_computed},
                {"mean", group.count > 0 ? Json(group.mean) : Json(nullptr)},
                {"standard_deviation", group.count > 1 ? Json(group.deviation) : Json(nullptr)},
                {"worst", group.count > 0 ? Json(group.worst) : Json(nullptr)},
                {"worst_row", group.worst_id.toStdString()},
                {"little_evidence", group.isLittle()}};
}

Json asJson(const EvidenceTarget& target) {
    Json missed = Json::array();
    for (const QString& id : target.missed) missed.push_back(id.toStdString());
    return Json{{"target", target.id.toStdString()},
                {"what", target.what.toStdString()},
                {"unit", differenceUnit(target.unit).toStdString()},
                {"count", target.reached.count},
                {"mean", target.reached.count > 0 ? Json(target.reached.mean) : Json(nullptr)},
                {"standard_deviation", target.reached.count > 1 ? Json(target.reached.deviation) : Json(nullptr)},
                {"target_standard_deviation", target.deviation},
                {"own_scatter", target.own_scatter},
                {"worst", target.reached.count > 0 ? Json(target.reached.worst) : Json(nullptr)},
                {"target_worst", target.worst},
                {"missed", missed},
                {"unsure_rows", target.unsure},
                {"unsure_rows_within_twice_their_scatter", target.unsure_hits},
                {"little_evidence", target.isLittle()},
                {"met", target.isMet()}};
}

Result<Done> save(const QString& path, const QString& text) {
    QSaveFile file(path);
    const QByteArray bytes = text.toUtf8();
    if (!file.open(QIODevice::WriteOnly) || file.write(bytes) != bytes.size() || !file.commit())
        return Error{Fault::store, path.toStdString() + ": not written: " + file.errorString().toStdString(), {}, {}};
    return Done{};
}

QString baselineText(const std::vector<EvidenceRow>& rows) {
    QString text = "row_id,computed,unit,made_by\n";
    for (const EvidenceRow& row : rows)
        if (row.computed)
            text += row.id + "," + QString::number(*row.computed, 'g', 8) + "," + row.unit +
                    ",soakwright evidence --baseline\n";
    return text;
}

Result<Done> addOwnRows(const Arguments& arguments, std::vector<EvidenceRow>& rows) {
    const QString own = arguments.text("own");
    if (own.isEmpty() && arguments.has("weigh-own"))
        return Error{Fault::input, "--weigh-own needs the shop's rows: name their table with --own FILE", {}, {}};
    if (own.isEmpty()) return Done{};
    if (!arguments.text("baseline").isEmpty())
        return Error{Fault::input, "--baseline records published rows only: leave out --own", {}, {}};
    auto read = readShopEvidence(own, arguments.has("weigh-own"));
    if (!read) return std::move(read).error();
    for (EvidenceRow& row : read.value()) rows.push_back(std::move(row));
    return Done{};
}

}  // namespace

Result<int> evidenceCommand(const QStringList& given) {
    const auto read = readArguments(given, {"family", "kind", "write", "baseline", "own"}, {"json", "weigh-own"});
    if (!read) return read.error();
    const Arguments& arguments = read.value();
    const QString family = arguments.text("family"), kind = arguments.text("kind");
    const QString write = arguments.text("write"), baseline = arguments.text("baseline");
    if ((!write.isEmpty() || !baseline.isEmpty()) && !(family.isEmpty() && kind.isEmpty()))
        return Error{Fault::input, "--write and --baseline need all rows: leave out --family and --kind", {}, {}};

    auto rows = readEvidence();
    if (!rows) return std::move(rows).error();
    if (auto done = addOwnRows(arguments, rows.value()); !done) return std::move(done).error();
    std::vector<EvidenceRow> chosen;
    for (const EvidenceRow& row : rows.value())
        if ((family.isEmpty() || row.family == family) && (kind.isEmpty() || row.kind == kind || row.quantity == kind))
            chosen.push_back(row);
    if (chosen.empty())
        return Error{
            Fault::input, "no published row of this family and kind; soakwright evidence lists them all", {}, {}};
    if (auto done = computeEvidence(chosen); !done) return std::move(done).error();

    if (!write.isEmpty()) {
        const auto table = modelScatterTable(chosen);
        if (!table) return table.error();
        if (auto done = save(write, table.value()); !done) return std::move(done).error();
    }
    if (!baseline.isEmpty())
        if (auto done = save(baseline, baselineText(chosen)); !done) return std::move(done).error();
    const auto targets = evidenceTargets(chosen);
    if (!targets) return targets.error();
    if (arguments.has("json")) {
        Json json{{"rows", Json::array()}, {"groups", Json::array()}, {"targets", Json::array()}};
        for (const EvidenceRow& row : chosen) json["rows"].push_back(asJson(row));
        for (const EvidenceGroup& group : evidenceGroups(chosen)) json["groups"].push_back(asJson(group));
        for (const EvidenceTarget& target : targets.value()) json["targets"].push_back(asJson(target));
        print(json);
    } else {
        print(asText(chosen, targets.value()));
    }
    return 0;
}

}  // namespace soak::cli
