// The converter through the whole of audit: published worked examples, both modes, drives, feedback, ladders, negative rails, runaway, a person on
// it.
#include <doctest/doctest.h>

#include "converter_help.hpp"

#include <cmath>

using namespace onehand;
using namespace onehand::test;

namespace {

doctest::Approx near(double x, double closeness = 1e-6)
{
    return doctest::Approx(x).epsilon(closeness).scale(0);
}

std::string with(std::string text, const std::string& from, const std::string& to)
{
    const std::string out = replaced(std::move(text), from, to);
    REQUIRE_FALSE(out.empty());
    return out;
}

} // namespace

TEST_CASE("A-01 Rashid ex 5.6 through audit: a regulated boost stage in continuous mode")
{
    boost_text t;
    t.input = "5 V";
    t.inductance = "150 uH";
    t.drive = R"(frequency = "25 kHz", duty = "0.9")";
    t.feedback = R"(feedback = { net = "FB", threshold = "2.5 V", lag = "max 1 us", mode = "duty" })";
    t.parts = R"([capacitor]
C1 = { nets = ["HT", "0V"], value = "220 uF", rated-voltage = "50 V", dielectric = "polypropylene" }
[resistor]
R1 = { nets = ["HT", "FB"], value = "500 Mohm" }
R2 = { nets = ["FB", "0V"], value = "100 Mohm" }
[load]
X1 = { nets = ["HT", "0V"], current = "0.5 A" })";
    const audit_result r = t.audited();
    CHECK(r.converter->mode == "continuous");
    CHECK(whole(r, "inductor.peak").high == near(1.9444444, 3e-5));   // printed 1.944 A
    CHECK(whole(r, "inductor.ripple").high == near(0.8888889, 3e-5)); // 0.89 A
    CHECK(whole(r, "inductor.average").high == near(1.5, 3e-5));
    CHECK(whole(r, "output-ripple").high == near(60.606061e-3, 3e-5)); // 60.61 mV
    CHECK(whole(r, "input-current").high == near(1.5, 3e-5));
}

TEST_CASE("A-02 Hart ex 6-9 through audit: a boost stage that nothing regulates")
{
    boost_text t;
    t.input = "20 V";
    t.drive = R"(frequency = "15 kHz", duty = "0.6")";
    t.feedback = "";
    t.parts = R"([capacitor]
C1 = { nets = ["HT", "0V"], value = "100 uF", rated-voltage = "100 V", dielectric = "polypropylene" }
[resistor]
R1 = { nets = ["HT", "0V"], value = "50 ohm" })";
    const audit_result r = t.audited();
    CHECK(r.set_point->basis == "running free");
    CHECK(r.set_point->output.numbers.front().whole.high == near(60.0, 2e-5)); // printed 60 V
    CHECK(whole(r, "inductor.peak").high == near(8.0, 2e-5));                  // 8.0 A
    // The continuous formula would give 50 V: with twice the inductance and more it does.
    t.inductance = "400 uH";
    CHECK(t.audited().set_point->output.numbers.front().whole.high == near(50.0, 2e-5));
}

TEST_CASE("A-24 and A-25 through audit: a timer's frequency and duty follow from its parts")
{
    boost_text t;
    t.input = "5 V";
    t.drive = R"(astable = { ra = "RA", rb = "RB", c = "CT" })";
    const auto drawn = [&](const std::string& ra, const std::string& rb, const std::string& c, const std::string& control) {
        boost_text one = t;
        one.parts +=
            fmt::format("\nRA = {{ nets = [\"VIN\", \"DIS\"], value = \"{}\" }}\nRB = {{ nets = [\"DIS\", \"TIM\"], value = \"{}\" }}\n", ra, rb);
        one.parts = with(one.parts, "[resistor]", fmt::format("CT = {{ nets = [\"TIM\", \"0V\"], value = \"{}\" }}\n[resistor]", c));
        one.drive += control;
        return one.audited();
    };
    const audit_result a = drawn("7.5k", "7.5k", "0.1 uF", "");
    CHECK(whole(a, "frequency").high == near(641.198, 1e-5)); // Boylestad prints 635 Hz with 0.7 for ln 2
    CHECK(whole(a, "duty").high == near(2.0 / 3.0));
    const audit_result low = drawn("14.4k", "7.2k", "1 nF", R"(, control = "2.33333333333 V")");
    CHECK(whole(low, "frequency").high == near(77946.0, 1e-4));
    CHECK(whole(low, "duty").high == near(0.61100, 1e-4));
    const audit_result high = drawn("14.4k", "7.2k", "1 nF", R"(, control = "4.33333333333 V")");
    CHECK(whole(high, "frequency").high == near(27591.0, 1e-4));
    CHECK(whole(high, "duty").high == near(0.86230, 1e-4));
    // Spread jointly: duty does not move with the capacitor, frequency does.
    const audit_result wide = drawn("14.4k", "7.2k", "1 nF +-10%", "");
    CHECK(whole(wide, "duty").high == near(0.75));
    CHECK(whole(wide, "frequency").high == near(50094.0 / 0.9, 1e-4));
    // A fixed control pin and an input that sags: the on-time grows without an end where the two meet.
    t.input = "3.5 V .. 5 V";
    const audit_result sag = drawn("14.4k", "7.2k", "1 nF", R"(, control = "3.33333333333 V")");
    CHECK(whole(sag, "duty").high > 0.9);
    CHECK(whole(sag, "inductor.start-up").high > whole(low, "inductor.start-up").high);
}

TEST_CASE("a peak-current limit is passed by what the comparator's delay lets through")
{
    boost_text t;
    t.drive = R"(frequency = "50 kHz", peak-current = "1 A +-10%", delay = "max 500 ns")";
    CHECK(whole(t.audited(), "inductor.peak").high == near(1.1 + 12.0 * 500e-9 / 100e-6));
}

TEST_CASE("pulses that run into each other are told, not guessed")
{
    boost_text t;
    t.drive = R"(frequency = "50 kHz", duty = "0.95")"; // 180 V: on + emptying beyond the period
    t.feedback = R"(feedback = { net = "FB", threshold = "2.5 V", lag = "max 1 us" })";
    const audit_result r = t.audited();
    CHECK(r.converter->mode == "continuous");
    CHECK(told(r, "inductor.peak").numbers.empty());
    CHECK(told(r, "inductor.peak").missing.front().find("K1.feedback.mode") == 0);
    CHECK_FALSE(told(r, "overshoot").missing.empty());
    // A measured overshoot settles the latter.
    t.feedback += "\novershoot = \"max 7 V\"";
    CHECK(whole(t.audited(), "overshoot").high == 7.0);
}

TEST_CASE("the set point by a zener string, by a reference, from a negative rail")
{
    boost_text t;
    t.feedback = R"(feedback = { net = "FB", threshold = "0.6 V", zener = ["Z1", "Z2"], lag = "max 1 us", mode = "gated" })";
    t.parts = R"([capacitor]
C1 = { nets = ["HT", "0V"], value = "10 uF", rated-voltage = "630 V", dielectric = "polypropylene" }
[zener]
Z1 = { cathode = "HT", anode = "M", zener-voltage = "91 V +-5%" }
Z2 = { cathode = "M", anode = "FB", zener-voltage = "82 V +-5%" }
[resistor]
R2 = { nets = ["FB", "0V"], value = "10k" })";
    const audit_result r = t.audited();
    CHECK(r.set_point->output.numbers.front().whole.high == near(173.0 * 1.05 + 0.6));
    CHECK(r.set_point->output.numbers.front().whole.low == near(173.0 * 0.95 + 0.6));
    // Not named as the feedback's they may as well not conduct: nothing is shown.
    t.feedback = with(t.feedback, R"(zener = ["Z1", "Z2"], )", "");
    CHECK(found(t.audited(), "feedback-holds", "K1")->judged != verdict::pass);
}

TEST_CASE("lag: a capacitor on the divider lifts a 180 V rail far above")
{
    boost_text t;
    t.parts = with(with(t.parts, "71k", "7M1"), "\"1k\"", "\"100k\"");
    const double bare = whole(t.audited(), "overshoot").high;
    t.parts = with(t.parts, "[resistor]", "C2 = { nets = [\"FB\", \"0V\"], value = \"1 uF\" }\n[resistor]");
    const audit_result r = t.audited();
    const double lifted = whole(r, "overshoot").high;
    CHECK(bare < 1.0);
    CHECK(lifted > 20.0);
    // It reaches the capacitor: one that stands the set point alone fails at start-up.
    boost_text tight = t;
    tight.parts = with(tight.parts, "630 V", "185 V");
    CHECK(found(tight.audited(), "capacitor-start-up", "C1")->judged == verdict::fail);
    CHECK(found(tight.audited(), "capacitor-voltage", "C1")->judged == verdict::pass);
}

TEST_CASE("without feedback the rail goes where the switch breaks down, the load or its own capacitance holds it")
{
    boost_text t;
    CHECK(whole(t.audited(), "runaway.voltage").high == near(520.0)); // 400 V times 1.3
    boost_text loaded = t;
    loaded.parts += "\nR3 = { nets = [\"HT\", \"0V\"], value = \"200k\" }\n";
    CHECK(whole(loaded.audited(), "runaway.voltage").high == near(520.0));
    // Full cycles: 1.2 A, 3.6 W stored; V (V - 12) = P R.
    loaded.parts = with(loaded.parts, "200k", "5k");
    CHECK(whole(loaded.audited(), "runaway.voltage").high == near(6.0 + std::sqrt(36.0 + 3.6 * 5000.0), 2e-5));
    // The divider that senses it does not count as a load: it may be what failed.
    boost_text sensed = t;
    sensed.parts = with(sensed.parts, "71k", "7k1");
    sensed.parts = with(sensed.parts, "\"1k\"", "\"100 ohm\"");
    CHECK(whole(sensed.audited(), "runaway.voltage").high == near(520.0));
    boost_text stray = t;
    stray.transistor += R"(, output-capacitance = "1 nF")";
    const double i = 12.0 * 10e-6 / 100e-6;
    CHECK(whole(stray.audited(), "runaway.voltage").high == near(12.0 + std::sqrt(144.0 + i * i * 100e-6 / 1e-9), 2e-5));
    // What it passes is told in its order.
    const audit_result r = t.audited();
    REQUIRE_FALSE(r.converter->runaway_order.empty());
    CHECK(r.converter->runaway_order.front().part == "Q1");
}

TEST_CASE("a person on the running rail: by delivered power, not by the set point over the body")
{
    boost_text t;
    // 12 V, 100 uH, 50 kHz, duty 0.5: 1.2 A, 3.6 W stored; V (V - 12) = P 2 kohm.
    const double v = 6.0 + std::sqrt(36.0 + 3.6 * 2000.0);
    const audit_result r = t.audited();
    CHECK(whole(r, "body-power").high == near(v * v / 2000.0, 2e-5));
    for (const access_facts& a : r.accesses) {
        if (a.about.name == "HT to 0V") {
            CHECK(a.states.front().current.numbers.front().whole.high == near(v / 2000.0, 2e-5)); // not 180 V/2 kohm
        }
    }
    CHECK(found(r, "body-power", "K1")->advice.find("1.25 W") != std::string::npos);
    // The lowest published body at 180 V: the row of 200 V, 800 ohm.
    const double low = 6.0 + std::sqrt(36.0 + 3.6 * 800.0);
    CHECK(whole(r, "body-current").high == near(low / 800.0, 2e-5));
    // A tenth of the inductance times as much: well below the line.
    t.inductance = "10 mH";
    CHECK(found(t.audited(), "body-power", "K1")->advice.empty());
    // A hand on the feedback net moves the set point: the rail is then taken as far as it runs.
    boost_text open;
    double on_feedback = 0.0;
    const audit_outcome touched = run(open.text() + "[[access]]\nnets = [\"FB\", \"0V\"]\nwhen = \"always\"\n");
    REQUIRE(touched.result);
    for (const access_facts& a : touched.result->accesses) {
        on_feedback = a.states.front().current.numbers.front().whole.high;
    }
    CHECK(on_feedback > 2.5 / 2000.0 * 1.5);
}

TEST_CASE("a flyback: reflected voltage, clamp, rectifier, and which part of the secondary swings")
{
    const audit_result r = *run(sample("valve-rail-flyback.toml")).result;
    const double set = r.set_point->output.numbers.front().whole.high;
    double highest = 0.0;
    double lowest = 0.0;
    for (const net_facts& n : r.nets) {
        if (n.net == "SEC") {
            highest = n.potential.front().second.numbers.front().whole.high;
            lowest = n.potential.front().second.numbers.front().whole.low;
        }
    }
    CHECK(lowest == near(-126.0)); // 10 times 12.6 V
    CHECK(highest > set);
    CHECK(found(r, "resistor-dissipation", "R5")->judged == verdict::fail); // the clamp's resistor
    CHECK(found(r, "runaway-energy", "K1")->judged == verdict::fail);
    CHECK(found(r, "runaway-energy", "K1")->change != "none");
    CHECK(found(r, "wiper-open", "K1")->judged == verdict::fail);
    // The clamp: Vc (Vc - VR) = R P, at its greatest.
    const double leak = 0.5 * 0.75e-6 * std::pow(5.4 + 12.6 * 150e-9 / 22.5e-6, 2) * 46.2e3;
    double clamp = 0.0;
    for (const net_facts& n : r.nets) {
        if (n.net == "CL") {
            clamp = n.potential.front().second.numbers.front().whole.high;
        }
    }
    const double vr = (whole(r, "overshoot").high + set + 1.7) / 10.0;
    const double vc = 0.5 * (vr + std::sqrt(vr * vr + 4.0 * 1575.0 * leak));
    CHECK(clamp == near(12.6 + vc, 1e-3));
    // Its power Vc^2/R at the resistor's least.
    const double at_least = 0.5 * (vr + std::sqrt(vr * vr + 4.0 * 1425.0 * leak));
    CHECK(whole(r, "clamp.power").high == near(at_least * at_least / 1425.0, 1e-3));
}

TEST_CASE("a ladder of five: potentials, stress, droop, and both ways round")
{
    const audit_result r = *run(sample("photomultiplier-ladder.toml")).result;
    const auto volts = [&](const std::string& ref) {
        for (const part_facts& p : r.parts) {
            if (p.ref == ref) {
                return p.states.front().voltage.numbers.front().whole;
            }
        }
        return range{};
    };
    // C11 holds one peak from the switch node to its first net, each further capacitor one; each diode blocks one.
    const double peak = volts("C11").high;
    CHECK(peak > 927.5 / 5.0);
    CHECK(volts("C15").high == near(peak));
    CHECK(-volts("D17").low == near(peak));
    // The load's droop: n = 5 of 22 nF; I/(f C)(2 n^3/3 + n^2/2 - n/6) at the worst.
    const double amps = whole(r, "load-current").high;
    const double droop = amps / (23750.0 * 19.8e-9) * (2.0 * 125.0 / 3.0 + 12.5 - 5.0 / 6.0);
    CHECK(peak == near((r.set_point->output.numbers.front().whole.high + droop) / 5.0, 1e-5));
    CHECK(whole(r, "output-ripple").high == near(amps / (23750.0 * 19.8e-9) * 15.0, 1e-5));
    CHECK(found(r, "saturation-start-up-inductor", "L1")->judged == verdict::marginal);
}

TEST_CASE("A-09 through audit: four doublers from a swing of 10 V, without their drops")
{
    // Lessons in Electric Circuits: 5 V peak, so 10 V from trough to peak each stage; 40 V ideal. From a switch node that swings from the return the
    // first capacitor holds nothing less than one swing.
    std::string parts = R"([capacitor]
C0 = { nets = ["HT", "0V"], value = "1 nF" }
)";
    std::string diodes = "[diode]\n";
    std::string ladder;
    const char* nodes[] = {"X1", "N1", "X2", "N2", "X3", "N3", "X4", "HT"};
    const char* below[] = {"SW", "0V", "X1", "N1", "X2", "N2", "X3", "N3"};
    std::string before = "0V";
    for (int i = 0; i < 8; ++i) {
        parts += fmt::format("C{0} = {{ nets = [\"{1}\", \"{2}\"], value = \"1 uF\" }}\n", i + 10, nodes[i], below[i]);
        diodes += fmt::format("D{0} = {{ anode = \"{2}\", cathode = \"{1}\", rated-voltage = \"100 V\" }}\n", i + 10, nodes[i], before);
        ladder += fmt::format("{0}\"C{1}\", \"D{1}\"", i == 0 ? "" : ", ", i + 10);
        before = nodes[i];
    }
    boost_text t;
    t.input = "5 V";
    t.topology = "boost-multiplier";
    t.stage = "inductor = \"L1\"\nswitch = \"Q1\"\nladder = [" + ladder + "]";
    t.rectifier = diodes;
    t.parts = parts + "[resistor]\nR1 = { nets = [\"HT\", \"FB\"], value = \"15M\" }\nR2 = { nets = [\"FB\", \"0V\"], value = \"1M\" }\n";
    const audit_result r = t.audited();
    CHECK(r.set_point->output.numbers.front().whole.high == near(40.0));
    double first = 0.0;
    for (const net_facts& n : r.nets) {
        if (n.net == "N1") {
            first = n.potential.front().second.numbers.front().whole.high;
        }
    }
    CHECK(first == near(10.0, 1e-3)); // what is drawn by 16 Mohm droops it a little
}

TEST_CASE("a trimmer tied to one of its ends is one resistance, whichever end")
{
    boost_text t;
    t.parts = R"([capacitor]
C1 = { nets = ["HT", "0V"], value = "10 uF" }
[resistor]
R1 = { nets = ["HT", "FB"], value = "100k" }
R2 = { nets = ["B", "0V"], value = "1k" }
[trimmer]
P1 = { ends = ["FB", "B"], wiper = "B", value = "1k" })";
    const auto spread_of = [](const audit_result& r) { return r.set_point->output.numbers.front().whole; };
    const range by_end_2 = spread_of(t.audited());
    CHECK(by_end_2.high == near(2.5 * 101.0));
    CHECK(by_end_2.low == near(2.5 * 51.0));
    CHECK(found(t.audited(), "wiper-open", "K1")->judged == verdict::pass); // open: all of it in the lower arm
    t.parts = with(t.parts, "wiper = \"B\"", "wiper = \"FB\"");
    CHECK(spread_of(t.audited()).high == near(by_end_2.high));
    t.parts = with(t.parts, "wiper = \"FB\", value = \"1k\"", "wiper = \"B\", value = \"1k\", position = \"0.2 .. 0.4\"");
    CHECK(spread_of(t.audited()).high == near(2.5 * (1.0 + 100.0 / 1.2)));
}

TEST_CASE("input events are judged as such and are no faults as built")
{
    const audit_result r = *run(sample("valve-rail-flyback.toml")).result;
    CHECK(found(r, "input-reversed", "C1")->judged == verdict::fail);
    CHECK(found(r, "input-reversed", "C1")->change == "input event");
    CHECK(found(r, "adapter-capacitor", "C1")->judged == verdict::fail);
    CHECK(found(r, "hot-plug", "C1")->judged == verdict::pass); // 25.2 V on 28.75 V
    const audit_result keyed = *run(with(sample("valve-rail-flyback.toml"), "reversible        = true", "reversible        = false")).result;
    CHECK(found(keyed, "input-reversed", "C1")->judged == verdict::not_applicable);
    const audit_result unsaid = *run(with(sample("valve-rail-flyback.toml"), "reversible        = true", "")).result;
    CHECK(found(unsaid, "input-reversed", "C1")->judged == verdict::not_shown);
}

TEST_CASE("A-36 through audit: a switch's heat and junction from its effective current")
{
    // Jacob ex 6.7, turned to a coil current: 0.11 ohm times 2.6 when hot, 62 K/W, 40 degC. Here the current is what the stage's load asks, so the
    // junction is read back from the heat told.
    boost_text t;
    t.transistor =
        R"(rated-voltage = "400 V", on-resistance = "0.11 ohm", thermal-resistance = "62 K/W", junction-limit = "60 degC", output-capacitance = "1 pF")";
    t.parts += "\n[load]\nX1 = { nets = [\"HT\", \"0V\"], current = \"15 mA\" }\n";
    const audit_outcome o = run(with(t.text(), "[input]", "[use]\nambient = \"40 degC\"\ninside-rise = \"0 K\"\n[input]"));
    REQUIRE(o.result);
    const double amps = whole(*o.result, "switch.current").high;
    const double own = 0.5 * 1e-12 * std::pow(o.result->converter->figures.empty() ? 0.0 : whole(*o.result, "switch.voltage").high, 2) * 50e3;
    const finding* f = found(*o.result, "switch-junction", "Q1");
    REQUIRE(f->left);
    CHECK(f->left->numbers.front().whole.high - 273.15 == near(40.0 + 62.0 * (amps * amps * 0.11 * 2.6 + own), 1e-5));
    CHECK(f->judged == verdict::pass);
}

TEST_CASE("common practice without a source, as descriptions write it")
{
    // A silicon base-emitter drop of about 0.6 V, a bandgap reference of 1.25 V, display-tube rails of about 170 V: in daily use, no document behind
    // them.
    boost_text t;
    t.feedback = R"(feedback = { net = "FB", threshold = "1.25 V +-2%", lag = "max 1 us", mode = "gated" })";
    t.parts = with(with(t.parts, "\"71k\"", "\"1.43 Mohm +-5%\""), "\"1k\"", "\"10 kohm +-1%\"");
    const spread set = t.audited().set_point->output.numbers.front();
    CHECK(set.in_use.high == near(180.0));
    CHECK(set.whole.low == near(165.99, 1e-4)); // derived reference: every tolerance against it
    CHECK(set.whole.high == near(194.65, 1e-4));
    t.feedback = R"(feedback = { net = "FB", threshold = "0.6 V", lag = "max 1 us", mode = "gated" })";
    t.parts = with(with(t.parts, "\"1.43 Mohm +-5%\"", "\"680k\""), "\"10 kohm +-1%\"", "\"2.4k\"");
    CHECK(t.audited().set_point->output.numbers.front().whole.high == near(170.6));
}

TEST_CASE("output ripple counts a series resistance that is written")
{
    boost_text t;
    const double bare = whole(t.audited(), "output-ripple").high;
    t.parts = with(t.parts, "dielectric = \"polypropylene\"", "dielectric = \"polypropylene\", equivalent-series-resistance = \"0.5 ohm\"");
    CHECK(whole(t.audited(), "output-ripple").high == near(bare + 1.2 * 0.5, 1e-5));
}

TEST_CASE("a flyback that makes a negative rail: the cathode swings")
{
    std::string text = sample("valve-rail-flyback.toml");
    for (const auto& [from, to] :
         {std::pair("outputs   = [[\"HT\", \"0V\"]]", "outputs   = [[\"0V\", \"HT\"]]"),
          std::pair("D1 = { anode = \"SEC\", cathode = \"HT\"", "D1 = { anode = \"HT\", cathode = \"SEC\""),
          std::pair("threshold = \"2.5 V +-1%\"", "threshold = \"-2.5 V +-1%\""),
          std::pair("positive = \"HT\", negative = \"0V\", value = \"22 uF", "positive = \"0V\", negative = \"HT\", value = \"22 uF"),
          std::pair("X1 = { nets = [\"HT\", \"0V\"]", "X1 = { nets = [\"0V\", \"HT\"]")}) {
        text = with(text, from, to);
    }
    const audit_outcome o = run(text);
    CAPTURE(format_complaints(o.complaints));
    REQUIRE(o.result);
    const audit_result positive = *run(sample("valve-rail-flyback.toml")).result;
    for (const char* name : {"inductor.peak", "output-power", "runaway.voltage", "body-power", "overshoot", "clamp.power"}) {
        CAPTURE(name);
        CHECK(whole(*o.result, name).high == near(whole(positive, name).high, 1e-9));
    }
    for (const net_facts& n : o.result->nets) {
        if (n.net == "SEC") {
            CHECK(n.potential.front().second.numbers.front().whole.high == near(126.0));
        }
        if (n.net == "HT") {
            CHECK(n.potential.front().second.numbers.front().whole.low == near(-positive.set_point->output.numbers.front().whole.high));
        }
    }
    CHECK(found(*o.result, "rectifier-voltage", "D1")->judged == found(positive, "rectifier-voltage", "D1")->judged);
    CHECK(found(*o.result, "capacitor-polarity", "C4")->judged == verdict::pass);
}
