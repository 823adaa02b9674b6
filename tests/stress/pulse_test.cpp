// IEC 62368-1 tables 6 and 7 as facts of a solved supply, row by row; two national texts of the 2014 and 2018 editions print them alike.
#include "published/embedded.hpp"
#include "stress/solved.hpp"
#include "supply/reader.hpp"

#include <doctest/doctest.h>

#include <cmath>
#include <fmt/format.h>

using namespace onehand;

namespace {

const library& data()
{
    static const library lib = load_library(embedded_rules()).lib;
    return lib;
}

/// A fact of the pair, with so many seconds from 150 V to 60 V left to itself and so many across 2 kohm.
double fact(const char* name, double open_seconds, double body_seconds)
{
    constexpr double volts = 150.0;
    const double ln = std::log(volts / 60.0);
    const double with_body = body_seconds / ln; // time constant
    const double alone = open_seconds / ln;
    // 1/with_body = 1/alone + 1/(2000 C)
    const double farads = 1.0 / (2000.0 * (1.0 / with_body - 1.0 / alone));
    const std::string text = fmt::format(
        "[supply]\nreturn = \"0V\"\n[input]\nnets = [\"VIN\", \"0V\"]\nvoltage = \"12 V\"\n[converter.K1]\ntopology = \"module\"\noutputs = "
        "[[\"HT\", "
        "\"0V\"]]\noutput-voltage = \"{} V\"\ninternal-capacitance = \"0 F\"\n[capacitor]\nC1 = {{ nets = [\"HT\", \"0V\"], value = \"{:.12g} F\" "
        "}}\n[resistor]\nR0 = {{ nets = [\"VIN\", \"0V\"], value = \"1k\" }}\nR1 = {{ nets = [\"HT\", \"0V\"], value = \"{:.12g} ohm\" "
        "}}\n[[access]]\nnets = [\"HT\", \"0V\"]\nwhen = \"always\"\n",
        volts, farads, alone / farads);
    const read_result read = read_document(text, "t.toml");
    const supply_result described = read_supply(read.doc, data(), {});
    CAPTURE(format_complaints(described.complaints));
    const solved_supply solved(described.built, data());
    for (const stored_item& i : solved.stored()) {
        if (i.is_pair) {
            const value v = solved.look_up(i.about, state::switched_off, name);
            REQUIRE(v.numbers.size() == 1);
            return v.numbers.front().whole.high;
        }
    }
    FAIL("no pair");
    return 0.0;
}

} // namespace

TEST_CASE("IEC 62368-1 table 6 row by row at the time left to itself")
{
    const std::pair<double, double> rows[] = {{10, 196}, {20, 178}, {50, 150}, {80, 135}, {100, 129}, {200, 120}};
    for (std::size_t i = 0; i < std::size(rows); ++i) {
        const auto& [ms, volts] = rows[i];
        CHECK(fact("pulse-es2-voltage", 0.999e-3 * ms, 0.1e-3 * ms) == doctest::Approx(volts).epsilon(1e-9).scale(0));
        // Just past a row the next, stricter one holds; past the last the last.
        const double next = i + 1 < std::size(rows) ? rows[i + 1].second : volts;
        CHECK(fact("pulse-es2-voltage", 1.001e-3 * ms, 0.1e-3 * ms) == doctest::Approx(next).epsilon(1e-9).scale(0));
    }
}

TEST_CASE("IEC 62368-1 table 7 row by row at the time across two kilohm")
{
    const std::pair<double, double> rows[] = {{10, 200}, {20, 153}, {50, 107}, {100, 81}, {200, 62}, {500, 43}, {1000, 33}, {2000, 25}};
    for (std::size_t i = 0; i < std::size(rows); ++i) {
        const auto& [ms, milliamp] = rows[i];
        CHECK(fact("pulse-es2-current", 3e-3 * ms, 0.999e-3 * ms) == doctest::Approx(1e-3 * milliamp).epsilon(1e-9).scale(0));
        const double next = i + 1 < std::size(rows) ? rows[i + 1].second : milliamp;
        CHECK(fact("pulse-es2-current", 3e-3 * ms, 1.001e-3 * ms) == doctest::Approx(1e-3 * next).epsilon(1e-9).scale(0));
    }
    CHECK(fact("pulse-time", 1.0, 0.3) == doctest::Approx(0.3).epsilon(1e-9).scale(0));
    CHECK(fact("pulse-current", 1.0, 0.3) == doctest::Approx(150.0 / 2000.0).epsilon(1e-9).scale(0));
}
