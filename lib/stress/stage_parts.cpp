// Facts of the parts in and around the stage: coil, switch, rectifier, driver, capacitors at the output and at the input, fuse.
#include "stress/paths.hpp"
#include "stress/rail_load.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_facts.hpp"
#include "stress/stage_rail.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;
using view = stage_model::view;

bool is(const part& p, const std::string& ref)
{
    return !ref.empty() && (p.ref == ref || p.ref.starts_with(ref + "/"));
}

value not_of_stage(const part& p, const std::string& name)
{
    return missing_value(value::type::number, {p.ref + "." + name + ": it is no part of the stage"});
}

value of_module(const part& p, const std::string& name)
{
    return missing_value(value::type::number, {p.ref + "." + name});
}

/// Junction: the air inside and what the part dissipates through its thermal resistance.
value junction(const solved_supply& s, const part& p, const value& watts)
{
    const value air = inside_temperature(s.bodies().used);
    const value rth = field_value(p, *s.data().find_kind(p.kind), s.data(), "thermal-resistance");
    value v;
    for (const value* x : std::initializer_list<const value*>{&air, &rth, &watts}) {
        inherit(v, *x);
    }
    if (air.numbers.empty() || rth.numbers.empty() || watts.numbers.empty()) {
        return v;
    }
    const auto hot = [](const range& a, const range& r, const range& w) { return range{a.low + r.low * w.low, a.high + r.high * w.high}; };
    const spread& a = air.numbers.front();
    const spread& r = rth.numbers.front();
    const spread& w = watts.numbers.front();
    v.numbers.push_back({dim::temperature, hot(a.in_use, r.in_use, w.in_use), hot(a.whole, r.whole, w.whole), std::nullopt});
    v.shown.formula = "air inside + P Rth";
    v.shown.inputs = watts.shown.inputs;
    v.shown.inputs.insert(v.shown.inputs.end(), rth.shown.inputs.begin(), rth.shown.inputs.end());
    return v;
}

/// I^2 R hot and the switch's own capacitance emptied into it each cycle.
value switch_heat(const solved_supply& s, const part& p)
{
    const value amps = converter_figure(s, "switch-effective");
    const stage_model::parameter& hot = s.stage().at(given::hot_resistance);
    value v;
    inherit(v, amps);
    v.missing.insert(v.missing.end(), hot.missing.begin(), hot.missing.end());
    if (amps.numbers.empty() || !hot.at || !hot.at->whole.bounded()) {
        return v;
    }
    const spread& i = amps.numbers.front();
    v.numbers.push_back({dim::power,
                         {0.0, i.in_use.high * i.in_use.high * hot.at->in_use.high},
                         {0.0, i.whole.high * i.whole.high * hot.at->whole.high},
                         std::nullopt});
    const field* co = p.find("output-capacitance");
    const value hertz = converter_figure(s, "frequency");
    if (co != nullptr && co->number() != nullptr && !hertz.numbers.empty() && !s.output().peak.numbers.empty()) {
        const double u = s.output().peak.numbers.front().whole.high;
        const double more = 0.5 * co->number()->whole.high * u * u * hertz.numbers.front().whole.high;
        v.numbers.front().in_use.high += more;
        v.numbers.front().whole.high += more;
    } else {
        v.missing.push_back(p.ref + ".output-capacitance");
    }
    v.shown.formula = "I^2 Ron hot + C U^2 f/2";
    v.shown.inputs = amps.shown.inputs;
    return v;
}

value rectifier_heat(const solved_supply& s)
{
    const stage_model::parameter& drop = s.stage().at(given::drop);
    value v = rectifier_average(s);
    for (spread& x : v.numbers) {
        x = {dim::power, {0.0, x.in_use.high * drop.at->in_use.high}, {0.0, x.whole.high * drop.at->whole.high}, std::nullopt};
    }
    v.shown.formula = "forward drop times average current; recovery losses not counted";
    return v;
}

value avalanche_pulse(const solved_supply& s, const part& p)
{
    const field* rated = p.find("rated-voltage");
    if (rated == nullptr || rated->number() == nullptr || !rated->number()->whole.bounded()) {
        return missing_value(value::type::number, {p.ref + ".rated-voltage"});
    }
    const range u = rated->number()->whole;
    std::vector<given> needs = s.stage().cycle();
    needs.insert(needs.end(), {given::in, given::inductance});
    return s.stage().figure("L i^2/2 U/(U - Uin), U its rated voltage", dim::energy, needs, [u](const view& v) {
        return physics::avalanche_energy(physics::full_energy(v.stage), physics::volts<interval>::from_value(interval(u.low, u.high)), v.stage.in)
            .value();
    });
}

/// Driver: from nothing to what feeds it, unless its own levels are written.
value gate_peak(const solved_supply& s)
{
    const auto& drive = s.bodies().stage->drive;
    const auto it = drive.find("high");
    if (it != drive.end() && it->second.number() != nullptr && it->second.number()->whole.bounded()) {
        return written_value(it->second, value::type::number, "");
    }
    value v = written_value(s.bodies().fed.voltage, value::type::number, "input.voltage");
    v.shown.formula = "the driver is fed from the input";
    return v;
}

value gate_level(const solved_supply& s, const char* key)
{
    const auto& drive = s.bodies().stage->drive;
    const auto it = drive.find(key);
    return written_value(it == drive.end() ? std::nullopt : std::optional(it->second), value::type::number, s.bodies().stage->name + ".drive." + key);
}

std::optional<value> of_switch(const solved_supply& s, const part& p, const std::string& name)
{
    const bool known = name == "effective-current" || name == "heat" || name == "junction" || name == "avalanche-pulse" || name == "gate-peak" ||
                       name == "gate-high" || name == "gate-low" || name == "switches-stage";
    if (!known) {
        return std::nullopt;
    }
    const bool stage = is(p, s.bodies().stage ? s.bodies().stage->power_switch : "");
    if (name == "switches-stage") {
        return truth_of(stage);
    }
    if (!stage) {
        return not_of_stage(p, name);
    }
    if (name == "effective-current") {
        return converter_figure(s, "switch-effective");
    }
    if (name == "heat") {
        return switch_heat(s, p);
    }
    if (name == "junction") {
        return junction(s, p, switch_heat(s, p));
    }
    if (name == "avalanche-pulse") {
        return avalanche_pulse(s, p);
    }
    return name == "gate-peak" ? gate_peak(s) : gate_level(s, name == "gate-high" ? "high" : "low");
}

bool rectifies(const solved_supply& s, const part& p)
{
    if (!s.bodies().stage) {
        return false;
    }
    const auto& c = *s.bodies().stage;
    return is(p, c.rectifier) || std::any_of(c.ladder.begin(), c.ladder.end(), [&](const std::string& ref) { return is(p, ref); });
}

/// Recovery time over the period: what share of the cycle the rectifier conducts backwards.
value recovery_share(const solved_supply& s, const part& p)
{
    const field* trr = p.find("recovery-time");
    const value hertz = converter_figure(s, "frequency");
    value v;
    inherit(v, hertz);
    if (trr == nullptr || trr->number() == nullptr) {
        v.missing.push_back(p.ref + ".recovery-time");
        return v;
    }
    for (const spread& f : hertz.numbers) {
        const spread& t = *trr->number();
        const auto at = [](const range& a, const range& b) { return range{std::max(0.0, a.low) * b.low, a.high * b.high}; };
        v.numbers.push_back({dim::none, at(t.in_use, f.in_use), at(t.whole, f.whole), std::nullopt});
    }
    v.shown.formula = "recovery time times frequency";
    v.shown.inputs = hertz.shown.inputs;
    v.shown.inputs.push_back(input_of(p.ref + ".recovery-time", *trr));
    return v;
}

std::optional<value> of_rectifier(const solved_supply& s, const part& p, const std::string& name)
{
    if (name == "rectifies") {
        return truth_of(rectifies(s, p));
    }
    const bool known = name == "recovery-share" || name == "average-current" || name == "inrush" || name == "junction";
    if (!known) {
        return std::nullopt;
    }
    if (!rectifies(s, p)) {
        return not_of_stage(p, name);
    }
    if (name == "recovery-share") {
        return recovery_share(s, p);
    }
    if (name == "average-current") {
        return rectifier_average(s);
    }
    return name == "inrush" ? converter_figure(s, "inrush-current") : junction(s, p, rectifier_heat(s));
}

bool on_input(const solved_supply& s, const part& p)
{
    const std::set<std::string> side = input_side(s);
    return p.terminals.size() >= 2 && side.contains(p.terminals[0].net) && !s.bodies().fed.nets.empty() &&
           p.terminals[1].net == s.bodies().fed.nets[1];
}

bool turned_on_input(const solved_supply& s, const part& p)
{
    const std::set<std::string> side = input_side(s);
    return p.terminals.size() >= 2 && side.contains(p.terminals[1].net) && !s.bodies().fed.nets.empty() &&
           p.terminals[0].net == s.bodies().fed.nets[1];
}

value input_volts(const solved_supply& s)
{
    return written_value(s.bodies().fed.voltage, value::type::number, "input.voltage");
}

value adapter_volts(const solved_supply& s)
{
    const auto& fields = s.bodies().fed.fields;
    const auto it = fields.find("highest-adapter");
    return written_value(it == fields.end() ? std::nullopt : std::optional(it->second), value::type::number, "input.highest-adapter");
}

/// Ripple that the capacitors at the output share: rectifier current less its mean; each is judged on all of it.
value output_ripple_current(const solved_supply& s)
{
    const value all = converter_figure(s, "rectifier-effective");
    value v = all;
    for (spread& x : v.numbers) {
        x.in_use.low = x.whole.low = 0.0; // at no load there is none
        x.nominal.reset();
    }
    v.shown.formula = "at most the rectifier's effective current, all of it through one part";
    return v;
}

bool across_output(const solved_supply& s, const part& p)
{
    const std::set<std::string> live = live_nets(s.bodies(), s.data(), s.output());
    const std::set<std::string> quiet = quiet_nets(s.bodies(), s.data(), s.output());
    return p.terminals.size() == 2 && ((live.contains(p.terminals[0].net) && quiet.contains(p.terminals[1].net)) ||
                                       (live.contains(p.terminals[1].net) && quiet.contains(p.terminals[0].net)));
}

/// As written; an aluminium electrolytic without it as its standard allows by rated voltage; anything else its rated voltage.
value surge_voltage(const solved_supply& s, const part& p)
{
    const kind_spec& kind = *s.data().find_kind("capacitor");
    if (p.find("surge-voltage") != nullptr) {
        return field_value(p, kind, s.data(), "surge-voltage");
    }
    value rated = s.look_up({p.kind, p.ref, {}, p.at}, state::running, "rated-voltage");
    const value d = field_value(p, kind, s.data(), "dielectric");
    const table* t = s.data().find_table("electrolytic-surge");
    if (d.choice != "aluminium electrolytic" || t == nullptr || rated.numbers.empty() || !rated.missing.empty()) {
        return rated;
    }
    const table_answer over = look_up(*t, "surge", rated.numbers.front());
    if (over.figure) {
        rated = product(rated, number(*over.figure));
        rated.numbers.front().dim = dim::voltage;
        rated.shown.formula = "rated voltage times the share its standard allows briefly";
        rated.shown.inputs.push_back({t->title, over.rows, t->at});
    }
    return rated;
}

std::optional<value> of_capacitor(const solved_supply& s, const part& p, const std::string& name)
{
    if (name == "on-input") {
        return truth_of(on_input(s, p) || turned_on_input(s, p));
    }
    if (name == "own-stage") {
        return truth_of(s.stage().there());
    }
    if (name == "start-up-differs") {
        return truth_of(s.stage().there() || (s.bodies().stage && s.bodies().stage->find("overshoot") != nullptr));
    }
    if (name == "at-output") {
        return truth_of(across_output(s, p) && s.stage().there());
    }
    if (name == "ripple-through") {
        return s.stage().there() ? output_ripple_current(s) : of_module(p, name);
    }
    if (name == "surge-limit") {
        return surge_voltage(s, p);
    }
    if (name == "runaway-voltage") {
        return runaway_share(s, p);
    }
    if (name == "hot-plug-voltage") {
        value v = input_volts(s);
        for (spread& x : v.numbers) {
            x = scaled(x, 2.0);
        }
        v.shown.formula = "twice the input: leads and capacitor ring";
        return v;
    }
    if (name == "adapter-voltage") {
        return adapter_volts(s);
    }
    if (name == "reversed-voltage") {
        // Written with its positive towards the input it is reversed with it.
        value v = on_input(s, p) && p.polarised ? input_volts(s) : number(exactly({0.0, dim::voltage}));
        v.shown.formula = "the input reversed, straight across it";
        return v;
    }
    if (name == "input-reversible") {
        const auto& fields = s.bodies().fed.fields;
        const auto it = fields.find("reversible");
        return written_value(it == fields.end() ? std::nullopt : std::optional(it->second), value::type::truth, "input.reversible");
    }
    return std::nullopt;
}

std::optional<value> of_coil(const solved_supply& s, const part& p, const std::string& name)
{
    const bool known = name == "peak-current" || name == "start-up-peak" || name == "effective-current" || name == "stores";
    if (!known) {
        return std::nullopt;
    }
    const bool stage = is(p, s.bodies().stage ? s.bodies().stage->inductor : "");
    if (name == "stores") {
        return truth_of(stage);
    }
    if (!stage) {
        return not_of_stage(p, name);
    }
    return name == "peak-current"    ? converter_figure(s, "inductor-peak")
           : name == "start-up-peak" ? converter_figure(s, "start-up-peak")
                                     : converter_figure(s, "inductor-effective");
}

} // namespace

std::optional<value> stage_part_fact(const solved_supply& s, const part& p, const std::string& name)
{
    if (p.kind == "mosfet" || p.kind == "bjt") {
        return of_switch(s, p, name);
    }
    if (p.kind == "diode") {
        return of_rectifier(s, p, name);
    }
    if (p.kind == "inductor" || p.kind == "transformer") {
        return of_coil(s, p, name);
    }
    if (p.kind == "capacitor") {
        return of_capacitor(s, p, name);
    }
    if (name == "own-stage") {
        return truth_of(s.stage().there());
    }
    if (p.kind == "fuse" && name == "inrush-integral") {
        return converter_figure(s, "inrush-integral");
    }
    if (p.kind == "fuse" && name == "in-input") {
        const std::set<std::string> side = input_side(s);
        return truth_of(p.terminals.size() == 2 && side.contains(p.terminals[0].net) && side.contains(p.terminals[1].net));
    }
    if (p.kind == "fuse" && name == "short-current") {
        return converter_figure(s, "held-on-current");
    }
    if ((p.kind == "timer" || p.kind == "controller") && name == "adapter-voltage") {
        return adapter_volts(s);
    }
    if ((p.kind == "timer" || p.kind == "controller") && name == "on-input") {
        return truth_of(on_input(s, p));
    }
    return std::nullopt;
}

} // namespace onehand
