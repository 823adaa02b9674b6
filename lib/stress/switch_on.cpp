// Switched on with everything empty: what rushes in, and what the coil sees until the rail stands.
#include "physics/surge.hpp"
#include "stress/paths.hpp"
#include "stress/rail_load.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_facts.hpp"
#include "stress/stage_rail.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;
using view = stage_model::view;

/// Capacitance that the coil charges straight from the input: a boost stage's output, the standing rungs that a ladder's diodes lead to.
value charged_through_coil(const solved_supply& s)
{
    const std::string& topology = s.output().topology;
    if (topology == "flyback") {
        return number(exactly({0.0, dim::capacitance}));
    }
    value c = rail_capacitance(s.bodies(), s.data(), s.output());
    for (const ladder::stressed& rung : s.output().rungs.capacitors) {
        const part* p = s.bodies().find_part(rung.ref);
        const field* f = p == nullptr ? nullptr : p->find("value");
        if (f == nullptr || f->number() == nullptr) {
            c.missing.push_back(rung.ref + ".value");
            continue;
        }
        c.numbers.front().in_use.high += f->number()->in_use.high;
        c.numbers.front().whole.high += f->number()->whole.high;
    }
    return c;
}

double input_capacitance(const solved_supply& s, bool whole)
{
    const std::set<std::string> side = input_side(s);
    double farads = 0.0;
    for (const part& p : s.bodies().parts) {
        const field* f = p.find("value");
        const bool there =
            p.kind == "capacitor" && p.terminals.size() == 2 && (side.contains(p.terminals[0].net) != side.contains(p.terminals[1].net));
        if (there && f != nullptr && f->number() != nullptr) {
            farads += whole ? f->number()->whole.high : f->number()->in_use.high;
        }
    }
    return farads;
}

value input_capacitance_known(const solved_supply& s)
{
    const std::set<std::string> side = input_side(s);
    value v;
    for (const part& p : s.bodies().parts) {
        const bool there =
            p.kind == "capacitor" && p.terminals.size() == 2 && (side.contains(p.terminals[0].net) != side.contains(p.terminals[1].net));
        if (there && p.find("value") == nullptr) {
            v.missing.push_back(p.ref + ".value");
        }
    }
    v.numbers.push_back({dim::capacitance,
                         {0.0, input_capacitance(s, false)},
                         {0.0, std::max(input_capacitance(s, true), input_capacitance(s, false))},
                         std::nullopt});
    return v;
}

double end_of(const value& v, bool whole, bool high)
{
    const range& r = whole ? v.numbers.front().whole : v.numbers.front().in_use;
    return high ? r.high : r.low;
}

double end_of(const stage_model::parameter& p, bool whole, bool high)
{
    const range& r = whole ? p.at->whole : p.at->in_use;
    return high ? r.high : r.low;
}

/// Greatest over both ranges of something that rises in its ingredients.
template<class Form>
value up_to_both(const dimension& d, Form form)
{
    const auto known = [](double x) { return std::isnan(x) ? unbounded : x; };
    const double use = known(form(false));
    return number({d, {0.0, use}, {0.0, std::max(use, known(form(true)))}, std::nullopt});
}

/// Resistance of everything between the source and the stage, at its least; nothing where the source's own is not told.
std::optional<double> feed_resistance(const solved_supply& s, bool whole)
{
    const auto& fields = s.bodies().fed.fields;
    const auto it = fields.find("source-resistance");
    if (it == fields.end() || it->second.number() == nullptr || !(it->second.number()->whole.low > 0.0)) {
        return std::nullopt; // none at all is no figure
    }
    return whole ? it->second.number()->whole.low : it->second.number()->in_use.low;
}

} // namespace

std::set<std::string> input_side(const solved_supply& s)
{
    const supply& b = s.bodies();
    if (b.fed.nets.size() != 2) {
        return {};
    }
    return reach(wire(b, s.data(), state::running, {}), b.fed.nets[0], [&](const element& e) {
        return joins_nets(e) && e.from != b.fed.nets[1] && e.to != b.fed.nets[1] && !(b.stage && e.ref == b.stage->inductor);
    });
}

value inrush_current(const solved_supply& s)
{
    const value farads = charged_through_coil(s);
    const stage_model::parameter& in = s.stage().at(given::in);
    const stage_model::parameter& coil = s.stage().at(given::inductance);
    value v;
    inherit(v, farads);
    for (const auto* p : {&in, &coil}) {
        v.missing.insert(v.missing.end(), p->missing.begin(), p->missing.end());
        if (p->shown) {
            v.shown.inputs.push_back(*p->shown);
        }
    }
    v.shown.inputs.insert(v.shown.inputs.end(), farads.shown.inputs.begin(), farads.shown.inputs.end());
    v.shown.formula = s.output().topology == "flyback" ? "the coil charges nothing straight from the input" : "Uin sqrt(C/L), lossless";
    if (!in.at || !coil.at || farads.numbers.empty() || !(coil.at->whole.low > 0.0)) {
        return v;
    }
    const value most = up_to_both(dim::current, [&](bool whole) {
        return physics::coil_inrush(volt::from_value(end_of(in, whole, true)), farad::from_value(end_of(farads, whole, true)),
                                    henry::from_value(end_of(coil, whole, false)))
            .value();
    });
    v.numbers = most.numbers;
    // Beyond saturation the coil is a smaller one: the peak is then bounded by resistance only.
    const part* p = s.bodies().find_part(s.bodies().stage->inductor);
    const field* limit = p == nullptr ? nullptr : p->find("saturation-current");
    if (limit != nullptr && limit->number() != nullptr && v.numbers.front().whole.high > limit->number()->whole.low) {
        v.numbers.front().whole.high = unbounded;
        if (v.numbers.front().in_use.high > limit->number()->in_use.low) {
            v.numbers.front().in_use.high = unbounded;
        }
        v.shown.formula = "Uin sqrt(C/L) passes " + p->ref + "'s saturation: bounded by resistance only";
    }
    return v;
}

value inrush_integral(const solved_supply& s)
{
    const value own = input_capacitance_known(s);
    const value in = written_value(s.bodies().fed.voltage, value::type::number, "input.voltage");
    const bool stage = s.stage().there();
    const value farads = stage ? charged_through_coil(s) : number(exactly({0.0, dim::capacitance}));
    value v;
    for (const value* x : std::initializer_list<const value*>{&own, &in, &farads}) {
        inherit(v, *x);
    }
    v.shown.formula = "(sqrt(U^2 C_in/(2 R)) + sqrt(I^2 t/2 of the coil's half sine))^2";
    const auto ohms = feed_resistance(s, true);
    const bool direct = end_of(own, true, true) > 0.0;
    if (direct && !ohms) {
        v.missing.push_back("input.source-resistance");
    }
    if (stage) {
        const auto& missing = s.stage().at(given::inductance).missing;
        v.missing.insert(v.missing.end(), missing.begin(), missing.end());
    }
    if (!v.missing.empty() || in.numbers.empty()) {
        return v;
    }
    const value most = up_to_both({{0, 0, 1, 2, 0}}, [&](bool whole) {
        const volt u = volt::from_value(end_of(in, whole, true));
        const farad c_in = farad::from_value(end_of(own, whole, true));
        const auto one = direct ? physics::resistive_inrush_integral(u, c_in, ohm::from_value(feed_resistance(s, whole).value_or(1e-3)))
                                : physics::melting_integral::from_value(0.0);
        const auto two = stage ? physics::coil_inrush_integral(u, farad::from_value(end_of(farads, whole, true)),
                                                               henry::from_value(end_of(s.stage().at(given::inductance), whole, false)))
                               : physics::melting_integral::from_value(0.0);
        return physics::together(one, two).value();
    });
    v.numbers = most.numbers;
    if (!s.stage().there()) {
        v.missing.push_back("what is inside the module");
    }
    return v;
}

/// Until the rail has left the voltage where full cycles run into each other, the averaged stage is a coil and a capacitor: its current peaks at
/// Uss sqrt(C/L), Uss = Uin/(1 - D) of a boost stage, turns^2 Uin D/(1 - D) of a flyback seen from its primary.
value start_up_peak(const solved_supply& s)
{
    const stage_model& m = s.stage();
    const value farads = port_capacitance(s.bodies(), s.data(), s.output());
    if (farads.numbers.empty() || !farads.missing.empty() || !farads.numbers.front().whole.bounded()) {
        return missing_value(value::type::number,
                             farads.missing.empty() ? std::vector<std::string>{"capacitances known on both sides"} : farads.missing);
    }
    stage_model with = m;
    value most = farads;
    for (spread& x : most.numbers) {
        x.in_use.low = x.in_use.high;
        x.whole = {std::min(x.whole.high, x.in_use.high), x.whole.high};
    }
    with.set(given::capacitance, most, "capacitance reached from the output");
    std::vector<given> needs{given::in, given::inductance, given::turns, given::capacitance};
    const std::vector<given> cycle = m.cycle();
    needs.insert(needs.end(), cycle.begin(), cycle.end());
    if (m.limited()) {
        // The comparator's delay lets each cycle add a little while the rail is too low to take it off again.
        value v = with.figure("inrush + limit + one delay for each cycle of it", dim::current, needs, [](const view& w) {
            const interval lc = w.stage.inductance.value() * w.of(given::capacitance) * physics::squared(w.stage.turns);
            const interval swing = w.stage.is == physics::shape::boost
                                       ? w.stage.in.value() * physics::root(w.of(given::capacitance) / w.stage.inductance.value())
                                       : interval(0.0);
            const interval cycles = physics::root(lc) * interval(std::numbers::pi / 2.0) / w.stage.period.value() + interval(1.0);
            return swing + physics::full_peak(w.stage).value() + cycles * w.stage.in.value() * w.stage.delay.value() / w.stage.inductance.value();
        });
        return v;
    }
    return with.figure("Uss sqrt(C/L) + Uin on/L, lossless", dim::current, needs, [](const view& w) {
        const interval off = interval(1.0) - w.stage.duty;
        const interval square = w.of(given::capacitance) / w.stage.inductance.value();
        const interval settled =
            w.stage.is == physics::shape::boost ? w.stage.in.value() / off : w.stage.in.value() * w.stage.turns * w.stage.duty / off;
        return settled * physics::root(square) + physics::full_peak(w.stage).value();
    });
}

} // namespace onehand
