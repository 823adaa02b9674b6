// What protects a person by one part alone: pairs that one failed part makes live, against descriptions edited part by part; barriers.
#include "help.hpp"

#include <doctest/doctest.h>
#include <fmt/format.h>

#include <algorithm>

using namespace onehand;
using namespace onehand::test;

namespace {

/// A rail of 450 V and resistors that end at a socket anyone can touch.
std::string socket(const std::string& resistors, const std::string& person = "ordinary", const std::string& use = "")
{
    return "[supply]\nname = \"S\"\nreturn = \"0V\"\n[use]\nsetting = \"teaching lab\"\nperson = \"" + person + "\"\n" + use +
           "[input]\nnets = [\"VIN\", \"0V\"]\nvoltage = \"12 V\"\n[converter.K1]\ntopology = \"module\"\noutputs = [[\"HT\", \"0V\"]]\n"
           "output-voltage = \"450 V +-2%\"\ninternal-capacitance = \"0 F\"\n[resistor]\n" +
           resistors + "[[access]]\nnets = [\"M\", \"0V\"]\nat = \"socket\"\nwhen = \"always\"\n";
}

struct resistor {
    const char* nets;
    double ohms;
};

/// The resistors, one of them (if any) with another value.
std::string written(const std::vector<resistor>& list, std::size_t changed = 99, double ohms = 0.0)
{
    std::string text;
    for (std::size_t i = 0; i < list.size(); ++i) {
        text += fmt::format("R{} = {{ nets = [{}], value = \"{:.9f} ohm\" }}\n", i + 1, list[i].nets, i == changed ? ohms : list[i].ohms);
    }
    return text;
}

double touch_current(const audit_result& r)
{
    double most = 0.0;
    for (const access_facts& a : r.accesses) {
        for (const auto& s : a.states) {
            if ((s.in == state::running || s.in == state::no_load) && !s.current.numbers.empty()) {
                most = std::max(most, s.current.numbers.front().whole.high);
            }
        }
    }
    return most;
}

} // namespace

TEST_CASE("each part on the way shorted and opened: the same as editing the description and auditing anew")
{
    struct network {
        std::vector<resistor> parts;
        verdict due;
    };
    const network list[] = {
        {{{"\"HT\", \"M\"", 1e6}}, verdict::fail},                                                // one part alone
        {{{"\"HT\", \"A\"", 1e6}, {"\"A\", \"M\"", 1e6}}, verdict::pass},                         // two that share
        {{{"\"HT\", \"A\"", 4.7e6}, {"\"A\", \"M\"", 470.0}}, verdict::fail},                     // the second holds nothing
        {{{"\"HT\", \"M\"", 2.2e6}, {"\"HT\", \"M\"", 2.2e6}}, verdict::fail},                    // side by side
        {{{"\"HT\", \"A\"", 5e3}, {"\"A\", \"M\"", 5e3}, {"\"M\", \"0V\"", 1e3}}, verdict::fail}, // held down by one part
        {{{"\"HT\", \"A\"", 1e6}, {"\"A\", \"M\"", 1e6}, {"\"M\", \"0V\"", 1e5}}, verdict::pass}, // the same, weakly fed
    };
    for (const network& n : list) {
        const audit_outcome whole = run(socket(written(n.parts)));
        CAPTURE(format_complaints(whole.complaints));
        CAPTURE(written(n.parts));
        REQUIRE(whole.result);
        double worst = touch_current(*whole.result);
        for (std::size_t i = 0; i < n.parts.size(); ++i) {
            for (const double ohms : {1e-6, 1e12}) {
                worst = std::max(worst, touch_current(*run(socket(written(n.parts, i, ohms))).result));
            }
        }
        const finding* f = found(*whole.result, "access-class-faulted", "M to 0V");
        REQUIRE(f != nullptr);
        CHECK(f->judged == n.due);
        REQUIRE(f->left);
        CHECK(f->left->numbers.front().whole.high == doctest::Approx(worst).epsilon(1e-6).scale(0));
        CHECK(found(*whole.result, "access-live-faulted", "M to 0V")->judged == n.due);
        CHECK(found(*run(socket(written(n.parts), "instructed")).result, "access-class-faulted", "M to 0V")->judged == n.due);
    }
}

TEST_CASE("a pair held below 60 V by one resistor is not passed over")
{
    // As built 41 V and nothing to judge; its lower part open, 459 V stand there through 10 kohm: 459 V / 12 kohm into a body. Ohm's law, no source.
    const std::vector<resistor> parts{{"\"HT\", \"A\"", 5e3}, {"\"A\", \"M\"", 5e3}, {"\"M\", \"0V\"", 1e3}};
    const audit_result r = *run(socket(written(parts))).result;
    CHECK(found(r, "access-class", "M to 0V")->judged == verdict::not_applicable);
    const finding* f = found(r, "access-class-faulted", "M to 0V");
    CHECK(f->judged == verdict::fail);
    CHECK(f->left->numbers.front().whole.high == doctest::Approx(459.0 / 12e3).epsilon(1e-6).scale(0));
    CHECK(f->message.find("459 V") != std::string::npos);
    CHECK(f->left->shown.formula.find("R3 open") != std::string::npos);
    // Where it is wet 70 V after a fault are too many, where it is dry 120 V: 100 V through 5 kohm at the most.
    const std::string low =
        replaced(socket(written({{"\"HT\", \"M\"", 5e3}, {"\"M\", \"0V\"", 5e3}}), "ordinary", "location = \"dry\"\n"), "450 V +-2%", "100 V");
    CHECK(found(*run(low).result, "access-live-faulted", "M to 0V")->judged == verdict::not_applicable);
    CHECK(found(*run(replaced(low, "dry", "wet")).result, "access-live-faulted", "M to 0V")->judged == verdict::fail);
    CHECK(found(*run(replaced(low, "location = \"dry\"", "")).result, "access-live-faulted", "M to 0V")->judged == verdict::not_shown);
}

TEST_CASE("two bodies of one reference are two parts, and what no one touches is not looked at")
{
    const std::string two = socket("R1 = { nets = [\"HT\", \"M\"], value = \"1 Mohm\", series = 2 }\n");
    const audit_result bare = *run(two).result;
    const finding* f = found(bare, "access-class-faulted", "M to 0V");
    CHECK(f->judged == verdict::pass);
    CHECK(f->left->numbers.front().whole.high == doctest::Approx(459.0 / 1.002e6).epsilon(1e-6).scale(0));
    const audit_result covered = *run(replaced(two, "always", "cover off")).result;
    CHECK(found(covered, "access-class-faulted", "M to 0V")->judged == verdict::not_applicable);
    CHECK(found(covered, "access-live-faulted", "M to 0V")->judged == verdict::not_applicable);
}

TEST_CASE("an open box is no barrier, and one that is not written is not there")
{
    const std::string clock = sample("tide-clock-corrected.toml");
    const std::string name = "Tide clock, display-tube supply, corrected";
    const auto boxed = [&](const char* person, const char* box, const char* rule) {
        const std::string text = replaced(clock, "person           = \"instructed\"", std::string("person = \"") + person + "\"");
        return found(*run(replaced(text, "enclosure = \"finger-proof\"", box)).result, rule, name)->judged;
    };
    CHECK(boxed("instructed", "enclosure = \"covered\"", "enclosure-there") == verdict::pass);
    CHECK(boxed("instructed", "enclosure = \"open\"", "enclosure-there") == verdict::fail);
    CHECK(boxed("skilled", "", "enclosure-there") == verdict::fail);
    CHECK(boxed("ordinary", "", "enclosure-finger-proof") == verdict::fail);
    CHECK(boxed("ordinary", "enclosure = \"covered\"", "enclosure-finger-proof") == verdict::fail);
    CHECK(boxed("ordinary", "enclosure = \"finger-proof\"", "enclosure-finger-proof") == verdict::pass);
}
