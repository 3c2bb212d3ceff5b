// SPDX-License-Identifier: GPL-3.0-or-later
#include <unistd.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <thread>

#include "support.h"

using namespace soak;
using namespace soak::test;
namespace fs = std::filesystem;

namespace {

/// A copy of the ferrous set that a test may spoil; gone with the object.
class SpoiledSet {
public:
    SpoiledSet() {
        static int number = 0;
        folder_ = fs::temp_directory_path() / ("soak-set-" + std::to_string(getpid()) + "-" + std::to_string(number++));
        fs::copy(productPath("thermo/data/ferrous"), folder_, fs::copy_options::recursive);
    }
    ~SpoiledSet() {
        std::error_code ignored;
        fs::remove_all(folder_, ignored);
    }
    SpoiledSet(const SpoiledSet&) = delete;
    SpoiledSet& operator=(const SpoiledSet&) = delete;

    const fs::path& folder() const { return folder_; }

    SpoiledSet& replace(const std::string& file, const std::string& from, const std::string& to) {
        std::string text = read(file);
        const auto at = text.find(from);
        REQUIRE(at != std::string::npos);
        write(file, text.replace(at, from.size(), to));
        return *this;
    }
    /// Puts one parameter in front of all others of a system file.
    SpoiledSet& addParameter(const std::string& file, const std::string& entry) {
        return replace(file, "parameters = [", "parameters = [\n  " + entry + ",");
    }
    /// What the loader says; fails the test when it accepts the set.
    std::string refusal() const {
        const auto data = loadDataSet(folder_);
        REQUIRE_FALSE(data);
        CHECK(data.error().fault == Fault::data);
        return data.error().text();
    }

private:
    std::string read(const std::string& file) const {
        std::ifstream in(folder_ / file);
        REQUIRE(in);
        return {std::istreambuf_iterator<char>(in), {}};
    }
    void write(const std::string& file, const std::string& text) const { std::ofstream(folder_ / file) << text; }

    fs::path folder_;
};

const char* const kFeC = "systems/C-Fe.toml";

}  // namespace

TEST_CASE("the ferrous set loads and says what it holds", "[data]") {
    const DataSetFacts& f = facts(*ferrous());
    CHECK(f.name == "ferrous");
    CHECK(f.balance == "Fe");
    CHECK(f.elements.size() == 15);
    for (const char* phase : {"liquid", "austenite", "ferrite", "cementite", "M23C6", "sigma", "graphite"})
        CHECK(std::count(f.phases.begin(), f.phases.end(), phase) == 1);
    CHECK(f.version.size() <= 12);
    CHECK(f.version.find_first_not_of("0123456789abcdef") == std::string::npos);
    CHECK(f.parameters > 1000);
    CHECK(f.left_out == std::vector<std::string>{"graphite", "nitrogen_gas"});
}

TEST_CASE("the set's version changes with any byte of any file", "[data]") {
    SpoiledSet same, other;
    other.replace(kFeC, "-124320", "-124321");
    const auto first = loadDataSet(same.folder()), second = loadDataSet(other.folder());
    REQUIRE(first);
    REQUIRE(second);
    CHECK(facts(*first.value()).version == facts(*ferrous()).version);
    CHECK(facts(*second.value()).version != facts(*ferrous()).version);
}

TEST_CASE("what the set lacks and what is estimated is listed", "[data]") {
    const DataSetFacts& f = facts(*ferrous());
    const auto count = [&](const std::string& head) {
        return std::count_if(f.gaps.begin(), f.gaps.end(), [&](const auto& gap) { return gap.rfind(head, 0) == 0; });
    };
    const long defaults = count("end-member by default: "), binaries = count("no assessed binary ");
    CHECK(defaults + binaries == static_cast<long>(f.gaps.size()));

    // Taking one file away adds its binary to the list, and every end-member that stood in it.
    SpoiledSet without;
    fs::remove(without.folder() / "systems/C-V.toml");
    const auto data = loadDataSet(without.folder());
    REQUIRE(data);
    const auto& gaps = facts(*data.value()).gaps;
    CHECK(std::find(gaps.begin(), gaps.end(), "no assessed binary C-V") != gaps.end());
    CHECK(std::find(gaps.begin(), gaps.end(), "end-member by default: M7C3 V:C") != gaps.end());

    int estimated = 0;
    for (const Parameter& p : ferrous()->parameters) estimated += p.estimated;
    CHECK(f.estimated == estimated);
    CHECK(f.estimated < f.parameters);
}

TEST_CASE("every parameter carries a source", "[data]") {
    for (const Parameter& p : ferrous()->parameters) {
        INFO(p.place);
        CHECK_FALSE(p.source.empty());
    }
}

TEST_CASE("an entry that is wrong is refused, named with its file", "[data]") {
    const std::string source = ", source = \"gustafson1985\", seen = \"memory\" }";
    SpoiledSet set;
    std::string expected, entry, place = "C-Fe.toml, entry 1 ";
    SECTION("unknown phase") {
        entry = "{ phase = \"austenyte\", at = [\"Fe\", \"C\"], order = 0, value = \"1\"" + source;
        expected = "austenyte";
    }
    SECTION("unknown constituent") {
        entry = "{ phase = \"austenite\", at = [\"Xx\", \"C\"], order = 0, value = \"1\"" + source;
        expected = "\"Xx\" is no constituent of sublattice 1";
    }
    SECTION("a constituent of another sublattice") {
        entry = "{ phase = \"austenite\", at = [\"Fe\", \"Fe\"], order = 0, value = \"1\"" + source;
        expected = "\"Fe\" is no constituent of sublattice 2";
    }
    SECTION("an element that the file is not about") {
        entry = "{ phase = \"austenite\", at = [\"Cr\", \"C\"], order = 0, value = \"1\"" + source;
        expected = "Cr does not belong";
    }
    SECTION("unknown function") {
        entry = "{ phase = \"M5C2\", at = [\"Fe\", \"C\"], order = 0, value = \"Fe_nowhere\"" + source;
        expected = "Fe_nowhere";
    }
    SECTION("wrong number of sublattices") {
        entry = "{ phase = \"austenite\", at = [\"Fe\"], order = 0, value = \"1\"" + source;
        expected = "it names 1 sublattices, the phase has 2";
    }
    SECTION("unordered constituents") {
        entry = "{ phase = \"liquid\", at = [\"Fe,C\"], order = 3, value = \"1\"" + source;
        expected = "alphabetical";
    }
    SECTION("a constituent twice") {
        entry = "{ phase = \"liquid\", at = [\"Fe,Fe\"], order = 3, value = \"1\"" + source;
        expected = "once each";
    }
    SECTION("an empty sublattice") {
        entry = "{ phase = \"austenite\", at = [\"Fe\", \"\"], order = 0, value = \"1\"" + source;
        expected = "sublattice 2 is empty";
    }
    SECTION("a parameter twice") {
        entry = "{ phase = \"liquid\", at = [\"C,Fe\"], order = 1, value = \"1\"" + source;
        expected = "stands twice";
        place = "C-Fe.toml, entry 3 ";  // the one that was there, now the second of its kind
    }
    SECTION("a missing value") {
        entry = "{ phase = \"liquid\", at = [\"C,Fe\"], order = 3" + source;
        expected = "`value` is missing";
    }
    SECTION("an unknown kind") {
        entry = "{ phase = \"austenite\", kind = \"Td\", at = [\"Fe\", \"C\"], order = 0, value = \"1\"" + source;
        expected = "unknown kind \"Td\"";
    }
    SECTION("a Curie temperature that depends on T") {
        entry = "{ phase = \"austenite\", kind = \"Tc\", at = [\"Fe\", \"C,Va\"], order = 0, value = \"2*T\"" + source;
        expected = "must not depend on T";
    }
    SECTION("an order out of range") {
        entry = "{ phase = \"liquid\", at = [\"C,Fe\"], order = 11, value = \"1\"" + source;
        expected = "unknown order 11";
    }
    SECTION("a missing source") {
        entry = "{ phase = \"liquid\", at = [\"C,Fe\"], order = 3, value = \"1\", source = \"nobody\" }";
        expected = "\"nobody\" is not listed in [sources]";
    }
    const std::string said = set.addParameter(kFeC, entry).refusal();
    CHECK_THAT(said, Catch::Contains(expected));
    CHECK_THAT(said, Catch::Contains(place));
}

TEST_CASE("a parameter given in two files is refused", "[data]") {
    SpoiledSet set;
    fs::copy(set.folder() / kFeC, set.folder() / "systems/C-Fe-again.toml");
    CHECK_THAT(set.refusal(), Catch::Contains("stands twice"));
}

TEST_CASE("a file that is wrong as a whole is refused, named", "[data]") {
    SpoiledSet set;
    SECTION("not TOML") {
        set.replace(kFeC, "parameters = [", "parameters = [[");
        CHECK_THAT(set.refusal(), Catch::Contains("C-Fe.toml") && Catch::Contains("not readable"));
    }
    SECTION("no list of parameters") {
        set.replace(kFeC, "parameters = [", "parametres = [");
        CHECK_THAT(set.refusal(), Catch::Contains("C-Fe.toml") && Catch::Contains("missing"));
    }
    SECTION("a file is not there") {
        fs::remove(set.folder() / "elements.toml");
        CHECK_THAT(set.refusal(), Catch::Contains("elements.toml"));
    }
    SECTION("no set at all") {
        const auto nothing = loadDataSet(set.folder() / "nowhere");
        REQUIRE_FALSE(nothing);
        CHECK_THAT(nothing.error().text(), Catch::Contains("nowhere"));
    }
}

TEST_CASE("ranges of a function with gaps are refused, named", "[data]") {
    SpoiledSet set;
    const std::string file = "functions.toml";
    SECTION("it begins too high") {
        set.replace(file, "[Al_fcc]\nranges = [\n  { from = 298.15", "[Al_fcc]\nranges = [\n  { from = 400.0");
        CHECK_THAT(set.refusal(), Catch::Contains("functions.toml, Al_fcc") && Catch::Contains("gap below 400"));
    }
    SECTION("it ends before its last range") {
        set.replace(file, "upto = 2900.0", "upto = 900.0");
        CHECK_THAT(set.refusal(), Catch::Contains("functions.toml, Al_fcc") && Catch::Contains("upto"));
    }
    SECTION("ranges out of order") {
        set.replace(file, "{ from = 700.0", "{ from = 200.0");
        CHECK_THAT(set.refusal(), Catch::Contains("functions.toml, Al_fcc") && Catch::Contains("does not lie above"));
    }
    SECTION("a function of itself") {
        set.replace(file, "\"Al_fcc + 11005.029", "\"Al_liquid + 11005.029");
        CHECK_THAT(set.refusal(), Catch::Contains("refers to itself"));
    }
}

TEST_CASE("phases and elements that do not fit together are refused, named", "[data]") {
    SpoiledSet set;
    SECTION("a constituent that is no element") {
        set.replace("phases.toml", "[[\"Al\"], [\"N\"]]", "[[\"Zr\"], [\"N\"]]");
        CHECK_THAT(set.refusal(), Catch::Contains("phases.toml, AlN") && Catch::Contains("Zr"));
    }
    SECTION("sites without constituents") {
        set.replace("phases.toml", "[[\"Al\"], [\"N\"]]", "[[\"Al\"]]");
        CHECK_THAT(set.refusal(), Catch::Contains("phases.toml, AlN") && Catch::Contains("sublattices"));
    }
    SECTION("an element whose function is unknown") {
        set.replace("elements.toml", "function = \"Al_fcc\"", "function = \"Al_foo\"");
        CHECK_THAT(set.refusal(), Catch::Contains("elements.toml, Al") && Catch::Contains("Al_foo"));
    }
    SECTION("a label for no phase") {
        set.replace("labels.toml", "laves = \"Laves\"", "lavess = \"Laves\"");
        CHECK_THAT(set.refusal(), Catch::Contains("labels.toml") && Catch::Contains("lavess"));
    }
    SECTION("a phase without a volume") {
        set.replace("volumes.toml", "[AlN]", "[AlNN]");
        CHECK_THAT(set.refusal(), Catch::Contains("volumes.toml, AlN"));
    }
}

TEST_CASE("compiled systems are shared, also between threads", "[data]") {
    const std::vector<int> elements{ferrous()->elementIndex("C"), ferrous()->elementIndex("Fe")};
    std::vector<std::shared_ptr<const System>> found(4);
    std::vector<std::thread> threads;
    for (auto& system : found) threads.emplace_back([&] { system = ferrous()->system(elements); });
    for (auto& thread : threads) thread.join();
    for (const auto& system : found) CHECK(system == found.front());
}
