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

constexpr double unsaid_spike = 0.30;         // of the rail: common practice, no source
constexpr double breakdown_over_rating = 1.3; // of a switch, at most (from memory of a maker's application note)

std::vector<given> with_cycle(const stage_model& m, std::vector<given> more)
{
    const std::vector<given> cycle = m.cycle();
    more.insert(more.end(), cycle.begin(), cycle.end());
    return more;
}

/// Drops the low end: anywhere up to it.
value up_to(value v)
{
    for (spread& s : v.numbers) {
        s.in_use.low = std::min(0.0, s.in_use.low);
        s.whole.low = std::min(0.0, s.whole.low);
        s.nominal.reset();
    }
    return v;
}

value scaled_by(value v, double factor)
{
    for (spread& s : v.numbers) {
        s = scaled(s, factor);
    }
    return v;
}

/// V + margin per volt and volts, for figures that are known only as a multiple of the rail.
value divided_by(const value& v, double by)
{
    return by > 0.0 ? scaled_by(v, 1.0 / by) : v;
}

void find_droop(const supply& s, const library& lib, rail& r)
{
    if (!r.rungs.loaded_why.empty() || r.rungs.chain.empty()) {
        r.droop = missing_value(value::type::number, {"the droop of the ladder: " + r.rungs.loaded_why});
        r.ladder_ripple = r.droop;
        return;
    }
    const value load = rail_load(s, lib, r, solve_dc(s, lib, r, state::running));
    const auto hertz_needed = with_cycle(r.model, {});
    const value hertz = r.model.figure("1/T", dim::frequency, hertz_needed, [](const view& v) { return interval(1.0) / v.stage.period.value(); });
    inherit(r.droop, load);
    inherit(r.droop, hertz);
    for (const bool whole : {false, true}) {
        std::vector<farad> caps;
        for (const std::string& ref : r.rungs.chain) {
            const part* p = s.find_part(ref);
            const field* f = p == nullptr ? nullptr : p->find("value");
            if (f == nullptr || f->number() == nullptr || !(f->number()->whole.low > 0.0)) {
                r.droop.missing.push_back(ref + ".value");
                continue;
            }
            caps.push_back(farad::from_value(whole ? f->number()->whole.low : f->number()->in_use.low));
        }
        if (!r.droop.missing.empty() || hertz.numbers.empty() || load.numbers.empty()) {
            r.ladder_ripple = r.droop;
            return;
        }
        const spread& l = load.numbers.front();
        const spread& f = hertz.numbers.front();
        const auto at = physics::loaded(caps, r.rungs.form, ampere::from_value(whole ? l.whole.high : l.in_use.high),
                                        hertz::from_value(whole ? f.whole.low : f.in_use.low));
        if (!whole) {
            r.droop.numbers.push_back(between(dim::voltage, 0.0, at.drop.value()));
            r.ladder_ripple.numbers.push_back(between(dim::voltage, 0.0, at.ripple.value()));
        } else {
            r.droop.numbers.front().whole.high = std::max(at.drop.value(), r.droop.numbers.front().whole.high);
            r.ladder_ripple.numbers.front().whole.high = std::max(at.ripple.value(), r.ladder_ripple.numbers.front().whole.high);
        }
    }
    r.droop.shown.formula = "I/f times the sum of charge shares over C, drop of the peak (convention told in the formula's note)";
    r.ladder_ripple.shown.formula = "I/f times the sum over the output's column, peak to peak";
}

void find_port(const supply& s, const library& lib, rail& r)
{
    if (r.topology != "boost-multiplier") {
        r.port = r.output;
        r.multiple = number(exactly({1.0, dim::none}));
        return;
    }
    const bool solved = r.rungs.there && r.rungs.why.empty() && r.rungs.multiple > 0.0;
    if (!solved) {
        const std::string why = !r.rungs.there ? s.stage->name + ".ladder" : r.rungs.why.empty() ? "a ladder that lifts its output" : r.rungs.why;
        r.port = r.multiple = missing_value(value::type::number, {why});
        return;
    }
    find_droop(s, lib, r);
    r.multiple = number(exactly({r.rungs.multiple, dim::none}));
    value lifted = r.output;
    if (r.droop.numbers.empty()) {
        inherit(lifted, r.droop);
    } else {
        lifted = sum(lifted, r.droop);
    }
    r.port = divided_by(lifted, r.rungs.multiple);
    r.port.shown.formula = "(output + droop)/" + in_words(r.multiple);
}

// --- start-up ---------------------------------------------------------------------------------------------------------------------------------

struct pumping {
    value power, most, energy, slack, period;
};

pumping pumping_of(const rail& r)
{
    const stage_model& m = r.model;
    const auto cycle = with_cycle(m, {given::in, given::inductance});
    pumping p;
    p.power = m.figure("L i^2/(2 T)", dim::power, cycle, [](const view& v) { return physics::full_power(v.stage).value(); });
    p.energy = m.figure("L i^2/2", dim::energy, cycle, [](const view& v) { return physics::full_energy(v.stage).value(); });
    p.most = m.figure("Uin i", dim::power, cycle, [](const view& v) { return (v.stage.in * physics::full_peak(v.stage)).value(); });
    p.period = m.figure("T", dim::time, m.cycle(), [](const view& v) { return v.stage.period.value(); });
    auto all = cycle;
    all.insert(all.end(), {given::out, given::drop, given::turns});
    p.slack = m.figure("1 - (on + emptying)/T", dim::none, all, [](const view& v) { return physics::slack(v.stage); });
    return p;
}

void find_start_up(const supply& s, const library& lib, rail& r)
{
    const converter& c = *s.stage;
    r.start_up = r.output;
    r.overshoot = number(exactly({0.0, dim::voltage}));
    if (const field* written = c.find("overshoot")) {
        r.overshoot = up_to(number(*written->number()));
        r.overshoot.shown = {"as written", {input_of(c.name + ".overshoot", *written)}, false, 0.0};
    } else if (r.basis == "as declared") {
        r.overshoot.shown.formula = "the declared output";
        return;
    } else if (r.feedback_lost || r.output.numbers.empty() || r.basis == "running free") {
        return;
    } else {
        const pumping p = pumping_of(r);
        const value farads = port_capacitance(s, lib, r);
        const value filter = sense_filter(s, lib, r);
        const auto lag_field = c.feedback.find("lag");
        const value lag = written_value(lag_field == c.feedback.end() ? std::nullopt : std::optional(lag_field->second), value::type::number,
                                        c.name + ".feedback.lag");
        r.overshoot = value{};
        for (const value* v : std::initializer_list<const value*>{&p.power, &p.energy, &farads, &filter, &lag, &r.port}) {
            inherit(r.overshoot, *v);
            r.overshoot.shown.inputs.insert(r.overshoot.shown.inputs.end(), v->shown.inputs.begin(), v->shown.inputs.end());
        }
        // A comparator that ends each cycle bounds the power where cycles run into each other too.
        const bool run_together = r.overshoot.missing.empty() && !(p.slack.numbers.front().whole.low >= 0.0);
        if (run_together && !r.model.limited()) {
            r.overshoot.missing.push_back(c.name + ".overshoot, measured: full cycles run into each other at the set point");
        }
        const double multiple = r.topology == "boost-multiplier" ? r.rungs.multiple : 1.0;
        for (const bool whole : {false, true}) {
            if (!r.overshoot.missing.empty()) {
                break;
            }
            const auto top = [&](const value& v) { return whole ? v.numbers.front().whole.high : v.numbers.front().in_use.high; };
            const auto low = [&](const value& v) { return whole ? v.numbers.front().whole.low : v.numbers.front().in_use.low; };
            if (!(low(farads) > 0.0)) {
                r.overshoot.missing.push_back("a capacitor straight across the output");
                break;
            }
            const bool boost = r.model.shape() == physics::shape::boost;
            const stage_model::parameter& in = r.model.at(given::in);
            const stage_model::parameter& turns = r.model.at(given::turns);
            const double volts_in = boost ? (whole ? in.at->whole.high : in.at->in_use.high) : 0.0;
            const double ratio = boost ? 1.0 : (whole ? turns.at->whole.low : turns.at->in_use.low);
            // Each diode of a ladder hands on once a cycle: the output is late by that many.
            const double steps = top(p.period) * r.rungs.drops;
            const double set = top(r.port);
            const physics::pumped_rail pumped{volt::from_value(volts_in),          volt::from_value(set),
                                              volt::from_value(volts_in),          ratio,
                                              watt::from_value(top(p.power)),      joule::from_value(top(p.energy)),
                                              farad::from_value(low(farads)),      second::from_value(top(filter)),
                                              second::from_value(top(lag) + steps)};
            const double over = std::max(0.0, physics::carried_to(pumped).value() - set) * multiple;
            if (!whole) {
                r.overshoot.numbers.push_back(between(dim::voltage, 0.0, over));
            } else {
                r.overshoot.numbers.front().whole.high = std::max(over, r.overshoot.numbers.front().whole.high);
            }
        }
        r.overshoot.shown.formula = "full cycles until the lagging feedback stops them, and one more packet";
    }
    if (r.overshoot.numbers.empty()) {
        inherit(r.start_up, r.overshoot);
        return;
    }
    r.start_up = sum(r.output, r.overshoot);
    r.start_up.shown = r.overshoot.shown;
    r.start_up.shown.formula = "set point + overshoot";
}

} // namespace

value port_capacitance(const supply& s, const library& lib, const rail& r)
{
    value c = rail_capacitance(s, lib, r);
    if (r.topology != "boost-multiplier") {
        return c;
    }
    c = scaled_by(c, r.rungs.multiple * r.rungs.multiple);
    for (const ladder::stressed& rung : r.rungs.capacitors) {
        const part* p = s.find_part(rung.ref);
        const field* f = p == nullptr ? nullptr : p->find("value");
        if (f == nullptr || f->number() == nullptr) {
            c.missing.push_back(rung.ref + ".value");
            continue;
        }
        const double square = rung.voltage * rung.voltage;
        spread& sum = c.numbers.front();
        sum.in_use = {sum.in_use.low + square * f->number()->in_use.low, sum.in_use.high + square * f->number()->in_use.high};
        sum.whole = {sum.whole.low + square * f->number()->whole.low, sum.whole.high + square * f->number()->whole.high};
    }
    return c;
}

// --- free running -----------------------------------------------------------------------------------------------------------------------------

free_run run_free(const supply& s, const rail& r, double siemens)
{
    free_run out;
    const stage_model& m = r.model;
    const double multiple = r.topology == "boost-multiplier" ? r.rungs.multiple : 1.0;
    if (!m.there() || (r.topology == "boost-multiplier" && !(multiple > 0.0))) {
        out.rail = missing_value(value::type::number, {m.there() ? "a ladder that can be solved" : "the converter's own stage"});
        return out;
    }
    std::vector<std::pair<value, std::string>> ends;
    std::vector<std::string> missing;
    const auto cycle = with_cycle(m, {given::in, given::inductance, given::turns});
    const auto offer = [&](value v, const std::string& what, double factor) {
        if (v.numbers.empty() || !v.missing.empty()) {
            missing.insert(missing.end(), v.missing.begin(), v.missing.end());
            return;
        }
        ends.emplace_back(scaled_by(std::move(v), factor), what);
    };
    if (siemens > 0.0) {
        const double ohms = 1.0 / (siemens * multiple * multiple);
        offer(m.figure("full cycles into what surely loads the output", dim::voltage, cycle,
                       [ohms](const view& v) { return physics::open_loop(v.stage, physics::ohms<interval>::from_value(interval(ohms))).value(); }),
              "what surely loads it", multiple);
    }
    const part* q = s.find_part(s.stage->power_switch);
    const auto field_of = [&](const char* name) { return q == nullptr ? nullptr : q->find(name); };
    if (const field* co = field_of("output-capacitance"); co != nullptr && co->number() != nullptr && co->number()->whole.low > 0.0) {
        const range c = co->number()->whole;
        offer(m.figure("Uin + sqrt(Uin^2 + i^2 L/C)", dim::voltage, cycle,
                       [c](const view& v) {
                           const auto farads = physics::farads<interval>::from_value(interval(c.low, c.high));
                           const auto node = physics::unloaded_peak(v.stage.in, physics::full_peak(v.stage), v.stage.inductance, farads);
                           return v.stage.is == physics::shape::boost ? node.value() : ((node - v.stage.in) * v.stage.turns).value();
                       }),
              s.stage->power_switch + "'s own capacitance", multiple);
    }
    if (const field* rated = field_of("rated-voltage"); rated != nullptr && rated->number() != nullptr && rated->number()->whole.bounded()) {
        const range u = rated->number()->whole;
        offer(m.figure("breakdown of the switch, anywhere from its rating to 1.3 times it", dim::voltage, {given::in, given::turns},
                       [u](const view& v) {
                           const interval node(u.low, u.high * breakdown_over_rating);
                           return v.stage.is == physics::shape::boost ? node : (node - v.stage.in.value()) * v.stage.turns;
                       }),
              s.stage->power_switch + " breaks down", multiple);
    } else {
        missing.push_back(s.stage->power_switch.empty() ? s.stage->name + ".switch" : s.stage->power_switch + ".rated-voltage");
    }
    if (ends.empty()) {
        out.rail = missing_value(value::type::number, missing);
        return out;
    }
    const auto least = std::min_element(ends.begin(), ends.end(), [](const auto& a, const auto& b) {
        return a.first.numbers.front().whole.high < b.first.numbers.front().whole.high;
    });
    out.rail = least->first;
    for (const auto& [v, what] : ends) {
        spread& x = out.rail.numbers.front();
        x.in_use.high = std::min(x.in_use.high, v.numbers.front().in_use.high);
        x.in_use.low = std::min(x.in_use.low, v.numbers.front().in_use.low);
        x.whole.low = std::min(x.whole.low, v.numbers.front().whole.low);
    }
    out.rail.numbers.front().nominal.reset();
    out.ends = least->second;
    return out;
}

namespace {

/// Nothing regulates it, or something takes the feedback away: the rail is where full cycles take it.
void find_runaway(const supply& s, const library& lib, rail& r)
{
    if (!r.model.there()) {
        r.runaway = missing_value(value::type::number, {"what holds the output inside the module"});
        return;
    }
    const bool regulated = r.basis.starts_with("held by");
    const free_run lost = run_free(s, r, sure_conductance(s, lib, r, !regulated));
    r.runaway = lost.rail;
    r.runaway_ends = lost.ends;
    if (r.basis == "running free" || r.feedback_lost) {
        r.output = up_to(r.runaway);
        r.output.shown.formula = r.feedback_lost ? "feedback lost: full cycles until something ends them" : r.runaway.shown.formula;
    }
}

bool runs_free(const supply& s, const rail& r)
{
    return r.model.there() && s.stage->feedback_net.empty() && s.stage->find("output-voltage") == nullptr && s.stage->feedback.empty();
}

} // namespace

void find_stage(const supply& s, const library& lib, rail& r)
{
    r.model = stage_model(s, lib);
    std::set<std::string> still = quiet_nets(s, lib, r);
    still.insert(s.return_net);
    r.rungs = solve_ladder(s, r.switch_net, still);
    if (runs_free(s, r)) {
        r.basis = "running free";
        r.output = value{};
    }
    find_runaway(s, lib, r);
    find_port(s, lib, r);
    r.model.set(given::out, r.port, s.stage->name + " output");
    find_start_up(s, lib, r);
}

// --- what swings ------------------------------------------------------------------------------------------------------------------------------

namespace {

value port_at_start_up(const rail& r)
{
    if (r.topology != "boost-multiplier" || r.start_up.numbers.empty()) {
        return r.start_up;
    }
    value v = sum(r.port, divided_by(r.overshoot, r.rungs.multiple));
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
    const part* rectifier = s.find_part(s.stage->rectifier);
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
    // Vc/(Vc - VR) times the leakage's power; each voltage at its worst end.
    r.clamp_power = leaking;
    inherit(r.clamp_power, r.clamp_voltage);
    for (const bool whole : {false, true}) {
        if (r.clamp_power.numbers.empty() || r.clamp_voltage.numbers.empty() || r.reflected.numbers.empty()) {
            r.clamp_power.numbers.clear();
            break;
        }
        spread& p = r.clamp_power.numbers.front();
        const range vc = whole ? r.clamp_voltage.numbers.front().whole : r.clamp_voltage.numbers.front().in_use;
        const range vr = whole ? r.reflected.numbers.front().whole : r.reflected.numbers.front().in_use;
        range& to = whole ? p.whole : p.in_use;
        // Below the reflected voltage the clamp takes what the output should: no bound.
        to.high = vc.low > vr.high ? to.high / (1.0 - vr.high / vc.low) : unbounded;
    }
    r.clamp_power.shown.formula = "Llk i^2/(2 T) Vc/(Vc - VR)";
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
    const part* q = s.find_part(c.power_switch);
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
