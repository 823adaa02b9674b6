// How far the rail runs past its set point before lagging feedback stops the stage.
#include "stress/stage_rail.hpp"

#include "physics/surge.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;
using view = stage_model::view;

/// What the pump is made of, each at both ranges.
struct pump {
    value power;  // of full cycles
    value most;   // where they run into each other and a comparator ends each
    value energy; // of the last packet
    value slack, period, farads, filter, lag;
    bool run_together = false;
};

/// Below twice the voltage where full cycles run into each other the coil may still carry the current that start-up built: its energy is the last
/// packet's then, (Uss sqrt(C) + Uin on/sqrt(L))^2/2.
value climbing_energy(const rail& r, const pump& p)
{
    const auto settled = [](const view& v) {
        const interval off = interval(1.0) - v.stage.duty;
        return v.stage.is == physics::shape::boost ? v.stage.in.value() / off
                                                   : v.stage.in.value() * v.stage.turns * v.stage.turns * v.stage.duty / off;
    };
    auto needs = with_cycle(r.model, {given::in, given::inductance, given::turns});
    const value top = r.model.figure("", dim::voltage, needs, settled);
    const bool above = !top.numbers.empty() && !r.port.numbers.empty() && r.port.numbers.front().whole.low > 2.0 * top.numbers.front().whole.high;
    if (above || p.farads.numbers.empty() || !p.farads.numbers.front().whole.bounded()) {
        return p.energy;
    }
    stage_model with = r.model;
    value most = p.farads;
    for (spread& x : most.numbers) {
        x.in_use.low = x.in_use.high;
        x.whole = {std::min(x.whole.high, x.in_use.high), x.whole.high};
    }
    with.set(given::capacitance, most, "capacitance reached from the output");
    needs.push_back(given::capacitance);
    return with.figure("(Uss sqrt(C) + Uin on/sqrt(L))^2/2", dim::energy, needs, [&](const view& v) {
        const interval own = v.stage.in.value() * v.stage.on.value() / physics::root(v.stage.inductance.value());
        const interval volts = settled(v) / v.stage.turns;
        return physics::squared(volts * physics::root(v.of(given::capacitance)) + own) * interval(0.5);
    });
}

pump pump_of(const supply& s, const library& lib, const rail& r)
{
    const stage_model& m = r.model;
    const auto cycle = with_cycle(m, {given::in, given::inductance});
    pump p;
    p.farads = port_capacitance(s, lib, r);
    p.power = m.figure("L i^2/(2 T)", dim::power, cycle, [](const view& v) { return physics::full_power(v.stage).value(); });
    p.energy = m.figure("L i^2/2", dim::energy, cycle, [](const view& v) { return physics::full_energy(v.stage).value(); });
    p.most = m.figure("Uin i", dim::power, cycle, [](const view& v) { return (v.stage.in * physics::full_peak(v.stage)).value(); });
    p.period = m.figure("T", dim::time, m.cycle(), [](const view& v) { return v.stage.period.value(); });
    auto all = cycle;
    all.insert(all.end(), {given::out, given::drop, given::turns});
    p.slack = m.figure("1 - (on + emptying)/T", dim::none, all, [](const view& v) { return physics::slack(v.stage); });
    if (!m.limited()) {
        p.energy = climbing_energy(r, p);
    }
    p.filter = sense_filter(s, lib, r);
    const auto lag = s.stage->feedback.find("lag");
    p.lag = written_value(lag == s.stage->feedback.end() ? std::nullopt : std::optional(lag->second), value::type::number,
                          s.stage->name + ".feedback.lag");
    return p;
}

void note_missing(const supply& s, const rail& r, pump& p, value& overshoot)
{
    for (const value* v : std::initializer_list<const value*>{&p.power, &p.energy, &p.farads, &p.filter, &p.lag, &r.port, &p.slack}) {
        inherit(overshoot, *v);
        overshoot.shown.inputs.insert(overshoot.shown.inputs.end(), v->shown.inputs.begin(), v->shown.inputs.end());
    }
    if (!overshoot.missing.empty()) {
        return;
    }
    for (const value* v : {&p.lag, &p.filter}) {
        if (!std::isfinite(v->numbers.front().whole.high)) {
            overshoot.missing.push_back(s.stage->name + ".feedback.lag: its highest figure");
        }
    }
    p.run_together = !(p.slack.numbers.front().whole.low >= 0.0);
    if (p.run_together && !r.model.limited()) {
        overshoot.missing.push_back(s.stage->name + ".overshoot, measured: full cycles run into each other at the set point");
    }
    if (!(p.farads.numbers.front().whole.low > 0.0)) {
        overshoot.missing.push_back("a capacitor straight across the output");
    }
}

/// Over one of the two ranges; everything at the end that carries it farthest.
double carried_past(const rail& r, const pump& p, bool whole, double set)
{
    const auto of = [&](const value& v) { return whole ? v.numbers.front().whole : v.numbers.front().in_use; };
    const auto given_of = [&](given g) { return whole ? r.model.at(g).at->whole : r.model.at(g).at->in_use; };
    const bool boost = r.model.shape() == physics::shape::boost;
    const double input = boost ? given_of(given::in).high : 0.0;
    physics::pumped_rail pumped;
    pumped.from = pumped.input = volt::from_value(input);
    pumped.set_point = volt::from_value(set);
    pumped.turns = boost ? 1.0 : given_of(given::turns).low;
    pumped.stored = watt::from_value(of(p.run_together ? p.most : p.power).high);
    pumped.packet = joule::from_value(of(p.energy).high);
    pumped.rail = farad::from_value(of(p.farads).low);
    pumped.filter = second::from_value(of(p.filter).high);
    // A cycle begun within the lag is finished; each diode of a ladder hands on once a cycle: the output is late by that many.
    const bool late = of(p.lag).high > 0.0 || of(p.filter).high > 0.0;
    pumped.lag = second::from_value(of(p.lag).high + of(p.period).high * (r.rungs.drops + (late ? 1 : 0)));
    return std::max(0.0, physics::carried_to(pumped).value() - set) * lift_of(r);
}

value overshoot_of(const supply& s, const library& lib, const rail& r)
{
    if (const field* written = s.stage->find("overshoot")) {
        const spread& o = *written->number();
        value v = number({dim::voltage, {0.0, o.in_use.high}, {0.0, o.whole.high}, std::nullopt});
        v.shown = {"as written", {input_of(s.stage->name + ".overshoot", *written)}, false, 0.0};
        return v;
    }
    value v;
    pump p = pump_of(s, lib, r);
    note_missing(s, r, p, v);
    if (v.missing.empty()) {
        // A packet lifts a low rail further than a high one; with a filter it may be the other way round.
        const auto farthest = [&](bool whole) {
            const range port = whole ? r.port.numbers.front().whole : r.port.numbers.front().in_use;
            double most = 0.0;
            for (const double share : {0.0, 0.25, 0.5, 0.75, 1.0}) {
                most = std::max(most, carried_past(r, p, whole, port.low + share * (port.high - port.low)));
            }
            return most;
        };
        const double in_use = farthest(false);
        v.numbers.push_back({dim::voltage, {0.0, in_use}, {0.0, std::max(in_use, farthest(true))}, std::nullopt});
    }
    v.shown.formula = "full cycles until the lagging feedback stops them, and one more packet";
    return v;
}

} // namespace

void find_start_up(const supply& s, const library& lib, rail& r)
{
    r.start_up = r.output;
    r.overshoot = number(exactly({0.0, dim::voltage}));
    if (r.basis == "as declared" && s.stage->find("overshoot") == nullptr) {
        r.overshoot.shown.formula = "the declared output";
        return;
    }
    if (r.feedback_lost || r.output.numbers.empty() || r.basis == "running free") {
        return;
    }
    r.overshoot = overshoot_of(s, lib, r);
    if (r.overshoot.numbers.empty()) {
        inherit(r.start_up, r.overshoot);
        return;
    }
    r.start_up = sum(r.output, r.overshoot);
    r.start_up.shown = r.overshoot.shown;
    r.start_up.shown.formula = "set point + overshoot";
    if (r.topology == "boost" && r.model.at(given::in).at) {
        // The coil rings the empty output to twice the input, and the rectifier keeps it.
        for (spread& x : r.start_up.numbers) {
            x.in_use.high = std::max(x.in_use.high, 2.0 * r.model.at(given::in).at->in_use.high);
            x.whole.high = std::max(x.whole.high, 2.0 * r.model.at(given::in).at->whole.high);
        }
    }
}

} // namespace onehand
