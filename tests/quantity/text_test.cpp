// Quantity text in and out: every form read, every hurried form refused with the right one, and the round-trip law.
#include "quantity/text.hpp"

#include <doctest/doctest.h>

#include <random>

using namespace onehand;

namespace {

struct refused_row {
    const char* dimension;
    const char* text;
    std::size_t offset; // code points
    const char* message;
};

const refused_row refused[] = {
    // Each of these was once read, one of them optimistically.
    {"voltage", "400 V +-50/-10 %", 10, "a tolerance with two different sides is written \"+50/-10 %\""},
    {"current", "250 MA", 4, "no unit 'MA': a current is due: write it like \"20 mA\""},
    {"voltage", "1 kV M", 5, "'M' is left over after the value"},
    {"capacitance", "3300m", 0, "3300m is a length: a capacitance is due: write it like \"3.3 uF\""},
    {"temperature", "10 degC .. 35 degC +-5%", 0, "a tolerance on a temperature is written in K"},
    {"temperature", "-300 degC", 0, "below absolute zero"},
    {"melting-integral", "1.2 mA2s", 4, "no unit 'mA2s': a melting integral is due: write it like \"1.2 A2s\""},
    {"temperature", "35 C", 0, "C is the coulomb: for a temperature write \"35 degC\""},
    {"resistance", "4,7k", 0, "a comma is read two ways: write the decimal point, \"4.7\", and no thousands mark"},
    {"resistance", "1meg", 1, "'meg' is no prefix: a million ohms is written \"1M\" or \"1 Mohm\""},
    {"resistance", "1 Meg", 2, "'meg' is no prefix: a million ohms is written \"1M\" or \"1 Mohm\""},
    {"voltage", "400VDC", 3, "write the unit alone, \"400 V\": the file speaks of d.c. throughout"},
    {"voltage", "400 VDC", 4, "write the unit alone, \"400 V\": the file speaks of d.c. throughout"},
    {"voltage", "230 VAC", 4, "write the unit alone, \"400 V\": the file speaks of d.c. throughout"},
    {"power", "1/4W", 1, "a fraction is not read: write \"0.25 W\" for a quarter watt"},
    {"voltage", "12-15 V", 0, "'12-15 V' is a range or a difference: a range is written \"12 V .. 15 V\""},
    {"voltage", "12–15 V", 0, "a dash between two values is read two ways: a range is written \"12 V .. 15 V\""},
    {"voltage", "12 to 15 V", 3, "a range is written with two points: \"12 V .. 15 V\""},
    {"capacitance", "104", 0, "'104' is a bare number, or the three-digit code for 100 nF: write the value with its unit"},
    {"resistance", "472", 0, "'472' is a bare number, or the three-digit code for 4.7 kΩ: write the value with its unit"},
    {"capacitance", "3300mF", 0, "mF is the millifarad: 3300mF is 3.3 F; for microfarads write uF, for farads write F"},
    {"capacitance", "10M", 2,
     "'M' on a capacitor is a tolerance letter (20 %) or a multiplier: write the value with its unit, and the tolerance as \"+-20%\""},
    {"capacitance", "47K", 0,
     "'K' on a capacitor is a tolerance letter (10 %) or a multiplier: write the value with its unit, and the tolerance as \"+-10%\""},
    {"voltage", "12", 0, "a bare number: a voltage is due: write it like \"12 V\""},
    {"voltage", "", 0, "empty: a voltage is due: write it like \"12 V\""},
    {"voltage", "   ", 0, "empty: a voltage is due: write it like \"12 V\""},
    {"voltage", "12 KV", 3, "no unit 'KV': it is written \"kV\""},
    {"voltage", "180 v", 4, "no unit 'v': it is written \"V\""},
    {"voltage", "12 volts", 3, "no unit 'volts': it is written \"V\""},
    {"resistance", "4.7 kOhm", 4, "the unit is written \"ohm\" or \"Ω\": prefixes stand before it, \"4.7 kohm\""},
    {"resistance", "100 ohms", 4, "the unit is written \"ohm\" or \"Ω\", without s"},
    {"resistance", "4.7 Kohm", 4, "no unit 'Kohm': it is written \"kohm\""},
    {"capacitance", "10 uf", 3, "no unit 'uf': it is written \"uF\""},
    {"capacitance", "10 UF", 3, "no unit 'UF': it is written \"uF\""},
    {"frequency", "29 khz", 3, "no unit 'khz': it is written \"kHz\""},
    {"frequency", "1 MHZ", 2, "no unit 'MHZ': it is written \"MHz\""},
    {"current", "20 ma", 3, "no unit 'ma': it is written \"mA\""},
    {"length", "2.4 MM", 4, "no unit 'MM': it is written \"mm\""},
    {"length", "100 mils", 4, "no unit 'mils': it is written \"mil\""},
    {"time", "5 sec", 2, "no unit 'sec': it is written \"s\""},
    {"time", "5 seconds", 2, "no unit 'seconds': it is written \"s\""},
    {"time", "2 min", 2, "no unit 'min': it is written \"minutes\""},
    {"temperature", "35", 0, "a bare number: a temperature is due: write it like \"35 degC\""},
    {"temperature", "35 deg", 3, "no unit 'deg': it is written \"degC\""},
    {"resistance", "4.7 V", 0, "4.7 V is a voltage: a resistance is due: write it like \"4.7 kohm\""},
    {"voltage", "4k7", 1, "no unit 'k': a voltage is due: write it like \"12 V\""},
    {"voltage", "12 V 5", 5, "'5' is left over after the value"},
    {"voltage", "12 V +-5", 7, "a bare number: a voltage is due: write it like \"12 V\""},
    {"voltage", "12 V +-", 7, "no number here: a voltage is due: write it like \"12 V\""},
    {"voltage", "12 V +-5% J", 10, "'J' is left over after the value"},
    {"voltage", "--5 V", 0, "no number here: a voltage is due: write it like \"12 V\""},
    {"voltage", "1e400 V", 0, "the number is too large to be meant"},
    {"voltage", "15 V .. 12 V", 7, "the range runs backwards: write the lower end first"},
    {"voltage", "12 .. 15 V", 0, "a bare number: a voltage is due: write it like \"12 V\""},
    {"voltage", "12 V ..", 7, "no number here: a voltage is due: write it like \"12 V\""},
    {"temperature", "25 degC +-5%", 0, "a tolerance on a temperature is written in K"},
    {"temperature", "25 degC +-5 degC", 12, "a tolerance on a temperature is written in K"},
    {"resistance", "4k7 H", 4, "sources disagree on the tolerance letter 'H': write the tolerance in %"},
    {"capacitance", "4p7 F", 4, "below 10 pF a tolerance letter is a share or a number of picofarads: write which"},
    {"ratio", "0.75 V", 0, "0.75 V is a voltage: a plain number is due: write it like \"0.75\""},
    {"resistance", "4k7k", 1, "no unit 'k': a resistance is due: write it like \"4.7 kohm\""},
    {"resistance", "R", 0, "no number here: a resistance is due: write it like \"4.7 kohm\""},
    {"voltage", "V", 0, "no number here: a voltage is due: write it like \"12 V\""},
    {"voltage", "1 . 5 V", 0, "a bare number: a voltage is due: write it like \"12 V\""},
    {"voltage", "5 V/2", 2, "no unit 'V/': a voltage is due: write it like \"12 V\""},
    {"capacitance", "10 nF/m", 0, "10 nF/m is a capacitance per length: a capacitance is due: write it like \"3.3 uF\""},
    {"current", "1,5 A", 0, "a comma is read two ways: write the decimal point, \"4.7\", and no thousands mark"},
    {"voltage", "12 V (11 V .. 11.5 V)", 5, "the whole range in brackets does not hold what stands before it"},
    {"voltage", "12 V (11", 5, "in brackets stands the whole range: \"12 V (11.4 V .. 12.6 V)\""},
    {"capacitance", "3300mF", 0, "mF is the millifarad: 3300mF is 3.3 F; for microfarads write uF, for farads write F"},
};

struct read_row {
    const char* dimension;
    const char* text;
    const char* exact;   // as write_spread prints it
    const char* printed; // as reports print it
};

const read_row read[] = {
    {"ratio", "5%", "0.05", "0.05"},
    {"voltage", "12 V ± 5 %", "12 V (11.4 V .. 12.6 V)", "12 V (11.4 V .. 12.6 V)"},
    {"voltage", "12V", "12 V", "12 V"},
    {"resistance", "4k7", "4.7 kΩ", "4.7 kΩ"},
    {"resistance", "R47", "470 mΩ", "470 mΩ"},
    {"resistance", "4R7 J", "4.7 Ω (4.465 Ω .. 4.9350000000000005 Ω)", "4.7 Ω (4.465 Ω .. 4.935 Ω)"},
    {"resistance", "10M", "10 MΩ", "10 MΩ"},
    {"resistance", "4K7", "4.7 kΩ", "4.7 kΩ"},
    {"capacitance", "3u3 +-20%", "3.3 µF (2.64 µF .. 3.96 µF)", "3.3 µF (2.64 µF .. 3.96 µF)"},
    {"capacitance", "2n2 K", "2.2 nF (1.9799999999999998 nF .. 2.42 nF)", "2.2 nF (1.98 nF .. 2.42 nF)"},
    {"capacitance", "100n", "100 nF", "100 nF"},
    {"capacitance", "10 uF +50/-20 %", "10 µF (8.000000000000002 µF .. 1.5000000000000002e-05 F)", "10 µF (8 µF .. 15 µF)"},
    {"voltage", "350 V .. 450 V +-2%", "350 V .. 450 V (343 V .. 459 V)", "343 V .. 459 V"},
    {"temperature", "10 degC .. 35 degC", "283.15 K .. 308.15 K", "10 degC .. 35 degC"},
    {"voltage", "max 165 V", "max 165 V", "up to 165 V"},
    {"voltage", "min 3 V", "min 3 V", "at least 3 V"},
    {"ratio", "0.75 +-0.03", "0.75 (0.72 .. 0.78)", "0.75 (0.72 .. 0.78)"},
    {"ratio", "0.3 .. 0.4", "0.3 .. 0.4", "0.3 .. 0.4"},
    {"time", "5 minutes", "300 s", "300 s"},
    {"length", "62 mil", "0.0015748000000000001 m", "1.575 mm"},
    {"length", "0.1 in", "2.54 mm", "2.54 mm"},
    {"inductance", "150u", "150 µH", "150 µH"},
    {"voltage", "0.18 kV", "180 V", "180 V"},
    {"voltage", "-12 V +-5%", "-12 V (-12.6 V .. -11.4 V)", "-12 V (-12.6 V .. -11.4 V)"},
    {"melting-integral", "1.2 A2s", "1.2 A2s", "1.2 A2s"},
    {"thermal-resistance", "62 K/W", "62 K/W", "62 K/W"},
    {"capacitance-per-length", "100 pF/m", "100 pF/m", "100 pF/m"},
    {"resistance", "4.7 kΩ ±1%", "4.7 kΩ (4.653 kΩ .. 4.747 kΩ)", "4.7 kΩ (4.653 kΩ .. 4.747 kΩ)"},
    {"charge", "45 µC", "45 µC", "45 µC"},
    {"charge", "45 μC", "45 µC", "45 µC"},
    {"voltage", "350 V .. 450 V (343 V .. 459 V)", "350 V .. 450 V (343 V .. 459 V)", "343 V .. 459 V"},
};

dimension dim_of(const char* name)
{
    return *dimension_named(name);
}

} // namespace

TEST_CASE("refused with the place and the right form")
{
    for (const refused_row& r : refused) {
        CAPTURE(r.text);
        const auto got = parse_spread(r.text, dim_of(r.dimension));
        const auto* wrong = std::get_if<text_error>(&got);
        REQUIRE(wrong != nullptr);
        CHECK(wrong->message == r.message);
        CHECK(wrong->offset == r.offset);
    }
}

TEST_CASE("read and printed")
{
    for (const read_row& r : read) {
        CAPTURE(r.text);
        const auto got = parse_spread(r.text, dim_of(r.dimension));
        const auto* s = std::get_if<spread>(&got);
        REQUIRE(s != nullptr);
        CHECK(write_spread(*s) == r.exact);
        CHECK(format_spread(*s) == r.printed);
    }
}

TEST_CASE("the same number however it is written")
{
    const std::pair<const char*, const char*> same[] = {{"0.18 kV", "180 V"},  {"4k7", "4.7 kohm"},        {"4700 ohm", "4.7 k\u03a9"},
                                                        {"3u3", "3.3 uF"},     {"3300 nF", "3.3 \u00b5F"}, {"0.1 V", "100 mV"},
                                                        {"2.4 mm", "2400 um"}, {"5 minutes", "300 s"}};
    const char* dims[] = {"voltage", "resistance", "resistance", "capacitance", "capacitance", "voltage", "length", "time"};
    for (std::size_t i = 0; i < std::size(same); ++i) {
        const auto a = parse_quantity(same[i].first, dim_of(dims[i]));
        const auto b = parse_quantity(same[i].second, dim_of(dims[i]));
        CHECK(std::get<quantity>(a).si == std::get<quantity>(b).si);
    }
}

TEST_CASE("what is in use and the whole are kept apart")
{
    const auto s = std::get<spread>(parse_spread("350 V .. 450 V +-2%", dim::voltage));
    CHECK(s.in_use == range{350.0, 450.0});
    CHECK(s.whole == range{343.0, 459.0});
    CHECK_FALSE(s.nominal.has_value());
    const auto t = std::get<spread>(parse_spread("12 V +-5%", dim::voltage));
    CHECK(t.in_use == range{12.0, 12.0});
    CHECK(t.whole.low == doctest::Approx(11.4).epsilon(1e-12).scale(0));
    const auto m = std::get<spread>(parse_spread("max 165 V", dim::voltage));
    CHECK(m.whole.low == -unbounded);
    CHECK(m.whole.high == 165.0);
}

TEST_CASE("round trip: what is written reads back to the same spread")
{
    std::mt19937 r(12345);
    const dimension dims[] = {dim::voltage,          dim::current,
                              dim::resistance,       dim::capacitance,
                              dim::inductance,       dim::time,
                              dim::frequency,        dim::power,
                              dim::energy,           dim::charge,
                              dim::length,           dim::thermal_resistance,
                              dim::melting_integral, dim::capacitance_per_length,
                              dim::pressure,         dim::none};
    std::uniform_real_distribution<double> mantissa(-9.999, 9.999);
    std::uniform_int_distribution<int> exponent(-13, 11);
    std::uniform_real_distribution<double> wide(0.0, 0.5);
    for (int i = 0; i < 20000; ++i) {
        const dimension d = dims[static_cast<std::size_t>(i) % std::size(dims)];
        const double x = mantissa(r) * std::pow(10.0, exponent(r));
        const double t = std::abs(x) * wide(r);
        const double u = std::abs(x) * wide(r);
        spread s = i % 4 == 0   ? exactly({x, d})
                   : i % 4 == 1 ? between(d, x - t, x + t)
                   : i % 4 == 2 ? toleranced({x, d}, x - t, x + u)
                                : between(d, x - t, x + t);
        if (i % 4 == 3) {
            s.whole = {s.whole.low - u, s.whole.high + u};
        }
        const std::string text = write_spread(s);
        CAPTURE(text);
        const auto back = parse_spread(text, d);
        const auto* got = std::get_if<spread>(&back);
        REQUIRE(got != nullptr);
        REQUIRE(got->in_use == s.in_use);
        REQUIRE(got->whole == s.whole);
        if (i % 4 != 1 || t > 0.0) {
            REQUIRE(got->nominal == s.nominal);
        }
    }
}

TEST_CASE("a figure too small for ordinary doubles prints and does not stop the program")
{
    CHECK_FALSE(format_quantity({1e-320, dim::voltage}).empty());
    CHECK_FALSE(format_quantity({-4e-324, dim::resistance}, 17).empty());
}

TEST_CASE("two different sides of a tolerance are both kept")
{
    const auto s = std::get<spread>(parse_spread("400 V +50/-10 %", dim::voltage));
    CHECK(s.whole.low == doctest::Approx(360.0).epsilon(1e-12).scale(0));
    CHECK(s.whole.high == doctest::Approx(600.0).epsilon(1e-12).scale(0));
}

TEST_CASE("rounding never crosses a prefix wrongly and nothing prints as minus zero")
{
    CHECK(format_quantity({999.96, dim::voltage}) == "1 kV");
    CHECK(format_quantity({999.94, dim::voltage}) == "999.9 V");
    CHECK(format_quantity({-0.0, dim::voltage}) == "0 V");
    CHECK(format_quantity({0.0024, dim::length}) == "2.4 mm");
    CHECK(format_quantity({2500.0, dim::length}) == "2500 m");
    CHECK(format_quantity({308.15, dim::temperature}) == "35 degC");
    CHECK(format_quantity({3.3e-6, dim::capacitance}) == "3.3 \u00b5F");
}
