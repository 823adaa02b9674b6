// What each sample must say, and that the corrected one can be brought to its end.
#include "help.hpp"

#include <doctest/doctest.h>

using namespace onehand;
using namespace onehand::test;

TEST_CASE("the clock as built holds for the reasons it was built with")
{
    const audit_outcome o = run(sample("tide-clock-as-built.toml"));
    REQUIRE(o.result);
    const audit_result& r = *o.result;
    CHECK(r.concluded.energise == "hold");
    CHECK(r.concluded.reach_in == "hold");
    CHECK(exit_code(o) == 1);
    CHECK(found(r, "resistor-limiting-voltage", "R7")->judged == verdict::fail); // within its power, beyond its limiting voltage
    CHECK(found(r, "resistor-dissipation", "R7")->judged == verdict::pass);
    CHECK(found(r, "electrolytic-voltage", "C4")->judged == verdict::fail); // holds at mid trimmer, not at its end
    CHECK(found(*run(sample("tide-clock-as-built.toml"), {"P1.position=0.5"}).result, "electrolytic-voltage", "C4")->judged == verdict::pass);
    CHECK(found(r, "bleeder-second-path", "HT to 0V")->judged == verdict::fail); // the divider alone
    CHECK(found(r, "creepage", "HT to 0V at C4 pads")->judged == verdict::fail);
    CHECK(found(r, "capacitor-voltage", "C5")->judged == verdict::not_shown); // its marking is worn off
    CHECK(found(r, "capacitor-voltage", "C5")->missing == std::vector<std::string>{"C5.rated-voltage"});
}

TEST_CASE("the corrected clock is conditional with a time and clean once its condition is written into the file")
{
    const audit_outcome o = run(sample("tide-clock-corrected.toml"));
    REQUIRE(o.result);
    CHECK(o.result->concluded.energise == "conditional");
    CHECK(o.result->concluded.reach_in == "only-after");
    CHECK(o.result->concluded.time_known);
    CHECK(o.result->concluded.conditions.size() <= 3);
    CHECK(exit_code(o) == 4);
    const audit_outcome settled = run(sample("tide-clock-corrected.toml"), {"K1.spike=40 V"});
    CHECK(settled.result->concluded.energise == "no-objection");
    CHECK(exit_code(settled) == 0);
}

TEST_CASE("the Geiger bench: access behind ten megohms is ES1 and the module is bounded by its measured discharge")
{
    const audit_outcome o = run(sample("geiger-bench.toml"));
    REQUIRE(o.result);
    CHECK(o.result->concluded.energise == "no-objection");
    CHECK(found(*o.result, "access-class", "MON to 0V")->judged == verdict::pass);
    CHECK(found(*o.result, "access-capacitor", "LC to LS")->judged == verdict::pass);
    // Without the measured discharge what the module holds is not known: never passed over.
    const std::string text = sample("geiger-bench.toml");
    const std::size_t from = text.find("[[decay]]");
    const std::size_t to = text.find("[[access]]");
    const audit_outcome unknown = run(text.substr(0, from) + text.substr(to));
    REQUIRE(unknown.result);
    CHECK_FALSE(unknown.result->concluded.time_known);
    CHECK(found(*unknown.result, "access-capacitor", "MON to 0V")->judged == verdict::not_shown);
}

TEST_CASE("the least description is mostly not-shown")
{
    const audit_outcome o = run(sample("minimal.toml"));
    REQUIRE(o.result);
    CHECK(o.result->concluded.energise == "hold");
    int not_shown = 0;
    int pass = 0;
    for (const finding& f : o.result->judged.findings) {
        not_shown += f.judged == verdict::not_shown ? 1 : 0;
        pass += f.judged == verdict::pass ? 1 : 0;
    }
    CHECK(not_shown > 6);
    CHECK(pass <= 4);
    // A certain failure stays one although the module's inside is unknown: 10 uF at 250 V and nothing discharges it.
    CHECK(found(*o.result, "bleeder-present", "HT to 0V")->judged == verdict::fail);
    CHECK(found(*o.result, "discharge-cover-off", "HT to 0V")->judged == verdict::fail);
}

TEST_CASE("a negative rail and the capacitor fitted the wrong way round")
{
    const audit_outcome o = run(sample("negative-rail.toml"));
    REQUIRE(o.result);
    CHECK(found(*o.result, "capacitor-polarity", "C2")->judged == verdict::fail);
    CHECK(found(*o.result, "capacitor-polarity", "C1")->judged == verdict::pass);
    for (const net_facts& n : o.result->nets) {
        if (n.net == "NHT") {
            CHECK(n.potential.front().second.numbers.front().whole.low == doctest::Approx(-123.6).epsilon(1e-9).scale(0));
        }
    }
    const std::string turned = replaced(sample("negative-rail.toml"), "positive = \"NB\", negative = \"0V\"", "positive = \"0V\", negative = \"NB\"");
    CHECK(run(turned).result->concluded.energise == "no-objection");
}

TEST_CASE("Kirchhoff: the currents of the corrected clock's rail come out even")
{
    const audit_result r = *run(sample("tide-clock-corrected.toml")).result;
    // R7, P1 and R8 carry the same current; both bodies of R9 too.
    const auto amps = [&](const std::string& ref) {
        for (const part_facts& p : r.parts) {
            if (p.ref == ref) {
                return p.states.front().current.numbers.front().whole;
            }
        }
        return range{};
    };
    CHECK(amps("R7/1").high == doctest::Approx(amps("R7/2").high).epsilon(1e-9).scale(0));
    CHECK(amps("R9/1").high == doctest::Approx(amps("R9/2").high).epsilon(1e-9).scale(0));
    CHECK(amps("R8").high == doctest::Approx(amps("R7/1").high).epsilon(1e-9).scale(0));
}
