// What the running stage can push through a resistance: a person across the output, by delivered power.
#include "stress/paths.hpp"
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

double declared(const supply& s, const char* key, bool high)
{
    const field* f = s.stage ? s.stage->find(key) : nullptr;
    if (f == nullptr || f->number() == nullptr) {
        return high ? unbounded : 0.0;
    }
    return high ? f->number()->whole.high : f->number()->whole.low;
}

/// Drop of a ladder's peak for each ampere, at its least: greatest capacitances, highest frequency; nothing where its form is not known.
double ladder_impedance(const supply& s, const rail& r)
{
    std::vector<farad> caps;
    for (const std::string& ref : r.rungs.chain) {
        const part* p = s.find_part(ref);
        const field* f = p == nullptr ? nullptr : p->find("value");
        if (f == nullptr || f->number() == nullptr || !f->number()->whole.bounded()) {
            return 0.0;
        }
        caps.push_back(farad::from_value(f->number()->whole.high));
    }
    const auto hertz = r.model.plain(r.model.cycle(), [](const view& v) { return interval(1.0) / v.stage.period.value(); });
    if (caps.empty() || !hertz || !std::isfinite(hertz->high) || r.topology != "boost-multiplier") {
        return 0.0;
    }
    return physics::loaded(caps, r.rungs.form, ampere::from_value(1.0), hertz::from_value(hertz->high)).drop.value();
}

/// Greatest output voltage across a resistance: the set point, or what the power holds up.
std::optional<double> greatest_across(const supply& s, const rail& r, double ohms)
{
    const auto top = highest(r.output);
    if (!top) {
        return std::nullopt;
    }
    if (r.topology == "module") {
        const double inner = declared(s, "source-resistance", false);
        const double limit = declared(s, "power-limit", true);
        const double divided = *top * ohms / (ohms + inner);
        return std::min(divided, std::sqrt(limit * ohms));
    }
    const double multiple = r.topology == "boost-multiplier" ? r.rungs.multiple : 1.0;
    std::vector<given> needs = r.model.cycle();
    needs.insert(needs.end(), {given::in, given::inductance, given::turns});
    // A ladder's own impedance stands in the way, at its least: the feedback meanwhile drives its port as far as the power goes.
    const double inner = ladder_impedance(s, r);
    const double at_port = (ohms + inner) / (multiple * multiple);
    const auto reached = r.model.plain(
        needs, [at_port](const view& v) { return physics::open_loop(v.stage, physics::ohms<interval>::from_value(interval(at_port))).value(); });
    if (!reached || !(multiple > 0.0)) {
        return top; // nothing known of the stage: as stiff as its set point
    }
    return std::min(*top, reached->high * multiple * ohms / (ohms + inner));
}

} // namespace

push push_into(const supply& s, const rail& r, double ohms)
{
    push out;
    const auto volts = greatest_across(s, r, ohms);
    if (!volts) {
        out.current = out.power = missing_value(value::type::number, r.output.missing);
        return out;
    }
    out.current = number(between(dim::current, 0.0, *volts / ohms));
    out.power = number(between(dim::power, 0.0, *volts * *volts / ohms));
    out.current.shown.formula = "least of set point and delivered power across the resistance";
    out.power.shown.formula = "U^2/R, U the least of set point and what the delivered power holds up";
    inherit(out.current, r.output);
    inherit(out.power, r.output);
    return out;
}

namespace {

/// The rail alone feeds the pair: no way from it to the input but through the stage.
bool fed_by_rail_alone(const supply& s, const library& lib, const rail& r, const std::string& a, const std::string& b)
{
    const std::set<std::string> quiet = quiet_nets(s, lib, r);
    if (s.fed.nets.empty() || r.positive.empty() || (r.positive != s.return_net && r.negative != s.return_net)) {
        return false;
    }
    const std::vector<element> all = wire(s, lib, state::running, r.stage_parts);
    for (const std::string& net : {a, b}) {
        const std::set<std::string> reached = quiet.contains(net) ? std::set<std::string>{} : reach(all, net, [&](const element& e) {
            const bool winding = s.stage && e.ref == s.stage->inductor;
            return may_conduct(e) && !winding && !quiet.contains(e.from) && !quiet.contains(e.to) && (e.wiper.empty() || !quiet.contains(e.wiper));
        });
        if (reached.contains(s.fed.nets[0]) || (!r.switch_net.empty() && reached.contains(r.switch_net))) {
            return false;
        }
    }
    return true;
}

} // namespace

value touch_current(const supply& s, const library& lib, const rail& r, state in, const std::string& a, const std::string& b, double ohms)
{
    rail pushed = r;
    const std::set<std::string> chain = in == state::standby ? std::set<std::string>{} : sense_nets(s, lib, r);
    const bool moves = chain.contains(a) || chain.contains(b);
    if (moves) {
        pushed.output = hull(r.output, r.runaway);
        pushed.output.missing = r.runaway.missing;
    }
    value v = current_through(s, lib, pushed, in, a, b, ohms);
    const auto stiff = highest(magnitude(v));
    const auto top = highest(pushed.output);
    if (in == state::standby || !stiff || !top || !(*stiff > 0.0) || !fed_by_rail_alone(s, lib, r, a, b)) {
        return v;
    }
    // All the way along: the rail's voltage over the body's current.
    const push most = push_into(s, pushed, *top / *stiff);
    const auto bound = highest(most.current);
    if (bound && *bound < *stiff) {
        for (spread& x : v.numbers) {
            x = clamped(x, -*bound, *bound);
            x.nominal.reset();
        }
        v.shown.formula = "through 2 kohm, as much as the stage delivers";
    }
    return v;
}

value pushed_current(const solved_supply& s, double ohms)
{
    return push_into(s.bodies(), s.output(), ohms).current;
}

} // namespace onehand
