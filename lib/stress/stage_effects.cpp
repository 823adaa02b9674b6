// What the stage does outside itself: ripple on the output, current with the switch held on, what it pushes through a person, what an open wiper
// does.
#include "stress/stage_facts.hpp"

#include "quantity/text.hpp"
#include "stress/rail_load.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_rail.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;
using view = stage_model::view;

const std::vector<given> port{given::in, given::inductance, given::out, given::drop, given::turns};
const std::vector<given> loaded{given::in, given::inductance, given::out, given::drop, given::turns, given::load, given::coil, given::on_resistance};

/// Least of the series resistances written of what stands straight across the output: what is beside it only takes its share.
std::optional<double> series_resistance(const solved_supply& s)
{
    const std::set<std::string> live = live_nets(s.bodies(), s.data(), s.output());
    const std::set<std::string> quiet = quiet_nets(s.bodies(), s.data(), s.output());
    std::optional<double> least;
    for (const part& p : s.bodies().parts) {
        const field* f = p.kind == "capacitor" ? p.find("equivalent-series-resistance") : nullptr;
        const bool across = p.terminals.size() == 2 && ((live.contains(p.terminals[0].net) && quiet.contains(p.terminals[1].net)) ||
                                                        (live.contains(p.terminals[1].net) && quiet.contains(p.terminals[0].net)));
        if (f != nullptr && f->number() != nullptr && across && f->number()->whole.bounded()) {
            least = std::min(least.value_or(unbounded), f->number()->whole.high);
        }
    }
    return least;
}

value charge_ripple(const solved_supply& s)
{
    if (s.output().topology == "boost-multiplier") {
        return s.output().ladder_ripple;
    }
    const value farads = rail_capacitance(s.bodies(), s.data(), s.output());
    if (!farads.missing.empty() || farads.numbers.empty() || !(farads.numbers.front().whole.low > 0.0)) {
        return missing_value(value::type::number,
                             farads.missing.empty() ? std::vector<std::string>{"a capacitor straight across the output"} : farads.missing);
    }
    if (!surely_discontinuous(s) && by_whole_cycles(s)) {
        return cannot_tell(s, "the output ripple");
    }
    stage_model m = s.stage();
    value least = farads;
    for (spread& x : least.numbers) {
        x.in_use.high = x.in_use.low;
        x.whole = {x.whole.low, x.in_use.low};
    }
    m.set(given::capacitance, least, "capacitance across the output");
    if (surely_discontinuous(s)) {
        // At no load all of a packet stays.
        auto needs = with_cycle(s.stage(), port);
        needs.push_back(given::capacitance);
        value v = m.figure("one packet over C, peak to peak; series resistance not counted", dim::voltage, needs,
                           [](const view& w) { return physics::packet(w.stage).value() / w.of(given::capacitance); });
        for (spread& x : v.numbers) {
            x.in_use.low = x.whole.low = 0.0;
        }
        return v;
    }
    auto needs = with_cycle(s.stage(), loaded);
    needs.push_back(given::capacitance);
    return m.figure("charge above the load over C, peak to peak; series resistance not counted", dim::voltage, needs, [](const view& w) {
        const auto c = physics::farads<interval>::from_value(w.of(given::capacitance));
        const auto peak = w.stage.limited ? physics::full_peak(w.stage) : physics::regulated_peak(w.stage);
        return physics::output_ripple(w.stage, peak, c).value();
    });
}

} // namespace

/// What the charge makes on the capacitance, and the step that the rectifier's peak makes on its series resistance where that is written.
value output_ripple(const solved_supply& s)
{
    value v = charge_ripple(s);
    const auto ohms = series_resistance(s);
    const value peak = converter_figure(s, "inductor-peak");
    if (!ohms || s.output().topology == "boost-multiplier" || v.numbers.empty() || peak.numbers.empty()) {
        return v;
    }
    const stage_model::parameter& turns = s.stage().at(given::turns);
    spread& x = v.numbers.front();
    x.in_use.high += peak.numbers.front().in_use.high * *ohms / turns.at->in_use.low;
    x.whole.high += peak.numbers.front().whole.high * *ohms / turns.at->whole.low;
    x.nominal.reset();
    v.shown.formula = "charge over C and peak current times the least series resistance written, peak to peak";
    return v;
}

/// With the switch held on the coil and the switch are all that limits.
value held_on_current(const solved_supply& s)
{
    const given ohms = given::on_resistance;
    value v = s.stage().figure("Uin/(Rcoil + Ron)", dim::current, {given::in, given::coil, ohms},
                               [](const view& w) { return (w.stage.in / (w.stage.coil + w.stage.on_resistance)).value(); });
    const value limit = written_value(s.bodies().fed.current_limit, value::type::number, "input.current-limit");
    for (spread& x : v.numbers) {
        for (const spread& l : limit.numbers) {
            x.in_use = {std::min(x.in_use.low, l.in_use.low), std::min(x.in_use.high, l.in_use.high)};
            x.whole = {std::min(x.whole.low, l.whole.low), std::min(x.whole.high, l.whole.high)};
        }
    }
    v.shown.formula += ", or what the input delivers";
    return v;
}

/// Into the lowest published body resistance at the output's voltage: not exceeded by five in a hundred, large dry hands.
value lowest_body_current(const solved_supply& s)
{
    const table* t = s.data().find_table("iec-60479-1-body");
    const auto top = highest(s.output().output);
    if (t == nullptr || !top) {
        return missing_value(value::type::number, s.output().output.missing);
    }
    // Between printed rows the next one up: resistance falls with voltage.
    const auto row = std::lower_bound(t->axis.begin(), t->axis.end(), *top);
    const table_answer ohms = look_up(*t, "5-percent", exactly({row == t->axis.end() ? t->axis.back() : *row, dim::voltage}));
    if (!ohms.figure) {
        return missing_value(value::type::number, {t->title + ": " + ohms.reason});
    }
    value v = push_into(s.bodies(), s.output(), ohms.figure->whole.low).current;
    v.shown.formula =
        "into " + format_quantity({ohms.figure->whole.low, dim::resistance}, 3) + ", the lowest published body resistance at that voltage";
    v.shown.inputs.push_back({t->title, ohms.rows, t->at});
    return v;
}

value clamp_power(const solved_supply& s)
{
    return s.output().clamp_power;
}

value body_power(const solved_supply& s)
{
    return push_into(s.bodies(), s.output(), standard_body).power;
}

/// Set point with each trimmer's wiper lifted off, in turn: does any raise it?
value wiper_open_raises(const solved_supply& s)
{
    const std::set<std::string> chain = sense_nets(s.bodies(), s.data(), s.output());
    value v = truth_of(false);
    for (const part& p : s.bodies().parts) {
        const bool senses =
            p.kind == "trimmer" && std::any_of(p.terminals.begin(), p.terminals.end(), [&](const terminal& t) { return chain.contains(t.net); });
        if (!senses) {
            continue;
        }
        change c;
        c.sort = change::what::part_fault;
        c.ref = p.ref;
        c.mode = "wiper-open";
        const change_result open = apply(s.bodies(), s.data(), c);
        const rail r = open.refused.empty() ? find_rail(open.edited, s.data()) : rail{};
        const auto before = highest(s.output().output);
        const auto after = highest(r.output);
        const bool raises = r.feedback_lost || (before && after && *after > *before * (1.0 + 1e-9));
        if (raises) {
            v = truth_of(true);
            v.shown.formula = p.ref + " wiper open: " + (r.feedback_lost ? "feedback lost" : in_words(r.output));
            return v;
        }
        if (!before || !after) {
            v = missing_value(value::type::truth, {"the set point with " + p.ref + "'s wiper open"});
        }
    }
    return v;
}

} // namespace onehand
