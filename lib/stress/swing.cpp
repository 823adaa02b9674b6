// What swings: the switch node at its peak, the clamp, the secondary.
#include "stress/stage_rail.hpp"

#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;
using view = stage_model::view;

constexpr double unsaid_spike = 0.30; // of the rail: common practice, no source

value port_at_start_up(const rail& r)
{
    if (r.topology != "boost-multiplier" || r.start_up.numbers.empty()) {
        return r.start_up;
    }
    value v = sum(r.port, scaled_by(r.overshoot, 1.0 / r.rungs.multiple));
    return v;
}

void find_boost_peak(const supply& s, rail& r, const value& port)
{
    const converter& c = *s.stage;
    const field* spike = c.find("spike");
    const value ringing = spike != nullptr ? number(*spike->number()) : product(port, number(exactly({unsaid_spike, dim::none})));
    r.peak = sum(port, ringing);
    for (spread& v : r.peak.numbers) {
        v.dim = dim::voltage;
    }
    r.peak.shown.inputs = r.output.shown.inputs;
    if (spike != nullptr) {
        r.peak.shown.formula = "rail + spike";
        r.peak.shown.inputs.push_back(input_of(c.name + ".spike", *spike));
    } else {
        r.peak.shown.formula = "rail + 30 % of it";
        r.peak.assumed.push_back("a spike of 30 % of the rail on " + (r.switch_net.empty() ? std::string("the switch") : r.switch_net) + " (" +
                                 c.name + ".spike unsaid; practice)");
    }
}

/// The end of the secondary that the rectifier hangs on, and how it swings.
void find_secondary(const supply& s, rail& r)
{
    const part* coil = s.find_part(s.stage->inductor);
    const part* rectifier = first_body(s, s.stage->rectifier);
    if (coil == nullptr || coil->kind != "transformer" || rectifier == nullptr) {
        return;
    }
    const std::string& one = coil->net("secondary-1");
    const std::string& two = coil->net("secondary-2");
    const std::string& anode = rectifier->net("anode");
    const std::string& cathode = rectifier->net("cathode");
    const bool by_anode = anode == one || anode == two;
    const std::string& swinging = by_anode ? anode : cathode;
    if (swinging != one && swinging != two) {
        return;
    }
    r.secondary_net = swinging;
    r.secondary_return = swinging == one ? two : one;
    const value top = r.start_up;
    const value driven =
        r.model.figure("turns Uin", dim::voltage, {given::in, given::turns}, [](const view& v) { return (v.stage.in * v.stage.turns).value(); });
    inherit(r.secondary_swing, top);
    inherit(r.secondary_swing, driven);
    if (top.numbers.empty() || driven.numbers.empty()) {
        return;
    }
    const auto swing = [&](const range& u, const range& d) {
        const double conducting = u.high + 1.5; // with the rectifier's drop
        return by_anode ? range{-d.high, conducting} : range{-conducting, d.high};
    };
    r.secondary_swing.numbers.push_back({dim::voltage, swing(top.numbers.front().in_use, driven.numbers.front().in_use),
                                         swing(top.numbers.front().whole, driven.numbers.front().whole), std::nullopt});
}

/// Vc^2/R, which falls in R although Vc rises: everything at the end that heats it most.
value resistor_power(const supply& s, const value& leaking, const rail& r)
{
    const part* resistor = s.find_part(s.stage->clamp->resistor);
    const field* f = resistor == nullptr ? nullptr : resistor->find("value");
    value v;
    inherit(v, r.clamp_voltage);
    if (f == nullptr || f->number() == nullptr || leaking.numbers.empty() || r.reflected.numbers.empty()) {
        return v;
    }
    const auto most = [&](const range& vr, const range& p, const range& ohms) {
        const double volts = physics::clamp_voltage(physics::volts<double>::from_value(vr.high), physics::watts<double>::from_value(p.high),
                                                    physics::ohms<double>::from_value(ohms.low))
                                 .value();
        return range{0.0, volts * volts / ohms.low};
    };
    const spread& vr = r.reflected.numbers.front();
    const spread& p = leaking.numbers.front();
    const spread& ohms = *f->number();
    v.numbers.push_back({dim::power, most(vr.in_use, p.in_use, ohms.in_use), most(vr.whole, p.whole, ohms.whole), std::nullopt});
    v.shown = r.clamp_voltage.shown;
    v.shown.formula = "Vc^2/R";
    return v;
}

/// Vc/(Vc - VR) times the leakage's power; each voltage at its worst end.
value suppressor_power(const value& leaking, const rail& r)
{
    value v = leaking;
    inherit(v, r.clamp_voltage);
    for (const bool whole : {false, true}) {
        if (v.numbers.empty() || r.clamp_voltage.numbers.empty() || r.reflected.numbers.empty()) {
            v.numbers.clear();
            break;
        }
        const range vc = whole ? r.clamp_voltage.numbers.front().whole : r.clamp_voltage.numbers.front().in_use;
        const range vr = whole ? r.reflected.numbers.front().whole : r.reflected.numbers.front().in_use;
        range& to = whole ? v.numbers.front().whole : v.numbers.front().in_use;
        // Below the reflected voltage the clamp takes what the output should: no bound.
        to = {0.0, vc.low > vr.high ? to.high / (1.0 - vr.high / vc.low) : unbounded};
    }
    v.shown.formula = "Llk i^2/(2 T) Vc/(Vc - VR)";
    return v;
}

void find_clamp(const supply& s, rail& r)
{
    const converter& c = *s.stage;
    const auto cycle = with_cycle(r.model, {given::in, given::inductance, given::leakage});
    const value leaking = r.model.figure("Llk i^2/(2 T)", dim::power, cycle, [](const view& v) {
        return physics::leakage_power(v.stage, physics::henries<interval>::from_value(v.of(given::leakage))).value();
    });
    if (!c.clamp->suppressor.empty()) {
        const part* z = s.find_part(c.clamp->suppressor);
        const std::string name = z != nullptr && z->kind == "zener" ? "zener-voltage" : "clamp-voltage";
        const field* f = z == nullptr ? nullptr : z->find(name);
        r.clamp_voltage = written_value(f == nullptr ? std::nullopt : std::optional(*f), value::type::number, c.clamp->suppressor + "." + name);
    } else {
        const part* resistor = s.find_part(c.clamp->resistor);
        const field* f = resistor == nullptr ? nullptr : resistor->find("value");
        value v;
        inherit(v, leaking);
        inherit(v, r.reflected);
        v.shown = leaking.shown;
        if (f == nullptr || f->number() == nullptr) {
            v.missing.push_back(c.clamp->resistor + ".value");
        } else if (!leaking.numbers.empty() && !r.reflected.numbers.empty()) {
            v.shown.inputs.push_back(input_of(c.clamp->resistor + ".value", *f));
            const auto at = [&](const range& vr, const range& p, const range& ohms) {
                const auto one = [](double volts, double watts, double r_ohms) {
                    return physics::clamp_voltage(physics::volts<double>::from_value(volts), physics::watts<double>::from_value(watts),
                                                  physics::ohms<double>::from_value(r_ohms))
                        .value();
                };
                return range{one(vr.low, p.low, ohms.low), one(vr.high, p.high, ohms.high)};
            };
            const spread& vr = r.reflected.numbers.front();
            const spread& p = leaking.numbers.front();
            v.numbers.push_back(
                {dim::voltage, at(vr.in_use, p.in_use, f->number()->in_use), at(vr.whole, p.whole, f->number()->whole), std::nullopt});
        }
        v.shown.formula = "Vc (Vc - VR) = R Llk i^2/(2 T)";
        r.clamp_voltage = v;
    }
    r.clamp_power = c.clamp->suppressor.empty() ? resistor_power(s, leaking, r) : suppressor_power(leaking, r);
}

void find_flyback_peak(const supply& s, const value& port, rail& r)
{
    const converter& c = *s.stage;
    stage_model lifted = r.model;
    lifted.set(given::out, port, c.name + " output at start-up");
    r.reflected = lifted.figure("(Uout + drop)/turns", dim::voltage, {given::out, given::drop, given::turns},
                                [](const view& v) { return ((v.stage.out + v.stage.drop) / v.stage.turns).value(); });
    const value in = written_value(s.fed.voltage, value::type::number, "input.voltage");
    if (c.clamp) {
        find_clamp(s, r);
    }
    if (const field* spike = c.find("spike")) {
        r.peak = sum(sum(in, r.reflected), number(*spike->number()));
        r.peak.shown.formula = "Uin + reflected + spike";
        r.peak.shown.inputs = r.reflected.shown.inputs;
        r.peak.shown.inputs.push_back(input_of(c.name + ".spike", *spike));
        return;
    }
    if (c.clamp) {
        const value held = greater(r.clamp_voltage, r.reflected);
        r.peak = sum(in, held);
        r.peak.shown = r.clamp_voltage.shown;
        r.peak.shown.formula = "Uin + clamp voltage";
        // Until the clamp's diode conducts the node overshoots it: that is not in the formula.
        r.peak.assumed.push_back("a clamp that takes hold at once on " + r.switch_net + " (" + c.name + ".spike unsaid; practice)");
        return;
    }
    const part* q = first_body(s, c.power_switch);
    const field* co = q == nullptr ? nullptr : q->find("output-capacitance");
    const auto cycle = with_cycle(r.model, {given::in, given::inductance, given::leakage});
    value spike;
    if (co == nullptr || co->number() == nullptr || !(co->number()->whole.low > 0.0)) {
        spike = missing_value(value::type::number, {c.name + ".spike or .clamp, or " + c.power_switch + ".output-capacitance"});
    } else {
        const range farads = co->number()->whole;
        spike = r.model.figure("i sqrt(Llk/C)", dim::voltage, cycle, [farads](const view& v) {
            return physics::leakage_spike(physics::full_peak(v.stage), physics::henries<interval>::from_value(v.of(given::leakage)),
                                          physics::farads<interval>::from_value(interval(farads.low, farads.high)))
                .value();
        });
    }
    r.peak = sum(sum(in, r.reflected), spike);
    r.peak.shown = spike.shown;
    r.peak.shown.formula = "Uin + reflected + i sqrt(Llk/C)";
}

} // namespace

void find_peak(const supply& s, rail& r)
{
    if (!r.model.there()) {
        r.peak = missing_value(value::type::number, {"the switch voltage of a " + r.topology + " stage"});
        return;
    }
    const value port = port_at_start_up(r);
    if (r.topology == "flyback") {
        find_flyback_peak(s, port, r);
        find_secondary(s, r);
    } else {
        find_boost_peak(s, r, port);
    }
    if (s.stage->clamp && !s.stage->clamp->resistor.empty()) {
        // The clamp's capacitor stands on the input: the net that diode and resistor share.
        const part* d = s.find_part(s.stage->clamp->diode);
        const part* resistor = s.find_part(s.stage->clamp->resistor);
        if (d != nullptr && resistor != nullptr && resistor->terminals.size() == 2) {
            const std::string& cathode = d->net("cathode");
            const bool first = resistor->terminals[0].net == cathode;
            r.clamp_net = cathode;
            r.clamp_return = resistor->terminals[first ? 1 : 0].net;
        }
    }
}

} // namespace onehand
