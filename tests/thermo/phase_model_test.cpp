// SPDX-License-Identifier: GPL-3.0-or-later
#include "phase_model.h"

#include <cmath>
#include <cstdlib>
#include <new>

#include "support.h"

// Counts what the evaluation takes from the heap: it must be nothing. Under AddressSanitizer, which brings its own
// operators, the count is left out with its test.
#ifndef __SANITIZE_ADDRESS__
static thread_local long allocations = 0;
void* operator new(std::size_t size) {
    ++allocations;
    if (void* memory = std::malloc(size)) return memory;
    throw std::bad_alloc();
}
void operator delete(void* memory) noexcept { std::free(memory); }
void operator delete(void* memory, std::size_t) noexcept { std::free(memory); }
#endif

using namespace soak;
using namespace soak::test;

namespace {

using Sites = std::vector<double>;

std::vector<int> indices(const std::vector<std::string>& symbols) {
    std::vector<int> list;
    for (const auto& symbol : symbols) list.push_back(ferrous()->elementIndex(symbol));
    std::sort(list.begin(), list.end());
    return list;
}

std::shared_ptr<const System> everything() { return ferrous()->system(indices(facts(*ferrous()).elements)); }

const std::string& nameOf(const PhaseModel& model) { return ferrous()->phases[static_cast<size_t>(model.data)].name; }

/// Evenly spread, sparse, or nearly one constituent per sublattice; down to 1e-10.
Sites randomSites(const PhaseModel& model, Random& random) {
    Sites y(static_cast<size_t>(model.size));
    const double depth = std::vector<double>{0.5, 4, 10}[random() % 3];
    for (double& x : y) x = std::pow(10, -uniform(random, 0, depth));
    for (size_t s = 0; s < static_cast<size_t>(model.sublattices); ++s) {
        double sum = 0;
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) sum += y[static_cast<size_t>(c)];
        for (int c = model.start[s]; c < model.start[s + 1]; ++c) y[static_cast<size_t>(c)] /= sum;
    }
    return y;
}

/// Within 2 % of the Curie temperature the second derivative jumps; a difference across it means nothing.
bool nearCurie(const PhaseModel& model, double T, const double* y) {
    return model.magnetic && std::abs(model.magnetism(y).Tc / T - 1) < 0.02;
}

/// f'(0) from f(0), f(h) .. f(4h): one-sided, since a site fraction of 1e-10 cannot be lowered.
template <class F>
double oneSided(F f, double h) {
    return (-25 * f(0) + 48 * f(h) - 36 * f(2 * h) + 16 * f(3 * h) - 3 * f(4 * h)) / (12 * h);
}

struct At {
    std::shared_ptr<const System> system;
    double T;
    Eigen::VectorXd at, slope;
    At(std::shared_ptr<const System> s, double temperature) : system(std::move(s)), T(temperature) {
        system->parametersAt(T, at);
        system->slopesAt(T, slope);
    }
};

}  // namespace

TEST_CASE("the gradient is the slope of G for every phase, near-pure and near-empty points included", "[phase_model]") {
    Random random(1);
    for (double T : {650.0, 1130.0, 1873.0}) {
        const At here(everything(), T);
        for (const PhaseModel& model : here.system->phases())
            for (int draw = 0; draw < 12; ++draw) {
                const Sites y = randomSites(model, random);
                if (nearCurie(model, T, y.data())) continue;
                Sites g(y.size());
                const double G = model.gradient(here.at.data(), T, y.data(), g.data());
                CHECK(G == Approx(model.gibbs(here.at.data(), T, y.data())).epsilon(1e-12).margin(1e-7));
                for (size_t c = 0; c < y.size(); ++c) {
                    INFO(nameOf(model) << " constituent " << c << " y " << y[c] << " T " << T);
                    const auto rest = [&](double h) {
                        Sites moved = y;
                        moved[c] += h;
                        return model.gibbs(here.at.data(), T, moved.data()) - model.ideal(T, moved.data());
                    };
                    // Rounding 1e-16 G / h with G up to 1e7 J and h 3e-4, times the weights' sum: below 1e-4 J.
                    // Truncation h^4 G'''''/5: below 1e-6 of the terms, which reach 1e6 J.
                    const double ideal = kGas * T * model.sites[c] * (std::log(y[c]) + 1);
                    CHECK(g[c] == Approx(oneSided(rest, 3e-4) + ideal).epsilon(2e-6).margin(0.05));
                }
            }
    }
}

TEST_CASE("ideal mixing is R T sum a y ln y", "[phase_model]") {
    Random random(5);
    for (const PhaseModel& model : everything()->phases()) {
        const Sites y = randomSites(model, random);
        double sum = 0;
        for (size_t c = 0; c < y.size(); ++c) sum += model.sites[c] * y[c] * std::log(y[c]);
        CHECK(model.ideal(1000, y.data()) == Approx(8.31451 * 1000 * sum).epsilon(1e-12));
    }
}

TEST_CASE("the Hessian is the slope of the gradient, symmetric, for every phase", "[phase_model]") {
    Random random(2);
    for (double T : {650.0, 1130.0, 1873.0}) {
        const At here(everything(), T);
        for (const PhaseModel& model : here.system->phases())
            for (int draw = 0; draw < 6; ++draw) {
                const Sites y = randomSites(model, random);
                if (nearCurie(model, T, y.data())) continue;
                const size_t n = y.size();
                Sites g(n), H(n * n), moved(n), slope(n);
                model.hessian(here.at.data(), T, y.data(), g.data(), H.data());
                for (size_t j = 0; j < n; ++j)
                    for (size_t i = 0; i < n; ++i) {
                        INFO(nameOf(model) << " " << i << "," << j << " y " << y[i] << "," << y[j] << " T " << T);
                        CHECK(H[i * n + j] == H[j * n + i]);
                        const auto rest = [&](double h) {
                            moved = y;
                            moved[j] += h;
                            model.gradient(here.at.data(), T, moved.data(), slope.data());
                            return slope[i] - kGas * T * model.sites[i] * (std::log(moved[i]) + 1);
                        };
                        CHECK(H[i * n + j] == Approx(oneSided(rest, 3e-4)).epsilon(1e-5).margin(1));
                    }
            }
    }
}

TEST_CASE("all three evaluations agree on G and its gradient", "[phase_model]") {
    Random random(3);
    const At here(everything(), 1043);
    for (const PhaseModel& model : here.system->phases()) {
        const Sites y = randomSites(model, random);
        Sites g(y.size()), g2(y.size()), H(y.size() * y.size());
        const double G = model.gibbs(here.at.data(), here.T, y.data());
        CHECK(model.gradient(here.at.data(), here.T, y.data(), g.data()) == Approx(G).epsilon(1e-13));
        CHECK(model.hessian(here.at.data(), here.T, y.data(), g2.data(), H.data()) == Approx(G).epsilon(1e-13));
        for (size_t c = 0; c < y.size(); ++c) CHECK(g2[c] == Approx(g[c]).epsilon(1e-11).margin(1e-6));
    }
}

TEST_CASE("the slope in T agrees with differences, of G and of the gradient", "[phase_model]") {
    Random random(4);
    const double h = 0.02;
    for (double T : {650.0, 1130.0, 1860.0}) {  // away from every break of the data's ranges
        const At here(everything(), T), below(everything(), T - h), above(everything(), T + h);
        for (const PhaseModel& model : here.system->phases())
            for (int draw = 0; draw < 4; ++draw) {
                const Sites y = randomSites(model, random);
                if (nearCurie(model, T, y.data())) continue;
                INFO(nameOf(model) << " T " << T);
                Sites gT(y.size()), low(y.size()), high(y.size());
                const double GT = model.slope(here.slope.data(), T, y.data(), gT.data());
                const double Glow = model.gradient(below.at.data(), T - h, y.data(), low.data());
                const double Ghigh = model.gradient(above.at.data(), T + h, y.data(), high.data());
                CHECK(GT == Approx((Ghigh - Glow) / (2 * h)).epsilon(1e-5).margin(1e-4));
                for (size_t c = 0; c < y.size(); ++c)
                    CHECK(gT[c] == Approx((high[c] - low[c]) / (2 * h)).epsilon(1e-5).margin(1e-3));
            }
    }
}

TEST_CASE("the magnetic term has the published constants", "[phase_model][published]") {
    // A. T. Dinsdale, CALPHAD 15 (1991) 317-425: D = 1.55828482 for bcc (p = 0.40), 2.342456517 for fcc (p = 0.28).
    // Seen: memory. At the Curie temperature g = -(1/10 + 1/315 + 1/1500)/D exactly. Margin: the last printed digit.
    const double g1 = 1.0 / 10 + 1.0 / 315 + 1.0 / 1500;
    const auto D = [&](double p) {
        return -g1 * 8.31451 * 1043 * std::log(3.22) / magneticGibbs(1043, 1043, 2.22, p).G;
    };
    CHECK(D(0.40) == Approx(1.55828482).margin(1e-8));
    CHECK(D(0.28) == Approx(2.342456517).margin(1e-8));
}

TEST_CASE("pure iron orders at 1043 K with 2.22 Bohr magnetons", "[phase_model][published]") {
    // A. T. Dinsdale, CALPHAD 15 (1991) 317-425: bcc Fe Tc = 1043 K, beta = 2.22; fcc Fe Tc = -201 K, beta = -2.1,
    // which the antiferromagnetic factor -3 turns into 67 K and 0.7. Seen: memory.
    const auto system = ferrous()->system(indices({"Fe"}));
    int seen = 0;
    for (const PhaseModel& model : system->phases()) {
        const Sites y(static_cast<size_t>(model.size), 1.0);
        const auto m = model.magnetism(y.data());
        if (nameOf(model) == "ferrite") {
            CHECK(m.Tc == Approx(1043));
            CHECK(m.beta == Approx(2.22));
            ++seen;
        }
        if (nameOf(model) == "austenite") {
            CHECK(m.Tc == Approx(67));
            CHECK(m.beta == Approx(0.7));
            ++seen;
        }
    }
    CHECK(seen == 2);
}

TEST_CASE("magnetic entropy is R ln(beta + 1) in all", "[phase_model]") {
    // From complete order to complete disorder; M. Hillert, M. Jarl, CALPHAD 2 (1978) 227-238.
    const double full = 8.31451 * std::log(3.22);
    CHECK(magneticGibbs(1e-3, 1043, 2.22, 0.4).G_T == Approx(full).epsilon(1e-6));  // G_T = -S relative to disorder
    CHECK(magneticGibbs(1e6, 1043, 2.22, 0.4).G_T == Approx(0).margin(1e-9));
}

TEST_CASE("the derivatives of the magnetic term agree with differences on both sides of the Curie point",
          "[phase_model]") {
    const double p = 0.4;
    for (double T : {300.0, 900.0, 1030.0, 1060.0, 1700.0}) {
        const double Tc = 1043, beta = 2.22, h = 1e-3, b = 1e-6;
        const auto m = magneticGibbs(T, Tc, beta, p);
        const auto T1 = magneticGibbs(T + h, Tc, beta, p), T0 = magneticGibbs(T - h, Tc, beta, p);
        const auto C1 = magneticGibbs(T, Tc + h, beta, p), C0 = magneticGibbs(T, Tc - h, beta, p);
        const auto B1 = magneticGibbs(T, Tc, beta + b, p), B0 = magneticGibbs(T, Tc, beta - b, p);
        const auto close = [](double exact, double high, double low, double step) {
            CHECK(exact == Approx((high - low) / (2 * step)).epsilon(1e-5).margin(1e-8));
        };
        close(m.G_T, T1.G, T0.G, h);
        close(m.G_Tc, C1.G, C0.G, h);
        close(m.G_beta, B1.G, B0.G, b);
        close(m.G_TcTc, C1.G_Tc, C0.G_Tc, h);
        close(m.G_Tcbeta, B1.G_Tc, B0.G_Tc, b);
        close(m.G_betabeta, B1.G_beta, B0.G_beta, b);
        close(m.G_TTc, T1.G_Tc, T0.G_Tc, h);
        close(m.G_Tbeta, T1.G_beta, T0.G_beta, h);
    }
}

TEST_CASE("G and its first derivatives run smoothly through the Curie point and through no moment at all",
          "[phase_model]") {
    const auto below = magneticGibbs(1043 - 1e-6, 1043, 2.22, 0.4), above = magneticGibbs(1043 + 1e-6, 1043, 2.22, 0.4);
    CHECK(below.G == Approx(above.G).margin(1e-4));
    CHECK(below.G_T == Approx(above.G_T).margin(1e-5));
    CHECK(below.G_Tc == Approx(above.G_Tc).margin(1e-5));
    CHECK(below.G_beta == Approx(above.G_beta).margin(1e-4));
    for (double Tc : {0.0, 1e-6, 1e-3, 0.1, 1.0}) {
        const auto m = magneticGibbs(900, Tc, 0.5, 0.28);
        CHECK(std::abs(m.G) < 1e-9);
        CHECK(std::isfinite(m.G_TcTc));
    }
    CHECK(magneticGibbs(900, 500, 0, 0.28).G == 0);
}

TEST_CASE("an element that is hardly there changes nothing", "[phase_model]") {
    // Models are compiled for the elements at hand; with one more of amount 1e-20 every phase gives the same G and
    // slope.
    Random random(6);
    const std::vector<std::string> few{"C", "Cr", "Fe", "Mo", "N"};
    for (const char* added : {"Al", "Co", "Mn", "Nb", "Si", "Ti", "W"}) {
        auto more = few;
        more.push_back(added);
        const At small(ferrous()->system(indices(few)), 1200), large(ferrous()->system(indices(more)), 1200);
        for (const PhaseModel& model : small.system->phases()) {
            const auto twin = std::find_if(large.system->phases().begin(), large.system->phases().end(),
                                           [&](const PhaseModel& m) { return m.data == model.data; });
            REQUIRE(twin != large.system->phases().end());
            const Sites y = randomSites(model, random);
            Sites z(static_cast<size_t>(twin->size), 1e-20), g(y.size()), h(z.size());
            std::vector<size_t> place(y.size());
            for (size_t c = 0; c < y.size(); ++c)
                for (size_t d = 0; d < z.size(); ++d)
                    if (twin->origin[d] == model.origin[c] && twin->sublattice[d] == model.sublattice[c])
                        z[place[c] = d] = y[c];
            INFO(nameOf(model) << " with " << added);
            const double G = model.gradient(small.at.data(), 1200, y.data(), g.data());
            CHECK(twin->gradient(large.at.data(), 1200, z.data(), h.data()) == Approx(G).epsilon(1e-12));
            for (size_t c = 0; c < y.size(); ++c) CHECK(h[place[c]] == Approx(g[c]).epsilon(1e-10).margin(1e-6));
        }
    }
}

TEST_CASE("amounts count the atoms of one formula unit", "[phase_model]") {
    Random random(7);
    const auto system = everything();
    for (const PhaseModel& model : system->phases()) {
        const Sites y = randomSites(model, random);
        std::vector<double> amounts(static_cast<size_t>(system->elementCount()));
        const double atoms = model.amounts(y.data(), amounts.data(), system->elementCount());
        double all = 0, vacant = 0, sum = 0;
        for (double site : ferrous()->phases[static_cast<size_t>(model.data)].sites) all += site;
        for (size_t c = 0; c < y.size(); ++c)
            if (model.element[c] < 0) vacant += model.sites[c] * y[c];
        for (double a : amounts) sum += a;
        CHECK(atoms == Approx(all - vacant).epsilon(1e-12));
        CHECK(atoms == Approx(sum).epsilon(1e-12));
    }
}

#ifndef __SANITIZE_ADDRESS__
TEST_CASE("evaluation takes nothing from the heap", "[phase_model]") {
    Random random(8);
    const At here(everything(), 1200);
    for (const PhaseModel& model : here.system->phases()) {
        const Sites y = randomSites(model, random);
        Sites g(y.size()), H(y.size() * y.size());
        const long before = allocations;
        model.gibbs(here.at.data(), here.T, y.data());
        model.gradient(here.at.data(), here.T, y.data(), g.data());
        model.hessian(here.at.data(), here.T, y.data(), g.data(), H.data());
        model.slope(here.slope.data(), here.T, y.data(), g.data());
        const long taken = allocations - before;
        CHECK(taken == 0);
    }
    const long before = allocations;
    const Sites proof(3);
    CHECK(allocations == before + 1);  // the counter itself works
}
#endif
