#include "stress/decay.hpp"

#include "circuit/discharge.hpp"
#include "physics/storage.hpp"
#include "stress/dc_network.hpp"
#include "stress/paths.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>

namespace onehand {

namespace {

using form = element_spec::form;

bool has(const element& e, form f)
{
    return std::find(e.forms.begin(), e.forms.end(), f) != e.forms.end();
}

std::vector<std::string> left_out_parts(const rail& output)
{
    return output.stage_parts;
}

/// The converter's own inner capacitance and bleeder, as parts of a module.
const field* inner(const supply& s, const char* name)
{
    return s.stage && s.stage->topology == "module" ? s.stage->find(name) : nullptr;
}

/// Resistances that surely discharge, between nets; unknown ones are absent.
struct path {
    std::string ref, a, b;
    spread ohms;
};

std::vector<path> soldered(const supply& s, const std::vector<element>& off)
{
    std::vector<path> list;
    for (const element& e : off) {
        const bool track = !e.wiper.empty();
        const auto v = e.values.find(track ? form::track : form::resistance);
        if (!e.charge_path || v == e.values.end() || v->second.numbers.empty()) {
            continue;
        }
        list.push_back({e.ref, e.from, e.to, v->second.numbers.front()});
    }
    if (const field* bleeder = inner(s, "internal-bleeder")) {
        list.push_back({s.stage->name, s.stage->outputs[0], s.stage->outputs[1], *bleeder->number()});
    }
    return list;
}

/// Greatest conductance that the soldered paths can have between two nets: the current that one volt drives.
double conductance_at_most(const std::vector<path>& paths, const std::string& a, const std::string& b)
{
    circuit::network n;
    std::map<std::string, int> node{{b, 0}};
    const auto at = [&](const std::string& net) { return node.emplace(net, static_cast<int>(node.size())).first->second; };
    for (const path& p : paths) {
        n.branches.push_back({at(p.a), at(p.b), {{circuit::form::resistance, {p.ohms.whole.low, p.ohms.whole.high}}}});
    }
    constexpr double probe = 1e-3; // ohm
    const int feed = at("~feed");
    n.branches.push_back({feed, at(a), {{circuit::form::resistance, {probe, probe}}}});
    n.sources.push_back({feed, 0, {1.0, 1.0}});
    n.nodes = static_cast<int>(node.size());
    return std::max(0.0, circuit::solve(n).current.back().high);
}

/// What a measured discharge says of the capacitance between its nets, given the conductance that is known there (no inner bleeder counted unless
/// written).
value capacitance_from_decay(const supply& s, const std::vector<path>& paths, const charged_capacitor& inside)
{
    for (const decay& d : s.decays) {
        const bool same =
            (d.nets[0] == inside.positive && d.nets[1] == inside.negative) || (d.nets[0] == inside.negative && d.nets[1] == inside.positive);
        if (!same || !(d.to->number()->whole.high > 0.0) || !std::isfinite(d.from->number()->whole.low)) {
            continue; // a decay to nothing bounds nothing
        }
        // The conductance at its greatest: a smaller one would tell less capacitance than there may be.
        double siemens = conductance_at_most(paths, inside.positive, inside.negative);
        siemens += d.meter && d.meter->number()->whole.low > 0.0 ? 1.0 / d.meter->number()->whole.low : 0.0;
        const double tau = d.time->number()->whole.high / std::log(d.from->number()->whole.low / d.to->number()->whole.high);
        value v = number(between(dim::capacitance, 0.0, tau * siemens));
        v.shown.formula = "C <= t/(R ln(U1/U2)) from the measured discharge, the meter counted";
        v.shown.inputs = {input_of("decay.time", *d.time), input_of("decay.from", *d.from), input_of("decay.to", *d.to)};
        return v;
    }
    return missing_value(value::type::number, {inside.ref + ".internal-capacitance"});
}

value held_voltage(const std::vector<dc_solution>& states, const std::string& a, const std::string& b)
{
    value v;
    for (const dc_solution& d : states) {
        if (d.in == state::standby) {
            continue;
        }
        v = v.numbers.empty() && v.missing.empty() ? d.voltage(a, b) : hull(v, d.voltage(a, b));
    }
    return v;
}

/// A typed formula of capacitance and voltage, rising in both, over both ranges of each.
template<class Result>
value of_both(const value& farads, const value& volts, Result (*formula)(farad, volt))
{
    value out;
    inherit(out, volts);
    inherit(out, farads);
    const auto at = [&](double c, double u) { return from(formula(farad::from_value(c), volt::from_value(u))).si; };
    for (const spread& c : farads.numbers) {
        for (const spread& u : volts.numbers) {
            spread s{dimension_of<Result>,
                     {at(c.in_use.low, u.in_use.low), at(c.in_use.high, u.in_use.high)},
                     {at(c.whole.low, u.whole.low), at(c.whole.high, u.whole.high)},
                     {}};
            if (c.nominal && u.nominal) {
                s.nominal = at(*c.nominal, *u.nominal);
            }
            out.numbers.push_back(s);
        }
    }
    return out;
}

void fill(charged_capacitor& c, const std::vector<element>& off)
{
    const value volts = magnitude(c.voltage);
    c.energy = of_both(c.capacitance, volts, physics::stored_energy);
    c.charge = of_both(c.capacitance, volts, physics::stored_charge);
    c.energy.shown.formula = "C U^2 / 2";
    c.charge.shown.formula = "C U";
    for (value* v : {&c.energy, &c.charge}) {
        v->shown.inputs = c.capacitance.shown.inputs;
    }
    c.discharge_path = soldered_path(off, c.positive, c.negative);
    c.only_part = only_path(off, c.positive, c.negative);
}

} // namespace

std::vector<charged_capacitor> charged_capacitors(const supply& s, const library& lib, const rail& output, const std::vector<dc_solution>& states)
{
    std::vector<charged_capacitor> list;
    std::vector<element> off = wire(s, lib, state::switched_off, left_out_parts(output));
    const field* bleeder = inner(s, "internal-bleeder");
    if (bleeder != nullptr) {
        element e;
        e.ref = s.stage->name;
        e.from = s.stage->outputs[0];
        e.to = s.stage->outputs[1];
        e.forms = {form::resistance};
        e.charge_path = true;
        off.push_back(std::move(e));
    }
    for (const element& e : off) {
        const auto v = e.values.find(form::capacitance);
        if (!has(e, form::capacitance) || v == e.values.end()) {
            continue;
        }
        charged_capacitor c;
        c.ref = e.ref;
        c.positive = e.from;
        c.negative = e.to;
        c.capacitance = v->second;
        for (std::string& name : c.capacitance.missing) {
            name += " (capacitance)"; // so that what is missing tells what it is
        }
        c.voltage = held_voltage(states, e.from, e.to);
        fill(c, off);
        list.push_back(std::move(c));
    }
    // What a module holds inside endangers: unsaid it is unknown, unless a measured discharge bounds it.
    if (s.stage && s.stage->topology == "module" && s.stage->outputs.size() == 2) {
        charged_capacitor c;
        c.ref = s.stage->name;
        c.positive = s.stage->outputs[0];
        c.negative = s.stage->outputs[1];
        const field* written = s.stage->find("internal-capacitance");
        c.capacitance = written != nullptr ? number(*written->number()) : capacitance_from_decay(s, soldered(s, off), c);
        if (written != nullptr) {
            c.capacitance.shown = {"as written", {input_of(c.ref + ".internal-capacitance", *written)}, false, 0.0};
        } else if (!c.capacitance.numbers.empty() && bleeder == nullptr) {
            // Without its bleeder the measured time bounds the time, not the charge.
            c.capacitance.missing.push_back(c.ref + ".internal-bleeder or .internal-capacitance");
        }
        c.voltage = held_voltage(states, c.positive, c.negative);
        fill(c, off);
        list.push_back(std::move(c));
    }
    return list;
}

struct decay_network::inside {
    circuit::rc_network net;
    std::map<std::string, int> node;
    std::vector<std::string> capacitors;                     // references, in order
    std::map<std::string, std::vector<std::string>> unknown; // per net: what is not known of a capacitor there
    std::map<std::string, std::string> alias;                // nets joined by wires
    double input_volts = 0.0;                                // greatest: below it the rectifier may refill
    std::string rectifier_to;                                // the net that the rectifier feeds
    std::map<std::string, std::string> tied;

    std::string root(const std::string& net_name) const
    {
        std::string n = net_name;
        for (auto it = alias.find(n); it != alias.end(); it = alias.find(n)) {
            n = it->second;
        }
        return n;
    }

    int at(const std::string& net_name)
    {
        const auto [it, fresh] = node.emplace(root(net_name), static_cast<int>(node.size()));
        static_cast<void>(fresh);
        return it->second;
    }

    int find(const std::string& net_name) const
    {
        const auto it = node.find(root(net_name));
        return it == node.end() ? -1 : it->second;
    }

    /// What is not known of a capacitor on either net is not known of the figure.
    void note_unknown(value& v, const std::string& a, const std::string& b) const
    {
        for (const std::string& end : {a, b}) {
            if (const auto it = unknown.find(root(end)); it != unknown.end()) {
                value other;
                other.missing = it->second;
                inherit(v, other);
            }
        }
    }
};

namespace {

/// Nets that wires, coils, fuses and fitted plugs join; the input's two where it is shorted.
void join_nets(const supply& s, const std::vector<element>& off, const off_case& how, std::map<std::string, std::string>& alias)
{
    const auto root = [&](std::string n) {
        for (auto it = alias.find(n); it != alias.end(); it = alias.find(n)) {
            n = it->second;
        }
        return n;
    };
    const auto join = [&](const std::string& a, const std::string& b) {
        if (root(a) != root(b)) {
            alias[root(a)] = root(b);
        }
    };
    for (const element& e : off) {
        const bool closed = joins_nets(e);
        const part* p = s.find_part(e.ref);
        const bool unplugged = how.output_unplugged && p != nullptr && p->kind == "connector";
        if (closed && !unplugged && e.ref != how.broken) {
            join(e.from, e.to);
        }
    }
    if (how.input_shorted && s.fed.nets.size() == 2) {
        join(s.fed.nets[0], s.fed.nets[1]);
    }
    const bool bonded = s.return_bonded && s.return_bonded->truth() != nullptr && *s.return_bonded->truth();
    if (bonded && !s.chassis.empty()) {
        join(s.chassis, s.return_net);
    }
}

std::string floating_words(const std::string& a, const std::string& b)
{
    return "what ties " + a + " to " + b + " after switch-off";
}

} // namespace

decay_network::decay_network(const supply& s, const library& lib, const std::vector<charged_capacitor>& capacitors, const off_case& how)
    : inside_(std::make_unique<inside>())
{
    const std::vector<std::string> stage = s.stage ? std::vector<std::string>{s.stage->power_switch, s.stage->rectifier} : std::vector<std::string>{};
    const std::vector<element> off = wire(s, lib, state::switched_off, stage);
    join_nets(s, off, how, inside_->alias);
    inside_->at(s.return_net);
    for (const path& p : soldered(s, off)) {
        if (p.ref != how.broken) {
            inside_->net.resistances.push_back({inside_->at(p.a), inside_->at(p.b), {p.ohms.whole.low, p.ohms.whole.high}});
        }
    }
    for (const element& e : off) {
        if (!e.wiper.empty() && e.ref != how.broken) {
            inside_->at(e.wiper); // the wiper's net follows the track; nothing else hangs on it for certain
        }
    }
    for (const charged_capacitor& c : capacitors) {
        if (c.capacitance.numbers.empty() || c.voltage.numbers.empty()) {
            for (const std::string& net : {c.positive, c.negative}) {
                auto& list = inside_->unknown[inside_->root(net)];
                list.insert(list.end(), c.capacitance.missing.begin(), c.capacitance.missing.end());
                list.insert(list.end(), c.voltage.missing.begin(), c.voltage.missing.end());
            }
            continue;
        }
        const circuit::box farads = box_of(c.capacitance, over::whole);
        inside_->net.capacitors.push_back(
            {inside_->at(c.positive), inside_->at(c.negative), {std::max(farads.low, 0.0), farads.high}, box_of(c.voltage, over::whole)});
        inside_->capacitors.push_back(c.ref);
    }
    inside_->net.nodes = static_cast<int>(inside_->node.size());
    if (s.fed.voltage && s.fed.voltage->number() != nullptr && s.stage && s.stage->topology == "boost") {
        inside_->input_volts = s.fed.voltage->number()->whole.high;
        inside_->rectifier_to = inside_->root(s.stage->outputs[0]);
    }
}

decay_network::~decay_network() = default;
decay_network::decay_network(decay_network&&) noexcept = default;
decay_network& decay_network::operator=(decay_network&&) noexcept = default;

namespace {

constexpr double least_told = 1e-3; // volt: what is left is told no finer

value from_figure(const circuit::rc_figure& f, const dimension& d, const std::string& formula)
{
    value v;
    if (!f.never) {
        v.numbers.push_back({d, {0.0, f.value}, {0.0, f.value}, std::nullopt});
        if (d == dim::time) {
            v.numbers.back() = exactly({f.value, d});
        }
    }
    v.never = f.never;
    v.shown.formula = formula;
    v.shown.searched = f.searched;
    v.shown.margin = f.margin;
    return v;
}

} // namespace

value decay_network::time_to(const std::string& a, const std::string& b, double volts) const
{
    const int i = inside_->find(a);
    const int j = inside_->find(b);
    value v;
    if (i < 0 || j < 0) {
        v = missing_value(value::type::number, {floating_words(a, b)});
        return v;
    }
    const circuit::rc_figure f = circuit::last_time_above(inside_->net, i, j, volts);
    if (f.floating) {
        return missing_value(value::type::number, {floating_words(a, b)});
    }
    v = from_figure(f, dim::time, fmt::format("last time |V({}) - V({})| is above {} V, sum of exponentials", a, b, volts));
    if (f.never) {
        const std::string keeper = f.keeper >= 0 ? inside_->capacitors[static_cast<std::size_t>(f.keeper)] : "a capacitor";
        v.reason = "never: nothing that surely stays connected discharges " + keeper;
    } else if (volts < inside_->input_volts) {
        v.missing.push_back("the time to " + fmt::format("{}", volts) + " V: the input side can hold the rail at its own voltage");
    }
    inside_->note_unknown(v, a, b);
    return v;
}

value decay_network::left_after(const std::string& a, const std::string& b, double seconds) const
{
    const int i = inside_->find(a);
    const int j = inside_->find(b);
    if (i < 0 || j < 0) {
        return missing_value(value::type::number, {floating_words(a, b)});
    }
    const circuit::rc_figure f = circuit::voltage_after(inside_->net, i, j, seconds);
    if (f.floating) {
        return missing_value(value::type::number, {floating_words(a, b)});
    }
    circuit::rc_figure told = f;
    if (told.value > 0.0 && told.value < least_told) {
        told.value = least_told;
    }
    value v = from_figure(told, dim::voltage, fmt::format("greatest |V({}) - V({})| after {} s", a, b, seconds));
    // The rectifier may refill from the input side up to the input's own voltage.
    for (spread& s : v.numbers) {
        const bool rail = inside_->root(a) == inside_->rectifier_to || inside_->root(b) == inside_->rectifier_to;
        s.in_use.high = std::max(s.in_use.high, rail ? inside_->input_volts : 0.0);
        s.whole.high = std::max(s.whole.high, s.in_use.high);
    }
    inside_->note_unknown(v, a, b);
    return v;
}

value decay_network::final_voltage(const std::string& a, const std::string& b) const
{
    return left_after(a, b, std::numeric_limits<double>::infinity());
}

decay_network::touch decay_network::touched(const std::string& a, const std::string& b, double ohms, double volts) const
{
    const int i = inside_->find(a);
    const int j = inside_->find(b);
    touch out;
    if (i < 0 || j < 0) {
        out.peak = number(exactly({0.0, dim::voltage})); // nothing charged reaches the pair
        out.above = number(exactly({0.0, dim::time}));
    } else {
        circuit::rc_network with_body = inside_->net;
        with_body.resistances.push_back({i, j, {ohms, ohms}});
        out.peak = from_figure(circuit::voltage_after(with_body, i, j, 0.0), dim::voltage, fmt::format("first instant across {} ohm", ohms));
        out.above =
            from_figure(circuit::last_time_above(with_body, i, j, volts), dim::time, fmt::format("last time above {} V across {} ohm", volts, ohms));
    }
    inside_->note_unknown(out.peak, a, b);
    inside_->note_unknown(out.above, a, b);
    return out;
}

decay_network::pulse decay_network::into_body(const std::string& a, const std::string& b, double ohms, double seconds) const
{
    const int i = inside_->find(a);
    const int j = inside_->find(b);
    pulse out;
    if (i < 0 || j < 0) {
        out.charge = number(exactly({0.0, dim::charge}));
        out.energy = number(exactly({0.0, dim::energy}));
    } else {
        const circuit::rc_pulse p = circuit::delivered(inside_->net, i, j, ohms, seconds);
        out.charge = from_figure(p.charge, dim::charge, fmt::format("integral of current into {} ohm over {} s", ohms, seconds));
        out.energy = from_figure(p.energy, dim::energy, fmt::format("integral of power into {} ohm over {} s", ohms, seconds));
    }
    inside_->note_unknown(out.charge, a, b);
    inside_->note_unknown(out.energy, a, b);
    return out;
}

} // namespace onehand
