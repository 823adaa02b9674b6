// Published tables through the whole chain: a description at each printed row, the limit that `audit` judges by.
// IEC 62368-1 table 5 (two national texts of 2014 and 2018); IEC 60664-1 creepage (terminal maker's reproduction, national standard, copied-out
// tables).
#include "help.hpp"

#include "quantity/text.hpp"

#include <doctest/doctest.h>

#include <cmath>
#include <fmt/format.h>

using namespace onehand;
using namespace onehand::test;

namespace {

std::string described(double volts, const std::string& rest, const std::string& use)
{
    return fmt::format(
        "[supply]\nname = \"T\"\nreturn = \"0V\"\ncomplete = [\"capacitors\", \"sources\", \"access\"]\n[use]\naltitude = \"0 "
        "m\"\n{}\n[input]\nnets = [\"VIN\", \"0V\"]\n"
        "voltage = \"12 V\"\nfeed = \"battery\"\n[converter.K1]\ntopology = \"module\"\noutputs = [[\"HT\", \"0V\"]]\noutput-voltage = \"{} "
        "V\"\ninternal-capacitance = \"0 F\"\n"
        "[resistor]\nR1 = {{ nets = [\"HT\", \"VIN\"], value = \"1G\" }}\n{}\n",
        use, volts, rest);
}

const stored_facts* capacitor(const audit_result& r, const std::string& ref)
{
    for (const stored_facts& s : r.stored) {
        if (s.about.name == ref) {
            return &s;
        }
    }
    return nullptr;
}

} // namespace

TEST_CASE("IEC 62368-1 table 5 row by row through audit")
{
    const double nf[] = {300, 170, 91, 61, 41, 28, 18, 12, 8, 4, 1.6, 0.8, 0.4, 0.2, 0.133};
    const double es1[] = {60, 75, 100, 125, 150, 200, 250, 350, 500, 1000, 2500, 5000, 10000, 20000, 25000};
    int cells = 0;
    for (std::size_t i = 0; i < std::size(nf); ++i) {
        for (const double factor : {1.0, 2.0}) {
            for (const double side : {0.999, 1.001}) {
                const double volts = es1[i] * factor * side;
                const audit_outcome o =
                    run(described(volts, fmt::format("[capacitor]\nC1 = {{ nets = [\"HT\", \"0V\"], value = \"{} nF\" }}\n", nf[i]), ""));
                REQUIRE(o.result);
                const stored_facts* c = capacitor(*o.result, "C1");
                REQUIRE(c != nullptr);
                std::string name;
                for (const class_told& t : c->classes) {
                    name = t.id == "iec-62368-1-capacitor" ? t.name : name;
                }
                CAPTURE(nf[i]);
                CAPTURE(volts);
                CHECK(name == (factor == 1.0 ? (side < 1.0 ? "ES1" : "ES2") : (side < 1.0 ? "ES2" : "ES3")));
                ++cells;
            }
        }
    }
    CHECK(cells == 60); // 30 cells, both sides
}

TEST_CASE("IEC 60664-1 creepage row by row through audit")
{
    const table& t = *library_of(opened()).find_table("iec-60664-1-creepage");
    int cells = 0;
    for (std::size_t row = 0; row < t.axis.size(); ++row) {
        for (std::size_t c = 2; c < t.columns.size(); ++c) { // printed-wiring columns are asked for by surface below
            const std::string& name = t.columns[c].name;
            const std::string degree = name.substr(2, 1);
            const std::string cti = name.ends_with("-I") ? "600" : name.ends_with("-II") ? "400" : "175";
            const std::string gap =
                fmt::format("[[gap]]\nnets = [\"HT\", \"0V\"]\nclearance = \"1 m\"\ncreepage = \"1 m\"\ncti = {}\ninsulation = \"basic\"\n", cti);
            const audit_outcome o = run(described(t.axis[row], gap, "pollution-degree = " + degree));
            REQUIRE(o.result);
            const finding* f = found(*o.result, "creepage", "HT to 0V");
            REQUIRE(f != nullptr);
            CAPTURE(t.axis[row]);
            CAPTURE(name);
            REQUIRE(f->limit);
            REQUIRE_FALSE(f->limit->numbers.empty());
            // Never below the clearance beside it; at altitude 0 that is the steady-state value or the least by pollution degree.
            const double printed = std::stod(t.printed[row][c + 1]) * 1e-3;
            CHECK(f->limit->numbers.front().whole.high >= printed * (1.0 - 1e-9));
            const bool clearance_governs = f->limit->numbers.front().whole.high > printed * (1.0 + 1e-9);
            CHECK((!clearance_governs || printed < 0.21e-3));
            ++cells;
        }
    }
    CHECK(cells == 31 * 7);
}

TEST_CASE("printed-wiring columns hold for board copper only")
{
    const auto asked = [](const char* surface) {
        const std::string gap = fmt::format(
            "[[gap]]\nnets = [\"HT\", \"0V\"]\nclearance = \"1 m\"\ncreepage = \"1 m\"\nsurface = \"{}\"\ninsulation = \"basic\"\n", surface);
        return found(*run(described(400, gap, "pollution-degree = 2")).result, "creepage", "HT to 0V")->limit->numbers.front().whole.high;
    };
    CHECK(asked("board copper") == doctest::Approx(2.0e-3).epsilon(1e-9).scale(0));
    CHECK(asked("FR-4") == doctest::Approx(4.0e-3).epsilon(1e-9).scale(0));
    CHECK(asked("ceramic") == doctest::Approx(2.0e-3).epsilon(1e-9).scale(0));
}

TEST_CASE("reinforced is twice, altitude widens clearances only")
{
    const auto run_gap = [](const char* insulation, const char* altitude) {
        const std::string gap = fmt::format(
            "[[gap]]\nnets = [\"HT\", \"0V\"]\nclearance = \"1 m\"\ncreepage = \"1 m\"\nsurface = \"FR-4\"\ninsulation = \"{}\"\n", insulation);
        std::string text = described(1500, gap, "pollution-degree = 2");
        return *run(replaced(text, "altitude = \"0 m\"", std::string("altitude = \"") + altitude + "\"")).result;
    };
    const audit_result basic = run_gap("basic", "0 m");
    CHECK(found(basic, "clearance", "HT to 0V")->limit->numbers.front().whole.high == doctest::Approx(0.76e-3).epsilon(1e-9).scale(0));
    const audit_result high = run_gap("basic", "4000 m");
    CHECK(found(high, "clearance", "HT to 0V")->limit->numbers.front().whole.high == doctest::Approx(0.76e-3 * 1.29).epsilon(1e-9).scale(0));
    CHECK(found(high, "creepage", "HT to 0V")->limit->numbers.front().whole.high ==
          found(basic, "creepage", "HT to 0V")->limit->numbers.front().whole.high);
    const audit_result twice = run_gap("reinforced", "0 m");
    CHECK(found(twice, "creepage", "HT to 0V")->limit->numbers.front().whole.high ==
          doctest::Approx(2.0 * found(basic, "creepage", "HT to 0V")->limit->numbers.front().whole.high).epsilon(1e-9).scale(0));
}
