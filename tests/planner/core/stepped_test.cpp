// SPDX-License-Identifier: GPL-3.0-or-later
// A lower step raises first melting of a casting, as far as diffusion lets it.
#include <catch2/catch.hpp>

#include "base/folders.h"
#include "heats.h"
#include "planner/core/limits.h"

using namespace soak;

namespace {

struct Bench {
    FamilyBook book = loadFamilyBook().value();
    Analysis analysis;
    std::unique_ptr<AlloyReport> report;
    LimitContext context;

    explicit Bench(const QString& chemistry) {
        analysis = shop::heat("", "", "casting", chemistry).analysis;
        Chemistry wt;
        wt.balance = "Al";
        for (const auto& [element, content] : analysis) wt.wt[element] = *content.wt;
        const auto data = loadDataSet(productPath("thermo/data/light")).value();
        report = std::make_unique<AlloyReport>(AlloyReport::make(data, wt, {}, 300, 690).value());
        context.report = report.get();
        context.analysis = &analysis;
        context.book = &book;
        context.family = "light-cast-AlSiCu";
    }
    Limit limit(const QString& kind, double step_C = 0, double hours = 0, const QString& spacing = "40") const {
        CycleLimit wanted;
        wanted.kind = kind;
        if (hours > 0) wanted.phase = spacing, wanted.low = hours, wanted.high = step_C;
        return evaluate(wanted, context).front();
    }
};

const Bench& casting() {
    static const Bench made("Si 6.5, Cu 3.5, Mg 0.04, Fe 0.4, Mn 0.3");
    return made;
}

}  // namespace

TEST_CASE("hours at the lower step raise first melting from the segregated to the equilibrium solidus") {
    const double cast_C = *casting().limit("below_segregated_solidus").temperature_C;
    const double solidus_C = *casting().limit("below_solidus").temperature_C;
    CHECK(solidus_C > cast_C + 8);
    double before_C = cast_C;
    for (const double hours : {0.02, 0.5, 2.0, 12.0}) {
        const Limit stepped = casting().limit("below_stepped_solidus", 490, hours);
        INFO(hours << " h: " << stepped.remark.toStdString());
        REQUIRE(stepped.temperature_C);
        CHECK(*stepped.temperature_C >= before_C - 0.1);
        CHECK(*stepped.temperature_C <= solidus_C + 0.1);
        before_C = *stepped.temperature_C;
    }
    CHECK(before_C == Approx(solidus_C).margin(3));
    // Coarse arms need longer: 100 um of a sand casting keep their segregation for the first half hour.
    CHECK(*casting().limit("below_stepped_solidus", 490, 0.5, "100").temperature_C <
          *casting().limit("below_stepped_solidus", 490, 0.5, "25").temperature_C - 1);
}

TEST_CASE("a lower step above first melting is refused, and so is one that is not described") {
    const Limit hot = casting().limit("below_stepped_solidus", 530, 2);
    CHECK(hot.impossible);
    CHECK(hot.remark.contains("too hot"));
    CHECK_FALSE(casting().limit("below_stepped_solidus").computed);
}
