// SPDX-License-Identifier: GPL-3.0-or-later
#include "chemistry_list.h"

#include <QRegularExpression>
#include <QSet>
#include <QStringList>

#include "db/content.h"
#include "planner/core/grade_check.h"

namespace soak::cli {
namespace {

Error refuse(const QString& message) { return {Fault::input, message.toStdString(), {}, {"--wt"}}; }

/// Symbols of the natural elements; an unknown word is a slip of the pen, an element that no data set has is kept.
bool isElement(const QString& symbol) {
    static const QStringList symbols =
        QString(
            "H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr Rb Sr "
            "Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W "
            "Re Os Ir Pt Au Hg Tl Pb Bi Th U")
            .split(' ');
    return symbols.contains(symbol);
}

/// Splits at semicolons when there are any, so that "C=0,05;Cr=18" keeps its decimal commas; else at commas.
QStringList entriesOf(const QString& text) {
    static const QRegularExpression comma_before_symbol(",(?=\\s*[A-Za-z])");
    QStringList entries;
    for (const QString& part : text.split(';'))
        for (const QString& entry : part.split(comma_before_symbol))
            if (!entry.trimmed().isEmpty()) entries << entry.trimmed();
    return entries;
}

Result<Content> readAmount(const QString& symbol, const QString& text, bool commas_separate) {
    const QString shown = symbol + "=" + text;
    if (text.contains('%') || text.contains("ppm", Qt::CaseInsensitive)) {
        const CellReading reading = readCell(text);
        const QString instead =
            reading.content.wt ? "; write " + symbol + "=" + QString::number(*reading.content.wt) : "";
        return refuse(shown + ": amounts are in wt% and carry no unit" + instead);
    }
    if (commas_separate && text.contains(','))
        return refuse(shown + ": a decimal comma between commas is ambiguous; write " +
                      QString(shown).replace(',', '.') + ", or put semicolons between the entries");
    const CellReading reading = readCell(text);
    if (reading.kind != CellKind::number && reading.kind != CellKind::censored)
        return refuse(shown + ": " +
                      (reading.content.remark.isEmpty() ? QString("no amount in wt%") : reading.content.remark));
    return reading.content;
}

}  // namespace

Result<TypedChemistry> readChemistry(const QString& text) {
    TypedChemistry typed;
    double sum = 0;
    const bool commas_separate = !text.contains(';');
    for (const QString& entry : entriesOf(text)) {
        const qsizetype equals = entry.indexOf('=');
        if (equals < 1) return refuse("\"" + entry + "\" is not of the form C=0.05");
        const QString symbol = entry.left(equals).trimmed(), amount = entry.mid(equals + 1).trimmed();
        if (!isElement(symbol)) return refuse("\"" + symbol + "\" is no element; symbols are written like C, Cr, Mo");
        if (typed.analysis.count(symbol.toStdString()) || typed.balance == symbol)
            return refuse(symbol + " stands there twice");
        if (readCell(amount).kind == CellKind::balance) {
            if (!typed.balance.isEmpty()) return refuse("two balance elements: " + typed.balance + " and " + symbol);
            typed.balance = symbol;
            continue;
        }
        const auto content = readAmount(symbol, amount, commas_separate);
        if (!content) return content.error();
        sum += *content.value().wt;
        typed.analysis[symbol.toStdString()] = content.value();
    }
    if (typed.analysis.empty() && typed.balance.isEmpty()) return refuse("no element given; write C=0.05,Cr=18,Ni=10");
    if (typed.balance.isEmpty()) typed.balance = QString::fromStdString(baseMetal(typed.analysis));
    if (sum > 100) return refuse(QString("the amounts add up to %1 %, more than 100 %").arg(sum, 0, 'f', 2));
    return typed;
}

Result<Chemistry> plainChemistry(const TypedChemistry& typed, const QString& default_balance) {
    Chemistry chemistry;
    chemistry.balance = (typed.balance.isEmpty() ? default_balance : typed.balance).toStdString();
    for (const auto& [element, content] : typed.analysis) {
        if (content.less_than)
            return refuse(QString::fromStdString(element) + "=" + content.raw +
                          ": a state needs a number, not a bound");
        if (element != chemistry.balance) chemistry.wt[element] = *content.wt;
    }
    return chemistry;
}

}  // namespace soak::cli
