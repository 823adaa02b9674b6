#include "stress/rail.hpp"

#include "quantity/text.hpp"
#include "stress/dc_network.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_rail.hpp"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>

namespace onehand {

namespace {

constexpr double rectifier_drop = 1.5; // volt at most across rectifier and coil when settled: common practice, no source

bool by_feedback(const converter& c)
{
    return !c.feedback_net.empty() && c.feedback.contains("threshold");
}

std::string end_name(const dc_network& n, const circuit::output_end& e)
{
    using of = circuit::output_end::of;
    const auto element_of = [&](const std::vector<int>& index) {
        const auto it = std::find(index.begin(), index.end(), e.index);
        return it == index.end() ? std::string("?") : n.elements[static_cast<std::size_t>(it - index.begin())].ref;
    };
    switch (e.what) {
    case of::branch:
        return element_of(n.branch_of);
    case of::track:
        return element_of(n.track_of) + " track";
    case of::track_position:
        return element_of(n.track_of) + " wiper";
    case of::threshold:
        return "threshold";
    case of::bias:
        return "bias current";
    case of::source:
        return static_cast<std::size_t>(e.index) < n.source_names.size() ? n.source_names[static_cast<std::size_t>(e.index)] : "a held net";
    }
    return "?";
}

std::string end_word(char c)
{
    return c == 'l' ? "low" : c == 'h' ? "high" : "inside";
}

/// The set point from the feedback net: the output that holds the threshold, at its worst.
void find_set_point(const supply& s, const library& lib, rail& r)
{
    r.basis = "held by " + s.stage->feedback_net;
    const dc_network whole = build_network(s, lib, r, state::no_load, over::whole, true);
    const circuit::solution at_worst = circuit::solve(whole.net);
    const circuit::solution in_use = circuit::solve(build_network(s, lib, r, state::no_load, over::in_use, true).net);
    std::vector<std::string> missing;
    for (const std::string& net : {s.stage->feedback_net}) {
        if (const auto it = whole.missing.find(whole.node.at(net)); it != whole.missing.end()) {
            missing = it->second;
        }
    }
    if (at_worst.feedback_lost) {
        r.feedback_lost = missing.empty();
        r.lost_why = "at some setting " + s.stage->feedback_net + " no longer depends on the output, or no output holds it";
        r.output =
            missing_value(value::type::number, missing.empty() ? std::vector<std::string>{"a set point: feedback is lost at some setting"} : missing);
        return;
    }
    r.output = to_value(in_use.output, at_worst.output, dim::voltage);
    r.output.missing = missing;
    for (const circuit::output_end& e : at_worst.set_by) {
        r.set_by.push_back({end_name(whole, e), end_word(e.at_low), end_word(e.at_high)});
    }
    r.output.shown.formula = "the output at which V(" + s.stage->feedback_net + ") = threshold, nodal solve";
    const field& threshold = s.stage->feedback.at("threshold");
    r.output.shown.inputs.push_back(input_of("threshold", threshold));
    for (const rail::end& e : r.set_by) {
        const part* p = s.find_part(e.part.substr(0, e.part.find(' ')));
        if (p == nullptr) {
            continue;
        }
        if (const field* f = p->find("value")) {
            r.output.shown.inputs.push_back(input_of(p->ref + ".value", *f));
        }
    }
}

void find_output(const supply& s, const library& lib, rail& r)
{
    const converter& c = *s.stage;
    if (const field* declared = c.find("output-voltage")) {
        r.output = number(*declared->number());
        r.output.shown = {"as declared", {input_of(c.name + ".output-voltage", *declared)}, false, 0.0};
        r.basis = "as declared";
        if (!std::isfinite(declared->number()->whole.high)) {
            r.output.missing.push_back(c.name + ".output-voltage: its highest figure");
        }
    } else if (by_feedback(c)) {
        find_set_point(s, lib, r);
    } else {
        r.output = missing_value(value::type::number, {c.name + ".output-voltage, or feedback with its threshold"});
    }
}

/// Stage stopped and settled: a boost rail stays near the input, a ladder's no higher than that, a flyback's sinks to nothing where something surely
/// discharges it; else anywhere up to the output.
void find_standby(const supply& s, bool discharged, rail& r)
{
    const value in = written_value(s.fed.voltage, value::type::number, "input.voltage");
    const bool settles = r.topology != "module" && discharged;
    if (r.topology == "boost" || (r.topology == "boost-multiplier" && settles)) {
        double drop = unbounded;
        if (r.topology == "boost") {
            drop = rectifier_drop;
        }
        r.standby = in;
        for (spread& v : r.standby.numbers) {
            v.in_use.low = std::max(0.0, v.in_use.low - drop);
            v.whole.low = std::max(0.0, v.whole.low - drop);
            v.nominal.reset();
        }
        r.standby.shown.formula = r.topology == "boost" ? "input through coil and rectifier" : "at most the input, through coil and ladder";
        return;
    }
    if (settles) {
        r.standby = number(exactly({0.0, dim::voltage}));
        r.standby.shown.formula = "nothing feeds it, soldered resistances discharge it";
        return;
    }
    r.standby = r.output;
    for (spread& v : r.standby.numbers) {
        v.in_use.low = v.whole.low = 0.0;
        v.nominal.reset();
    }
}

/// A part's own bodies where it is a string.
void add_bodies(const supply& s, const std::string& ref, std::vector<std::string>& list)
{
    if (ref.empty()) {
        return;
    }
    for (const part& p : s.parts) {
        if (p.ref == ref || p.ref.starts_with(ref + "/")) {
            list.push_back(p.ref);
        }
    }
}

void find_nets(const supply& s, rail& r)
{
    const converter& c = *s.stage;
    r.topology = c.topology;
    if (c.outputs.size() == 2) {
        r.positive = c.outputs[0];
        r.negative = c.outputs[1];
    }
    add_bodies(s, c.power_switch, r.stage_parts);
    add_bodies(s, c.rectifier, r.stage_parts);
    for (const std::string& ref : c.ladder) {
        const part* p = s.find_part(ref);
        if (p == nullptr || p->kind == "diode") {
            add_bodies(s, ref, r.stage_parts);
        }
    }
    if (c.clamp) {
        add_bodies(s, c.clamp->diode, r.stage_parts);
    }
    r.gate_net = c.gate;
    const part* power_switch = first_body(s, c.power_switch);
    if (power_switch != nullptr && r.topology != "module" && !r.topology.empty()) {
        r.switch_net = power_switch->terminals.front().net;
        r.switch_return = power_switch->terminals.back().net;
    }
}

} // namespace

rail find_rail(const supply& s, const library& lib)
{
    rail r;
    if (!s.stage) {
        r.output = missing_value(value::type::number, {"a [converter]"});
        r.standby = r.peak = r.output;
        return r;
    }
    find_nets(s, r);
    find_output(s, lib, r);
    const bool discharged = sure_conductance(s, lib, r, true) > 0.0;
    find_stage(s, lib, r);
    find_standby(s, discharged, r);
    find_peak(s, r);
    return r;
}

} // namespace onehand
