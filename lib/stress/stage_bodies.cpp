#include "stress/stage_bodies.hpp"

#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

namespace {

value flyback_reverse(const supply& s, const rail& r, const value& output)
{
    if (r.secondary_net.empty()) {
        return missing_value(value::type::number, {"a secondary that the rectifier hangs on"});
    }
    // The side of the swing that the switch drives: below zero where the anode swings, above where the cathode does.
    const part* d = first_body(s, s.stage->rectifier);
    const bool below = d != nullptr && d->net("anode") == r.secondary_net;
    value driven = r.secondary_swing;
    for (spread& x : driven.numbers) {
        x.in_use = {0.0, below ? -x.in_use.low : x.in_use.high};
        x.whole = {0.0, below ? -x.whole.low : x.whole.high};
    }
    return sum(output, driven);
}

} // namespace

value rectifier_voltage(const supply& s, const rail& r, state in)
{
    value v = in == state::standby ? r.standby : in == state::start_up ? r.start_up : r.output;
    if (r.topology == "flyback") {
        v = flyback_reverse(s, r, v);
    } else if (r.topology != "boost") {
        return missing_value(value::type::number, {"the rectifier voltage of a " + r.topology + " stage"});
    }
    for (spread& x : v.numbers) {
        x = negated(x);
        x.in_use.high = x.whole.high = 0.0;
        x.nominal.reset();
    }
    v.shown.formula = r.topology == "flyback" ? "output + turns Uin, ringing not counted" : "blocks the rail while the switch is on";
    return v;
}

value ladder_port(const rail& r, state in)
{
    value v = r.port;
    const double share = r.topology == "boost-multiplier" ? r.rungs.multiple : 1.0;
    if (in != state::start_up) {
        return v;
    }
    inherit(v, r.overshoot);
    for (spread& x : v.numbers) {
        if (!r.overshoot.numbers.empty() && share > 0.0) {
            x.in_use.high += r.overshoot.numbers.front().in_use.high / share;
            x.whole.high += r.overshoot.numbers.front().whole.high / share;
        }
    }
    return v;
}

value in_units(value port, double units)
{
    for (spread& x : port.numbers) {
        for (range* r : {&x.in_use, &x.whole}) {
            *r = {std::min(0.0, units * r->high), std::max(0.0, units * r->high)};
        }
        x.nominal.reset();
    }
    return port;
}

std::map<std::string, value> ladder_voltages(const supply& s, const rail& r, state in)
{
    std::map<std::string, value> list;
    const ladder& l = r.rungs;
    if (!l.there || in == state::standby) {
        return list;
    }
    if (!l.why.empty()) {
        for (const std::string& ref : s.stage->ladder) {
            list[ref] = missing_value(value::type::number, {ref + " in a ladder that cannot be solved: " + l.why});
        }
        return list;
    }
    const value port = ladder_port(r, in);
    for (const ladder::stressed& c : l.capacitors) {
        list[c.ref] = in_units(port, c.voltage);
        list[c.ref].shown.formula = "its share of the ladder";
    }
    for (const ladder::stressed& d : l.diodes) {
        list[d.ref] = in_units(port, -d.voltage);
        list[d.ref].shown.formula = "blocks its step of the ladder";
    }
    return list;
}

} // namespace onehand
