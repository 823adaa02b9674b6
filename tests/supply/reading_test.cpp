// Good descriptions, what-if settings, bodies of strings, changes.
#include "published/embedded.hpp"
#include "quantity/text.hpp"
#include "supply/change.hpp"

#include <doctest/doctest.h>

#include <fstream>
#include <random>
#include <sstream>

using namespace onehand;

namespace {

const library& data()
{
    static const library_result loaded = load_library(embedded_rules());
    return loaded.lib;
}

std::string file(const std::string& name)
{
    std::ifstream in(std::string(ONEHAND_SOURCE) + "/samples/" + name);
    std::stringstream text;
    text << in.rdbuf();
    return text.str();
}

supply_result read(const std::string& text, const std::vector<std::string>& settings = {})
{
    const read_result r = read_document(text, "t");
    REQUIRE(r.complaints.empty());
    return read_supply(r.doc, data(), settings);
}

change fault(const std::string& ref, const std::string& mode)
{
    change c;
    c.sort = change::what::part_fault;
    c.ref = ref;
    c.mode = mode;
    return c;
}

} // namespace

TEST_CASE("every sample reads without a mistake")
{
    for (const char* name : {"tide-clock-as-built.toml", "tide-clock-corrected.toml", "geiger-bench.toml", "minimal.toml", "negative-rail.toml"}) {
        CAPTURE(name);
        CHECK_FALSE(any_mistake(read(file(name)).complaints));
    }
}

TEST_CASE("parts written as tables or inline are the same")
{
    const std::string head = "[supply]\nreturn = \"0V\"\n[input]\nnets = [\"VIN\", \"0V\"]\n";
    const supply a = read(head + "[resistor]\nR1 = { nets = [\"VIN\", \"0V\"], value = \"4k7\" }\n").built;
    const supply b = read(head + "[resistor.R1]\nnets = [\"VIN\", \"0V\"]\nvalue = \"4.7 kohm\"\n").built;
    REQUIRE(a.parts.size() == 1);
    REQUIRE(b.parts.size() == 1);
    CHECK(*a.parts[0].find("value")->number() == *b.parts[0].find("value")->number());
    CHECK(a.parts[0].terminals[0].net == b.parts[0].terminals[0].net);
}

TEST_CASE("a measured value stands for the marked one and keeps its place")
{
    const supply s = read("[supply]\nreturn = \"0V\"\n[input]\nnets = [\"VIN\", \"0V\"]\n[capacitor]\nC1 = { nets = [\"VIN\", \"0V\"], value = \"3u3 "
                          "+-20%\", measured = \"3.05 uF +-2%\" }\n")
                         .built;
    const field* f = s.parts[0].find("value");
    CHECK(*f->number()->nominal == doctest::Approx(3.05e-6).epsilon(1e-12).scale(0));
    REQUIRE(f->nominal_at.has_value());
    CHECK(f->nominal_at->line == 6);
}

TEST_CASE("what-if settings")
{
    const supply s = read(file("tide-clock-corrected.toml"), {"R8=8k2", "R9.rated-power=1 W", "use.altitude=2500 m", "K1.spike=40 V"}).built;
    CHECK(s.find_part("R8")->find("value")->number()->whole.high == 8200.0);
    CHECK(s.find_part("R9")->find("rated-power")->number()->whole.high == 1.0);
    CHECK(s.used.altitude->number()->whole.high == 2500.0);
    CHECK(s.stage->find("spike")->number()->whole.high == 40.0);
    const std::pair<const char*, const char*> wrong[] = {{"R99=1k", "no part or section 'R99'; nearest known name: R9"},
                                                         {"R9", "write it as R9=470k, R9.rated-power=0.5 W or use.altitude=2500 m"},
                                                         {"use=5", "a section needs its key: use.key=value"}};
    for (const auto& [setting, message] : wrong) {
        const auto list = read(file("tide-clock-corrected.toml"), {setting}).complaints;
        REQUIRE_FALSE(list.empty());
        CHECK(list.front().message == message);
    }
}

TEST_CASE("strings become bodies with nets of their own")
{
    const supply s = expand_bodies(read(file("tide-clock-corrected.toml")).built);
    REQUIRE(s.find_part("R7/1") != nullptr);
    REQUIRE(s.find_part("R7/2") != nullptr);
    CHECK(s.find_part("R7") == nullptr);
    CHECK(s.find_part("R7/1")->terminals[1].net == s.find_part("R7/2")->terminals[0].net);
    CHECK(s.find_part("R7/1")->terminals[0].net == "HT");
    CHECK(s.find_part("R7/2")->terminals[1].net == "FB");
}

TEST_CASE("changes edit a copy")
{
    const supply s = read(file("tide-clock-corrected.toml")).built;
    const change_result open = apply(s, data(), fault("R8", "open"));
    CHECK(open.refused.empty());
    CHECK(open.edited.find_part("R8")->fault == "open");
    CHECK(s.find_part("R8")->fault.empty());
    CHECK(apply(s, data(), fault("R9/2", "open")).edited.find_part("R9/2")->fault == "open");
    CHECK(apply(s, data(), fault("R8", "melted")).refused == "a resistor has no failure mode 'melted'");
    CHECK(apply(s, data(), fault("R77", "open")).refused == "R77 is no part of this supply");
    change bridge;
    bridge.sort = change::what::bridge;
    bridge.nets = {"HT", "FB"};
    CHECK(apply(s, data(), bridge).edited.parts.size() == s.parts.size() + 1);
    bridge.nets = {"HT", "NOWHERE"};
    CHECK(apply(s, data(), bridge).refused == "NOWHERE is no net of this supply");
    change wiper;
    wiper.sort = change::what::wiper;
    wiper.ref = "P1";
    wiper.value = exactly({0.25, dim::none});
    CHECK(apply(s, data(), wiper).edited.find_part("P1")->find("position")->number()->whole.low == 0.25);
    wiper.value = exactly({1.25, dim::none});
    CHECK(apply(s, data(), wiper).refused == "a wiper stands between 0 and 1");
    change reversed;
    reversed.sort = change::what::input_event;
    reversed.mode = "reversed";
    CHECK(apply(s, data(), reversed).edited.fed.voltage->number()->whole.high == doctest::Approx(-11.4).epsilon(1e-12).scale(0));
    change unplugged;
    unplugged.sort = change::what::output_unplugged;
    CHECK(apply(s, data(), unplugged).refused == "there is no connector");
    const supply g = read(file("geiger-bench.toml")).built;
    CHECK(apply(g, data(), unplugged).edited.find_part("J1")->net("pole-1-load") == "LC~J1");
    change off;
    off.sort = change::what::terminal_open;
    off.ref = "R8";
    off.mode = "second";
    CHECK(apply(s, data(), off).edited.find_part("R8")->net("second") == "0V~R8");
    CHECK(describe(fault("R8", "open")) == "R8 open");
    CHECK(single_faults(s, data()).size() > 40);
}

TEST_CASE("the natural order of references")
{
    CHECK(natural_less("R2", "R10"));
    CHECK(natural_less("R7/1", "R7/2"));
    CHECK(natural_less("C9", "R1"));
    CHECK_FALSE(natural_less("R10", "R2"));
    CHECK_FALSE(natural_less("R2", "R2"));
}

TEST_CASE("no mangled sample crashes the reader")
{
    std::mt19937 r(4242);
    const std::string bits[] = {"[", "]", "{", "}", "\"", "=", "..", "+-", "\n", "5", "V", "\xc2\xb5", "*", ",", "true", "[[gap]]", "series = 3"};
    for (const char* name : {"tide-clock-corrected.toml", "geiger-bench.toml"}) {
        const std::string whole = file(name);
        for (int i = 0; i < 400; ++i) {
            std::string text = whole;
            for (int k = 0; k < 3; ++k) {
                const std::size_t at = r() % text.size();
                if (r() % 2 == 0) {
                    text.erase(at, r() % 6);
                } else {
                    text.insert(at, bits[r() % std::size(bits)]);
                }
            }
            const read_result read_again = read_document(text, "t");
            if (read_again.complaints.empty()) {
                const supply_result s = read_supply(read_again.doc, data());
                for (const complaint& c : s.complaints) {
                    REQUIRE_FALSE(c.message.empty());
                }
            }
        }
    }
}
