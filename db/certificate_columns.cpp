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
    if (const auto found = other.find(name.toLower()); found != other.end()) return found->second;
    const qsizetype at = elements().indexOf(name.left(1).toUpper() + name.mid(1).toLower());
    return at < 0 ? QString() : elements()[at];
}

std::optional<AmountUnit> unitOf(QString text) {
    static const QRegularExpression brackets(R"([\[\]()\s])");
    text = text.remove(brackets).replace(',', '.').toLower();
    if (text == "%" || text == "wt%" || text == "wt.%" || text == "mass%" || text == "gew.-%")
        return AmountUnit::percent;
    if (text == "ppm") return AmountUnit::ppm;
    static const QRegularExpression thousandth(R"(^(x|\x{00D7})0\.001%$)");
    if (thousandth.match(text).hasMatch()) return AmountUnit::thousandth;
    return {};
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
    const std::optional<AmountUnit> written = unitOf(rest);
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

std::optional<CertificateColumns> columnsOf(const QStringList& header) {
    CertificateColumns columns;
    columns.names = header;
    for (const QString& name : header) {
        AmountUnit unit = AmountUnit::percent;
        QString meaning = takeElement(name, unit);
        if (meaning.isEmpty()) meaning = meaningOf(name);
        // The first column of a meaning is the one; a second is kept out and shows so in `taken_for`.
        if (columns.taken_for.contains(meaning)) meaning.clear();
        columns.taken_for << meaning;
        columns.units.push_back(unit);
    }
    if (columns.indexOf("heat") < 0 || columns.elementCount() < 3) return {};
    return columns;
}

bool takeUnits(const QStringList& cells, CertificateColumns& columns) {
    std::vector<AmountUnit> units = columns.units;
    int found = 0;
    for (qsizetype i = 0; i < cells.size() && i < columns.names.size(); ++i) {
        if (!columns.isElement(i) || cells[i].trimmed().isEmpty()) continue;
        const std::optional<AmountUnit> unit = unitOf(cells[i]);
        if (!unit) return false;
        units[size_t(i)] = *unit;
        ++found;
    }
    if (found == 0) return false;
    columns.units = std::move(units);
    return true;
}

}  // namespace soak
