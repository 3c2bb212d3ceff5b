// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/certificate_columns.h"

#include <QRegularExpression>
#include <map>

namespace soak {
namespace {

/// Elements that certificates report. Not the whole table: "No" and "In" are words of a header too.
const QStringList& elements() {
    static const QStringList list = {"Ag", "Al", "As", "B",  "Be", "Bi", "C",  "Ca", "Ce", "Co", "Cr",
                                     "Cu", "Fe", "Ga", "H",  "Hf", "La", "Li", "Mg", "Mn", "Mo", "N",
                                     "Na", "Nb", "Ni", "O",  "P",  "Pb", "Re", "S",  "Sb", "Se", "Si",
                                     "Sn", "Sr", "Ta", "Te", "Ti", "V",  "W",  "Y",  "Zn", "Zr"};
    return list;
}

QString elementOf(const QString& name) {
    static const std::map<QString, QString> other = {{"cb", "Nb"}, {"n2", "N"}, {"o2", "O"}, {"h2", "H"}};
    if (name.size() > 2) return {};
    if (const auto found = other.find(name.toLower()); found != other.end()) return found->second;
    const qsizetype at = elements().indexOf(name.left(1).toUpper() + name.mid(1).toLower());
    return at < 0 ? QString() : elements()[at];
}

/// "Nb/Cb" -> Nb; "Al ges." -> Al; "N ppm" -> N in ppm. Soluble aluminium is not the total and stays out.
QString takeElement(const QString& header, AmountUnit& unit) {
    static const QRegularExpression shape(R"(^([A-Za-z]{1,2}2?)(\s*/\s*([A-Za-z]{1,2}))?\s*(.*)$)");
    const QRegularExpressionMatch match = shape.match(header.trimmed());
    if (!match.hasMatch()) return {};
    const QString element = elementOf(match.captured(1)), other = match.captured(3), rest = match.captured(4).trimmed();
    if (!other.isEmpty() && elementOf(other) != element) return {};
    static const QStringList total = {"", "ges.", "ges", "tot", "tot.", "total"};
    if (total.contains(rest.toLower())) return element;
    const std::optional<AmountUnit> written = amountUnitOf(rest);
    if (!written) return {};
    unit = *written;
    return element;
}

/// Words of the other columns, English and German, each part of "Schmelze / Heat" on its own.
QString meaningOf(const QString& header) {
    static const std::map<QString, QString> words = {
        {"heat", "heat"},
        {"heat no", "heat"},
        {"heat number", "heat"},
        {"cast", "heat"},
        {"cast no", "heat"},
        {"heat-no", "heat"},
        {"melt", "heat"},
        {"melt no", "heat"},
        {"b07", "heat"},
        {"schmelzen-nr", "heat"},
        {"schmelze-nr", "heat"},
        {"chargen-nr", "heat"},
        {"ch.-nr", "heat"},
        {"charge nr", "heat"},
        {"b02", "grade"},
        {"b01", "form"},
        {"werkstoff-nr", "grade"},
        {"schmelze", "heat"},
        {"schmelze nr", "heat"},
        {"charge", "heat"},
        {"grade", "grade"},
        {"werkstoff", "grade"},
        {"material", "grade"},
        {"steel grade", "grade"},
        {"product", "form"},
        {"product form", "form"},
        {"product_form", "form"},
        {"erzeugnis", "form"},
        {"section_mm", "section"},
        {"section", "section"},
        {"abm", "section"},
        {"dimension", "section"},
        {"melt_route", "route"},
        {"melt route", "route"},
        {"erschm", "route"},
        {"kind", "kind"},
        {"analysis", "kind"},
        {"analysis kind", "kind"},
        {"art", "kind"},
        {"l/p", "kind"},
        // the sum of what is not named, and the largest of it, in light metal certificates
        {"others each", QString::fromStdString(kOthersEach)},
        {"others total", QString::fromStdString(kOthersTotal)},
        {"andere einzeln", QString::fromStdString(kOthersEach)},
        {"andere gesamt", QString::fromStdString(kOthersTotal)}};
    static const QRegularExpression unit_in_brackets(R"(\s*[\[(].*[\])])"), marks(R"([.:]+$)");
    QString text = header.toLower();
    text.remove(unit_in_brackets);
    QStringList parts = text.split('/');
    parts.prepend(text);
    for (QString part : parts) {
        part = part.trimmed().remove(marks);
        if (const auto found = words.find(part); found != words.end()) return found->second;
    }
    return {};
}

}  // namespace

bool CertificateColumns::isElement(qsizetype column) const {
    static const QStringList others = {QString::fromStdString(kOthersEach), QString::fromStdString(kOthersTotal)};
    return elements().contains(taken_for[column]) || others.contains(taken_for[column]);
}

int CertificateColumns::elementCount() const {
    int count = 0;
    for (qsizetype i = 0; i < taken_for.size(); ++i) count += isElement(i);
    return count;
}

std::optional<CertificateColumns> columnsOf(const QStringList& header, const ColumnChoices& choices) {
    CertificateColumns columns;
    columns.names = header;
    bool any_chosen = false;
    for (const QString& name : header) {
        AmountUnit unit = AmountUnit::percent;
        QString meaning = takeElement(name, unit);
        if (meaning.isEmpty()) meaning = meaningOf(name);
        const auto choice = choices.find(name.trimmed());
        const bool chosen = choice != choices.end();
        if (chosen) meaning = choice->second.taken_for;
        if (chosen) unit = choice->second.unit.value_or(unit);
        any_chosen = any_chosen || (chosen && !meaning.isEmpty());
        // The first column of a meaning is the one; a second is kept out and shows so in `taken_for`.
        if (columns.taken_for.contains(meaning)) meaning.clear();
        columns.taken_for << meaning;
        columns.units.push_back(unit);
        columns.unit_is_chosen.push_back(chosen && choice->second.unit);
    }
    if (columns.indexOf("heat") < 0 || columns.elementCount() < (any_chosen ? 1 : 3)) return {};
    return columns;
}

const QStringList& columnMeanings() {
    static const QStringList all =
        QStringList{"heat", "grade", "form", "section", "route", "kind"} + elements() +
        QStringList{QString::fromStdString(kOthersEach), QString::fromStdString(kOthersTotal)};
    return all;
}

std::optional<AmountUnit> amountUnitOf(const QString& written) {
    static const QRegularExpression brackets(R"([\[\]()\s])");
    QString text = QString(written).remove(brackets).replace(',', '.').toLower();
    if (text == "%" || text == "wt%" || text == "wt.%" || text == "mass%" || text == "gew.-%")
        return AmountUnit::percent;
    if (text == "ppm") return AmountUnit::ppm;
    static const QRegularExpression thousandth(R"(^(x|\x{00D7})?0\.001%$)");
    if (thousandth.match(text).hasMatch()) return AmountUnit::thousandth;
    return {};
}

QString amountUnitText(AmountUnit unit) {
    switch (unit) {
        case AmountUnit::percent:
            return "%";
        case AmountUnit::thousandth:
            return "0.001 %";
        case AmountUnit::ppm:
            return "ppm";
    }
    return {};
}

std::optional<ColumnChoice> columnChoiceOf(const QString& text) {
    const QString word = text.trimmed().section(' ', 0, 0), rest = text.trimmed().section(' ', 1).trimmed();
    if (word.isEmpty()) return ColumnChoice{};
    if (columnMeanings().contains(text.trimmed())) return ColumnChoice{text.trimmed(), {}};
    const QString element = elementOf(word), meaning = element.isEmpty() ? word.toLower() : element;
    if (!columnMeanings().contains(meaning)) return {};
    if (rest.isEmpty()) return ColumnChoice{meaning, {}};
    const std::optional<AmountUnit> unit = amountUnitOf(rest);
    if (!unit || element.isEmpty()) return {};
    return ColumnChoice{meaning, unit};
}

QString columnChoiceText(const ColumnChoice& choice) {
    return choice.unit ? choice.taken_for + " " + amountUnitText(*choice.unit) : choice.taken_for;
}

bool takeUnits(const QStringList& cells, CertificateColumns& columns) {
    std::vector<AmountUnit> units = columns.units;
    int found = 0;
    for (qsizetype i = 0; i < cells.size() && i < columns.names.size(); ++i) {
        if (!columns.isElement(i) || cells[i].trimmed().isEmpty()) continue;
        const std::optional<AmountUnit> unit = amountUnitOf(cells[i]);
        if (!unit) return false;
        if (!columns.unit_is_chosen[size_t(i)]) units[size_t(i)] = *unit;
        ++found;
    }
    if (found == 0) return false;
    columns.units = std::move(units);
    return true;
}

}  // namespace soak
