#pragma once
// Random converters, and an independent plain reading of one draw of theirs: charge and energy balances in plain numbers, by bisection where the
// program has a closed form and by stepping where it integrates. None of the program's formulas is used here.
#include "converter_help.hpp"

#include <algorithm>
#include <cmath>
#include <map>
#include <random>

namespace onehand::test {

struct span_of_values {
    double low = 0.0, high = 0.0;

    /// Anywhere inside, often at an end.
    double draw(std::mt19937& r) const
    {
        const unsigned where = r() % 4;
        return where == 0 ? low : where == 1 ? high : std::uniform_real_distribution(low, high)(r);
    }
    std::string text(const char* unit) const { return fmt::format("{:.12g} {} .. {:.12g} {}", low, unit, high, unit); }
};

struct random_converter {
    bool flyback = false, timed = false, limited = false, duty_regulated = false;
    span_of_values in, l, f, d, ra, rb, ct, limit, delay, turns, upper, lower, threshold, drop, load, c, lag, bleeder, coil, on, hot;
    double rated = 0.0;

    std::string text() const;
};

namespace random_parts {

inline span_of_values about(std::mt19937& r, double low, double high, double spread)
{
    const double middle = std::exp(std::uniform_real_distribution(std::log(low), std::log(high))(r));
    const double share = std::uniform_real_distribution(0.0, spread)(r);
    return {middle * (1.0 - share), middle * (1.0 + share)};
}

} // namespace random_parts

inline random_converter draw_converter(std::mt19937& r)
{
    using random_parts::about;
    random_converter k;
    k.flyback = r() % 3 == 0;
    k.timed = r() % 3 == 0;
    k.limited = !k.timed && r() % 3 == 0;
    k.duty_regulated = !k.limited && r() % 2 == 0;
    k.in = about(r, 5.0, 30.0, 0.3);
    k.l = about(r, 20e-6, 500e-6, 0.25);
    k.f = about(r, 20e3, 100e3, 0.15);
    const double duty = std::uniform_real_distribution(0.2, 0.8)(r);
    k.d = {duty * 0.95, duty * 1.05};
    k.ra = about(r, 5e3, 50e3, 0.05);
    k.rb = about(r, 3e3, 20e3, 0.05);
    k.ct = about(r, 0.5e-9, 2e-9, 0.1);
    k.limit = about(r, 0.3, 3.0, 0.1);
    k.delay = {0.0, std::uniform_real_distribution(50e-9, 500e-9)(r)};
    k.turns = k.flyback ? about(r, 2.0, 15.0, 0.0) : span_of_values{1.0, 1.0};
    k.threshold = about(r, 1.2, 2.6, 0.04);
    k.lower = about(r, 1e3, 10e3, 0.05);
    const double ratio = std::uniform_real_distribution(1.5, 20.0)(r) * k.in.high / k.threshold.low;
    k.upper = {k.lower.low * ratio, k.lower.low * ratio * 1.1};
    k.drop = {0.0, std::uniform_real_distribution(0.3, 1.5)(r)};
    k.load = {0.0, std::exp(std::uniform_real_distribution(std::log(1e-4), std::log(5e-2))(r))};
    k.c = about(r, 0.2e-6, 30e-6, 0.2);
    k.lag = {0.0, std::uniform_real_distribution(1e-6, 1e-4)(r)};
    k.bleeder = about(r, 50e3, 2e6, 0.05);
    k.coil = about(r, 0.02, 0.5, 0.1);
    k.on = about(r, 0.02, 0.5, 0.1);
    k.hot = {k.on.low, k.on.high * 2.6};
    k.rated = std::uniform_real_distribution(2.0, 6.0)(r) * (k.threshold.high * (1.0 + k.upper.high / k.lower.low)) / (k.flyback ? k.turns.low : 1.0);
    return k;
}

inline std::string random_converter::text() const
{
    boost_text t;
    t.input = in.text("V");
    t.inductance = l.text("H");
    t.topology = flyback ? "flyback" : "boost";
    t.drive = timed     ? R"(astable = { ra = "RA", rb = "RB", c = "CT" })"
              : limited ? fmt::format(R"(frequency = "{}", peak-current = "{}", delay = "max {:.12g} s")", f.text("Hz"), limit.text("A"), delay.high)
                        : fmt::format(R"(frequency = "{}", duty = "{:.12g} .. {:.12g}")", f.text("Hz"), d.low, d.high);
    t.feedback =
        fmt::format("feedback = {{ net = \"FB\", threshold = \"{}\", lag = \"max {:.12g} s\", mode = \"{}\" }}", threshold.text("V"), lag.high,
                    limited          ? "peak-current"
                    : duty_regulated ? "duty"
                                     : "gated");
    t.coil = flyback
                 ? fmt::format("[transformer]\nT1 = {{ primary = [\"VIN\", \"SW\"], secondary = [\"SEC\", \"0V\"], primary-inductance = \"{}\", "
                               "turns-ratio = \"{:.12g}\", primary-resistance = \"{}\" }}",
                               l.text("H"), turns.low, coil.text("ohm"))
                 : fmt::format("[inductor]\nL1 = {{ nets = [\"VIN\", \"SW\"], value = \"{}\", resistance = \"{}\" }}", l.text("H"), coil.text("ohm"));
    if (flyback) {
        t.stage = "inductor = \"T1\"\nswitch = \"Q1\"\nrectifier = \"D1\"";
    }
    t.rectifier =
        fmt::format("[diode]\nD1 = {{ anode = \"{}\", cathode = \"HT\", forward-voltage = \"max {:.12g} V\" }}", flyback ? "SEC" : "SW", drop.high);
    t.transistor =
        fmt::format("rated-voltage = \"{:.12g} V\", on-resistance = \"{}\", on-resistance-hot = \"{}\"", rated, on.text("ohm"), hot.text("ohm"));
    t.parts = fmt::format("[capacitor]\nC1 = {{ nets = [\"HT\", \"0V\"], value = \"{}\", dielectric = \"polypropylene\" }}\n", c.text("F"));
    if (timed) {
        t.parts += fmt::format("CT = {{ nets = [\"TIM\", \"0V\"], value = \"{}\" }}\n", ct.text("F"));
    }
    t.parts += fmt::format("[resistor]\nR1 = {{ nets = [\"HT\", \"FB\"], value = \"{}\" }}\nR2 = {{ nets = [\"FB\", \"0V\"], value = \"{}\" }}\n"
                           "R9 = {{ nets = [\"HT\", \"0V\"], value = \"{}\" }}\n",
                           upper.text("ohm"), lower.text("ohm"), bleeder.text("ohm"));
    if (timed) {
        t.parts += fmt::format("RA = {{ nets = [\"VIN\", \"DIS\"], value = \"{}\" }}\nRB = {{ nets = [\"DIS\", \"TIM\"], value = \"{}\" }}\n",
                               ra.text("ohm"), rb.text("ohm"));
    }
    t.parts += fmt::format("[load]\nX1 = {{ nets = [\"HT\", \"0V\"], current = \"max {:.12g} A\" }}\n", load.high);
    return t.text();
}

/// Figures of one draw; what does not apply is absent.
using drawn_figures = std::map<std::string, double>;

namespace random_parts {

/// Greatest rail that full cycles hold across a resistance: power in against power out, by bisection.
inline double held_across(bool flyback, double in, double energy, double period, double on, double turns, double ohms)
{
    const auto surplus = [&](double v) {
        // Charge of one packet at this voltage: what the coil hands on while it empties.
        const double reset = flyback ? v / turns : v - in;
        return energy / reset / turns / period - v / ohms;
    };
    double a = flyback ? 1e-6 : in * (1.0 + 1e-12);
    double b = 1e7;
    for (int i = 0; i < 200; ++i) {
        const double m = 0.5 * (a + b);
        (surplus(m) > 0.0 ? a : b) = m;
    }
    const double share = on / period;
    const double continuous = flyback ? turns * in * share / (1.0 - share) : in / (1.0 - share);
    return std::max(a, continuous);
}

} // namespace random_parts

inline drawn_figures read_draw(const random_converter& k, std::mt19937& r)
{
    const double in = k.in.draw(r), l = k.l.draw(r), n = k.turns.draw(r), drop = k.drop.draw(r), amps_out = k.load.draw(r), c = k.c.draw(r);
    const double upper = k.upper.draw(r), lower = k.lower.draw(r), bleeder = k.bleeder.draw(r), coil = k.coil.draw(r), on_ohms = k.on.draw(r);
    double period = 1.0 / k.f.draw(r);
    double on = k.d.draw(r) * period;
    if (k.timed) {
        const double ra = k.ra.draw(r), rb = k.rb.draw(r), ct = k.ct.draw(r);
        on = std::log(2.0) * (ra + rb) * ct;
        period = on + std::log(2.0) * rb * ct;
    }
    double peak = in * on / l;
    if (k.limited) {
        peak = k.limit.draw(r) + in / l * k.delay.draw(r);
        on = peak * l / in;
    }
    drawn_figures out;
    const double set = k.threshold.draw(r) * (1.0 + upper / lower);
    out["set-point"] = set;
    const double load = amps_out + set / bleeder + set / (upper + lower);
    const double reset = k.flyback ? (set + drop) / n : set + drop - in;
    const double empty = l * peak / reset;
    const double energy = 0.5 * l * peak * peak;
    const bool separate = on + empty <= period;
    if (separate) {
        out["inductor.peak"] = peak;
        // As many packets as the load asks, each emptied before the next.
        // Or, where the duty is adjusted, smaller ones at every period.
        const double charge = 0.5 * peak * empty / n;
        const double share = std::min(1.0, load * period / charge);
        const double size = k.duty_regulated ? std::sqrt(share) : 1.0;
        const double rate = (k.duty_regulated ? 1.0 : share) / period;
        out["inductor.average"] = rate * 0.5 * peak * size * (on + empty) * size;
        out["inductor.rms"] = std::sqrt(rate * std::pow(peak * size, 2) / 3.0 * (on + empty) * size);
        out["switch.current"] = std::sqrt(rate * std::pow(peak * size, 2) / 3.0 * on * size);
        const double swing = std::max(peak * size / n - load, 0.0);
        out["output-ripple"] = 0.5 * swing * swing * (n * n * l / (k.flyback ? set + drop : set + drop - in)) / c;
        // Full cycles for the lag, packet by packet: one that crosses the set point, those begun before the lag is over. Each adds its energy to the
        // square of the resetting voltage.
        double squared = std::pow(k.flyback ? set / n : set - in, 2);
        const int packets = 1 + static_cast<int>(std::ceil(k.lag.draw(r) / period));
        squared += packets * 2.0 * energy / (n * n * c);
        out["overshoot"] = (k.flyback ? n * std::sqrt(squared) : std::sqrt(squared) + in) - set;
    } else if (k.duty_regulated) {
        // Off share at which the volt-seconds of the winding balance, the greater of the two that do.
        const auto balance = [&](double off) {
            const double mean = load * n / off;
            const double rising = in - mean * (coil + on_ohms);
            const double falling = k.flyback ? (set + drop) / n : set + drop - in + mean * coil;
            return rising * (1.0 - off) - falling * off;
        };
        double a = 1e-4;
        double b = 1.0;
        bool holds = false;
        for (double off = 1.0; off > 1e-3; off -= 1e-3) {
            if (balance(off) > 0.0) {
                a = off;
                b = off + 1e-3;
                holds = true;
                break;
            }
        }
        for (int i = 0; holds && i < 100; ++i) {
            const double m = 0.5 * (a + b);
            (balance(m) > 0.0 ? a : b) = m;
        }
        const double mean = load * n / a;
        const double swing = (in - mean * (coil + on_ohms)) * (1.0 - a) * period / l;
        if (holds && mean > swing / 2.0) {
            out["inductor.peak"] = mean + swing / 2.0;
            out["inductor.average"] = mean;
        }
    }
    out["output-power"] = set * (amps_out + set / bleeder + set / (upper + lower));
    const double across = random_parts::held_across(k.flyback, in, energy, period, k.limited ? 0.0 : on, n, 2000.0);
    out["body-power"] = std::min(set, across) * std::min(set, across) / 2000.0;
    const double run = random_parts::held_across(k.flyback, in, energy, period, k.limited ? 0.0 : on, n, bleeder);
    const double breaks = k.rated * std::uniform_real_distribution(1.0, 1.3)(r);
    out["runaway.voltage"] = std::min(run, k.flyback ? n * (breaks - in) : breaks);
    if (!k.flyback) {
        out["inrush.current"] = in * std::sqrt(c / l);
    }
    return out;
}

/// Draws of one converter against its report; returns the first excess in words, empty if there is none.
inline std::string excess_of(const random_converter& k, const audit_result& r, int draws, std::mt19937& random)
{
    for (int i = 0; i < draws; ++i) {
        for (const auto& [name, x] : read_draw(k, random)) {
            const value told_of = name == "set-point" ? r.set_point->output : told(r, name);
            if (told_of.numbers.empty()) {
                continue; // not told, and said so
            }
            const double high = told_of.numbers.front().whole.high;
            if (x > high * (1.0 + 1e-7) + 1e-12) {
                return fmt::format("{}: {:.9g} drawn, {:.9g} told", name, x, high);
            }
        }
    }
    return {};
}

} // namespace onehand::test
