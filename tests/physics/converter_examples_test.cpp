// Published worked examples of converters, timers, ladders, ballasts, inrush and junctions: exact value to 1e-6, printed value at its rounding. Each
// row names its source; numbers A-xx are the project's own list.
#include "physics/ballast.hpp"
#include "physics/ladder.hpp"
#include "physics/limits.hpp"
#include "physics/stage.hpp"
#include "physics/surge.hpp"
#include "physics/timer.hpp"

#include "rows.hpp"

#include <doctest/doctest.h>

#include <cmath>

using namespace onehand;
using namespace onehand::physics;
using namespace onehand::test;

namespace {

void check_all(std::initializer_list<row> rows)
{
    for (const row& r : rows) {
        check(r);
    }
}

stage<double> made(shape is, double in, double out, double load, double f, double duty, double l, double turns = 1.0)
{
    stage<double> s;
    s.is = is;
    s.in = volts<double>::from_value(in);
    s.out = volts<double>::from_value(out);
    s.load = amperes<double>::from_value(load);
    s.period = seconds<double>::from_value(1.0 / f);
    s.on = s.period * duty;
    s.duty = duty;
    s.inductance = henries<double>::from_value(l);
    s.turns = turns;
    return s;
}

double duty_of(const stage<double>& s)
{
    return 1.0 - off_share(s);
}

} // namespace

TEST_CASE("boost in continuous mode")
{
    const stage<double> s = made(shape::boost, 5, 15, 0.5, 25e3, 2.0 / 3.0, 150e-6);
    const auto microfarad = [](double x) { return farads<double>::from_value(x * 1e-6); };
    check_all({
        {"A-01 Rashid ex 5.6: duty", duty_of(s), 2.0 / 3.0, 0.6667, 0.0001},
        {"A-01 Rashid ex 5.6: ripple current", regulated_ripple(s).value(), 0.8888889, 0.89, 0.01},
        {"A-01 Rashid ex 5.6: average, which is the input current", regulated_average(s).value(), 1.5, 1.5, 0.1},
        {"A-01 Rashid ex 5.6: peak", regulated_peak(s).value(), 1.9444444, 1.944, 0.001},
        {"A-01 Rashid ex 5.6: ripple voltage", output_ripple(s, regulated_peak(s), microfarad(220)).value(), 60.606061e-3, 60.61e-3, 0.01e-3},
    });
    // K 0.25 against 0.0740741: the book's "critical inductance" uses another relation and is no mode boundary.
    CHECK(continuity(s) == doctest::Approx(0.25 - 2.0 / 27.0).epsilon(1e-9).scale(0));
    // A-03 Imperial College student report: 90.909 uH give 0.22 A of ripple from 10 V to 20 V at 250 kHz; its D = 1 - efficiency Uin/Uout = 0.64 is
    // the duty that a drop of the efficiency's size asks.
    stage<double> lossy = made(shape::boost, 8.0 * 0.9, 20, 0.1, 250e3, 0.5, 100e-6);
    CHECK(duty_of(lossy) == doctest::Approx(0.64).epsilon(1e-9).scale(0));
    stage<double> chosen = made(shape::boost, 10, 20, 10, 250e3, 0.5, 90.909091e-6);
    CHECK(regulated_ripple(chosen).value() == doctest::Approx(0.22).epsilon(1e-6).scale(0));
}

TEST_CASE("boost in discontinuous mode")
{
    const stage<double> s = made(shape::boost, 20, 60, 1.2, 15e3, 0.6, 100e-6);
    const auto ohm50 = ohms<double>::from_value(50);
    check_all({
        {"A-02 Hart ex 6-9, from memory: output into 50 ohm", open_loop(s, ohm50).value(), 60, 60, 1},
        {"A-02 Hart ex 6-9, from memory: peak current", full_peak(s).value(), 8, 8.0, 0.1},
        {"A-02 Hart ex 6-9, from memory: diode conducts", (emptying_time(s) / s.period).value(), 0.3, 0.3, 0.1},
        {"A-02 stored power", full_power(s).value(), 48, 48, 1},
    });
    CHECK((full_current(s) * s.out).value() == doctest::Approx(72.0).epsilon(1e-9).scale(0)); // 48 M/(M - 1)
    CHECK(continuity(s) < 0.0);
    CHECK(regulated_peak(s).value() == doctest::Approx(8.0).epsilon(1e-9).scale(0)); // the same triangle asked from the load's side
    // Derived reference: 100 uH, 2 A, 50 kHz, 12 V to 180 V.
    const stage<double> p = made(shape::boost, 12, 180, 0.0595238, 50e3, 16.6666667e-6 * 50e3, 100e-6);
    CHECK(emptying_time(p).value() == doctest::Approx(1.1904762e-6).epsilon(1e-6).scale(0));
    CHECK((packet(p) / p.period * p.out).value() == doctest::Approx(10.714286).epsilon(1e-6).scale(0));
    CHECK(open_loop(p, ohms<double>::from_value(3024)).value() == doctest::Approx(180.0).epsilon(1e-6).scale(0));
}

TEST_CASE("flyback")
{
    const stage<double> s = made(shape::flyback, 12, 4, 1.25, 25e3, 0.25, 150e-6);
    const auto c = farads<double>::from_value(220e-6);
    check_all({
        {"A-04 Rashid ex 5.7: duty for 4 V", duty_of(s), 0.25, 0.25, 0.01},
        {"A-04 Rashid ex 5.7: ripple voltage", output_ripple(s, regulated_peak(s), c).value(), 56.8181818e-3, 56.8e-3, 0.1e-3},
        {"A-04 Rashid ex 5.7: ripple current", regulated_ripple(s).value(), 0.8, 0.8, 0.1},
        {"A-04 Rashid ex 5.7: input current", regulated_average(s).value() * duty_of(s), 0.4166667, 0.4167, 0.0001},
        {"A-04 Rashid ex 5.7: peak switch current", regulated_peak(s).value(), 2.0666667, 2.067, 0.001},
    });
    // A-05 Rashid ex 13.1: at the edge, with a switch that drops 1.2 V of 100 V + 1.2 V and a diode of 0.7 V; 24 V into 0.8 ohm, 1:0.25.
    stage<double> edge = made(shape::flyback, 100, 24, 30, 1e3, 0.5, 1.6666667e-3, 0.25);
    edge.drop = volts<double>::from_value(0.7);
    check_all({
        {"A-05 Rashid ex 13.1: peak current", full_peak(edge).value(), 30, 30, 1},
        {"A-05 Rashid ex 13.1: reflected voltage", reset_voltage(edge).value(), 98.8, 98.8, 0.1},
        {"A-05 Rashid ex 13.1: open-circuit switch voltage", (edge.in + reset_voltage(edge)).value(), 198.8, 198.8, 0.1},
        {"A-05 Rashid ex 13.1: effective switch current", effective_full(edge).power_switch.value(), 12.2474487, 12.25, 0.01},
        {"A-05 Rashid ex 13.1: input power", full_power(edge).value(), 750, 750, 1},
    });
    // Derived: 2 uH leakage, 2 A, 50 kHz, 100 V reflected, 150 V clamp: 0.6 W, 37.5 kohm.
    const stage<double> leaky = made(shape::flyback, 10, 100, 0, 50e3, 0.5, 100e-6); // 1 A
    const auto power = leakage_power(leaky, henries<double>::from_value(8e-6));
    const auto v100 = volts<double>::from_value(100);
    CHECK(power.value() == doctest::Approx(0.2).epsilon(1e-9).scale(0));
    CHECK(clamp_voltage(v100, power, ohms<double>::from_value(37.5e3)).value() == doctest::Approx(150.0).epsilon(1e-9).scale(0));
    CHECK(clamp_power(v100, power, volts<double>::from_value(150)).value() == doctest::Approx(0.6).epsilon(1e-9).scale(0));
}

TEST_CASE("ladders")
{
    const std::vector<farad> eight(16, farad::from_value(0.05e-6));
    const ladder_load a = loaded(eight, ladder_form::stacked, ampere::from_value(5e-3), hertz::from_value(150));
    const ladder_load b =
        loaded({farad::from_value(0.01e-6), farad::from_value(0.05e-6)}, ladder_form::stacked, ampere::from_value(5e-3), hertz::from_value(50));
    const std::vector<farad> twelve(24, farad::from_value(0.15e-6));
    const ladder_load c = loaded(twelve, ladder_form::stacked, ampere::from_value(5e-3), hertz::from_value(50));
    check_all({
        {"A-06 Naidu and Kamaraju ex 6.1: regulation of 2 n Up", a.drop.value() / (16.0 * 125e3), 0.124, 0.124, 0.001},
        {"A-06 Naidu and Kamaraju ex 6.1: best stages",
         best_stages(volt::from_value(125e3), hertz::from_value(150), farad::from_value(0.05e-6), ampere::from_value(5e-3)), 13.6930639, 14, 1},
        {"A-07 Khalifa ex 16.1: ripple", b.ripple.value(), 2000, 2000, 1},
        {"A-07 Khalifa ex 16.1: drop of the mean", b.drop.value() + b.ripple.value() / 2.0, 11000, 11000, 1},
        {"A-07 Khalifa ex 16.1: mean output", 2.0 * std::sqrt(2.0) * 100e3 - b.drop.value() - b.ripple.value() / 2.0, 271842.712, 271800, 100},
        {"A-08 Khalifa ex 16.3: ripple", c.ripple.value(), 52000, 52000, 1},
        {"A-08 Khalifa ex 16.3: best stages",
         best_stages(volt::from_value(200e3 * std::sqrt(2.0)), hertz::from_value(50), farad::from_value(0.15e-6), ampere::from_value(5e-3)),
         20.5976712, 21, 1},
    });
    // Derived, not published: the book's companion counts capacitors as stages, and truncates.
    CHECK(a.ripple.value() == doctest::Approx(24000).epsilon(1e-9).scale(0));
    CHECK(c.drop.value() + c.ripple.value() / 2.0 == doctest::Approx(840666.667).epsilon(1e-6).scale(0));
    // A ladder whose capacitors all hang on the base: each passes one charge.
    const std::vector<farad> four(4, farad::from_value(1e-6));
    CHECK(loaded(four, ladder_form::from_base, ampere::from_value(1e-3), hertz::from_value(1e3)).drop.value() ==
          doctest::Approx(3.0).epsilon(1e-9).scale(0));
    CHECK(ladder_energy(4, farad::from_value(1e-6), volt::from_value(100)).value() == doctest::Approx(0.5e-6 * 1e4 * 29).epsilon(1e-9).scale(0));
}

TEST_CASE("astable timer")
{
    const auto ohm = [](double x) { return ohms<double>::from_value(x); };
    const auto nano = [](double x) { return farads<double>::from_value(x * 1e-9); };
    const auto a = astable<double>(ohm(7.5e3), ohm(7.5e3), nano(100), 2.0 / 3.0);
    check_all({{"A-24 Boylestad ex 13.1: high", a.high.value(), 1.03972077e-3, 1.04e-3, 0.01e-3},
               {"A-24 Boylestad ex 13.1: frequency with ln 2", 1.0 / (a.high + a.low).value(), 641.1982, 641, 1}});
    // The book takes 0.7 for ln 2 and prints 1.05 ms, 0.525 ms and 635 Hz.
    CHECK(a.high.value() == doctest::Approx(1.05e-3).epsilon(0.0101).scale(0));
    CHECK(a.low.value() == doctest::Approx(0.525e-3).epsilon(0.0101).scale(0));
    CHECK(1.0 / (a.high + a.low).value() == doctest::Approx(635.0).epsilon(0.0101).scale(0));
    // A-25 Franco ex 10.4: 5 V, 14.4 kohm, 7.2 kohm, 1 nF, the control pin a volt either side of two thirds.
    const double control[] = {7.0 / 3.0, 10.0 / 3.0, 13.0 / 3.0};
    const double duty[] = {0.61100, 0.75, 0.86230};
    const double kilohertz[] = {77.946, 50.094, 27.591};
    const double printed_duty[] = {0.611, 0.75, 0.862};
    const double printed[] = {78.5, 50, 27.8}; // the book rounds the thresholds
    for (int i = 0; i < 3; ++i) {
        const auto t = astable<double>(ohm(14.4e3), ohm(7.2e3), nano(1), control[i] / 5.0);
        const double period = (t.high + t.low).value();
        CHECK(t.high.value() / period == doctest::Approx(duty[i]).epsilon(1e-4).scale(0));
        CHECK(t.high.value() / period == doctest::Approx(printed_duty[i]).epsilon(1e-3).scale(0));
        CHECK(1e-3 / period == doctest::Approx(kilohertz[i]).epsilon(1e-4).scale(0));
        CHECK(1e-3 / period == doctest::Approx(printed[i]).epsilon(0.01).scale(0));
    }
    CHECK(std::isinf(astable<double>(ohm(1e3), ohm(1e3), nano(1), 1.0).high.value())); // the switch is held on
}

TEST_CASE("shunt ballasts")
{
    const auto V = [](double x) { return volt::from_value(x); };
    const auto R = [](double x) { return ohm::from_value(x); };
    const shunt_state a = shunt_regulator(V(45), R(1000), V(12.6), R(1e12));
    const shunt_state b = shunt_regulator(V(45), R(1000), V(12.6), R(500));
    const shunt_state c = shunt_regulator(V(45), R(100e3), V(12.6), R(500));
    const shunt_state d = shunt_regulator(V(16), R(1000), V(10), R(1200));
    const shunt_state e = shunt_regulator(V(16), R(1000), V(10), R(3000));
    check_all({
        {"A-30 NEETS module 6: series resistance of a 90 V tube at its mean current and 100 mA",
         ballast_resistance(V(150), V(90), ampere::from_value(22.5e-3), ampere::from_value(0.1)).value(), 489.795918, 490, 1},
        {"A-31 Lessons in electric circuits: zener alone", a.shunt.value(), 32.4e-3, 32.4e-3, 0.1e-3},
        {"A-31: power in the resistor", a.in_series.value(), 1.04976, 1.05, 0.01},
        {"A-31: power in the zener", a.in_shunt.value(), 0.40824, 0.408, 0.001},
        {"A-31: load current", b.load.value(), 25.2e-3, 25.2e-3, 0.1e-3},
        {"A-31: zener current beside it", b.shunt.value(), 7.2e-3, 7.2e-3, 0.1e-3},
        {"A-31: 100 kohm no longer regulates", c.across.value(), 0.22388060, 0.224, 0.001},
        {"A-31: its load current", c.load.value(), 447.7612e-6, 447.76e-6, 0.01e-6},
        {"A-31: least load with 100 kohm", least_load(V(45), R(100e3), V(12.6)).value(), 38888.889, 38889, 1},
        {"A-32 Boylestad ex 2.26: off", d.across.value(), 8.7272727, 8.73, 0.01},
        {"A-32: on", e.shunt.value(), 2.6666667e-3, 2.67e-3, 0.01e-3},
        {"A-32: its power", e.in_shunt.value(), 26.6666667e-3, 26.67e-3, 0.01e-3},
    });
    CHECK_FALSE(d.regulating);
    CHECK(d.shunt.value() == 0.0);
    const shunt_state f = shunt_regulator(V(150), R(60.0 / 0.1225), V(90), R(900));
    CHECK(f.in_series.value() == doctest::Approx(7.35).epsilon(1e-6).scale(0)); // power in that resistor
    CHECK(f.shunt.value() == doctest::Approx(22.5e-3).epsilon(1e-6).scale(0));  // printed 22.5 mA, load 100 mA
}

TEST_CASE("inrush, fuse, junction, avalanche")
{
    const auto L = [](double x) { return henry::from_value(x); };
    const auto C = [](double x) { return farad::from_value(x); };
    const auto V = [](double x) { return volt::from_value(x); };
    check_all({
        {"A-38 Gupta and Singhal ex 2.35: 150 uH", coil_inrush(V(100), C(24e-6), L(150e-6)).value(), 40, 40, 1},
        {"A-38 Gupta and Singhal ex 2.35: 200 uH", coil_inrush(V(100), C(24e-6), L(200e-6)).value(), 34.6410162, 34.6, 0.1},
        {"A-37 University Physics 14.5: 12 uC on 8 uF into 20 mH", coil_inrush(V(12e-6 / 8e-6), C(8e-6), L(20e-3)).value(), 30e-3, 30e-3, 1e-3},
        {"A-39 fuse maker: needed integral", needed_melting(melting_integral::from_value(60), 0.35).value(), 171.428571, 171.4, 0.1},
    });
    // A-36 prints 182.6 degC from a rounded 2.3 W.
    CHECK(heated(kelvin::from_value(313.15), watt::from_value(2.26983), kelvin_per_watt::from_value(62)).value() - 273.15 ==
          doctest::Approx(180.729).epsilon(1e-4).scale(0));
    // A-35 Boylestad ex 12.18: 61.5 W over 1.5 + 0.5 + 0.6 K/W from 40 degC ends at 200 degC.
    CHECK(heated(kelvin::from_value(313.15), watt::from_value(61.5384615), kelvin_per_watt::from_value(1.5 + 0.5 + 0.6)).value() ==
          doctest::Approx(473.15).epsilon(1e-9).scale(0));
    // A-40 100 V MOSFET data sheet: 4.8 mH, 5.6 A, 25 V; rated 100 mJ (that line from memory).
    const auto held = joules<double>::from_value(0.5 * 4.8e-3 * 5.6 * 5.6);
    const auto e = avalanche_energy(held, volts<double>::from_value(100), volts<double>::from_value(25));
    CHECK(e.value() == doctest::Approx(0.100352).epsilon(1e-6).scale(0));
    CHECK(std::round(e.value() * 1e3) == 100.0);
    // Through a resistance and together.
    CHECK(resistive_inrush_integral(V(12), C(220e-6), ohm::from_value(0.5)).value() == doctest::Approx(144.0 * 220e-6).epsilon(1e-9).scale(0));
    CHECK(together(melting_integral::from_value(1), melting_integral::from_value(4)).value() == doctest::Approx(9.0).epsilon(1e-9).scale(0));
}
