// SPDX-License-Identifier: GPL-3.0-or-later
#include "db/import.h"

#include <QCryptographicHash>
#include <algorithm>
#include <map>

#include "db/heat_number.h"
#include "db/store.h"

namespace soak {
namespace {

/// Equal contents needed before a number one slip away is called the same heat: heats of one day are numbered in turn,
/// but never melted alike in so many figures (common practice).
constexpr int kAlikeContents = 5;

QString writtenIn(const Content& content) {
    const QString raw = content.raw.trimmed();
    return raw.isEmpty() ? "no value" : content.wt ? amountText(content) : "\"" + raw + "\"";
}

bool sameContent(const Content& a, const Content& b) { return a.wt == b.wt && a.less_than == b.less_than; }

/// Elements of `file` that another analysis holds with another value. An element that the other does not name at all is
/// new, not different.
std::vector<std::string> differing(const Analysis& file, const Analysis& stored) {
    std::vector<std::string> elements;
    for (const auto& [element, content] : file)
        if (const auto at = stored.find(element); at != stored.end() && !sameContent(content, at->second))
            elements.push_back(element);
    return elements;
}

int alike(const Analysis& a, const Analysis& b) {
    int count = 0;
    for (const auto& [element, content] : a)
        if (const auto at = b.find(element); at != b.end()) {
            if (!sameContent(content, at->second)) return 0;
            count += content.wt.has_value();
        }
    return count;
}

/// Every analysis of a heat, its own first.
std::vector<OtherAnalysis> allAnalyses(const Heat& heat) {
    std::vector<OtherAnalysis> all{{heat.analysis_kind, heat.analysis, heat.source}};
    all.insert(all.end(), heat.other_analyses.begin(), heat.other_analyses.end());
    return all;
}

bool holdsSame(const Heat& stored, const OtherAnalysis& analysis) {
    const std::vector<OtherAnalysis> all = allAnalyses(stored);
    return std::any_of(all.begin(), all.end(), [&](const OtherAnalysis& one) {
        if (one.kind != analysis.kind || one.analysis.size() < analysis.analysis.size()) return false;
        return differing(analysis.analysis, one.analysis).empty() &&
               std::all_of(analysis.analysis.begin(), analysis.analysis.end(),
                           [&](const auto& entry) { return one.analysis.count(entry.first) > 0; });
    });
}

bool isKnownProduct(const Heat& stored, const Product& product) {
    const auto same = [&](const QString& form, const std::optional<double>& section_mm) {
        return (product.form.isEmpty() || form == product.form) &&
               (!product.section_mm || section_mm == product.section_mm);
    };
    return same(stored.product_form, stored.section_mm) ||
           std::any_of(stored.other_products.begin(), stored.other_products.end(),
                       [&](const Product& one) { return same(one.form, one.section_mm); });
}

int lineOf(const QString& source) { return source.section(' ', -1).toInt(); }

/// Brings one file's heats before what the store holds.
class Comparison {
public:
    Comparison(ImportPlan& plan, std::vector<Heat> stored, std::vector<HeldRow> held)
        : plan_(plan), stored_(std::move(stored)), held_(std::move(held)), index_(numbersOf(stored_)) {
        for (const Heat& heat : stored_) by_number_[heat.number] = &heat;
        for (const HeldRow& row : held_) held_by_number_.emplace(row.heat, &row);
    }

    void take(Heat heat) {
        plan_.heats += 1;
        plan_.analyses += 1 + int(heat.other_analyses.size());
        compareWithHeld(heat);
        const auto known = by_number_.find(heat.number);
        if (known != by_number_.end()) return takeKnown(heat, *known->second);
        offerNear(heat);
        plan_.new_heats.push_back(std::move(heat));
    }

private:
    static QStringList numbersOf(const std::vector<Heat>& heats) {
        QStringList numbers;
        for (const Heat& heat : heats) numbers << heat.number;
        return numbers;
    }

    QString columnOf(const std::string& element) const {
        const qsizetype at = plan_.certificate.taken_for.indexOf(QString::fromStdString(element));
        return at < 0 ? QString::fromStdString(element) : plan_.certificate.columns[at];
    }

    void note(const Heat& heat, const QString& column, const QString& raw, const QString& read, const QString& text,
              const QString& stored = {}) {
        plan_.findings.push_back({heat.number, lineOf(heat.source), column, raw, read, text, false, stored});
    }

    /// One finding for each cell in which the file and an earlier entry of the same kind differ.
    void noteDifferences(const Heat& heat, const Analysis& earlier, const QString& where, const QString& advice) {
        for (const std::string& element : differing(heat.analysis, earlier)) {
            const Content &here = heat.analysis.at(element), &there = earlier.at(element);
            note(heat, columnOf(element), here.raw, amountText(here),
                 QString("%1 has %2, this file %3: %4").arg(where, writtenIn(there), writtenIn(here), advice),
                 there.raw);
        }
    }

    void compareWithHeld(const Heat& heat) {
        const auto [first, last] = held_by_number_.equal_range(heat.number);
        for (auto at = first; at != last; ++at) {
            const HeldRow& row = *at->second;
            if (row.kind != heat.analysis_kind) continue;
            noteDifferences(heat, row.analysis, QString("a held row (%1 line %2)").arg(row.file).arg(row.line),
                            "the row stays held");
        }
    }

    void takeKnown(const Heat& heat, const Heat& stored) {
        if (!heat.grade.isEmpty() && !sharesGrade(heat.grade, stored.grade))
            note(heat, {}, heat.grade, {},
                 "the store has this heat as " + stored.grade + ", this file as " + heat.grade +
                     ": the stored grade stays until a person decides",
                 stored.grade);
        Heat addition;
        addition.number = heat.number;
        for (const OtherAnalysis& analysis : allAnalyses(heat)) {
            if (holdsSame(stored, analysis)) continue;
            addition.other_analyses.push_back(analysis);
            if (analysis.kind == stored.analysis_kind && analysis.kind == heat.analysis_kind)
                noteDifferences(heat, stored.analysis, "the store (" + stored.source + ")",
                                "the stored value stays, this analysis stands beside it until a person decides");
        }
        const Product product{heat.product_form, heat.section_mm, heat.source};
        if (!isKnownProduct(stored, product)) addition.other_products.push_back(product);
        for (const Product& other : heat.other_products)
            if (!isKnownProduct(stored, other)) addition.other_products.push_back(other);
        if (addition.other_analyses.empty() && addition.other_products.empty())
            plan_.unchanged << heat.number;
        else
            plan_.additions.push_back(std::move(addition));
    }

    /// "1.4462" and "X2CrNiMoN22-5-3 / 1.4462" share a name; what different names mean is the grade check's to say.
    static bool sharesGrade(const QString& a, const QString& b) {
        const QStringList names = gradeNamesIn(b);
        const QStringList own = gradeNamesIn(a);
        return std::any_of(own.begin(), own.end(),
                           [&](const QString& name) { return names.contains(name, Qt::CaseInsensitive); });
    }

    void offerNear(const Heat& heat) {
        QStringList near = index_.sameBut(heat.number);
        for (const QString& slip : index_.oneSlipFrom(heat.number))
            if (alike(heat.analysis, by_number_.at(slip)->analysis) >= kAlikeContents) near << slip;
        if (near.isEmpty()) return;
        note(
            heat, plan_.certificate.columns[plan_.certificate.taken_for.indexOf("heat")], heat.number, {},
            "is it " + near.join(" or ") + ", which the store has? Stored as a heat of its own unless a person decides",
            near.first());
        noteDifferences(heat, by_number_.at(near.first())->analysis, "the store's " + near.first(),
                        "if they are one heat, a person must choose");
    }

    ImportPlan& plan_;
    std::vector<Heat> stored_;
    std::vector<HeldRow> held_;
    NumberIndex index_;
    std::map<QString, const Heat*> by_number_;
    std::multimap<QString, const HeldRow*> held_by_number_;
};

std::optional<Error> noteSameFile(const Store& store, ImportPlan& plan) {
    const QString hash = QCryptographicHash::hash(plan.bytes, QCryptographicHash::Sha256).toHex();
    const Result<std::vector<ImportRecord>> earlier = store.imports();
    if (!earlier) return earlier.error();
    for (const ImportRecord& record : earlier.value())
        if (!record.undone && record.file_hash == hash)
            plan.findings.push_back({{},
                                     0,
                                     {},
                                     {},
                                     {},
                                     QString("this very file was imported already: import %1, %2")
                                         .arg(record.id)
                                         .arg(record.day.toString(Qt::ISODate)),
                                     false,
                                     {}});
    return {};
}

}  // namespace

int ImportPlan::held() const {
    return int(std::count_if(certificate.rows.begin(), certificate.rows.end(),
                             [](const CertificateRow& row) { return !row.usable(); }));
}

Result<ImportPlan> planImport(const Store& store, const QByteArray& bytes, const QString& name,
                              const ImportOptions& options) {
    ImportPlan plan;
    plan.bytes = bytes;
    plan.supplier = options.supplier.isEmpty() ? certificateSupplier(bytes, name) : options.supplier;
    const Result<ColumnChoices> remembered = store.columnChoices(plan.supplier);
    if (!remembered) return remembered.error();
    plan.choices = options.choices;
    plan.choices.insert(remembered.value().begin(), remembered.value().end());
    Result<Certificate> certificate = readCertificateText(bytes, name, plan.choices);
    if (!certificate) return certificate.error();
    plan.certificate = std::move(certificate).value();
    plan.findings = plan.certificate.findings();
    if (std::optional<Error> error = noteSameFile(store, plan)) return *error;
    Result<std::vector<Heat>> stored = store.heats();
    if (!stored) return stored.error();
    Result<std::vector<HeldRow>> held = store.heldRows();
    if (!held) return held.error();
    std::vector<Heat> heats = plan.certificate.heats();
    Comparison comparison(plan, std::move(stored).value(), std::move(held).value());
    for (Heat& heat : heats) comparison.take(std::move(heat));
    return plan;
}

}  // namespace soak
