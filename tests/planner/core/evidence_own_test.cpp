// SPDX-License-Identifier: GPL-3.0-or-later
// A shop's own measurements beside the published values.
#include <QFile>
#include <QTemporaryDir>
#include <catch2/catch.hpp>

#include "planner/core/evidence_targets.h"

using namespace soak;

namespace {

const char* const kHead = "row_id,family,composition_wt,quantity,phase,at_C,element,value,unit,scatter,source,note\n";

Result<std::vector<EvidenceRow>> readRows(const QByteArray& rows, bool weigh_in = false) {
    const QTemporaryDir folder;
    const QString path = folder.filePath("own.csv");
    QFile file(path);
    REQUIRE(file.open(QIODevice::WriteOnly));
    file.write(kHead + rows);
    file.close();
    return readShopEvidence(path, weigh_in);
}

const QByteArray kFerrite =
    "own1,duplex "
    "stainless,C=0.02;Cr=22.1;Mn=1.5;Mo=3.1;N=0.17;Ni=5.6;Si=0.4;Fe=bal,phase_fraction,ferrite,1050,,48,vol%,"
    "4,\"report 117, point count\",\n";

}  // namespace

TEST_CASE("a shop's rows stand apart until they are let weigh in") {
    const auto apart = readRows(kFerrite);
    REQUIRE(apart);
    REQUIRE(apart.value().size() == 1);
    CHECK(apart.value()[0].weight == EvidenceClass::shop);
    CHECK(word(apart.value()[0].weight) == "own");
    const auto weighed = readRows(kFerrite, true);
    REQUIRE(weighed);
    CHECK(weighed.value()[0].weight == EvidenceClass::firm);

    for (const auto& [rows, count] : {std::pair{apart.value(), 0}, {weighed.value(), 1}}) {
        std::vector<EvidenceRow> computed = rows;
        REQUIRE(computeEvidence(computed));
        REQUIRE(computed[0].computed);
        CHECK(*computed[0].computed == Approx(48).margin(15));
        const auto targets = evidenceTargets(computed);
        REQUIRE(targets);
        for (const EvidenceTarget& target : targets.value())
            if (target.id == "tf6") CHECK(target.reached.count == count);
        const auto table = modelScatterTable(computed);
        REQUIRE(table);
        CHECK(table.value().contains("own1") == (count == 1));
    }
}

TEST_CASE("an own row without number, scatter or source, or with a known id, is refused and named") {
    const auto wrong = [](const QByteArray& rows) {
        const auto read = readRows(rows);
        REQUIRE_FALSE(read);
        return QString::fromStdString(read.error().text());
    };
    CHECK(wrong("a,duplex stainless,Cr=22;Fe=bal,solvus,sigma,,,about 950,degC,10,report,\n").contains("no number"));
    CHECK(wrong("a,duplex stainless,Cr=22;Fe=bal,solvus,sigma,,,950,degC,,report,\n").contains("half width"));
    CHECK(wrong("a,duplex stainless,Cr=22;Fe=bal,solvus,sigma,,,950,degC,10,,\n").contains("who measured"));
    CHECK(wrong(kFerrite + kFerrite).contains("an id of its own"));
}
