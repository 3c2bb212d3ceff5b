// SPDX-License-Identifier: GPL-3.0-or-later
// Published values of the elements and of iron's binaries. Each row's margin is the scatter that its source states or
// the spread of the literature, as written in its note; none is fitted to what the data give. A row that the data miss
// beyond its margin carries `miss`: it is printed with its difference in every run and does not fail.
#include <cmath>
#include <functional>
#include <limits>

#include "support.h"

using namespace soak;
using namespace soak::test;

namespace {

struct Row {
    const char* what;
    double published, margin;
    const char *unit, *source;
    std::function<double()> computed;
    bool miss = false;
};

const char* const kDinsdale = "A. T. Dinsdale, CALPHAD 15 (1991) 317-425; seen: memory";
const char* const kChipman = "J. Chipman, Metall. Trans. 3 (1972) 55; seen: memory";
const char* const kHandbook = "Fe-C diagram, ASM Metals Handbook vol. 8 (1973); seen: memory, read from the diagram";
const char* const kKubaschewski = "O. Kubaschewski, Iron-Binary Phase Diagrams, Springer 1982; seen: memory";
const char* const kSwartzendruber =
    "L. J. Swartzendruber, ASM Binary Alloy Phase Diagrams 2nd ed. (1990); seen: memory";

constexpr double kNothing = std::numeric_limits<double>::quiet_NaN();
const PhaseChoice kGraphite{{"graphite"}, {}}, kNitrogen{{"nitrogen_gas"}, {}};
const PhaseChoice kNitrogenFerrite{{"nitrogen_gas"}, {"austenite"}};  // nitrogen at 1 atm brings A3 close to 900 degC

/// °C at which a label appears or vanishes on heating; not a number where it does not.
double eventOf(const std::string& chemistry, const std::string& label, EventKind kind, double from_C, double to_C,
               const PhaseChoice& choice = {}) {
    Alloy alloy = alloyOf(chemistry, choice);
    const Sweep sweep = valueOf(alloy.sweep(kelvin(from_C), kelvin(to_C)));
    for (const Event& event : sweep.events)
        if (event.label == label && event.kind == kind) return celsius(event.temperature_K);
    return kNothing;
}
double appears(const std::string& chemistry, const std::string& label, double from_C, double to_C,
               const PhaseChoice& choice = {}) {
    return eventOf(chemistry, label, EventKind::appears, from_C, to_C, choice);
}
double vanishes(const std::string& chemistry, const std::string& label, double from_C, double to_C,
                const PhaseChoice& choice = {}) {
    return eventOf(chemistry, label, EventKind::vanishes, from_C, to_C, choice);
}

/// K at which a pure element changes or melts.
double changeOf(const char* element, const char* after, double near_K) {
    return kelvin(appears(std::string(element) + "=bal", after, celsius(near_K - 60), celsius(near_K + 60)));
}

double contentOf(const std::string& chemistry, double at_C, const std::string& label, const std::string& element,
                 const PhaseChoice& choice = {}) {
    const State state = stateOf(chemistry, at_C, choice);
    const PhaseAmount* set = state.find(label);
    return set ? set->wt.at(element) : kNothing;
}

double atomPercent(double wt_percent, const std::string& element) {
    const auto mass = [](const std::string& e) {
        return ferrous()->elements[static_cast<size_t>(ferrous()->elementIndex(e))].mass;
    };
    const double moles = wt_percent / mass(element), iron = (100 - wt_percent) / mass("Fe");
    return 100 * moles / (moles + iron);
}

/// The content (wt%) up to which an iron binary at T holds `wanted` alone, and the content from which it holds none.
double lastAlone(const std::string& element, double at_C, double most) {
    double low = 0, high = most;
    while (high - low > 1e-5) {
        const double middle = (low + high) / 2;
        const State state = stateOf(element + "=" + std::to_string(middle), at_C);
        (state.moleFraction("austenite") > 1 - 1e-9 ? low : high) = middle;
    }
    return low;
}
double firstWithout(const std::string& element, double at_C, double most) {
    double low = 0, high = most;
    while (high - low > 1e-5) {
        const double middle = (low + high) / 2;
        const State state = stateOf(element + "=" + std::to_string(middle), at_C);
        (state.moleFraction("austenite") > 0 ? low : high) = middle;
    }
    return high;
}

/// Tip of the gamma loop: the largest content over all temperatures.
double loopTip(const std::function<double(const std::string&, double, double)>& limit, const std::string& element,
               double most) {
    double tip = 0;
    for (double at_C = 960; at_C <= 1300; at_C += 20) tip = std::max(tip, limit(element, at_C, most));
    return tip;
}

/// Where the A3 line of iron and chromium has its lowest point: content (wt%) and °C.
std::pair<double, double> lowestA3() {
    std::pair<double, double> lowest{0, 1e9};
    for (double cr = 4; cr <= 11; cr += 0.25) {
        const double at_C = vanishes("Cr=" + std::to_string(cr), "ferrite", 780, 950);
        if (at_C < lowest.second) lowest = {cr, at_C};
    }
    return lowest;
}

double carbonActivity(const std::string& chemistry, double at_C) {
    const State state = stateOf(chemistry, at_C);
    const double graphite =
        ferrous()->elements[static_cast<size_t>(ferrous()->elementIndex("C"))].reference.valueAt(kelvin(at_C));
    return std::exp((state.chemical_potential_J_per_mol.at("C") - graphite) / (kGas * kelvin(at_C)));
}

double curieOf(const std::string& element, const std::string& phase) {
    const auto system = ferrous()->system({ferrous()->elementIndex(element)});
    for (const PhaseModel& model : system->phases())
        if (ferrous()->phases[static_cast<size_t>(model.data)].name == phase) {
            const std::vector<double> y(static_cast<size_t>(model.size), 1.0);
            return model.magnetism(y.data()).Tc;
        }
    return kNothing;
}

void judge(const std::vector<Row>& rows) {
    for (const Row& row : rows) {
        const double computed = row.computed(), difference = computed - row.published;
        INFO(row.what << ": published " << row.published << " +- " << row.margin << " " << row.unit << ", computed "
                      << computed << "; " << row.source);
        if (!row.miss) {
            CHECK(std::abs(difference) <= row.margin);
            continue;
        }
        WARN("miss: " << row.what << ": published " << row.published << " +- " << row.margin << " " << row.unit
                      << ", computed minus published " << difference
                      << (std::abs(difference) <= row.margin ? " (within the margin now: no longer a miss)" : ""));
        CHECK(std::isfinite(computed));
    }
}

}  // namespace

TEST_CASE("pure elements change and melt at the published temperatures", "[published][element]") {
    // Margin: half of the last printed digit, since the data are the compilation's own functions.
    judge(
        {{"Fe, ferrite to austenite", 1184.8, 0.05, "K", kDinsdale, [] { return changeOf("Fe", "austenite", 1185); }},
         {"Fe, austenite to delta", 1667.5, 0.05, "K", kDinsdale, [] { return changeOf("Fe", "delta ferrite", 1667); }},
         {"Fe melts", 1811, 0.5, "K", kDinsdale, [] { return changeOf("Fe", "liquid", 1811); }},
         {"Ni melts", 1728.3, 0.05, "K", kDinsdale, [] { return changeOf("Ni", "liquid", 1728); }},
         {"Cr melts", 2180, 0.5, "K", kDinsdale, [] { return changeOf("Cr", "liquid", 2180); }},
         {"Co, hcp to fcc", 695, 0.5, "K", kDinsdale, [] { return changeOf("Co", "austenite", 695); }},
         {"Co melts", 1768, 0.5, "K", kDinsdale, [] { return changeOf("Co", "liquid", 1768); }},
         {"Ti, hcp to bcc", 1155, 0.5, "K", kDinsdale,
          [] { return kelvin(vanishes("Ti=bal", "hexagonal", 800, 950)); }},
         {"Ti melts", 1941, 0.5, "K", kDinsdale, [] { return changeOf("Ti", "liquid", 1941); }},
         {"Mo melts", 2896, 0.5, "K", kDinsdale, [] { return changeOf("Mo", "liquid", 2896); }},
         {"Nb melts", 2750, 0.5, "K", kDinsdale, [] { return changeOf("Nb", "liquid", 2750); }},
         {"W melts", 3695, 0.5, "K", kDinsdale, [] { return changeOf("W", "liquid", 3695); }},
         {"V melts", 2183, 0.5, "K", kDinsdale, [] { return changeOf("V", "liquid", 2183); }},
         {"Al melts", 933.47, 0.005, "K", kDinsdale, [] { return changeOf("Al", "liquid", 933); }},
         {"Cu melts (ITS-90 fixed point)", 1357.77, 0.005, "K", kDinsdale,
          [] { return changeOf("Cu", "liquid", 1357); }},
         {"Mn melts", 1519, 0.5, "K", kDinsdale, [] { return changeOf("Mn", "liquid", 1519); }},
         {"Fe, Curie temperature", 1043, 0.5, "K", kDinsdale, [] { return curieOf("Fe", "ferrite"); }},
         {"Ni, Curie temperature", 630, 4, "K", kDinsdale, [] { return curieOf("Ni", "austenite"); }},
         {"Co, Curie temperature", 1396, 0.5, "K", kDinsdale, [] { return curieOf("Co", "austenite"); }}});
}

TEST_CASE("iron and carbon meet at the published points", "[published][Fe-C]") {
    judge(
        {{"eutectoid with cementite", 727, 2, "degC", kChipman,
          [] { return appears("C=0.77", "austenite", 650, 800); }},
         {"C of the eutectoid austenite", 0.77, 0.02, "wt%", kChipman,
          [] { return contentOf("C=1.5", appears("C=1.5", "austenite", 650, 800) + 0.01, "austenite", "C"); }},
         {"C of the white eutectic", 4.30, 0.03, "wt%", kChipman,
          [] { return contentOf("C=3.5", appears("C=3.5", "liquid", 1100, 1200) + 0.01, "liquid", "C"); }, true},
         {"white eutectic", 1148, 1, "degC", kChipman, [] { return appears("C=3.5", "liquid", 1100, 1200); }},
         {"largest C in austenite beside cementite", 2.11, 0.04, "wt%", kChipman,
          [] { return contentOf("C=3.5", appears("C=3.5", "liquid", 1100, 1200) - 0.01, "austenite", "C"); }, true},
         {"largest C in austenite beside graphite", 2.08, 0.04, "wt%", kChipman,
          [] {
              const double at_C = appears("C=3.5", "liquid", 1100, 1200, kGraphite) - 0.01;
              return contentOf("C=3.5", at_C, "austenite", "C", kGraphite);
          },
          true},
         {"eutectic with graphite", 1153, 1, "degC",
          "Y. Yamada et al., Metrologia 36 (1999) 207; E. R. Woolliams et al., Metrologia 43 (2006) R11; seen: memory",
          [] { return appears("C=3.5", "liquid", 1100, 1200, kGraphite); }},
         {"C of the austenite at the peritectic", 0.17, 0.015, "wt%", kChipman,
          [] { return contentOf("C=0.12", vanishes("C=0.4", "austenite", 1480, 1510) - 0.01, "austenite", "C"); }},
         {"peritectic", 1494, 2, "degC", kChipman, [] { return vanishes("C=0.4", "austenite", 1480, 1510); }},
         {"Acm at 1.0 C", 800, 15, "degC", kHandbook, [] { return vanishes("C=1.0", "cementite", 700, 1000); }, true},
         {"Ae3 at 0.2 C", 848, 10, "degC", kHandbook, [] { return vanishes("C=0.2", "ferrite", 700, 950); }, true},
         {"Ae3 at 0.4 C", 795, 10, "degC", kHandbook, [] { return vanishes("C=0.4", "ferrite", 700, 950); }},
         {"activity of C at 0.2 C, 1150 degC", 0.0495, 0.0015, "graphite = 1",
          "S. Ban-ya, J. F. Elliott, J. Chipman, Metall. Trans. 1 (1970) 1313; seen: memory",
          [] { return carbonActivity("C=0.2", 1150); }, true},
         {"activity of C at 1.8 C, 1150 degC", 0.788, 0.0236, "graphite = 1",
          "S. Ban-ya, J. F. Elliott, J. Chipman, Metall. Trans. 1 (1970) 1313; seen: memory",
          [] { return carbonActivity("C=1.8", 1150); }, true},
         {"C in ferrite beside cementite, 600 degC", 0.0095, 0.002, "wt%",
          "C. Wert, Trans. AIME 188 (1950) 1242; seen: memory", [] { return contentOf("C=0.1", 600, "ferrite", "C"); },
          true}});
}

TEST_CASE("gamma loops reach as far as published", "[published][loop]") {
    const char* const murray = "J. L. Murray, Bull. Alloy Phase Diagrams 2 (1981) 320; seen: memory";
    judge(
        {{"Fe-Cr, most Cr in austenite", 12.0, 0.6, "wt%",
          "G. Kirchner, T. Nishizawa, B. Uhrenius, Metall. Trans. 4 (1973) 167; seen: memory",
          [] { return loopTip(lastAlone, "Cr", 20); }},
         {"Fe-Cr, ferrite alone from", 13.2, 0.6, "wt%", kKubaschewski, [] { return loopTip(firstWithout, "Cr", 20); }},
         {"Fe-Cr, lowest A3", 840, 10, "degC", kKubaschewski, [] { return lowestA3().second; }, true},
         {"Fe-Cr, Cr at the lowest A3", 7.5, 0.8, "wt%", kKubaschewski, [] { return lowestA3().first; }},
         {"Fe-V, most V in austenite", 1.35, 0.15, "wt%",
          "J. F. Smith, Bull. Alloy Phase Diagrams 5 (1984) 184; seen: memory",
          [] { return loopTip(lastAlone, "V", 5); }},
         {"Fe-Al, most Al in austenite", 0.63, 0.04, "wt%",
          "U. R. Kattner, ASM Binary Alloy Phase Diagrams 2nd ed. (1990); seen: paper",
          [] { return loopTip(lastAlone, "Al", 3); }},
         {"Fe-Al, ferrite alone from", 0.95, 0.06, "wt%",
          "P. Rocquet, G. Jegaden, J. C. Petit, J. Iron Steel Inst. 205 (1967) 437; seen: memory",
          [] { return loopTip(firstWithout, "Al", 3); }},
         {"Fe-Ti, most Ti in austenite", 0.69, 0.08, "wt%", murray, [] { return loopTip(lastAlone, "Ti", 3); }},
         {"Fe-Ti, ferrite alone from", 1.15, 0.15, "wt%", murray, [] { return loopTip(firstWithout, "Ti", 3); }},
         {"Fe-Si, most Si in austenite", 1.65, 0.15, "wt%", kKubaschewski, [] { return loopTip(lastAlone, "Si", 5); }},
         {"Fe-Si, ferrite alone from", 1.94, 0.15, "wt%", kKubaschewski,
          [] { return loopTip(firstWithout, "Si", 5); }}});
}

TEST_CASE("iron and chromium form sigma, and part, as published", "[published][Fe-Cr]") {
    judge({{"sigma decays below", 500, 45, "degC",
            "O. Kubaschewski, Iron-Binary Phase Diagrams, Springer 1982; W. Xiong et al., Crit. Rev. Solid State 35 "
            "(2010) 125; seen: memory, 440 to 545 claimed",
            [] { return appears("Cr=46", "sigma", 400, 700); }},
           {"sigma is gone above", 825, 10, "degC",
            "O. Kubaschewski, Iron-Binary Phase Diagrams, Springer 1982; seen: memory, 820 to 830 quoted",
            [] { return vanishes("Cr=46", "sigma", 700, 950); }},
           {"Cr in the iron-rich ferrite at 415 degC", 14, 1.5, "at%",
            "S. M. Dubiel, G. Inden, Z. Metallkd. 78 (1987) 544; seen: memory",
            [] { return atomPercent(contentOf("Cr=30", 415, "ferrite", "Cr"), "Cr"); }, true},
           {"lowest melting, 21 Cr", 1512, 8, "degC",
            "A. Hellawell, W. Hume-Rothery, Phil. Trans. R. Soc. A249 (1957) 417; seen: memory",
            [] { return vanishes("Cr=21", "ferrite", 1400, 1600); }}});
}

TEST_CASE("other binaries of iron as published", "[published][binary]") {
    const char* const massalski = "T. B. Massalski (ed.), ASM Binary Alloy Phase Diagrams 2nd ed. (1990); seen: memory";
    const char* const itkin =
        "L. J. Swartzendruber, V. P. Itkin, C. B. Alcock, J. Phase Equilib. 12 (1991) 288; seen: memory";
    const char* const salje = "G. Salje, M. Feller-Kniepmeier, J. Appl. Phys. 48 (1977) 1833; seen: memory";
    const char* const abrahamson = "E. P. Abrahamson, S. L. Lopata, Trans. AIME 236 (1966) 76; seen: paper";
    const char* const corney = "N. S. Corney, E. T. Turkdogan, J. Iron Steel Inst. 180 (1955) 344; seen: memory";
    const char* const naidu =
        "S. V. Nagender Naidu, P. Rama Rao, Phase Diagrams of Binary Tungsten Alloys (1991); seen: memory";
    judge(
        {{"Fe-Mn peritectic", 1474, 3, "degC", massalski, [] { return appears("Mn=10", "liquid", 1400, 1520); }},
         {"Fe-Ni peritectic", 1514, 4, "degC", itkin, [] { return appears("Ni=4.6", "liquid", 1450, 1540); }},
         {"Fe-Ni, lowest melting", 1440, 3, "degC", itkin, [] { return vanishes("Ni=67", "austenite", 1380, 1500); },
          true},
         {"Ni in austenite, 10 Ni at 600 degC", 23, 2, "wt%",
          "J. I. Goldstein, R. E. Ogilvie, Trans. TMS-AIME 233 (1965) 2083; seen: memory",
          [] { return contentOf("Ni=10", 600, "austenite", "Ni"); }, true},
         {"Ni in ferrite, 8 Ni at 700 degC", 4.4, 0.5, "wt%",
          "J. I. Goldstein, R. E. Ogilvie, Trans. TMS-AIME 233 (1965) 2083; seen: memory",
          [] { return contentOf("Ni=8", 700, "ferrite", "Ni"); }, true},
         {"Ni in austenite, 20 Ni at 500 degC", 35, 3, "wt%",
          "A. D. Romig, J. I. Goldstein, Metall. Trans. A 11 (1980) 1151; seen: memory",
          [] { return contentOf("Ni=20", 500, "austenite", "Ni"); }, true},
         {"Fe-Co, highest ferrite", 985, 4, "degC", "I. Ohnuma et al., Acta Mater. 50 (2002) 379; seen: memory",
          [] { return vanishes("Co=46", "ferrite", 900, 1050); }, true},
         {"Fe-Cu, copper melts", 1096, 2, "degC", kSwartzendruber,
          [] { return appears("Cu=50", "liquid", 1000, 1200); }, true},
         {"Fe-Cu, upper peritectic", 1485, 4, "degC", kSwartzendruber,
          [] { return vanishes("Cu=10", "austenite", 1400, 1520); }, true},
         {"Fe-Cu eutectoid", 850, 5, "degC", kSwartzendruber, [] { return appears("Cu=3", "austenite", 750, 900); },
          true},
         {"most Cu in ferrite", 2.1, 0.25, "wt%", salje,
          [] { return contentOf("Cu=3", appears("Cu=3", "austenite", 750, 900) - 0.01, "ferrite", "Cu"); }, true},
         {"Cu in ferrite at 700 degC", 0.5, 0.12, "wt%", salje, [] { return contentOf("Cu=3", 700, "ferrite", "Cu"); }},
         {"Cu in austenite beside melting copper", 8.3, 1.2, "wt%", kSwartzendruber,
          [] { return contentOf("Cu=15", appears("Cu=15", "liquid", 1000, 1200) - 0.01, "austenite", "Cu"); }},
         {"Fe-Mo, R is stable from", 1200, 15, "degC",
          "C. P. Heijwegen, G. D. Rieck, J. Less-Common Met. 37 (1974) 115; seen: paper",
          [] { return appears("Mo=50", "R", 1100, 1300); }},
         {"Fe-Mo, sigma decays below", 1235, 15, "degC",
          "C. P. Heijwegen, G. D. Rieck, J. Less-Common Met. 37 (1974) 115; seen: paper",
          [] { return appears("Mo=60", "sigma", 1100, 1400); }},
         {"Fe-Mo, R melts", 1488, 15, "degC",
          "A. Fernandez Guillermet, Bull. Alloy Phase Diagrams 3 (1982) 359; seen: memory",
          [] { return vanishes("Mo=48", "R", 1400, 1560); }},
         {"Fe-W, ferrite and mu melt", 1548, 8, "degC", naidu, [] { return appears("W=33", "liquid", 1450, 1600); },
          true},
         {"Fe-W, mu melts", 1637, 8, "degC", naidu, [] { return vanishes("W=65", "mu", 1500, 1700); }, true},
         {"Fe-W, Laves decays above", 1060, 15, "degC", naidu, [] { return vanishes("W=40", "Laves", 900, 1200); },
          true},
         {"Fe-Nb, delta ferrite forms from", 1200, 20, "degC",
          "E. Paul, L. J. Swartzendruber, Bull. Alloy Phase Diagrams 7 (1986) 248; seen: memory",
          [] { return vanishes("Nb=5", "austenite", 1100, 1300); }},
         {"Nb in ferrite at 900 degC", 0.55, 0.15, "wt%", abrahamson,
          [] { return contentOf("Nb=2", 900, "ferrite", "Nb"); }, true},
         {"Nb in ferrite at 600 degC", 0.158, 0.05, "wt%", abrahamson,
          [] { return contentOf("Nb=2", 600, "ferrite", "Nb"); }, true},
         {"N in liquid iron beside N2, 1600 degC", 0.045, 0.001, "wt%",
          "R. D. Pehlke, J. F. Elliott, Trans. TMS-AIME 218 (1960) 1088; seen: memory",
          [] { return contentOf("N=0.2", 1600, "liquid", "N", kNitrogen); }},
         {"N in ferrite beside N2, 900 degC", 0.0044, 0.001, "wt%", corney,
          [] { return contentOf("N=0.2", 900, "ferrite", "N", kNitrogenFerrite); }},
         {"N in delta ferrite beside N2, 1450 degC", 0.0117, 0.001, "wt%", corney,
          [] { return contentOf("N=0.2", 1450, "delta ferrite", "N", kNitrogen); }},
         {"N in austenite beside N2, 1200 degC", 0.0222, 0.0015, "wt%",
          "Sci. Rep. RITU Tohoku Univ., nitrogen in austenitic iron under high pressure (abstract); seen: paper",
          [] { return contentOf("N=0.2", 1200, "austenite", "N", kNitrogen); }}});
}
