// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/sheet/wording.h"

#include <toml++/toml.h>
#include <QRegularExpression>
#include <cmath>
#include <vector>

namespace soak {
namespace {

struct TextRule {
    const char* key;
    std::vector<const char*> placeholders;
};

const std::vector<TextRule>& textRules() {
    static const std::vector<TextRule> rules = {
        {"page.sheet", {"number", "revision"}},
        {"page.no_number", {}},
        {"page.replaces", {"replaced"}},
        {"page.date", {"date"}},
        {"page.date_of_draft", {"date"}},
        {"page.valid_withdrawn", {}},
        {"page.valid_until", {"date"}},
        {"page.number", {"page", "pages"}},
        {"page.draft_mark", {}},
        {"page.draft", {}},
        {"page.wording_draft", {}},
        {"page.continued", {}},
        {"job.customer", {}},
        {"job.order", {}},
        {"job.specification", {}},
        {"job.cycle", {}},
        {"setpoint.heading", {}},
        {"setpoint.furnace", {}},
        {"setpoint.step", {"step"}},
        {"metal.heading", {}},
        {"metal.range", {"low", "high"}},
        {"metal.never_above", {"temperature"}},
        {"load.heading", {}},
        {"load.heat", {}},
        {"load.grade", {}},
        {"load.pieces", {}},
        {"load.section", {}},
        {"load.sketch", {}},
        {"load.zone", {"zone"}},
        {"load.spacing", {"spacing"}},
        {"load.decides", {}},
        {"heat_up.heading", {}},
        {"heat_up.ramp", {"ramp"}},
        {"heat_up.atmosphere", {"atmosphere"}},
        {"soak.heading", {}},
        {"soak.start", {"sensor", "temperature"}},
        {"soak.start_any", {"temperature"}},
        {"soak.minutes", {}},
        {"soak.formula", {"formula"}},
        {"soak.box_start", {}},
        {"soak.box_end", {}},
        {"soak.box_check", {}},
        {"soak.box_chart", {}},
        {"soak.box_initials", {}},
        {"quench.heading", {}},
        {"quench.heading_cool", {}},
        {"quench.medium", {"medium"}},
        {"quench.cooling", {"cooling"}},
        {"quench.within", {}},
        {"quench.box_door", {}},
        {"quench.box_under", {}},
        {"quench.box_start", {}},
        {"quench.box_peak", {}},
        {"quench.box_end", {}},
        {"quench.box_initials", {}},
        {"quench.box_out", {}},
        {"quench.box_cold", {}},
        {"after.heading", {}},
        {"after.next", {"step"}},
        {"after.check", {"check"}},
        {"wrong.heading", {}},
        {"wrong.action", {}},
        {"wrong.alarm", {}},
        {"wrong.over", {"temperature"}},
        {"wrong.late", {"delay"}},
        {"wrong.short", {}},
        {"caution.heading", {}},
        {"caution.danger", {}},
        {"caution.warning", {}},
        {"caution.note", {}},
        {"caution.defers", {"procedure"}},
        {"why.heading", {}},
        {"why.margin", {"margin"}},
        {"why.short_by", {"margin"}},
        {"why.floor", {"temperature", "cause"}},
        {"why.ceiling", {"temperature", "cause"}},
        {"why.floor_none", {"cause"}},
        {"why.ceiling_none", {"cause"}},
        {"why.uncertainty", {"uncertainty"}},
        {"why.window", {"low", "high"}},
        {"why.band", {"rule"}},
        {"why.rule", {"rule"}},
        {"why.grade", {"verdict"}},
        {"why.left_out", {"elements"}},
        {"why.published", {"ranges"}},
        {"why.remark", {"remark"}},
        {"verdict.inside", {}},
        {"verdict.tight", {}},
        {"verdict.outside", {}},
        {"verdict.no_window", {}},
        {"verdict.not_computed", {}},
        {"grade.passes", {}},
        {"grade.fails", {}},
        {"grade.not_checked", {}},
        {"sign.heading", {}},
        {"sign.hold", {}},
        {"record.heading", {}},
        {"record.attach", {}},
        {"record.readings", {}},
        {"record.clock", {}},
        {"record.control", {}},
        {"record.load", {}},
        {"record.second", {}},
        {"record.differed", {}},
        {"foot.program", {"program"}},
        {"foot.data", {"data"}},
        {"foot.rules", {"rules"}},
        {"foot.hash", {"hash"}},
        {"foot.deference", {}},
        {"second.soak_start", {}},
        {"second.soak_start_any", {}},
        {"second.quench_medium", {}},
        {"second.quench_cooling", {}},
        {"second.metal_never_above", {}},
        {"second.load_spacing", {}},
        {"second.after_next", {}},
        {"second.after_check", {}},
        {"second.heat_up_ramp", {}},
        {"second.heat_up_atmosphere", {}},
        {"second.wrong_over", {}},
        {"second.wrong_late", {}},
    };
    return rules;
}

/// Groups to which a shop may add words of its own; none of these has placeholders.
bool isOpenGroup(const QString& group) {
    return group == "kind" || group == "rule" || group == "caution_text" || group == "sign";
}

const QRegularExpression& placeholder() {
    static const QRegularExpression pattern("\\{([^{}]*)\\}");
    return pattern;
}

Error wrong(const QString& name, const QString& message) {
    return Error{Fault::data, message.toStdString(), "", {name.toStdString()}};
}

/// Nothing when the text has exactly the wanted placeholders, else the complaint.
QString placeholderComplaint(const QString& text, QStringList wanted) {
    QString rest = text;
    auto matches = placeholder().globalMatch(text);
    while (matches.hasNext()) {
        const auto match = matches.next();
        if (!wanted.removeOne(match.captured(1)))
            return QString("unknown or repeated placeholder {%1}").arg(match.captured(1));
    }
    rest.remove(placeholder());
    if (rest.contains('{') || rest.contains('}')) return "a brace without its partner";
    if (!wanted.isEmpty()) return QString("placeholder {%1} is missing").arg(wanted.first());
    return {};
}

Result<QHash<QString, QString>> readTexts(const toml::table& table, const QString& name) {
    QHash<QString, QString> texts;
    for (const auto& [group, node] : table) {
        const toml::table* inner = node.as_table();
        if (!inner) continue;
        for (const auto& [entry, value] : *inner) {
            const QString key = QString::fromStdString(std::string(group.str()) + "." + std::string(entry.str()));
            const auto text = value.value<std::string>();
            if (!text || QString::fromStdString(*text).trimmed().isEmpty())
                return wrong(name, QString("%1 is not a text; write it in quotes").arg(key));
            texts[key] = QString::fromStdString(*text);
        }
    }
    return texts;
}

}  // namespace

QStringList wordingKeys() {
    QStringList keys;
    for (const auto& rule : textRules()) keys << rule.key;
    return keys;
}

Result<Wording> Wording::parse(const QByteArray& toml, const QString& name) {
    toml::table table;
    try {
        table = toml::parse(std::string_view(toml.constData(), size_t(toml.size())));
    } catch (const toml::parse_error& problem) {
        return wrong(name, QString("line %1: %2")
                               .arg(problem.source().begin.line)
                               .arg(QString::fromStdString(std::string(problem.description()))));
    }
    Wording wording;
    wording.language_ = QString::fromStdString(table["language"].value_or(std::string()));
    wording.decimal_mark_ = QString::fromStdString(table["decimal_mark"].value_or(std::string()));
    const auto draft = table["draft"].value<bool>();
    if (wording.language_.isEmpty() || !draft || wording.decimal_mark_.size() != 1)
        return wrong(name, "language, draft and decimal_mark must stand at the top of the file");
    wording.draft_ = *draft;

    auto texts = readTexts(table, name);
    if (!texts) return std::move(texts).error();
    QHash<QString, QString> unknown = texts.value();
    for (const auto& rule : textRules()) {
        const QString key = rule.key;
        if (!unknown.remove(key)) return wrong(name, QString("%1 is missing").arg(key));
        QStringList wanted(rule.placeholders.begin(), rule.placeholders.end());
        const QString complaint = placeholderComplaint(texts.value()[key], wanted);
        if (!complaint.isEmpty()) return wrong(name, QString("%1: %2").arg(key, complaint));
    }
    for (auto it = unknown.cbegin(); it != unknown.cend(); ++it) {
        if (!isOpenGroup(it.key().section('.', 0, 0))) return wrong(name, QString("%1 is unknown").arg(it.key()));
        const QString complaint = placeholderComplaint(it.value(), {});
        if (!complaint.isEmpty()) return wrong(name, QString("%1: %2").arg(it.key(), complaint));
    }
    wording.texts_ = texts.value();
    return wording;
}

QString Wording::text(const QString& key, Values values) const {
    assert(texts_.contains(key));
    const QString pattern = texts_.value(key);
    QString filled;
    qsizetype from = 0;
    auto matches = placeholder().globalMatch(pattern);
    while (matches.hasNext()) {  // one pass: a brace inside a value is never read as a placeholder
        const auto match = matches.next();
        filled += pattern.mid(from, match.capturedStart() - from);
        from = match.capturedEnd();
        for (const auto& [name, value] : values)
            if (match.captured(1) == QLatin1String(name)) filled += value;
    }
    return filled + pattern.mid(from);
}

QString Wording::underText(const QString& key) const {
    const QString twin = texts_.value("second." + QString(key).replace('.', '_'));
    if (!twin.isEmpty()) return twin;
    const QString own = texts_.value(key);
    return own.contains('{') ? QString() : own;
}

QString Wording::wordOrNothing(const QString& group, const QString& stored) const {
    return texts_.value(group + "." + QString(stored).replace(' ', '-'));
}

QString Wording::word(const QString& group, const QString& stored) const {
    const QString known = wordOrNothing(group, stored);
    if (!known.isEmpty() || stored.isEmpty()) return known;
    return stored.left(1).toUpper() + stored.mid(1);
}

QString Wording::digits(const Quantity& quantity) const {
    QString digits = QString::number(std::abs(quantity.value), 'f', quantity.decimals);
    const bool negative = quantity.value < 0 && digits.toDouble() > 0;  // no "minus zero"
    digits.replace('.', decimal_mark_);
    return negative ? QChar(0x2212) + digits : digits;
}

QString Wording::number(const Quantity& quantity) const { return digits(quantity) + QChar(0x2009) + quantity.unit; }

QString Wording::number(const TwoUnits& quantity) const {
    const QString first = number(quantity.controller);
    return quantity.other ? first + " (" + number(*quantity.other) + ")" : first;
}

QString Wording::tolerance(const TwoUnits& quantity) const {
    const QString first = QChar(0x00B1) + QString(QChar(0x2009)) + number(quantity.controller);
    return quantity.other ? first + " (" + QChar(0x00B1) + QChar(0x2009) + number(*quantity.other) + ")" : first;
}

}  // namespace soak
