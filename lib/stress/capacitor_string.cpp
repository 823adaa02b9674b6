// Capacitors in series: how the string divides a voltage at once by capacitance and in the end by leakage and balancing resistors.
#include "stress/part_facts.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

constexpr double damping = 1000.0; // ohm: up to here a resistor between two capacitors joins them (practice); balancing takes far more

/// Nets that wires, coils, fuses, closed switches and damping resistors make one, each named by its first.
class joined_nets {
public:
    explicit joined_nets(const solved_supply& s)
    {
        using form = element_spec::form;
        for (const element& e : wire(s.bodies(), s.data(), state::running, s.output().stage_parts)) {
            const auto ohms = e.values.find(form::resistance);
            const bool small =
                e.wiper.empty() && ohms != e.values.end() && !ohms->second.numbers.empty() && ohms->second.numbers.front().whole.high <= damping;
            if ((small || joins_nets(e)) && root(e.from) != root(e.to)) {
                parent_[root(e.from)] = root(e.to);
            }
        }
    }
    std::string root(std::string net) const
    {
        for (auto it = parent_.find(net); it != parent_.end(); it = parent_.find(net)) {
            net = it->second;
        }
        return net;
    }
    bool touches(const part& p, const std::string& net) const
    {
        return std::any_of(p.terminals.begin(), p.terminals.end(), [&](const terminal& t) { return root(t.net) == root(net); });
    }
    /// A part with both ends on one joined net stands across nothing.
    bool inside(const part& p) const { return p.terminals.size() == 2 && root(p.terminals[0].net) == root(p.terminals[1].net); }
    std::string other_end(const part& p, const std::string& net) const
    {
        return root(root(p.terminals[0].net) == root(net) ? p.terminals[1].net : p.terminals[0].net);
    }

private:
    std::map<std::string, std::string> parent_;
};

/// The capacitor beyond a junction of two capacitors that nothing but resistors across either of them touches.
const part* next_in_string(const solved_supply& s, const joined_nets& nets, const part& c, const std::string& junction)
{
    const supply& built = s.bodies();
    std::vector<std::string> held{built.return_net, s.output().positive, s.output().negative};
    held.insert(held.end(), built.fed.nets.begin(), built.fed.nets.end());
    if (std::any_of(held.begin(), held.end(), [&](const std::string& net) { return !net.empty() && nets.root(net) == nets.root(junction); })) {
        return nullptr;
    }
    const part* next = nullptr;
    for (const part& p : built.parts) {
        if (p.ref == c.ref || !nets.touches(p, junction) || nets.inside(p)) {
            continue;
        }
        if (p.kind == "capacitor") {
            if (next != nullptr) {
                return nullptr; // more than two meet here
            }
            next = &p;
        } else if (p.kind != "resistor") {
            return nullptr;
        }
    }
    if (next == nullptr) {
        return nullptr;
    }
    const std::set<std::string> ends{nets.other_end(c, junction), nets.other_end(*next, junction)};
    const bool only_across = std::all_of(built.parts.begin(), built.parts.end(), [&](const part& p) {
        return p.kind != "resistor" || !nets.touches(p, junction) || nets.inside(p) || ends.contains(nets.other_end(p, junction));
    });
    return only_across ? next : nullptr;
}

/// Resistors straight across a capacitor.
std::vector<const part*> balancers(const solved_supply& s, const part& c)
{
    const joined_nets nets(s);
    std::vector<const part*> list;
    for (const part& p : s.bodies().parts) {
        if (p.kind == "resistor" && !nets.inside(p) && nets.touches(p, c.terminals[0].net) && nets.touches(p, c.terminals[1].net)) {
            list.push_back(&p);
        }
    }
    return list;
}

/// Those resistors together, over their tolerance; no upper end without any of known value.
range balancing_ohms(const solved_supply& s, const part& c)
{
    range siemens{0.0, 0.0};
    for (const part* p : balancers(s, c)) {
        const field* ohms = p->find("value");
        if (ohms != nullptr && ohms->number() != nullptr && ohms->number()->whole.low > 0.0) {
            siemens.low += 1.0 / ohms->number()->whole.high;
            siemens.high += 1.0 / ohms->number()->whole.low;
        }
    }
    return siemens.low > 0.0 ? range{1.0 / siemens.high, 1.0 / siemens.low} : range{unbounded, unbounded};
}

value string_voltage(const solved_supply& s, const capacitor_string& chain)
{
    value v;
    for (const dc_solution& d : s.states()) {
        const value one = magnitude(d.voltage(chain.from, chain.to));
        v = v.numbers.empty() && v.missing.empty() ? one : greater(v, one);
    }
    return v;
}

/// The greatest resistance across one that leaks nothing while the others, S across them in all, leak the most: R (U + I S) <= U_rated (R + S).
double limit_beside(double others, double bus, double rated, double leakage)
{
    if (!std::isfinite(others)) {
        return rated / leakage;
    }
    const double over = bus + leakage * others - rated;
    constexpr double any = 1e15; // ohm: more than any resistor
    return over > 0.0 ? std::min(any, rated * others / over) : any;
}

/// With equal resistors (n U_rated - U_bus)/((n - 1) dI); tolerance counts, so the others are taken at either end of theirs.
value balancing_limit(const solved_supply& s, const part& p, const capacitor_string& chain)
{
    const value bus = string_voltage(s, chain);
    value v;
    inherit(v, bus);
    double leakage = 0.0;
    double rated = unbounded;
    range others{0.0, 0.0};
    for (const part* member : chain.members) {
        if (member->ref != p.ref) {
            const range ohms = balancing_ohms(s, *member);
            others = {others.low + ohms.low, others.high + ohms.high};
        }
        const value one = leakage_of(s, *member);
        inherit(v, one);
        leakage = std::max(leakage, highest(one).value_or(0.0));
        const field* volts = member->find("rated-voltage");
        if (volts == nullptr || volts->number() == nullptr) {
            v.missing.push_back(member->ref + ".rated-voltage");
        } else {
            rated = std::min(rated, volts->number()->whole.low);
        }
    }
    const auto most = highest(bus);
    if (!v.missing.empty() || !most || !std::isfinite(rated) || leakage <= 0.0) {
        if (v.missing.empty()) {
            v.missing.push_back(p.ref + ".leakage");
        }
        return v;
    }
    const double ohms = std::min(limit_beside(others.low, *most, rated, leakage), limit_beside(others.high, *most, rated, leakage));
    v.numbers.push_back(exactly({ohms, dim::resistance}));
    v.shown.formula = "U_rated S/(U + S I_leak - U_rated), S across the others, n = " + std::to_string(chain.members.size());
    return v;
}

/// By capacitance alone, the smallest at its least against the others at their greatest.
value initial_share(const solved_supply& s, const part& p, const capacitor_string& chain)
{
    value v = string_voltage(s, chain);
    double own = 0.0;
    double all = 0.0;
    for (const part* member : chain.members) {
        const field* farads = member->find("value");
        if (farads == nullptr || farads->number() == nullptr || farads->number()->whole.low <= 0.0) {
            v.missing.push_back(member->ref + ".value");
            continue;
        }
        const bool self = member->ref == p.ref;
        const double inverse = 1.0 / (self ? farads->number()->whole.low : farads->number()->whole.high);
        own = self ? inverse : own;
        all += inverse;
    }
    for (spread& x : v.numbers) {
        x = scaled(x, all > 0.0 ? own / all : 1.0);
    }
    v.shown.formula = "U (1/C)/sum(1/C), this one at its least, the others at their greatest";
    return v;
}

} // namespace

std::optional<capacitor_string> string_of(const solved_supply& s, const part& p)
{
    const joined_nets nets(s);
    capacitor_string chain;
    chain.members = {&p};
    chain.from = p.terminals[0].net;
    chain.to = p.terminals[1].net;
    for (const bool forward : {true, false}) {
        std::string& end = forward ? chain.to : chain.from;
        const part* last = &p;
        while (const part* next = next_in_string(s, nets, *last, end)) {
            if (std::find(chain.members.begin(), chain.members.end(), next) != chain.members.end()) {
                return std::nullopt; // a ring divides nothing
            }
            chain.members.insert(forward ? chain.members.end() : chain.members.begin(), next);
            end = nets.other_end(*next, end);
            last = next;
        }
    }
    return chain.members.size() > 1 ? std::optional(chain) : std::nullopt;
}

value string_fact(const solved_supply& s, const part& p, const std::string& name)
{
    const auto chain = string_of(s, p);
    if (name == "in-series") {
        return truth_of(chain.has_value());
    }
    const double ohms = balancing_ohms(s, p).high;
    const std::vector<const part*> across = balancers(s, p);
    if (name == "balanced") {
        return truth_of(!across.empty());
    }
    if (name == "balancing-resistance") {
        return std::isfinite(ohms)
                   ? number(exactly({ohms, dim::resistance}))
                   : missing_value(value::type::number, {across.empty() ? "a resistor across " + p.ref : across.front()->ref + ".value"});
    }
    if (!chain) {
        return missing_value(value::type::number, {p.ref + " in a string"});
    }
    return name == "balancing-limit" ? balancing_limit(s, p, *chain) : initial_share(s, p, *chain);
}

} // namespace onehand
