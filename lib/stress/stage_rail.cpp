#include "stress/stage_rail.hpp"

#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;
using view = stage_model::view;

/// Drops the low end: anywhere up to it.
value up_to(value v)
{
    for (spread& s : v.numbers) {
        s.in_use.low = std::min(0.0, s.in_use.low);
        s.whole.low = std::min(0.0, s.whole.low);
        s.nominal.reset();
    }
    return v;
}

void find_droop(const supply& s, const library& lib, rail& r)
{
    if (!r.rungs.loaded_why.empty() || r.rungs.chain.empty()) {
        r.droop = missing_value(value::type::number, {"the droop of the ladder: " + r.rungs.loaded_why});
        r.ladder_ripple = r.droop;
        return;
    }
    const value load = rail_load(s, lib, r, solve_dc(s, lib, r, state::running));
    const auto hertz_needed = with_cycle(r.model, {});
    const value hertz = r.model.figure("1/T", dim::frequency, hertz_needed, [](const view& v) { return interval(1.0) / v.stage.period.value(); });
    inherit(r.droop, load);
    inherit(r.droop, hertz);
    for (const bool whole : {false, true}) {
        std::vector<farad> caps;
        for (const std::string& ref : r.rungs.chain) {
            const part* p = s.find_part(ref);
            const field* f = p == nullptr ? nullptr : p->find("value");
            if (f == nullptr || f->number() == nullptr || !(f->number()->whole.low > 0.0)) {
                r.droop.missing.push_back(ref + ".value");
                continue;
            }
            caps.push_back(farad::from_value(whole ? f->number()->whole.low : f->number()->in_use.low));
        }
        if (!r.droop.missing.empty() || hertz.numbers.empty() || load.numbers.empty()) {
            r.ladder_ripple = r.droop;
            return;
        }
        const spread& l = load.numbers.front();
        const spread& f = hertz.numbers.front();
        const auto at = physics::loaded(caps, r.rungs.form, ampere::from_value(whole ? l.whole.high : l.in_use.high),
                                        hertz::from_value(whole ? f.whole.low : f.in_use.low));
        if (!std::isfinite(at.drop.value())) {
            r.droop.numbers.clear();
            r.droop.missing.push_back("load and frequency of the ladder, known on both sides");
            r.ladder_ripple = r.droop;
            return;
        }
        if (!whole) {
            r.droop.numbers.push_back(between(dim::voltage, 0.0, at.drop.value()));
            r.ladder_ripple.numbers.push_back(between(dim::voltage, 0.0, at.ripple.value()));
        } else {
            r.droop.numbers.front().whole.high = std::max(at.drop.value(), r.droop.numbers.front().whole.high);
            r.ladder_ripple.numbers.front().whole.high = std::max(at.ripple.value(), r.ladder_ripple.numbers.front().whole.high);
        }
    }
    r.droop.shown.formula = "I/f times the sum of charge shares over C: drop of the output's peak; its mean lies half the ripple lower";
    r.ladder_ripple.shown.formula = "I/f times the sum over the output's column, peak to peak";
}

void find_port(const supply& s, const library& lib, rail& r)
{
    if (r.topology != "boost-multiplier") {
        r.port = r.output;
        r.multiple = number(exactly({1.0, dim::none}));
        return;
    }
    const bool solved = r.rungs.there && r.rungs.why.empty() && r.rungs.multiple > 0.0;
    if (!solved) {
        const std::string why = !r.rungs.there ? s.stage->name + ".ladder" : r.rungs.why.empty() ? "a ladder that lifts its output" : r.rungs.why;
        r.port = r.multiple = missing_value(value::type::number, {why});
        return;
    }
    find_droop(s, lib, r);
    r.multiple = number(exactly({r.rungs.multiple, dim::none}));
    value lifted = r.output;
    if (r.droop.numbers.empty()) {
        inherit(lifted, r.droop);
    } else {
        lifted = sum(lifted, r.droop);
    }
    r.port = scaled_by(lifted, 1.0 / r.rungs.multiple);
    r.port.shown.formula = "(output + droop)/" + in_words(r.multiple);
}

} // namespace

std::vector<given> with_cycle(const stage_model& m, std::vector<given> more)
{
    const std::vector<given> cycle = m.cycle();
    more.insert(more.end(), cycle.begin(), cycle.end());
    return more;
}

value scaled_by(value v, double factor)
{
    for (spread& s : v.numbers) {
        s = scaled(s, factor);
    }
    return v;
}

double lift_of(const rail& r)
{
    return r.topology == "boost-multiplier" ? r.rungs.multiple : 1.0;
}

value port_capacitance(const supply& s, const library& lib, const rail& r)
{
    value c = rail_capacitance(s, lib, r);
    if (r.topology != "boost-multiplier") {
        return c;
    }
    c = scaled_by(c, r.rungs.multiple * r.rungs.multiple);
    for (const ladder::stressed& rung : r.rungs.capacitors) {
        const part* p = s.find_part(rung.ref);
        const field* f = p == nullptr ? nullptr : p->find("value");
        if (f == nullptr || f->number() == nullptr) {
            c.missing.push_back(rung.ref + ".value");
            continue;
        }
        const double square = rung.voltage * rung.voltage;
        spread& sum = c.numbers.front();
        sum.in_use = {sum.in_use.low + square * f->number()->in_use.low, sum.in_use.high + square * f->number()->in_use.high};
        sum.whole = {sum.whole.low + square * f->number()->whole.low, sum.whole.high + square * f->number()->whole.high};
    }
    return c;
}

namespace {

/// Nothing regulates it, or something takes the feedback away: the rail is where full cycles take it.
void find_runaway(const supply& s, const library& lib, rail& r)
{
    if (!r.model.there()) {
        r.runaway = missing_value(value::type::number, {"what holds the output inside the module"});
        return;
    }
    const bool regulated = r.basis.starts_with("held by");
    const free_run lost = run_free(s, r, sure_conductance(s, lib, r, !regulated));
    r.runaway = lost.rail;
    r.runaway_ends = lost.ends;
    if (r.basis == "running free" || r.feedback_lost) {
        r.output = up_to(r.runaway);
        const auto most = r.feedback_lost ? std::nullopt : most_conductance(s, lib, r);
        if (most && *most > 0.0 && !r.output.numbers.empty()) {
            // Nothing but resistances: it does not fall below what they hold at their least.
            const value least = run_free(s, r, *most).rail;
            r.output.numbers.front().in_use.low = least.numbers.empty() ? 0.0 : least.numbers.front().in_use.low;
            r.output.numbers.front().whole.low = least.numbers.empty() ? 0.0 : least.numbers.front().whole.low;
        }
        r.output.shown.formula = r.feedback_lost ? "feedback lost: full cycles until something ends them" : r.runaway.shown.formula;
    }
}

bool runs_free(const supply& s, const rail& r)
{
    return r.model.there() && s.stage->feedback_net.empty() && s.stage->find("output-voltage") == nullptr && s.stage->feedback.empty();
}

} // namespace

void find_stage(const supply& s, const library& lib, rail& r)
{
    r.model = stage_model(s, lib);
    std::set<std::string> still = quiet_nets(s, lib, r);
    still.insert(s.return_net);
    r.rungs = solve_ladder(s, r.switch_net, still);
    if (runs_free(s, r)) {
        r.basis = "running free";
        r.output = value{};
    }
    find_runaway(s, lib, r);
    find_port(s, lib, r);
    r.model.set(given::out, r.port, s.stage->name + " output");
    find_start_up(s, lib, r);
}

} // namespace onehand
