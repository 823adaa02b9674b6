#include "stress/dc_network.hpp"

#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using form = element_spec::form;

class network_builder {
public:
    network_builder(const supply& s, const rail& output, state in, over which, bool held) : s_(s), rail_(output), in_(in), which_(which), held_(held)
    {
        out_.node[s.return_net] = 0;
    }

    dc_network run(const library& lib)
    {
        for (const std::string& net : s_.nets) {
            node(net);
        }
        hold_input();
        hold_output();
        hold_stage();
        hold_secondary();
        hold_ladder();
        hold_gate();
        for (element& e : wire(s_, lib, in_, rail_.stage_parts)) {
            add(std::move(e));
        }
        bond_chassis();
        out_.net.nodes = static_cast<int>(out_.node.size());
        return std::move(out_);
    }

private:
    int node(const std::string& net)
    {
        const auto [it, fresh] = out_.node.emplace(net, static_cast<int>(out_.node.size()));
        static_cast<void>(fresh);
        return it->second;
    }

    void hold(const std::string& plus, const std::string& minus, const value& v, const std::string& name)
    {
        // What is told on one side only holds nothing: a corner without an end would be left out of the search.
        const bool bounded = std::all_of(v.numbers.begin(), v.numbers.end(), [](const spread& s) { return s.whole.bounded(); });
        if (v.numbers.empty() || !bounded) {
            out_.unheld.push_back(name);
            for (const std::string& net : {plus, minus}) {
                if (net != s_.return_net) {
                    auto& list = out_.missing[node(net)];
                    list.insert(list.end(), v.missing.begin(), v.missing.end());
                    if (v.missing.empty()) {
                        list.push_back(name + ": its highest or lowest figure");
                    }
                }
            }
            return;
        }
        out_.net.sources.push_back({node(plus), node(minus), box_of(v, which_)});
        out_.source_names.push_back(name);
        if (!v.assumed.empty()) {
            out_.assumed_nets.insert(plus);
        }
    }

    void hold_input()
    {
        if (s_.fed.nets.size() == 2) {
            hold(s_.fed.nets[0], s_.fed.nets[1], written_value(s_.fed.voltage, value::type::number, "input.voltage"), "input.voltage");
        }
    }

    void hold_output()
    {
        if (rail_.positive.empty()) {
            return;
        }
        if (in_ == state::standby) {
            hold(rail_.positive, rail_.negative, rail_.standby, "output in standby");
        } else if (in_ == state::start_up) {
            hold(rail_.positive, rail_.negative, rail_.start_up, "output at start-up");
        } else if (held_) {
            const field* bias = s_.stage->feedback.contains("bias-current") ? &s_.stage->feedback.at("bias-current") : nullptr;
            out_.net.held = circuit::held_output{node(rail_.positive),
                                                 node(rail_.negative),
                                                 node(s_.stage->feedback_net),
                                                 node(s_.stage->feedback_return),
                                                 box_of(*s_.stage->feedback.at("threshold").number(), which_),
                                                 bias == nullptr ? circuit::box{} : box_of(*bias->number(), which_)};
        } else {
            hold(rail_.positive, rail_.negative, rail_.output, "output");
        }
    }

    static value from_nothing(value v)
    {
        for (spread& s : v.numbers) {
            s.in_use.low = std::min(0.0, s.in_use.low);
            s.whole.low = std::min(0.0, s.whole.low);
        }
        return v;
    }

    /// The switch node swings from the switch's return to the peak.
    void hold_stage()
    {
        if (in_ == state::standby || rail_.switch_net.empty()) {
            return;
        }
        hold(rail_.switch_net, rail_.switch_return, from_nothing(rail_.peak), "switch node");
        if (!rail_.clamp_net.empty() && rail_.clamp_net != rail_.clamp_return) {
            hold(rail_.clamp_net, rail_.clamp_return, from_nothing(rail_.clamp_voltage), "clamp");
        }
    }

    void hold_secondary()
    {
        if (in_ != state::standby && !rail_.secondary_net.empty()) {
            hold(rail_.secondary_net, rail_.secondary_return, rail_.secondary_swing, "secondary");
        }
    }

    /// Each net of a ladder stands, or moves with the switch node, above where the diodes have pumped it.
    void hold_ladder()
    {
        const ladder& l = rail_.rungs;
        if (!l.there || in_ == state::standby) {
            return;
        }
        for (const auto& [net, at] : l.nets) {
            const bool known = net == s_.return_net || net == rail_.positive || net == rail_.negative || net == rail_.switch_net;
            const auto units = l.between(net, s_.return_net).value_or(range{at.base, at.base + (at.moving ? 1.0 : 0.0)});
            if (!known && !l.alone(s_, net)) {
                hold(net, s_.return_net, times(rail_.port, units), "ladder net " + net);
            }
        }
    }

    static value times(value port, const range& units)
    {
        for (spread& s : port.numbers) {
            for (range* r : {&s.in_use, &s.whole}) {
                *r = {std::min({0.0, units.low * r->high, units.high * r->high}), std::max({0.0, units.low * r->high, units.high * r->high})};
            }
            s.nominal.reset();
        }
        return port;
    }

    /// The driver is fed from the input: the gate stands anywhere from the switch's return to the highest input.
    void hold_gate()
    {
        if (!rail_.switch_return.empty() && !rail_.gate_net.empty() && s_.fed.voltage && s_.fed.voltage->number() != nullptr) {
            value gate = number(*s_.fed.voltage->number());
            for (spread& s : gate.numbers) {
                s.in_use.low = s.whole.low = 0.0;
            }
            hold(rail_.gate_net, rail_.switch_return, gate, "gate");
        }
    }

    void bond_chassis()
    {
        const bool bonded = s_.return_bonded && s_.return_bonded->truth() != nullptr && *s_.return_bonded->truth();
        if (!s_.chassis.empty() && bonded) {
            out_.net.branches.push_back({node(s_.chassis), 0, {{circuit::form::closed, {}}}});
        }
    }

    void add(element e)
    {
        // A coil is held at both ends while the stage runs; its own voltage is the stage's.
        // So are the windings of a transformer, whose secondary is held as it swings.
        const bool stage_coil = in_ != state::standby && !rail_.switch_net.empty() && s_.stage && e.ref == s_.stage->inductor;
        const int from = node(e.from);
        const int to = node(e.to);
        if (stage_coil) {
            return;
        }
        if (!e.wiper.empty()) {
            add_track(std::move(e), from, to);
            return;
        }
        circuit::branch b{from, to, {}};
        for (const form f : e.forms) {
            b.options.push_back(option_of(e, f));
        }
        if (held_ && senses(e)) {
            // It conducts where the feedback holds: dark there would be no set point.
            std::erase_if(b.options, [](const circuit::option& o) { return o.is != circuit::form::clamp; });
            for (circuit::option& o : b.options) {
                o.is = circuit::form::fixed;
            }
        }
        const bool spans = std::any_of(e.forms.begin(), e.forms.end(), [](form f) { return f == form::current; });
        if (spans && e.forms.size() == 1) {
            b.options.push_back({circuit::form::open, {}}); // a load draws from none to its most
        }
        out_.track_of.push_back(-1);
        out_.branch_of.push_back(static_cast<int>(out_.net.branches.size()));
        out_.net.branches.push_back(std::move(b));
        out_.elements.push_back(std::move(e));
    }

    /// A zener that the feedback names.
    bool senses(const element& e) const
    {
        const auto& list = s_.stage->zeners;
        return std::any_of(list.begin(), list.end(), [&](const std::string& ref) { return e.ref == ref || e.ref.starts_with(ref + "/"); });
    }

    void add_track(element e, int from, int to)
    {
        const value& v = e.values[form::track];
        circuit::track t{from, node(e.wiper), to, {1e-3, 1e15}, box_of(e.position, which_)};
        if (v.numbers.empty()) {
            note_missing(from, v);
            note_missing(t.wiper, v);
            note_missing(to, v);
        } else {
            t.resistance = box_of(v, which_);
        }
        out_.branch_of.push_back(-1);
        out_.track_of.push_back(static_cast<int>(out_.net.tracks.size()));
        out_.net.tracks.push_back(t);
        out_.elements.push_back(std::move(e));
    }

    void note_missing(int at, const value& v)
    {
        auto& list = out_.missing[at];
        list.insert(list.end(), v.missing.begin(), v.missing.end());
    }

    circuit::option option_of(const element& e, form f)
    {
        const auto found = e.values.find(f);
        const bool valued = found != e.values.end();
        if (valued && (found->second.numbers.empty() || !found->second.numbers.front().whole.bounded())) {
            note_missing(node(e.from), found->second);
            note_missing(node(e.to), found->second);
        }
        const bool known = valued && !found->second.numbers.empty();
        switch (f) {
        case form::closed:
        case form::inductance:
            return {circuit::form::closed, {}};
        case form::resistance:
            return {circuit::form::resistance, known ? box_of(found->second, which_) : circuit::box{0.0, unbounded}};
        case form::clamp:
            return known && found->second.numbers.front().whole.bounded() ? circuit::option{circuit::form::clamp, box_of(found->second, which_)}
                                                                          : circuit::option{};
        case form::current:
            return known && found->second.numbers.front().whole.bounded() ? circuit::option{circuit::form::current, box_of(found->second, which_)}
                                                                          : circuit::option{};
        default:
            return {};
        }
    }

    const supply& s_;
    const rail& rail_;
    state in_;
    over which_;
    bool held_;
    dc_network out_;
};

} // namespace

circuit::box box_of(const spread& s, over which)
{
    const range& r = which == over::in_use ? s.in_use : s.whole;
    return {r.low, r.high};
}

circuit::box box_of(const value& v, over which)
{
    circuit::box b = box_of(v.numbers.front(), which);
    for (const spread& s : v.numbers) {
        const circuit::box o = box_of(s, which);
        b = {std::min(b.low, o.low), std::max(b.high, o.high)};
    }
    return b;
}

dc_network build_network(const supply& s, const library& lib, const rail& output, state in, over which, bool held_by_feedback)
{
    return network_builder(s, output, in, which, held_by_feedback).run(lib);
}

value to_value(const circuit::extreme& in_use, const circuit::extreme& whole, const dimension& d)
{
    value v;
    if (!whole.known) {
        return v;
    }
    // Rounding of the solver is no voltage: what lies a trillion times below a volt, an ampere or a watt is nothing.
    const auto tidy = [](double x) { return std::abs(x) < 1e-12 ? 0.0 : x; };
    const double low = std::min(in_use.known ? in_use.low : whole.low, whole.low);
    const double high = std::max(in_use.known ? in_use.high : whole.high, whole.high);
    const range use = in_use.known ? range{tidy(in_use.low), tidy(in_use.high)} : range{tidy(low), tidy(high)};
    v.numbers.push_back({d, use, {tidy(low), tidy(high)}, std::nullopt});
    if (use.low == use.high) {
        v.numbers.back().nominal = use.low;
    }
    v.shown.searched = in_use.searched || whole.searched;
    v.shown.margin = std::max(in_use.margin, whole.margin);
    return v;
}

} // namespace onehand
