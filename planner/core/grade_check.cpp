// SPDX-License-Identifier: GPL-3.0-or-later
#include "planner/core/grade_check.h"

#include <algorithm>
#include <cmath>

#include "db/content.h"
#include "db/store.h"
#include "planner/core/units_text.h"

namespace soak {
namespace {

/// Which standards speak of which product form; scope of the standards, common knowledge of the trade.
struct FormRow {
    QStringView standard;
    QStringView forms;  // words of Heat::product_form
};
constexpr FormRow kForms[] = {
    {u"EN 10088-2", u"plate sheet strip"},
    {u"EN 10088-3", u"bar forging ring wire rod"},
    {u"EN 10213", u"casting"},
    {u"EN 10283", u"casting"},
    {u"EN 10295", u"casting"},
    {u"EN 10216-2", u"tube pipe"},
    {u"EN 10216-5", u"tube pipe"},
    {u"EN 10028-2", u"plate sheet"},
    {u"EN 10028-7", u"plate sheet"},
    {u"EN 10222-2", u"forging ring"},
    {u"EN 10222-5", u"forging ring"},
    {u"EN 10269", u"bar forging"},
    {u"ASTM A240", u"plate sheet strip"},
    {u"ASTM A276", u"bar"},
    {u"ASTM A182", u"forging ring"},
    {u"ASTM A335", u"tube pipe"},
    {u"ASTM A105", u"forging"},
    {u"ASTM A350", u"forging"},
    {u"ASTM A216", u"casting"},
    {u"ASTM A217", u"casting"},
    {u"ASTM A351", u"casting"},
    {u"ASTM A743", u"casting"},
    {u"ASTM A747", u"casting"},
    {u"ASTM A890", u"casting"},
    {u"ASTM A297", u"casting"},
    {u"EN 573-3; AA International Designations (wrought)",
     u"plate sheet strip bar rod wire tube extrusion profile forging ring rivet"},
    {u"AA International Designations (wrought)",
     u"plate sheet strip bar rod wire tube extrusion profile forging ring rivet"},
    {u"EN 1706", u"casting"},
    {u"AA Designations (castings); ASTM B26/B108", u"casting"},
};

/// Where a grade's table gives no figure for the elements that it does not name: from `note_wt` they are mentioned,
/// from `deliberate_wt` they cannot be a residue of the scrap and the metal is not this grade. Standards forbid
/// unlisted additions without giving a figure (EN 10088-2 table 1, EN ISO 4957 table 1, footnotes); the figures are
/// common practice.
struct ResidueRow {
    const char* element;
    double note_wt, deliberate_wt;
};
constexpr ResidueRow kResidues[] = {{"Al", 0.06, 0.30}, {"Co", 0.35, 1.00}, {"Cr", 0.40, 0.80},  {"Cu", 0.60, 1.20},
                                    {"Mo", 0.50, 0.80}, {"Nb", 0.03, 0.15}, {"Ni", 0.60, 1.00},  {"Ti", 0.03, 0.15},
                                    {"V", 0.15, 0.40},  {"W", 0.15, 0.50},  {"B", 0.003, 0.005}, {"N", 0.15, 0.25},
                                    {"Mn", 2.0, 3.0},   {"Si", 1.5, 2.5}};

struct RowCheck {
    std::vector<Finding> findings;  // those that fail, those that are open, those that are close, in this order
    bool fails = false;
    bool open = false;  // an element that decides is missing or censored: nobody can say
};

QString symbolOf(const std::string& element) { return QString::fromStdString(element); }
QString sourceOf(const Grade& row) {
    return row.edition.isEmpty() || row.edition == "unknown" ? row.standard : row.standard + " (" + row.edition + ")";
}
QString printed(const Content& content) {
    return content.raw.isEmpty() && content.wt ? QString::number(*content.wt) : content.raw;
}
QString limitText(const QString& text, double value) { return text.isEmpty() ? QString::number(value) : text; }

bool servesForm(const Grade& row, const QString& form) {
    return std::any_of(std::begin(kForms), std::end(kForms), [&](const FormRow& one) {
        return row.standard == one.standard && one.forms.toString().split(' ').contains(form, Qt::CaseInsensitive);
    });
}
/// A row for another product form: its standard names forms, and not this one.
bool servesOtherForm(const Grade& row, const QString& form) {
    return !form.isEmpty() && !servesForm(row, form) &&
           std::any_of(std::begin(kForms), std::end(kForms),
                       [&](const FormRow& one) { return row.standard == one.standard; });
}

void checkLimit(RowCheck& check, const std::string& element, const GradeLimit& limit, const Content* content,
                const QString& source) {
    const QString symbol = symbolOf(element);
    const auto add = [&](const QString& text, bool fails) {
        check.findings.push_back({symbol, text, source, fails});
        check.fails = check.fails || fails;
    };
    if (!content || !content->wt) {
        const bool decides = limit.min_wt && *limit.min_wt > 0;
        check.open = check.open || decides;
        const QString why = content && !content->raw.trimmed().isEmpty() ? " (\"" + content->raw + "\")" : "";
        if (decides)
            return add(symbol + " missing" + why + ": the grade requires at least " +
                           limitText(limit.min_text, *limit.min_wt) + " %",
                       false);
        if (limit.max_wt && why.isEmpty())
            return add(symbol + " not on the certificate: its maximum " + limitText(limit.max_text, *limit.max_wt) +
                           " % is not checked",
                       false);
        return;
    }
    const double value = *content->wt;
    const QString amount = symbol + " " + printed(*content);
    if (limit.max_wt && value > *limit.max_wt + 1e-9) {
        check.open = check.open || content->less_than;
        return add(amount + (content->less_than ? " cannot be compared with the maximum " : " above the maximum ") +
                       limitText(limit.max_text, *limit.max_wt) + " %",
                   !content->less_than);
    }
    if (limit.min_wt && value < *limit.min_wt - 1e-9)
        return add(amount + " below the minimum " + limitText(limit.min_text, *limit.min_wt) + " %", true);
    if (limit.min_wt && content->less_than && *limit.min_wt > 0) {
        check.open = true;
        return add(amount + " cannot be compared with the minimum " + limitText(limit.min_text, *limit.min_wt) + " %",
                   false);
    }
    // Close: within a twentieth of the range.
    const double range = limit.max_wt.value_or(0) - limit.min_wt.value_or(0);
    const double close = limit.max_wt ? 0.05 * range : 0;
    if (limit.max_wt && *limit.max_wt - value <= close)
        add(amount + " close to the maximum " + limitText(limit.max_text, *limit.max_wt) + " %", false);
    if (limit.max_wt && limit.min_wt && value - *limit.min_wt <= close)
        add(amount + " close to the minimum " + limitText(limit.min_text, *limit.min_wt) + " %", false);
}

void checkRules(RowCheck& check, const Analysis& analysis, const Grade& row) {
    for (const QString& rule : row.rules) {
        const RuleOutcome outcome = applyRule(rule, analysis);
        using Answer = RuleOutcome::Answer;
        if (outcome.answer == Answer::holds) continue;
        const bool fails = outcome.answer == Answer::broken;
        check.fails = check.fails || fails;
        check.open = check.open || !fails;
        check.findings.push_back({outcome.elements.join(", "), outcome.text, sourceOf(row), fails});
    }
}

/// Whether the row speaks of the element: a limit, a rule, or the balance.
bool isNamed(const std::string& element, const Analysis& analysis, const Grade& row) {
    if (row.limits.count(element) || element == row.balance()) return true;
    return std::any_of(row.rules.begin(), row.rules.end(), [&](const QString& rule) {
        return applyRule(rule, analysis).elements.contains(symbolOf(element));
    });
}

/// The standard's own figure for elements that it does not name: for each, and for all of them together. A "less than"
/// value is no proof of an excess.
void checkOthers(RowCheck& check, const Analysis& analysis, const Grade& row) {
    const auto most = [&](const std::string& word) {
        const auto at = row.limits.find(word);
        return at == row.limits.end() ? std::optional<double>() : at->second.max_wt;
    };
    const auto fail = [&](const QString& element, const QString& text) {
        check.findings.push_back({element, text, sourceOf(row), true});
        check.fails = true;
    };
    double total = 0;
    QStringList names;
    for (const auto& [element, content] : analysis) {
        if (!content.wt || content.less_than || element == kOthersTotal ||
            (element != kOthersEach && isNamed(element, analysis, row)))
            continue;
        if (const auto each = most(kOthersEach); each && *content.wt > *each + 1e-9)
            fail(symbolOf(element),
                 QString("%1 %2 above the maximum %3 % for each element that the grade does not name")
                     .arg(symbolOf(element), printed(content), limitText(row.limits.at(kOthersEach).max_text, *each)));
        if (element == kOthersEach) continue;
        total += *content.wt;
        names << symbolOf(element);
    }
    if (const auto stated = analysis.find(kOthersTotal); stated != analysis.end() && stated->second.wt)
        total = std::max(total, *stated->second.wt);
    if (const auto all = most(kOthersTotal); all && total > *all + 1e-9)
        fail(names.join(", "),
             QString("the elements that the grade does not name add up to %1 %, above the maximum %2 %")
                 .arg(QString::number(total, 'g', 4), limitText(row.limits.at(kOthersTotal).max_text, *all)));
}

void checkResidues(RowCheck& check, const Analysis& analysis, const Grade& row) {
    for (const ResidueRow& residue : kResidues) {
        const auto at = analysis.find(residue.element);
        if (at == analysis.end() || !at->second.wt || isNamed(residue.element, analysis, row)) continue;
        const double value = *at->second.wt;
        if (value < residue.note_wt || at->second.less_than) continue;
        const bool deliberate = value >= residue.deliberate_wt;
        check.fails = check.fails || deliberate;
        check.findings.push_back(
            {residue.element,
             QString("%1 %2 is not in the grade's table%3")
                 .arg(residue.element, printed(at->second), deliberate ? ", and too much for a residue" : ""),
             deliberate ? "common practice" : sourceOf(row), deliberate});
    }
}

RowCheck checkRow(const Analysis& analysis, const Grade& row) {
    RowCheck check;
    if (const std::string base = baseMetal(analysis); !base.empty() && base != row.balance()) {
        check.fails = true;
        check.findings.push_back(
            {symbolOf(base),
             QString("the heat is an alloy of %1, the grade one of %2").arg(symbolOf(base), symbolOf(row.balance())),
             sourceOf(row), true});
    }
    for (const auto& [element, limit] : row.limits) {
        if (element == kOthersEach || element == kOthersTotal) continue;
        const auto at = analysis.find(element);
        checkLimit(check, element, limit, at == analysis.end() ? nullptr : &at->second, sourceOf(row));
    }
    checkRules(check, analysis, row);
    if (row.limits.count(kOthersEach) || row.limits.count(kOthersTotal))
        checkOthers(check, analysis, row);
    else
        checkResidues(check, analysis, row);
    std::stable_sort(check.findings.begin(), check.findings.end(),
                     [](const Finding& a, const Finding& b) { return a.fails > b.fails; });
    return check;
}

bool satisfies(const Analysis& analysis, const Grade& row) {
    const RowCheck check = checkRow(analysis, row);
    return !check.fails && !check.open;
}

/// The number of a grade where it has one ("1.4307"), else its first name.
QString shortName(const Grade& row) {
    for (const QString& name : row.names)
        if (name.size() >= 6 && name[0].isDigit() && name[1] == '.' && name[2].isDigit()) return name;
    return row.names.isEmpty() ? row.id : row.names.first();
}

/// How tightly a row fits: the sum of its ranges, each against the heat's own content. Of two grades that both accept
/// the heat, the one with the narrower ranges says more about it.
double looseness(const Analysis& analysis, const Grade& row) {
    double sum = 0;
    for (const auto& [element, content] : analysis) {
        if (!content.wt) continue;
        const auto at = row.limits.find(element);
        const double scale = *content.wt + 0.02;
        const double range = at == row.limits.end() || !at->second.max_wt
                                 ? 3 * scale
                                 : *at->second.max_wt - at->second.min_wt.value_or(0);
        sum += std::min(range / scale, 3.0);
    }
    return sum;
}

/// The grades that the heat satisfies, best fit first, at most three; the same body of standards comes first.
QStringList nearestGrades(const Heat& heat, const Grade* main, const std::vector<Grade>& library) {
    struct Candidate {
        double score;
        QString name;
    };
    std::vector<Candidate> candidates;
    const QString body = main ? main->standard.section(' ', 0, 0) : QString("EN");
    for (const Grade& row : library) {
        if (main && row.balance() != main->balance()) continue;
        if (servesOtherForm(row, heat.product_form) || !satisfies(heat.analysis, row)) continue;
        const bool same_body = row.standard.section(' ', 0, 0) == body;
        candidates.push_back({looseness(heat.analysis, row) + (same_body ? 0 : 1000), shortName(row)});
    }
    std::stable_sort(candidates.begin(), candidates.end(),
                     [](const Candidate& a, const Candidate& b) { return a.score < b.score; });
    QStringList names;
    for (const Candidate& candidate : candidates)
        if (names.size() < 3 && !names.contains(candidate.name)) names << candidate.name;
    return names;
}

Analysis scaled(Analysis analysis, const std::string& element, double factor) {
    Content& content = analysis.at(element);
    content.wt = *content.wt * factor;
    content.raw = QString::number(*content.wt);
    return analysis;
}

/// More than twice off: a shifted point would explain it, a melt that ran a little high would not. An element that the
/// row does not name is an addition, not a slip.
bool isFarOut(double value, const Grade& row, const std::string& element) {
    const auto at = row.limits.find(element);
    if (at == row.limits.end()) return false;
    const bool far_above = at->second.max_wt && value > 2 * *at->second.max_wt;
    const bool far_below = at->second.min_wt && value < *at->second.min_wt / 2;
    return far_above || far_below;
}

/// One slip of the pen that would explain everything that is wrong: a shifted decimal point, two columns swapped.
/// Only said, never done.
std::vector<Finding> slips(const Analysis& analysis, const Grade& row, const RowCheck& check) {
    std::vector<Finding> found;
    QStringList wrong;
    for (const Finding& finding : check.findings)
        if (finding.fails) wrong << finding.element;
    for (const auto& [element, content] : analysis) {
        if (!content.wt || !wrong.contains(symbolOf(element)) || !isFarOut(*content.wt, row, element)) continue;
        for (const double factor : {0.1, 10.0, 0.01}) {
            const Analysis moved = scaled(analysis, element, factor);
            if (!satisfies(moved, row)) continue;
            found.push_back({symbolOf(element),
                             QString("%1 %2 would fit as %3: check the decimal point against the certificate")
                                 .arg(symbolOf(element), printed(content), printed(moved.at(element))),
                             "suggestion", false});
            break;
        }
    }
    for (auto first = analysis.begin(); first != analysis.end(); ++first)
        for (auto second = std::next(first); second != analysis.end(); ++second) {
            const QString a = symbolOf(first->first), b = symbolOf(second->first);
            if (!first->second.wt || !second->second.wt || !wrong.contains(a) || !wrong.contains(b)) continue;
            Analysis swapped = analysis;
            std::swap(swapped.at(first->first), swapped.at(second->first));
            if (satisfies(swapped, row))
                found.push_back({a + ", " + b,
                                 QString("%1 %2 and %3 %4 would fit the other way round: check for swapped columns")
                                     .arg(a, printed(first->second), b, printed(second->second)),
                                 "suggestion", false});
        }
    return found;
}

/// What the near equivalents of the grade say: they never accept a heat, but customers ask.
std::vector<Finding> nearEquivalents(const Heat& heat, const Grade& main, const std::vector<Grade>& library) {
    std::vector<Finding> found;
    for (const Grade& row : library) {
        const bool near = std::any_of(row.names.begin(), row.names.end(),
                                      [&](const QString& name) { return main.near_names.contains(name); });
        if (!near || servesOtherForm(row, heat.product_form)) continue;
        const RowCheck check = checkRow(heat.analysis, row);
        const QString name = "near equivalent " + row.names.first() + " (" + row.standard + ")";
        QStringList why;
        for (const Finding& finding : check.findings)
            if (finding.fails) why << finding.text;
        const QString answer = check.fails  ? "not satisfied: " + why.join("; ")
                               : check.open ? "cannot be checked"
                                            : "satisfied";
        found.push_back({"", name + " " + answer, sourceOf(row), false});
    }
    return found;
}

}  // namespace

std::string baseMetal(const Analysis& analysis) {
    constexpr double kMost_wt = 50;  // more than all others together: no alloying element reaches it
    for (const auto& [element, content] : analysis) {
        if (readCell(content.raw).kind == CellKind::balance) return element;
        if (content.wt && !content.less_than && *content.wt > kMost_wt) return element;
    }
    return {};
}

std::vector<const Grade*> rowsOfGrade(const QString& name, const std::vector<Grade>& library) {
    const QStringList names = gradeNamesIn(name);
    std::vector<const Grade*> rows;
    for (const Grade& row : library)
        if (std::any_of(names.begin(), names.end(), [&](const QString& one) { return row.names.contains(one); }))
            rows.push_back(&row);
    return rows;
}

const Grade* mainRow(const Heat& heat, const std::vector<Grade>& library) {
    const auto rows = rowsOfGrade(heat.grade, library);
    const auto fitting =
        std::find_if(rows.begin(), rows.end(), [&](const Grade* row) { return servesForm(*row, heat.product_form); });
    if (fitting != rows.end()) return *fitting;
    return rows.empty() ? nullptr : rows.front();
}

GradeCheck checkGrade(const Heat& heat, const std::vector<Grade>& library) {
    GradeCheck answer;
    const Grade* main = mainRow(heat, library);
    if (!main) {
        answer.verdict = "not checked";
        answer.findings.push_back(
            {"",
             heat.grade.isEmpty() ? QString("no grade is given") : "grade \"" + heat.grade + "\" is not in the library",
             "", false});
        answer.suggested = nearestGrades(heat, nullptr, library);
        return answer;
    }
    const RowCheck check = checkRow(heat.analysis, *main);
    answer.grade_id = main->id;
    answer.verdict = check.fails ? "fails" : check.open ? "not checked" : "passes";
    answer.findings = check.findings;
    for (const Grade* row : rowsOfGrade(heat.grade, library))
        if (satisfies(heat.analysis, *row)) answer.satisfied << row->id;
    if (check.fails) {
        for (Finding& slip : slips(heat.analysis, *main, check)) answer.findings.push_back(std::move(slip));
        answer.suggested = nearestGrades(heat, main, library);
    }
    for (Finding& near : nearEquivalents(heat, *main, library)) answer.findings.push_back(std::move(near));
    if (heat.analysis_kind == "product")
        answer.findings.push_back({"",
                                   "product analysis compared with the limits of the cast analysis; no product "
                                   "tolerance is applied",
                                   "", false});
    return answer;
}

}  // namespace soak
