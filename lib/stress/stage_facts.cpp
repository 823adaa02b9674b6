#include "stress/stage_facts.hpp"

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

std::vector<given> with_cycle(const solved_supply& s, std::vector<given> more)
{
    const std::vector<given> cycle = s.stage().cycle();
    more.insert(more.end(), cycle.begin(), cycle.end());
    return more;
}

constexpr double least_load = 1e-12; // ampere: headroom over nothing is told as very large

const std::vector<given> port{given::in, given::inductance, given::out, given::drop, given::turns};
const std::vector<given> loaded{given::in, given::inductance, given::out, given::drop, given::turns, given::load, given::coil, given::on_resistance};

std::string feedback_mode(const solved_supply& s)
{
    const auto& f = s.bodies().stage->feedback;
    const auto it = f.find("mode");
    return it == f.end() || it->second.text() == nullptr ? std::string{} : *it->second.text();
}

bool free_running(const solved_supply& s)
{
    return s.output().basis == "running free";
}

value of_empty_cycles(const solved_supply& s, const std::string& formula, const dimension& d, const stage_model::form& f)
{
    auto needs = with_cycle(s, port);
    needs.push_back(given::load);
    return s.stage().figure(formula, d, needs, f);
}

value of_loaded(const solved_supply& s, const std::string& formula, const dimension& d, const stage_model::form& f)
{
    return s.stage().figure(formula, d, with_cycle(s, loaded), f);
}

value effective(const solved_supply& s, const std::string& what, const stage_model::form& full, const stage_model::form& regulated)
{
    if (surely_discontinuous(s)) {
        return of_empty_cycles(s, "full cycles as often as the load asks, effective " + what, dim::current, full);
    }
    if (by_whole_cycles(s)) {
        return cannot_tell(s, "the effective " + what);
    }
    const value adjusted = of_loaded(s, "duty as the load asks, effective " + what, dim::current, regulated);
    if (!s.stage().limited()) {
        return adjusted;
    }
    // Or every cycle up to the limit, as often as the load asks.
    value either = greater(adjusted, of_empty_cycles(s, "", dim::current, full));
    either.shown.formula = "the greater of full cycles paced and of an adjusted limit, effective " + what;
    return either;
}

value coil_effective(const solved_supply& s)
{
    return effective(
        s, "coil current", [](const view& v) { return physics::effective_paced(v.stage).coil.value(); },
        [](const view& v) { return physics::effective_regulated(v.stage).coil.value(); });
}

value rectifier_effective(const solved_supply& s)
{
    return effective(
        s, "rectifier current", [](const view& v) { return physics::effective_paced(v.stage).rectifier.value(); },
        [](const view& v) { return physics::effective_regulated(v.stage).rectifier.value(); });
}

value inductor_average(const solved_supply& s)
{
    if (surely_discontinuous(s)) {
        return of_empty_cycles(s, "load turns (reset + Uin)/Uin", dim::current,
                               [](const view& v) { return physics::average_paced(v.stage).value(); });
    }
    return by_whole_cycles(s) ? cannot_tell(s, "the average coil current")
                              : of_loaded(s, "load turns/(1 - D), resistances counted", dim::current,
                                          [](const view& v) { return physics::regulated_average(v.stage).value(); });
}

value inductor_ripple(const solved_supply& s)
{
    if (surely_discontinuous(s) || s.stage().limited()) {
        return inductor_peak(s);
    }
    return by_whole_cycles(s) ? cannot_tell(s, "the ripple of the coil current")
                              : of_loaded(s, "Uin D T/L", dim::current, [](const view& v) { return physics::regulated_ripple(v.stage).value(); });
}

/// Of the greatest load the description knows: the least current is none.
value at_most_load(const solved_supply& s, const std::string& formula, const dimension& d, const stage_model::form& f,
                   std::vector<given> also = {given::load, given::coil, given::hot_resistance, given::on_resistance})
{
    stage_model m = s.stage();
    value most = s.load();
    const double multiple = s.output().topology == "boost-multiplier" ? s.output().rungs.multiple : 1.0;
    for (spread& x : most.numbers) {
        x.in_use.low = x.in_use.high;
        x.whole.low = std::min(x.whole.high, x.in_use.high);
        x = scaled(x, multiple);
    }
    m.set(given::load, most, "load");
    return m.figure(formula, d, with_cycle(s, port), f, also);
}

value conduction_mode(const solved_supply& s)
{
    const value slack = converter_figure(s, "slack");
    if (slack.numbers.empty()) {
        return missing_value(value::type::choice, slack.missing);
    }
    value v;
    if (slack.numbers.front().whole.low >= 0.0) {
        v = choice_of("discontinuous");
    } else if (feedback_mode(s) == "duty" || free_running(s) || s.stage().limited()) {
        const value k =
            at_most_load(s, "K - Kcrit at the greatest load", dim::none, [](const view& w) { return physics::continuity(w.stage); }, {given::load});
        if (k.numbers.empty()) {
            return missing_value(value::type::choice, k.missing);
        }
        const range r = k.numbers.front().whole;
        v = choice_of(r.high < 0.0 ? "discontinuous" : r.low >= 0.0 ? "continuous" : "either");
        v.shown = k.shown;
        return v;
    } else {
        v = choice_of(slack.numbers.front().whole.high < 0.0 ? "continuous" : "either");
    }
    v.shown = slack.shown;
    return v;
}

value headroom(const solved_supply& s)
{
    value v = at_most_load(s, "greatest load current at the output over what is drawn", dim::none, [](const view& w) {
        view hot = w;
        hot.stage.on_resistance = physics::ohms<interval>::from_value(w.of(given::hot_resistance));
        return physics::most_load(hot.stage).value() / physics::at_least(hot.stage.load.value(), least_load);
    });
    return v;
}

value available_power(const solved_supply& s)
{
    return at_most_load(s, "greatest load current times output", dim::power, [](const view& w) {
        view hot = w;
        hot.stage.on_resistance = physics::ohms<interval>::from_value(w.of(given::hot_resistance));
        return physics::most_power(hot.stage).value();
    });
}

value load_power(const solved_supply& s)
{
    value v = product(s.output().output, s.load());
    v.shown = s.load().shown;
    v.shown.formula = "output times load current";
    return v;
}

/// Heat in coil, switch and rectifier; what is not known of them leaves it open.
value losses(const solved_supply& s)
{
    const value coil = converter_figure(s, "inductor-effective");
    const value through = converter_figure(s, "switch-effective");
    value v = number(exactly({0.0, dim::power}));
    const auto add = [&](const value& amps, given ohms) {
        const stage_model::parameter& r = s.stage().at(ohms);
        inherit(v, amps);
        if (!r.at || !r.at->whole.bounded()) {
            v.missing.insert(v.missing.end(), r.missing.begin(), r.missing.end());
            return;
        }
        for (const spread& i : amps.numbers) {
            v.numbers.front().in_use.high += i.in_use.high * i.in_use.high * r.at->in_use.high;
            v.numbers.front().whole.high += i.whole.high * i.whole.high * r.at->whole.high;
        }
    };
    add(coil, given::coil);
    add(through, given::hot_resistance);
    const stage_model::parameter& drop = s.stage().at(given::drop);
    const value diode = rectifier_average(s);
    for (const spread& i : diode.numbers) {
        const double steps = std::max(1, s.output().rungs.drops);
        v.numbers.front().in_use.high += steps * i.in_use.high * drop.at->in_use.high;
        v.numbers.front().whole.high += steps * i.whole.high * drop.at->whole.high;
    }
    v.numbers.front().nominal.reset();
    v.shown.formula = "I^2 R of coil and switch, drop times current of the rectifier; switching losses not counted";
    return v;
}

value input_current(const solved_supply& s)
{
    const value power = converter_figure(s, "load-power");
    const value lost = converter_figure(s, "losses");
    const stage_model::parameter& in = s.stage().at(given::in);
    value v;
    inherit(v, power);
    inherit(v, lost);
    v.missing.insert(v.missing.end(), in.missing.begin(), in.missing.end());
    if (in.at && !power.numbers.empty() && !lost.numbers.empty() && in.at->whole.low > 0.0) {
        const auto at = [](double watts, double more, double volts) { return (watts + more) / volts; };
        const spread& p = power.numbers.front();
        const spread& l = lost.numbers.front();
        v.numbers.push_back({dim::current,
                             {0.0, at(p.in_use.high, l.in_use.high, in.at->in_use.low)},
                             {0.0, at(p.whole.high, l.whole.high, in.at->whole.low)},
                             std::nullopt});
    }
    v.shown.formula = "(load power + losses)/Uin, none to full load";
    v.shown.inputs = power.shown.inputs;
    return v;
}

value first_of_cycle(const solved_supply& s, const std::string& name)
{
    if (name == "frequency") {
        return s.stage().figure("1/T", dim::frequency, s.stage().cycle(), [](const view& v) { return interval(1.0) / v.stage.period.value(); });
    }
    return s.stage().figure("on/T", dim::none, s.stage().cycle(), [](const view& v) {
        return v.stage.limited ? (physics::full_flux(v.stage) / v.stage.in / v.stage.period).value() : v.stage.duty;
    });
}

} // namespace

/// Whether whole cycles are let through one after the other, or may be.
bool by_whole_cycles(const solved_supply& s)
{
    const std::string mode = feedback_mode(s);
    return mode != "duty" && !s.stage().limited() && !free_running(s);
}

value cannot_tell(const solved_supply& s, const std::string& what)
{
    const std::string mode = feedback_mode(s);
    const std::string name = s.bodies().stage->name;
    return missing_value(value::type::number, {mode.empty() ? name + ".feedback.mode: " + what + " depends on it where cycles run into each other"
                                                            : what + " where whole cycles run into each other: measure it"});
}

value stage_slack(const solved_supply& s)
{
    return s.stage().figure("1 - (on + emptying)/T of a full cycle", dim::none, with_cycle(s, port),
                            [](const view& v) { return physics::slack(v.stage); });
}

bool surely_discontinuous(const solved_supply& s)
{
    const value slack = converter_figure(s, "slack");
    return !slack.numbers.empty() && slack.missing.empty() && slack.numbers.front().whole.low >= 0.0;
}

value inductor_peak(const solved_supply& s)
{
    if (s.stage().limited()) {
        return s.stage().figure("limit + Uin delay/L", dim::current, {given::in, given::inductance, given::limit, given::delay},
                                [](const view& v) { return physics::full_peak(v.stage).value(); });
    }
    const value slack = converter_figure(s, "slack");
    if (!slack.missing.empty() || slack.numbers.empty()) {
        return missing_value(value::type::number, slack.missing);
    }
    if (slack.numbers.front().whole.low >= 0.0) {
        return s.stage().figure("Uin on/L of a full cycle", dim::current, with_cycle(s, {given::in, given::inductance}),
                                [](const view& v) { return physics::full_peak(v.stage).value(); });
    }
    if (by_whole_cycles(s)) {
        return cannot_tell(s, "the peak coil current");
    }
    const value adjusted = of_loaded(s, "load turns/(1 - D) + half the ripple, resistances counted", dim::current,
                                     [](const view& v) { return physics::regulated_peak(v.stage).value(); });
    if (free_running(s) || !(slack.numbers.front().whole.high >= 0.0)) {
        return adjusted;
    }
    // Where full cycles may run empty, a step of the load calls for them.
    value full = s.stage().figure("", dim::current, with_cycle(s, {given::in, given::inductance}),
                                  [](const view& v) { return physics::full_peak(v.stage).value(); });
    full = greater(adjusted, full);
    full.shown.formula = "the greater of a full cycle and the duty that the load asks";
    return full;
}

value switch_effective(const solved_supply& s)
{
    return effective(
        s, "switch current", [](const view& v) { return physics::effective_paced(v.stage).power_switch.value(); },
        [](const view& v) { return physics::effective_regulated(v.stage).power_switch.value(); });
}

value rectifier_average(const solved_supply& s)
{
    value v = s.load(); // what the output draws has come through it; each diode of a ladder passes as much
    v.shown.formula = "the load current";
    return v;
}

value converter_figure(const solved_supply& s, const std::string& name)
{
    const std::optional<converter>& k = s.bodies().stage;
    return s.look_up({"converter", k ? k->name : std::string(), {}, k ? k->at : place{}}, state::running, name);
}

std::optional<value> stage_fact(const solved_supply& s, const std::string& name)
{
    using figure = value (*)(const solved_supply&);
    static const std::pair<const char*, figure> figures[] = {{"mode", conduction_mode},
                                                             {"slack", stage_slack},
                                                             {"inductor-peak", inductor_peak},
                                                             {"inductor-average", inductor_average},
                                                             {"inductor-effective", coil_effective},
                                                             {"inductor-ripple", inductor_ripple},
                                                             {"start-up-peak", start_up_peak},
                                                             {"switch-effective", switch_effective},
                                                             {"rectifier-average", rectifier_average},
                                                             {"rectifier-effective", rectifier_effective},
                                                             {"output-ripple", output_ripple},
                                                             {"input-current", input_current},
                                                             {"load-power", load_power},
                                                             {"available-power", available_power},
                                                             {"headroom", headroom},
                                                             {"losses", losses},
                                                             {"inrush-current", inrush_current},
                                                             {"inrush-integral", inrush_integral},
                                                             {"held-on-current", held_on_current},
                                                             {"body-power", body_power},
                                                             {"lowest-body-current", lowest_body_current},
                                                             {"clamp-power", clamp_power},
                                                             {"runaway-energy", runaway_energy},
                                                             {"wiper-open-raises", wiper_open_raises}};
    if (name == "load-current") {
        return s.load();
    }
    if (name == "overshoot") {
        return s.output().overshoot;
    }
    if (name == "runaway-voltage") {
        return s.output().runaway;
    }
    const bool by_stage =
        name == "frequency" || name == "duty" || std::any_of(std::begin(figures), std::end(figures), [&](const auto& f) { return name == f.first; });
    if (!by_stage) {
        return std::nullopt;
    }
    const bool anyway = name == "load-power" || name == "body-power" || name == "lowest-body-current" || name == "rectifier-average" ||
                        name == "wiper-open-raises" || name == "inrush-integral";
    if (!s.stage().there() && !anyway) {
        return missing_value(name == "mode" ? value::type::choice : value::type::number, {"what is inside the module"});
    }
    if (name == "frequency" || name == "duty") {
        return first_of_cycle(s, name);
    }
    for (const auto& [word, f] : figures) {
        if (name == word) {
            return f(s);
        }
    }
    return std::nullopt;
}

} // namespace onehand
