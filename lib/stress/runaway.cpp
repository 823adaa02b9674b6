// Feedback lost: how soon, what gives first, what it holds then.
#include "physics/storage.hpp"
#include "physics/surge.hpp"
#include "quantity/text.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_facts.hpp"
#include "stress/stage_rail.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using given = stage_model::given;
using view = stage_model::view;

/// A part's rating and the voltage it bounds, at the set point's highest.
struct bound_voltage {
    std::string what;
    double volts = 0.0, rating = 0.0;
};

std::vector<bound_voltage> bounds_of(const solved_supply& s, const part& p)
{
    std::vector<bound_voltage> list;
    const kind_spec* kind = s.data().find_kind(p.kind);
    if (kind == nullptr) {
        return list;
    }
    for (const field_spec& spec : kind->fields) {
        const bool bounds_voltage = spec.bounds == "voltage" || spec.bounds == "peak-voltage" || spec.bounds == "reverse-voltage";
        const value limit = bounds_voltage ? s.look_up({p.kind, p.ref, {}, p.at}, state::running, spec.name) : value{};
        if (limit.numbers.size() != 1 || !limit.missing.empty() || !std::isfinite(limit.numbers.front().whole.low)) {
            continue;
        }
        double most = 0.0;
        for (const state in : {state::running, state::no_load}) {
            const value v = magnitude(s.look_up({p.kind, p.ref, {}, p.at}, in, spec.bounds));
            most = std::max(most, highest(v).value_or(0.0));
        }
        list.push_back({spec.name, most, limit.numbers.front().whole.low});
    }
    return list;
}

} // namespace

value runaway_time(const solved_supply& s, double volts)
{
    const rail& r = s.output();
    const double multiple = r.topology == "boost-multiplier" ? r.rungs.multiple : 1.0;
    std::vector<given> needs = s.stage().cycle();
    needs.insert(needs.end(), {given::in, given::inductance});
    const value power = s.stage().figure("L i^2/(2 T)", dim::power, needs, [](const view& v) { return physics::full_power(v.stage).value(); });
    const value farads = port_capacitance(s.bodies(), s.data(), r);
    value v;
    inherit(v, power);
    inherit(v, farads);
    inherit(v, r.port);
    if (!v.missing.empty() || power.numbers.empty() || !(multiple > 0.0)) {
        return v;
    }
    const bool boost = s.stage().shape() == physics::shape::boost;
    const spread& in = *s.stage().at(given::in).at;
    const spread& turns = *s.stage().at(given::turns).at;
    const physics::pumped_rail pumped{volt::from_value(r.port.numbers.front().whole.high),
                                      volt::from_value(volts / multiple),
                                      volt::from_value(boost ? in.whole.high : 0.0),
                                      boost ? 1.0 : turns.whole.low,
                                      watt::from_value(power.numbers.front().whole.high),
                                      joule::from_value(0.0),
                                      farad::from_value(farads.numbers.front().whole.low),
                                      second::from_value(0.0),
                                      second::from_value(0.0)};
    const double seconds = physics::pumping_time(pumped, volt::from_value(volts / multiple)).value();
    v.numbers.push_back(between(dim::time, seconds, seconds));
    v.shown.formula = "energy balance at full cycles, least capacitance, nothing drawn: at the soonest";
    return v;
}

std::vector<exceeded> runaway_order(const solved_supply& s)
{
    std::vector<exceeded> list;
    const auto set = highest(s.output().output);
    const auto end = highest(s.output().runaway);
    if (!set || !end || s.output().basis == "running free" || s.output().feedback_lost) {
        return list;
    }
    for (const part& p : s.bodies().parts) {
        for (const bound_voltage& b : bounds_of(s, p)) {
            const double rail = b.volts > 0.0 ? *set * b.rating / b.volts : unbounded;
            // What does not hang on the rail does not rise with it: the input side stays where it is.
            const bool of_rail = b.volts > highest(written_value(s.bodies().fed.voltage, value::type::number, "")).value_or(0.0);
            if (of_rail && rail <= *end) {
                list.push_back({p.ref, b.what, std::max(rail, *set), runaway_time(s, std::max(rail, *set))});
            }
        }
    }
    std::stable_sort(list.begin(), list.end(), [](const exceeded& a, const exceeded& b) {
        const bool alike = std::abs(a.rail - b.rail) <= 1e-9 * b.rail;
        return alike ? natural_less(a.ref, b.ref) : a.rail < b.rail;
    });
    return list;
}

value runaway_energy(const solved_supply& s)
{
    const rail& r = s.output();
    value v;
    inherit(v, r.runaway);
    const value farads = port_capacitance(s.bodies(), s.data(), r);
    inherit(v, farads);
    const double multiple = r.topology == "boost-multiplier" ? r.rungs.multiple : 1.0;
    if (!v.missing.empty() || r.runaway.numbers.empty() || !(multiple > 0.0)) {
        return v;
    }
    const auto at = [&](double c, double u) { return physics::stored_energy(farad::from_value(c), volt::from_value(u / multiple)).value(); };
    const spread& c = farads.numbers.front();
    const spread& u = r.runaway.numbers.front();
    v.numbers.push_back({dim::energy, {0.0, at(c.in_use.high, u.in_use.high)}, {0.0, at(c.whole.high, u.whole.high)}, std::nullopt});
    v.shown.formula = "C U^2/2 of the output at its runaway";
    return v;
}

value runaway_share(const solved_supply& s, const part& p)
{
    const auto set = highest(s.output().output);
    const auto end = highest(s.output().runaway);
    value v;
    inherit(v, s.output().runaway);
    if (!set || !end || !(*set > 0.0)) {
        return v.missing.empty() ? missing_value(value::type::number, {"the runaway of the output"}) : v;
    }
    const value now = magnitude(s.look_up({p.kind, p.ref, {}, p.at}, state::no_load, "voltage"));
    inherit(v, now);
    // On the input's side of the stage nothing rises with the rail.
    const double input = highest(written_value(s.bodies().fed.voltage, value::type::number, "")).value_or(0.0);
    for (const spread& x : now.numbers) {
        const bool rises = x.whole.high > input;
        const double factor = rises ? std::max(1.0, *end / *set) : 1.0;
        v.numbers.push_back({dim::voltage, {0.0, x.in_use.high * factor}, {0.0, x.whole.high * factor}, std::nullopt});
    }
    v.shown.formula = "its voltage, raised as the rail is when feedback is lost";
    return v;
}

namespace {

std::string volts_of(double v)
{
    return format_quantity({v, dim::voltage}, 3);
}

/// Whether the switch's package bears the stage's whole power in breakdown; nothing where that is not told.
std::optional<bool> bears_breakdown(const solved_supply& s)
{
    const part* q = first_body(s.bodies(), s.bodies().stage->power_switch);
    const auto number_of = [&](const char* name) { return q == nullptr || q->find(name) == nullptr ? nullptr : q->find(name)->number(); };
    const spread* rth = number_of("thermal-resistance");
    const spread* limit = number_of("junction-limit");
    const value air = inside_temperature(s.bodies().used);
    std::vector<given> needs = s.stage().cycle();
    needs.insert(needs.end(), {given::in, given::inductance});
    const auto power = s.stage().plain(needs, [](const view& v) { return physics::full_power(v.stage).value(); });
    if (rth == nullptr || limit == nullptr || air.numbers.empty() || !power) {
        return std::nullopt;
    }
    return air.numbers.front().whole.high + power->high * rth->whole.high <= limit->whole.low;
}

} // namespace

std::vector<std::string> runaway_story(const solved_supply& s)
{
    std::vector<std::string> lines;
    const rail& r = s.output();
    const auto end = highest(r.runaway);
    if (!end || !s.stage().there()) {
        return lines;
    }
    // What gives at the same voltage stands in one line.
    const std::vector<exceeded> order = runaway_order(s);
    for (std::size_t i = 0; i < order.size();) {
        std::string names = order[i].ref;
        std::size_t next = i + 1;
        for (; next < order.size() && order[next].what == order[i].what && order[next].rail <= order[i].rail * (1.0 + 1e-9); ++next) {
            names += ", " + order[next].ref;
        }
        const value& t = order[i].time;
        const bool timed = !t.numbers.empty() && std::isfinite(t.numbers.front().whole.low);
        const std::string when = !timed ? "" : ", " + format_quantity({t.numbers.front().whole.low, dim::time}, 3) + " after";
        lines.push_back("at " + volts_of(order[i].rail) + when + ": " + order[i].what + " of " + names);
        i = next;
    }
    lines.push_back("it ends by " + volts_of(*end) + ": " + r.runaway_ends);
    if (r.runaway_ends.find("breaks down") != std::string::npos) {
        const auto bears = bears_breakdown(s);
        const std::string& q = s.bodies().stage->power_switch;
        if (bears && *bears) {
            lines.push_back(q + " bears the stage's power in breakdown: the rail stays there while the input is on");
        } else {
            lines.push_back(q + " may fail shorted: the input then feeds coil and switch until something opens, and the rail keeps its charge");
            lines.push_back(q + " may fail open: pumping ends, and the rail keeps its charge");
        }
    }
    const value energy = runaway_energy(s);
    if (const auto joules = highest(energy)) {
        lines.push_back("then stored: up to " + format_quantity({*joules, dim::energy}, 3));
    }
    return lines;
}

std::string short_story(const solved_supply& s)
{
    const std::string& topology = s.output().topology;
    const supply& b = s.bodies();
    if (topology == "boost" || topology == "boost-multiplier") {
        return topology == "boost" ? "nothing in the stage: coil and rectifier lead straight from the input; fuse and source limit it"
                                   : "coil and ladder diodes lead from the input where no capacitor stands between; fuse and source limit it";
    }
    if (topology == "flyback") {
        const auto watts = highest(converter_figure(s, "available-power"));
        return "the stage's own power" + (watts ? ", up to " + format_quantity({*watts, dim::power}, 3) : std::string(", not known"));
    }
    const field* limit = b.stage ? b.stage->find("power-limit") : nullptr;
    const field* inner = b.stage ? b.stage->find("source-resistance") : nullptr;
    return limit != nullptr || inner != nullptr ? "the module, as declared" : "not known: what is inside the module";
}

} // namespace onehand
