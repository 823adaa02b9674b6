#include "stress/rail_load.hpp"

#include "circuit/network.hpp"
#include "stress/paths.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using form = element_spec::form;

constexpr double least_ohms = 1e-3; // of what is closed

std::set<std::string> joined_to(const supply& s, const library& lib, const rail& output, const std::string& net)
{
    const std::vector<element> all = wire(s, lib, state::running, output.stage_parts);
    return net.empty() ? std::set<std::string>{} : reach(all, net, [&](const element& e) {
        // A winding makes its two ends one for direct current, not for the stage.
        return joins_nets(e) && !(s.stage && e.ref == s.stage->inductor);
    });
}

bool touches(const part& p, const std::set<std::string>& nets)
{
    return std::any_of(p.terminals.begin(), p.terminals.end(), [&](const terminal& t) { return nets.contains(t.net); });
}

bool inside(const part& p, const std::set<std::string>& nets)
{
    return std::all_of(p.terminals.begin(), p.terminals.end(), [&](const terminal& t) { return nets.contains(t.net); });
}

bool of_stage(const supply& s, const rail& output, const part& p)
{
    const auto named = [&](const std::string& ref) { return p.ref == ref || p.ref.starts_with(ref + "/"); };
    return std::any_of(output.stage_parts.begin(), output.stage_parts.end(), named) || (s.stage && named(s.stage->inductor)) ||
           (s.stage && std::any_of(s.stage->ladder.begin(), s.stage->ladder.end(), named));
}

/// A load that is told by its power draws most where the rail is lowest.
value by_power(const part& p, const rail& output)
{
    const field* watts = p.find("power");
    if (watts == nullptr || watts->number() == nullptr || output.output.numbers.empty()) {
        return missing_value(value::type::number, {p.ref + ".current"});
    }
    const spread& w = *watts->number();
    const spread& u = output.output.numbers.front();
    const auto most = [](double power, double volts) { return volts > 0.0 ? power / volts : unbounded; };
    return number({dim::current, {0.0, most(w.in_use.high, u.in_use.low)}, {0.0, most(w.whole.high, u.whole.low)}, std::nullopt});
}

value drawn_by(const part& p, const rail& output, const dc_solution& running)
{
    if (p.kind == "load" && p.find("current") == nullptr) {
        return by_power(p, output);
    }
    const auto body = running.bodies.find(p.ref);
    if (body == running.bodies.end()) {
        return missing_value(value::type::number, {p.ref + ".current"});
    }
    const value& amps = body->second.track_current ? *body->second.track_current : body->second.current;
    return magnitude(amps);
}

} // namespace

std::set<std::string> live_nets(const supply& s, const library& lib, const rail& output)
{
    return joined_to(s, lib, output, output.positive == s.return_net ? output.negative : output.positive);
}

std::set<std::string> quiet_nets(const supply& s, const library& lib, const rail& output)
{
    return joined_to(s, lib, output, output.positive == s.return_net ? output.positive : output.negative);
}

value rail_load(const supply& s, const library& lib, const rail& output, const dc_solution& running)
{
    const std::set<std::string> live = live_nets(s, lib, output);
    value sum = number(exactly({0.0, dim::current}));
    for (const part& p : s.parts) {
        const std::vector<element> own = elements_of(p, lib, state::running);
        const bool only_joins = !own.empty() && std::all_of(own.begin(), own.end(), joins_nets); // what is beyond it is counted itself
        if (!touches(p, live) || inside(p, live) || only_joins || of_stage(s, output, p) || p.kind == "capacitor") {
            continue;
        }
        const value one = drawn_by(p, output, running);
        inherit(sum, one);
        for (const spread& x : one.numbers) {
            sum.numbers.front().in_use.high += std::max(0.0, x.in_use.high);
            sum.numbers.front().whole.high += std::max(0.0, x.whole.high);
        }
        sum.shown.inputs.push_back({p.ref, in_words(one), p.at});
    }
    sum.numbers.front().nominal.reset();
    sum.shown.formula = "sum of what hangs on the output, none to its most";
    return sum;
}

std::set<std::string> sense_nets(const supply& s, const library& lib, const rail& output)
{
    if (!s.stage || s.stage->feedback_net.empty()) {
        return {};
    }
    std::set<std::string> ends = live_nets(s, lib, output);
    ends.merge(quiet_nets(s, lib, output));
    ends.insert(s.return_net);
    ends.insert(s.fed.nets.begin(), s.fed.nets.end());
    const std::vector<element> all = wire(s, lib, state::no_load, output.stage_parts);
    std::set<std::string> chain;
    for (const std::string& net : {s.stage->feedback_net, s.stage->feedback_return}) {
        if (!ends.contains(net)) {
            chain.insert(net);
        }
    }
    for (bool grew = true; grew;) {
        grew = false;
        for (const element& e : all) {
            const bool of_chain = chain.contains(e.from) || chain.contains(e.to) || (!e.wiper.empty() && chain.contains(e.wiper));
            if (!may_conduct(e) || !of_chain) {
                continue;
            }
            for (const std::string& net : {e.from, e.to, e.wiper}) {
                grew = (!net.empty() && !ends.contains(net) && chain.insert(net).second) || grew;
            }
        }
    }
    return chain;
}

namespace {

/// The output's two nets as a network of resistances, each at one end of its box, fed with one volt.
class across_output {
public:
    across_output(const supply& s, const library& lib, const rail& output) : live_(live_nets(s, lib, output)), quiet_(quiet_nets(s, lib, output)) {}

    bool fed() const { return !live_.empty(); }

    void add(const element& e, double resistance)
    {
        if (at(e.from) != at(e.to)) {
            net_.branches.push_back({at(e.from), at(e.to), {{circuit::form::resistance, {resistance, resistance}}}});
        }
    }

    double siemens()
    {
        const int feed = static_cast<int>(node_.size()) + 2;
        net_.branches.push_back({feed, 1, {{circuit::form::resistance, {least_ohms, least_ohms}}}});
        net_.sources.push_back({feed, 0, {1.0, 1.0}});
        net_.nodes = feed + 1;
        return std::max(0.0, circuit::solve(net_).current.back().low);
    }

private:
    int at(const std::string& net)
    {
        return quiet_.contains(net) ? 0 : live_.contains(net) ? 1 : node_.emplace(net, static_cast<int>(node_.size()) + 2).first->second;
    }

    std::set<std::string> live_, quiet_;
    circuit::network net_;
    std::map<std::string, int> node_;
};

/// Resistance of an element at one end; nothing where it is not known or none.
std::optional<double> resistance_of(const element& e, bool high)
{
    const auto track = e.values.find(form::track);
    const auto found = track != e.values.end() ? track : e.values.find(form::resistance);
    if (found == e.values.end()) {
        return least_ohms;
    }
    if (found->second.numbers.empty() || !found->second.numbers.front().whole.bounded()) {
        return std::nullopt;
    }
    return high ? found->second.numbers.front().whole.high : found->second.numbers.front().whole.low;
}

} // namespace

double sure_conductance(const supply& s, const library& lib, const rail& output, bool with_sense)
{
    const std::set<std::string> chain = with_sense ? std::set<std::string>{} : sense_nets(s, lib, output);
    across_output net(s, lib, output);
    if (!net.fed()) {
        return 0.0;
    }
    for (const element& e : wire(s, lib, state::switched_off, output.stage_parts)) {
        const bool sensing = chain.contains(e.from) || chain.contains(e.to) || (!e.wiper.empty() && chain.contains(e.wiper));
        const part* p = s.find_part(e.ref);
        // The wiper of a trimmer may stand at either end: only the whole track is sure; what is unknown loads nothing for sure.
        const auto most = resistance_of(e, true);
        if (most && discharges(e) && !sensing && (p == nullptr || !of_stage(s, output, *p))) {
            net.add(e, *most);
        }
    }
    return net.siemens();
}

std::optional<double> most_conductance(const supply& s, const library& lib, const rail& output)
{
    across_output net(s, lib, output);
    if (!net.fed()) {
        return std::nullopt;
    }
    for (const element& e : wire(s, lib, state::running, output.stage_parts)) {
        const part* p = s.find_part(e.ref);
        if ((p != nullptr && of_stage(s, output, *p)) || !may_conduct(e)) {
            continue;
        }
        const auto least = resistance_of(e, false);
        if (!discharges(e) || !e.wiper.empty() || !least) {
            return std::nullopt;
        }
        net.add(e, *least);
    }
    return net.siemens();
}

std::optional<double> feeding_resistance(const std::vector<element>& elements, const std::set<std::string>& stiff, const std::string& net)
{
    if (stiff.contains(net)) {
        return 0.0;
    }
    std::set<std::string> near{net};
    const auto near_any = [&](const element& e) { return near.contains(e.from) || near.contains(e.to) || near.contains(e.wiper); };
    for (bool grew = true; grew;) {
        grew = false;
        for (const element& e : elements) {
            if (may_conduct(e) && near_any(e)) {
                for (const std::string& other : {e.from, e.to, e.wiper}) {
                    grew = (!other.empty() && !stiff.contains(other) && near.insert(other).second) || grew;
                }
            }
        }
    }
    circuit::network n;
    std::map<std::string, int> node;
    const auto at = [&](const std::string& name) {
        return stiff.contains(name) ? 0 : node.emplace(name, static_cast<int>(node.size()) + 1).first->second;
    };
    const int self = at(net);
    bool tied = false;
    for (const element& e : elements) {
        if (!near_any(e)) {
            continue;
        }
        const auto v = e.values.find(e.wiper.empty() ? form::resistance : form::track);
        const bool closed = joins_nets(e);
        if (!closed && (v == e.values.end() || v->second.numbers.empty())) {
            continue;
        }
        const range ohms = closed ? range{least_ohms, least_ohms} : v->second.numbers.front().whole;
        if (!e.wiper.empty()) {
            const range travel = e.position.numbers.empty() ? range{0.0, 1.0} : e.position.numbers.front().whole;
            n.tracks.push_back({at(e.from), at(e.wiper), at(e.to), {ohms.low, ohms.high}, {travel.low, travel.high}});
            tied = true;
        } else if (at(e.from) != at(e.to)) {
            n.branches.push_back({at(e.from), at(e.to), {{circuit::form::resistance, {ohms.low, ohms.high}}}});
            tied |= at(e.from) == self || at(e.to) == self;
        }
    }
    if (!tied) {
        return std::nullopt;
    }
    const int feed = static_cast<int>(node.size()) + 1;
    n.branches.push_back({feed, self, {{circuit::form::resistance, {least_ohms, least_ohms}}}});
    n.sources.push_back({feed, 0, {1.0, 1.0}});
    n.nodes = feed + 1;
    const double least = circuit::solve(n).current.back().low;
    return least > 0.0 ? std::optional(1.0 / least) : std::nullopt;
}

value sense_filter(const supply& s, const library& lib, const rail& output)
{
    const std::set<std::string> chain = sense_nets(s, lib, output);
    std::set<std::string> stiff = live_nets(s, lib, output);
    const std::set<std::string> live = stiff;
    stiff.merge(quiet_nets(s, lib, output));
    stiff.insert(s.return_net);
    stiff.insert(s.fed.nets.begin(), s.fed.nets.end());
    const std::vector<element> all = wire(s, lib, state::no_load, output.stage_parts);
    value v;
    double seconds = 0.0;
    for (const element& e : all) {
        const bool holds = std::find(e.forms.begin(), e.forms.end(), form::capacitance) != e.forms.end();
        const bool from = chain.contains(e.from);
        if (!holds || from == chain.contains(e.to) || live.contains(from ? e.to : e.from)) {
            continue; // a capacitor from the rail itself leads rather than lags
        }
        const auto farads = e.values.find(form::capacitance);
        const auto ohms = feeding_resistance(all, stiff, from ? e.from : e.to);
        if (farads == e.values.end() || farads->second.numbers.empty() || !farads->second.numbers.front().whole.bounded() || !ohms) {
            v.missing.push_back(e.ref + ".value");
            continue;
        }
        seconds += farads->second.numbers.front().whole.high * *ohms;
        v.shown.inputs.insert(v.shown.inputs.end(), farads->second.shown.inputs.begin(), farads->second.shown.inputs.end());
    }
    v.numbers.push_back(between(dim::time, 0.0, seconds));
    v.shown.formula = "sum of C on the sensing chain times what feeds it";
    return v;
}

namespace {

/// Share of its marked capacitance that a class 2 ceramic surely keeps at its rated voltage.
double kept_under_voltage(const part& p, const library& lib)
{
    const field* dielectric = p.find("dielectric");
    const table* t = lib.find_table("class-2-loss");
    if (t == nullptr || dielectric == nullptr || dielectric->text() == nullptr) {
        return 1.0;
    }
    double kept = 1.0;
    for (const spread& loss : look_up_choice(*t, "loss", *dielectric->text())) {
        kept = std::min(kept, 1.0 - loss.whole.high);
    }
    return kept;
}

} // namespace

value rail_capacitance(const supply& s, const library& lib, const rail& output)
{
    const std::set<std::string> live = live_nets(s, lib, output);
    const std::set<std::string> quiet = quiet_nets(s, lib, output);
    const std::vector<element> all = wire(s, lib, state::running, output.stage_parts);
    std::set<std::string> reached;
    for (const std::string& net : live) {
        reached.merge(reach(all, net, [&](const element& e) { return may_conduct(e) && !quiet.contains(e.from) && !quiet.contains(e.to); }));
    }
    value v = number(exactly({0.0, dim::capacitance}));
    spread& sum = v.numbers.front();
    for (const part& p : s.parts) {
        const field* farads = p.find("value");
        if (p.kind != "capacitor" || !touches(p, reached) || inside(p, live) || of_stage(s, output, p)) {
            continue;
        }
        if (farads == nullptr || farads->number() == nullptr || !farads->number()->whole.bounded()) {
            v.missing.push_back(p.ref + ".value");
            continue;
        }
        const spread& c = *farads->number();
        const bool straight = touches(p, live) && touches(p, quiet);
        sum.in_use.high += c.in_use.high;
        sum.whole.high += c.whole.high;
        sum.in_use.low += straight ? c.in_use.low * kept_under_voltage(p, lib) : 0.0;
        sum.whole.low += straight ? c.whole.low * kept_under_voltage(p, lib) : 0.0;
        v.shown.inputs.push_back(input_of(p.ref + ".value", *farads));
    }
    sum.nominal.reset();
    v.shown.formula = "least: straight across the output; greatest: all that can be reached";
    return v;
}

} // namespace onehand
