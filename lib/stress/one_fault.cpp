// What one failed part does to a person: a limit shorted or what holds a pair down opened, the output joined to the input pins.
#include "stress/part_facts.hpp"
#include "stress/paths.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_rail.hpp"

#include <algorithm>

namespace onehand {

namespace {

/// Worst of one figure with each part on the way failed in each mode of its kind: what limits shorted, what holds down opened.
template<class Figure>
value worst_after_fault(const solved_supply& s, const access_item& a, const value& as_built, Figure figure)
{
    if (!a.touchable) {
        // Looked at only where a hand comes without opening anything.
        return missing_value(value::type::number, {a.about.name + " after a fault: it is behind a cover"});
    }
    value worst = as_built;
    std::string by;
    const std::set<std::string> near = weak_nets(s, a.where.nets);
    for (const change& c : single_faults(s.bodies(), s.data())) {
        const part* p = s.bodies().find_part(c.ref);
        // Behind a stiff net a part changes nothing here.
        const bool here =
            p != nullptr && std::any_of(p->terminals.begin(), p->terminals.end(), [&](const terminal& t) { return near.contains(t.net); });
        const change_result failed = here ? apply(s.bodies(), s.data(), c) : change_result{{}, "elsewhere"};
        if (!failed.refused.empty()) {
            continue;
        }
        const rail output = find_rail(failed.edited, s.data()); // a part of the feedback may be among them
        for (const state in : {state::running, state::no_load}) {
            const auto before = highest(worst);
            worst = greater(worst, magnitude(figure(failed.edited, output, in)));
            by = before && highest(worst) && *highest(worst) > *before * (1.0 + 1e-12) ? describe(c) : by;
        }
    }
    worst.shown.formula = "each part on the way failed in turn" + (by.empty() ? std::string() : "; worst " + by);
    return worst;
}

/// The pair already has the whole rail, which stands above the return and the input and does not hang on a part near the pair: no fault gives more.
bool has_the_whole_rail(const solved_supply& s, const access_item& a, const value& built)
{
    const supply& w = s.written();
    const auto rail = highest(s.output().output);
    const auto input = highest(written_value(w.fed.voltage, value::type::number, "input.voltage"));
    const bool by_feedback = !w.stage || !w.stage->feedback_net.empty();
    return a.touchable && built.missing.empty() && s.output().output.missing.empty() && !by_feedback && s.output().negative == w.return_net && rail &&
           input && *input <= *rail && highest(built) && *highest(built) >= *rail;
}

} // namespace

value faulted_voltage(const solved_supply& s, const access_item& a)
{
    const value built = hull(a.voltage.at(state::running), a.voltage.at(state::no_load));
    if (has_the_whole_rail(s, a, built)) {
        return built;
    }
    return worst_after_fault(s, a, built, [&](const supply& edited, const rail& output, state in) {
        return solve_dc(edited, s.data(), output, in).voltage(a.where.nets[0], a.where.nets[1]);
    });
}

value faulted_touch_current(const solved_supply& s, const access_item& a)
{
    const value built = greater(a.touch_current.at(state::no_load), a.touch_current.at(state::running));
    return worst_after_fault(s, a, built, [&](const supply& edited, const rail& output, state in) {
        return touch_current(edited, s.data(), output, in, a.where.nets[0], a.where.nets[1], standard_body);
    });
}

namespace {

/// Capacitors on the input's own side: between its nets, fuses, coils, wires and fitted plugs counted through.
double least_input_capacitance(const solved_supply& s, const std::set<std::string>& side)
{
    double farads = 0.0;
    for (const charged_capacitor& c : s.capacitors()) {
        const bool there = side.contains(c.positive) && c.negative == s.written().return_net;
        if (there && !c.capacitance.numbers.empty()) {
            farads += c.capacitance.numbers.front().whole.low;
        }
    }
    return farads;
}

} // namespace

value input_after_fault(const solved_supply& s)
{
    const supply& built = s.bodies();
    if (built.fed.nets.size() != 2 || s.output().positive.empty()) {
        return missing_value(value::type::number, {"input and output nets"});
    }
    const std::vector<element> wired = wire(built, s.data(), state::running, {});
    const std::set<std::string> side =
        reach(wired, built.fed.nets[0], [&](const element& e) { return joins_nets(e) && e.from != built.return_net && e.to != built.return_net; });
    value v;
    const value input = magnitude(s.at(state::running).voltage(built.fed.nets[0], built.fed.nets[1]));
    const auto source = highest(input);
    inherit(v, input);
    double charge = 0.0;
    double farads = 0.0;
    for (const charged_capacitor& c : s.capacitors()) {
        if (side.contains(c.positive) && c.negative == built.return_net) {
            continue;
        }
        inherit(v, c.voltage);
        inherit(v, c.capacitance);
        const auto volts = highest(magnitude(c.voltage));
        const auto size = highest(c.capacitance);
        if (!volts || !size) {
            v.missing.push_back(c.ref + " (capacitance)");
            continue;
        }
        if (*volts > source.value_or(0.0)) {
            charge += *size * *volts;
            farads += *size;
        }
    }
    const double own = least_input_capacitance(s, side);
    if (source && v.missing.empty()) {
        const double settled = farads + own > 0.0 ? (charge + own * *source) / (farads + own) : *source;
        v.numbers.push_back(between(dim::voltage, std::min(*source, settled), std::max(*source, settled)));
    }
    v.shown.formula =
        "(C_out U_out + C_in U_in)/(C_out + C_in): rectifier shorted, source disconnected; through a coil it rings to twice that less U_in "
        "at the most";
    return v;
}

} // namespace onehand
