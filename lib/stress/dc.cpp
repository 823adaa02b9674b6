#include "stress/dc_network.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_bodies.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using form = element_spec::form;

bool held_by_feedback(const supply& s, const rail& output, state in)
{
    return in != state::standby && in != state::start_up && output.basis.starts_with("held by") && !output.feedback_lost &&
           !output.output.numbers.empty() && s.stage.has_value();
}

/// Both solutions of one state and the tables that turn them into values.
class dc_reader {
public:
    dc_reader(const supply& s, const library& lib, const rail& output, state in)
        : s_(s), rail_(output), whole_(build_network(s, lib, output, in, over::whole, held_by_feedback(s, output, in))),
          use_(build_network(s, lib, output, in, over::in_use, held_by_feedback(s, output, in))), at_whole_(circuit::solve(whole_.net)),
          at_use_(circuit::solve(use_.net))
    {
        out_.in = in;
        find_islands();
    }

    dc_solution run()
    {
        for (const auto& [net, node] : whole_.node) {
            out_.nets.push_back(net);
            if (floats(node) && !by_ladder(net)) {
                out_.floating.insert(net);
            }
        }
        for (const auto& [net, node] : whole_.node) {
            out_.potential[net] = potential(net, node);
        }
        for (const auto& [a, i] : whole_.node) {
            for (const auto& [b, j] : whole_.node) {
                if (a < b) {
                    out_.between[{a, b}] = between(a, i, b, j);
                    if (together(i, j)) {
                        out_.solved.insert({a, b});
                    }
                }
            }
        }
        for (std::size_t e = 0; e < whole_.elements.size(); ++e) {
            if (whole_.elements[e].main) {
                add_body(e);
            }
        }
        add_others();
        for (auto& [ref, volts] : ladder_voltages(s_, rail_, out_.in)) {
            out_.bodies[ref].voltage = std::move(volts);
        }
        return std::move(out_);
    }

private:
    bool solved() const { return !at_whole_.feedback_lost && !at_use_.feedback_lost; }
    bool floats(int node) const { return !solved() || at_whole_.floating[at(node)] || at_use_.floating[at(node)]; }
    bool together(int i, int j) const { return solved() && at_whole_.together[at(i)][at(j)] && at_use_.together[at(i)][at(j)]; }
    static std::size_t at(int i) { return static_cast<std::size_t>(i); }

    /// Nets that something unknown touches, and everything those reach without passing a held net, share what is missing.
    void find_islands()
    {
        std::set<int> held{0};
        for (const circuit::source& s : whole_.net.sources) {
            held.insert(s.plus);
            held.insert(s.minus);
        }
        if (whole_.net.held) {
            held.insert(whole_.net.held->plus);
            held.insert(whole_.net.held->minus);
        }
        // What a fuse, a wire or a coil makes one with a held net is held too.
        for (bool grew = true; grew;) {
            grew = false;
            for (const element& e : whole_.elements) {
                const int from = whole_.node.at(e.from);
                const int to = whole_.node.at(e.to);
                if (joins_nets(e) && held.contains(from) != held.contains(to)) {
                    held.insert({from, to});
                    grew = true;
                }
            }
        }
        held_ = held;
        for (bool grew = true; grew;) {
            grew = false;
            for (const element& e : whole_.elements) {
                if (!may_conduct(e)) {
                    continue;
                }
                std::vector<std::string> ends{e.from, e.to};
                if (!e.wiper.empty()) {
                    ends.push_back(e.wiper);
                }
                std::set<std::string> all;
                for (const std::string& n : ends) {
                    const int node = whole_.node.at(n);
                    if (!held.contains(node) && whole_.missing.contains(node)) {
                        all.insert(whole_.missing[node].begin(), whole_.missing[node].end());
                    }
                }
                for (const std::string& n : ends) {
                    const int node = whole_.node.at(n);
                    auto& list = whole_.missing[node];
                    for (const std::string& name : all) {
                        if (!held.contains(node) && std::find(list.begin(), list.end(), name) == list.end()) {
                            list.push_back(name);
                            grew = true;
                        }
                    }
                }
            }
        }
    }

    void add_missing(value& v, int node) const
    {
        const auto it = whole_.missing.find(node);
        const bool holds = held_.contains(node) && node != 0;
        if (it != whole_.missing.end() && !holds && node != 0) {
            value other;
            other.missing = it->second;
            inherit(v, other);
        }
    }

    void add_assumed(value& v, const std::string& net) const
    {
        if (whole_.assumed_nets.contains(net)) {
            inherit(v, with_assumptions(rail_.peak));
        }
    }

    static value with_assumptions(const value& from)
    {
        value v;
        v.assumed = from.assumed;
        return v;
    }

    value raw(int a, int b) const
    {
        return solved() ? to_value(at_use_.voltage[at(a)][at(b)], at_whole_.voltage[at(a)][at(b)], dim::voltage) : value{};
    }

    /// Everything that a net nothing holds touches through a part or a gap: it may stand anywhere between those.
    std::set<int> touched(const std::string& net) const
    {
        std::set<int> nodes;
        std::set<std::string> seen{net};
        std::vector<std::string> todo{net};
        const auto visit = [&](const std::string& other) {
            if (other == "*" || !whole_.node.contains(other)) {
                return;
            }
            const int node = whole_.node.at(other);
            if (!floats(node)) {
                nodes.insert(node);
            } else if (seen.insert(other).second) {
                todo.push_back(other);
            }
        };
        while (!todo.empty()) {
            const std::string here = todo.back();
            todo.pop_back();
            for (const part& p : s_.parts) {
                if (std::any_of(p.terminals.begin(), p.terminals.end(), [&](const terminal& t) { return t.net == here; })) {
                    for (const terminal& t : p.terminals) {
                        visit(t.net);
                    }
                }
            }
            for (const gap& g : s_.gaps) {
                if (std::find(g.nets.begin(), g.nets.end(), here) != g.nets.end()) {
                    for (const std::string& n : g.nets) {
                        visit(n);
                    }
                }
            }
        }
        return nodes;
    }

    /// A net of the ladder that nothing else touches is told by the ladder.
    bool by_ladder(const std::string& net) const { return out_.in != state::standby && rail_.rungs.alone(s_, net); }

    value potential(const std::string& net, int node) const
    {
        if (const auto units = rail_.rungs.between(net, s_.return_net); units && by_ladder(net)) {
            value told = hull(in_units(ladder_port(rail_, out_.in), units->low), in_units(ladder_port(rail_, out_.in), units->high));
            told.shown.formula = "V(" + net + "), unloaded ladder";
            return told;
        }
        value v = raw(node, 0);
        if (floats(node)) {
            for (const int other : touched(net)) {
                v = v.numbers.empty() ? raw(other, 0) : hull(v, raw(other, 0));
            }
            v.shown.formula = "nothing holds " + net + ": anywhere between the nets it touches";
            if (v.numbers.empty()) {
                v.missing.push_back("what holds " + net);
            }
        } else {
            v.shown.formula = "V(" + net + "), nodal solve";
        }
        add_missing(v, node);
        add_assumed(v, net);
        return v;
    }

    value between(const std::string& a, int i, const std::string& b, int j) const
    {
        value v;
        const auto held = [&](const std::string& net) { return net == s_.return_net || net == rail_.positive || net == rail_.negative; };
        const auto units = held(a) && held(b) ? std::nullopt : rail_.rungs.between(a, b);
        if (units && out_.in != state::standby && !rail_.port.numbers.empty()) {
            // Both hang on the same ladder: they move together.
            v = hull(in_units(ladder_port(rail_, out_.in), units->low), in_units(ladder_port(rail_, out_.in), units->high));
            v.shown.formula = "V(" + a + ") - V(" + b + "), unloaded ladder";
            return v;
        }
        if (!together(i, j)) {
            // Bounded by both ends' own bounds; no closer, since nothing ties them.
            const value x = out_.potential.at(a);
            value y = out_.potential.at(b);
            for (spread& s : y.numbers) {
                s = negated(s);
            }
            v = sum(x, y);
            v.shown.formula = "V(" + a + ") - V(" + b + "), one of them floating";
        } else {
            v = raw(i, j);
            v.shown.formula = "V(" + a + ") - V(" + b + "), nodal solve";
        }
        add_missing(v, i);
        add_missing(v, j);
        add_assumed(v, a);
        add_assumed(v, b);
        if (v.numbers.empty() && v.missing.empty()) {
            v.missing.push_back("V(" + a + ") - V(" + b + ")");
        }
        return v;
    }

    void add_body(std::size_t index)
    {
        const element& e = whole_.elements[index];
        body_solution b;
        b.voltage = out_.voltage(e.from, e.to);
        if (const int track = whole_.track_of[index]; track >= 0 && solved()) {
            b.track_current = to_value(at_use_.track_current[at(track)], at_whole_.track_current[at(track)], dim::current);
            b.power = to_value(at_use_.track_power[at(track)], at_whole_.track_power[at(track)], dim::power);
            b.current = *b.track_current;
            b.span_voltage = hull(hull(magnitude(b.voltage), magnitude(out_.voltage(e.from, e.wiper))), magnitude(out_.voltage(e.wiper, e.to)));
            b.span_voltage->shown.formula = "greatest voltage between two terminals of the trimmer";
            b.track_current->shown.formula = "greater section current, wiper anywhere in its travel";
            b.power.shown.formula = "both sections, wiper anywhere in its travel";
        } else if (std::any_of(e.forms.begin(), e.forms.end(), [](form f) { return f == form::closed || f == form::inductance; })) {
            // What is closed joins its nets: the nodal solve tells no current through it, least of all none.
            b.current = missing_value(value::type::number, {"the current through " + e.ref});
            b.power = missing_value(value::type::number, {"the power in " + e.ref});
        } else if (const int branch = whole_.branch_of[index]; branch >= 0 && solved()) {
            b.current = to_value(at_use_.current[at(branch)], at_whole_.current[at(branch)], dim::current);
            b.power = to_value(at_use_.power[at(branch)], at_whole_.power[at(branch)], dim::power);
            b.current.shown.formula = "current through " + e.ref + ", nodal solve";
            b.power.shown.formula = "V^2/R of " + e.ref + ", spread jointly";
        }
        const bool floating = !together(whole_.node.at(e.from), whole_.node.at(e.to));
        for (value* v : {&b.voltage, &b.current, &b.power}) {
            inherit_ends(*v, e);
            // Across a part that floats in some case the current and power of the other cases are told; a resistance there may see its whole bound.
            if (floating && v != &b.voltage) {
                bound_by_voltage(*v, b.voltage, e, v == &b.power);
            }
            const auto found = e.values.find(form::resistance);
            if (found != e.values.end() && !found->second.shown.inputs.empty() && v != &b.voltage) {
                v->shown.inputs = found->second.shown.inputs;
            }
        }
        out_.bodies[e.ref] = std::move(b);
    }

    void inherit_ends(value& v, const element& e) const
    {
        add_missing(v, whole_.node.at(e.from));
        add_missing(v, whole_.node.at(e.to));
        for (const auto& [f, given] : e.values) {
            if (given.numbers.empty()) {
                value other;
                other.missing = given.missing;
                inherit(v, other);
            }
        }
    }

    static void bound_by_voltage(value& v, const value& volts, const element& e, bool power)
    {
        const auto ohms = e.values.find(form::resistance);
        if (ohms == e.values.end() || ohms->second.numbers.empty() || volts.numbers.empty()) {
            return;
        }
        const spread& u = volts.numbers.front();
        const spread& r = ohms->second.numbers.front();
        if (!(r.whole.low > 0.0)) {
            return;
        }
        const auto bound = [&](const range& ur, const range& rr) {
            const double most = std::max(std::abs(ur.low), std::abs(ur.high));
            return power ? range{0.0, most * most / rr.low} : range{std::min(0.0, ur.low / rr.low), std::max(0.0, ur.high / rr.low)};
        };
        value wide;
        wide.numbers.push_back({power ? dim::power : dim::current, bound(u.in_use, r.in_use), bound(u.whole, r.whole), std::nullopt});
        const evidence shown = v.shown;
        v = hull(v, wide);
        v.shown.formula = shown.formula;
        v.shown.inputs = shown.inputs;
    }

    /// Parts whose main terminals carry no element of this state (a capacitor, a rectifier): their voltage follows from the nets.
    void add_others()
    {
        for (const part& p : s_.parts) {
            if (out_.bodies.contains(p.ref) || p.terminals.size() < 2) {
                continue;
            }
            body_solution b;
            if (s_.stage && of(p, s_.stage->power_switch)) {
                b.voltage = out_.in == state::standby ? out_.voltage(p.terminals.front().net, p.terminals.back().net) : stage_voltage();
            } else if (s_.stage && of(p, s_.stage->rectifier)) {
                // Each body of a string may have to block all of it: the one that leaks least does.
                b.voltage = rectifier_voltage(s_, rail_, out_.in);
            } else {
                b.voltage = out_.voltage(p.terminals[0].net, p.terminals[1].net);
            }
            out_.bodies[p.ref] = std::move(b);
        }
    }

    static bool of(const part& p, const std::string& ref) { return !ref.empty() && (p.ref == ref || p.ref.starts_with(ref + "/")); }

    value stage_voltage() const
    {
        value v = rail_.peak;
        for (spread& s : v.numbers) {
            s.in_use.low = s.whole.low = 0.0;
            s.nominal.reset();
        }
        return v;
    }

    const supply& s_;
    const rail& rail_;
    dc_network whole_;
    dc_network use_;
    circuit::solution at_whole_;
    circuit::solution at_use_;
    std::set<int> held_;
    dc_solution out_;
};

} // namespace

value dc_solution::voltage(const std::string& a, const std::string& b) const
{
    if (a == b) {
        return number(exactly({0.0, dim::voltage}));
    }
    const bool turned = b < a;
    const auto it = between.find(turned ? std::pair(b, a) : std::pair(a, b));
    if (it == between.end()) {
        return missing_value(value::type::number, {"V(" + a + ") - V(" + b + ")"});
    }
    value v = it->second;
    if (turned) {
        for (spread& s : v.numbers) {
            s = negated(s);
        }
    }
    return v;
}

dc_solution solve_dc(const supply& s, const library& lib, const rail& output, state in)
{
    return dc_reader(s, lib, output, in).run();
}

value current_through(const supply& s, const library& lib, const rail& output, state in, const std::string& a, const std::string& b, double ohms)
{
    supply touched = s;
    part body;
    body.ref = "body";
    body.kind = "meter";
    body.terminals = {{"first", a, {}}, {"second", b, {}}};
    body.fields["resistance"] = {exactly({ohms, dim::resistance}), {}, "2 kohm", {}};
    touched.parts.push_back(std::move(body));
    // The rail is held at what it was: what a body on the divider does to the set point is left to the converter.
    rail stiff = output;
    stiff.basis = "as declared";
    value v = dc_reader(touched, lib, stiff, in).run().bodies["body"].current;
    v.shown.formula = "through 2 kohm, the rail taken as stiff";
    return v;
}

} // namespace onehand
