#include "stress/stage_model.hpp"

#include "physics/timer.hpp"

#include <algorithm>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;

constexpr double unsaid_drop = 1.5; // volt at most across one rectifier: common practice, no source
constexpr double hottest = 2.6;     // of on-resistance over the published one: a textbook's worst (Jacob, example 6.7)
constexpr double bypass_drop = 0.6; // of a timer's bypass diode: common practice, no source
constexpr double usual_control = 2.0 / 3.0;

std::size_t slot(given g)
{
    return static_cast<std::size_t>(g);
}

spread not_negative(const spread& s)
{
    return clamped(s, 0.0, unbounded);
}

} // namespace

const part* first_body(const supply& s, const std::string& ref)
{
    const part* whole = ref.empty() ? nullptr : s.find_part(ref);
    return whole != nullptr || ref.empty() ? whole : s.find_part(ref + "/1");
}

stage_model::stage_model(const supply& s, const library& lib)
{
    if (!s.stage || s.stage->topology == "module" || s.stage->topology.empty()) {
        return;
    }
    there_ = true;
    shape_ = s.stage->topology == "flyback" ? physics::shape::flyback : physics::shape::boost;
    read_drive(s, lib);
    read_parts(s, lib);
}

void stage_model::set(given g, const value& v, const std::string& name)
{
    parameter& p = all_[slot(g)];
    p.name = name;
    p.missing = v.missing;
    p.at.reset();
    for (const spread& x : v.numbers) {
        p.at = not_negative(p.at ? hull(*p.at, x) : x);
    }
    if (!p.at && p.missing.empty()) {
        p.missing.push_back(name);
    }
    if (p.at) {
        p.shown = evidence::input{name, in_words(v), v.shown.inputs.empty() ? place{} : v.shown.inputs.front().at};
    }
}

void stage_model::from_field(given g, const part* p, const std::string& field_name, const std::string& ref)
{
    const std::string name = (ref.empty() ? std::string("converter") : ref) + "." + field_name;
    const field* f = p == nullptr ? nullptr : p->find(field_name);
    parameter& to = all_[slot(g)];
    to.name = name;
    if (f == nullptr || f->number() == nullptr) {
        to.missing = {name};
        return;
    }
    to.at = not_negative(*f->number());
    to.shown = input_of(name, *f);
    if (!to.at->whole.bounded()) {
        to.missing = {name + ": its highest figure"};
    }
}

void stage_model::read_drive(const supply& s, const library&)
{
    const converter& c = *s.stage;
    const auto written = [&](given g, const std::optional<field>& f, const std::string& name) {
        set(g, written_value(f, value::type::number, name), name);
    };
    const auto from_drive = [&](given g, const char* key) {
        const auto it = c.drive.find(key);
        written(g, it == c.drive.end() ? std::nullopt : std::optional(it->second), c.name + ".drive." + key);
    };
    timed_ = c.astable.has_value();
    limited_ = c.drive.contains("peak-current");
    written(given::in, s.fed.voltage, "input.voltage");
    written(given::frequency, c.frequency, c.name + ".drive.frequency");
    written(given::duty, c.duty, c.name + ".drive.duty");
    from_drive(given::limit, "peak-current");
    from_drive(given::delay, "delay");
    if (!timed_) {
        return;
    }
    from_field(given::ra, s.find_part(c.astable->ra), "value", c.astable->ra);
    from_field(given::rb, s.find_part(c.astable->rb), "value", c.astable->rb);
    from_field(given::ct, s.find_part(c.astable->c), "value", c.astable->c);
    bypassed_ = !c.astable->bypass.empty();
    const auto inverted = c.drive.find("inverted");
    inverted_ = inverted != c.drive.end() && inverted->second.truth() != nullptr && *inverted->second.truth();
    from_drive(given::control, "control");
    const auto own = c.drive.find("supply");
    written(given::timer_supply, own == c.drive.end() ? s.fed.voltage : std::optional(own->second), c.name + ".drive.supply");
    if (!c.drive.contains("control")) {
        // Left alone the pin stands at two thirds of the supply: the share does not move with it.
        all_[slot(given::control)] = {c.name + ".drive.control", std::nullopt, std::nullopt, {}};
    }
}

void stage_model::read_parts(const supply& s, const library&)
{
    const converter& c = *s.stage;
    const part* coil = s.find_part(c.inductor);
    const part* power_switch = first_body(s, c.power_switch);
    const std::string first = c.rectifier.empty() ? (c.ladder.empty() ? std::string{} : c.ladder.front()) : c.rectifier;
    const part* rectifier = first_body(s, first);
    const auto of_string = [&](const part& p) { return p.ref == first || p.ref.starts_with(first + "/"); };
    const auto bodies = std::max<std::ptrdiff_t>(1, std::count_if(s.parts.begin(), s.parts.end(), of_string));
    const bool wound = coil != nullptr && coil->kind == "transformer";
    from_field(given::inductance, coil, wound ? "primary-inductance" : "value", c.inductor.empty() ? c.name + ".inductor" : c.inductor);
    from_field(given::coil, coil, wound ? "primary-resistance" : "resistance", c.inductor.empty() ? c.name + ".inductor" : c.inductor);
    from_field(given::leakage, coil, "leakage-inductance", c.inductor);
    from_field(given::on_resistance, power_switch, "on-resistance", c.power_switch.empty() ? c.name + ".switch" : c.power_switch);
    from_field(given::hot_resistance, power_switch, "on-resistance-hot", c.power_switch);
    if (!at(given::hot_resistance).at && at(given::on_resistance).at) {
        parameter& hot = all_[slot(given::hot_resistance)];
        hot = at(given::on_resistance);
        hot.at->whole.high *= hottest;
        hot.at->in_use.high *= hottest;
        hot.at->nominal.reset();
    }
    if (wound) {
        from_field(given::turns, coil, "turns-ratio", c.inductor);
    } else {
        set(given::turns, number(exactly({1.0, dim::none})), "turns");
    }
    from_field(given::drop, rectifier != nullptr && rectifier->kind == "diode" ? rectifier : nullptr, "forward-voltage", c.rectifier);
    parameter& drop = all_[slot(given::drop)];
    if (!drop.at || !drop.at->whole.bounded()) {
        drop.at = between(dim::voltage, 0.0, unsaid_drop);
        drop.missing.clear();
        drop.shown = evidence::input{drop.name, "unsaid: 0 V to 1.5 V a body (practice)", {}};
    }
    drop.at = scaled(*drop.at, static_cast<double>(bodies)); // the bodies of a string drop one after the other
}

std::vector<given> stage_model::cycle() const
{
    if (timed_) {
        std::vector<given> list{given::ra, given::rb, given::ct};
        if (!at(given::control).missing.empty() || at(given::control).at) {
            list.push_back(given::control);
            list.push_back(given::timer_supply);
        } else if (bypassed_) {
            list.push_back(given::timer_supply);
        }
        return list;
    }
    if (limited_) {
        return {given::in, given::inductance, given::limit, given::delay, given::frequency};
    }
    return {given::frequency, given::duty};
}

stage_model::view stage_model::viewed(const std::vector<given>& used, std::span<const interval> at) const
{
    view v;
    for (std::size_t i = 0; i < used.size(); ++i) {
        v.at[slot(used[i])] = at[i];
    }
    auto& s = v.stage;
    s.is = shape_;
    s.in = physics::volts<interval>::from_value(v.of(given::in));
    s.inductance = physics::henries<interval>::from_value(v.of(given::inductance));
    s.turns = v.of(given::turns);
    s.out = physics::volts<interval>::from_value(v.of(given::out));
    s.drop = physics::volts<interval>::from_value(v.of(given::drop));
    s.load = physics::amperes<interval>::from_value(v.of(given::load));
    s.coil = physics::ohms<interval>::from_value(v.of(given::coil));
    s.on_resistance = physics::ohms<interval>::from_value(v.of(given::on_resistance));
    s.limited = limited_;
    s.limit = physics::amperes<interval>::from_value(v.of(given::limit));
    s.delay = physics::seconds<interval>::from_value(v.of(given::delay));
    if (timed_) {
        const auto ra = physics::ohms<interval>::from_value(v.of(given::ra));
        const auto rb = physics::ohms<interval>::from_value(v.of(given::rb));
        const auto c = physics::farads<interval>::from_value(v.of(given::ct));
        const interval supply_volts = v.of(given::timer_supply);
        const bool moved = this->at(given::control).at.has_value();
        const interval share = moved ? v.of(given::control) / supply_volts : interval(usual_control);
        const interval drop = bypassed_ ? interval(bypass_drop) / supply_volts : interval(0.0);
        const auto times = bypassed_ ? physics::astable_bypassed(ra, rb, c, share, drop) : physics::astable(ra, rb, c, share);
        const interval duty = physics::astable_duty(ra, rb, share, drop, bypassed_);
        s.on = inverted_ ? times.low : times.high;
        s.duty = inverted_ ? interval(1.0) - duty : duty;
        s.period = times.high + times.low;
    } else {
        s.period = physics::seconds<interval>::from_value(interval(1.0) / v.of(given::frequency));
        s.duty = v.of(given::duty);
        s.on = s.period * s.duty;
    }
    return v;
}

namespace {

std::vector<given> each_once(const std::vector<given>& list)
{
    std::vector<given> out;
    for (const given g : list) {
        if (std::find(out.begin(), out.end(), g) == out.end()) {
            out.push_back(g);
        }
    }
    return out;
}

} // namespace

value stage_model::figure(const std::string& formula, const dimension& d, std::vector<given> needs, const form& f,
                          const std::vector<given>& also) const
{
    needs = each_once(needs);
    value v;
    for (const given g : needs) {
        const parameter& p = at(g);
        v.missing.insert(v.missing.end(), p.missing.begin(), p.missing.end());
        if (p.shown) {
            v.shown.inputs.push_back(*p.shown);
        }
    }
    v.shown.formula = formula;
    if (!there_ || !v.missing.empty()) {
        if (!there_) {
            v.missing.push_back("a stage of known topology");
        }
        return v;
    }
    std::vector<given> used = needs;
    for (const given g : also) {
        if (std::find(used.begin(), used.end(), g) == used.end()) {
            used.push_back(g);
            v.missing.insert(v.missing.end(), at(g).missing.begin(), at(g).missing.end());
        }
    }
    const physics::on_intervals on = [&](std::span<const interval> at_values) { return f(viewed(used, at_values)); };
    const auto over_range = [&](bool whole) {
        std::vector<physics::span_of> box;
        for (const given g : used) {
            const parameter& p = at(g);
            const range r = !p.at ? range{0.0, unbounded} : whole ? p.at->whole : p.at->in_use;
            box.push_back({r.low, r.high});
        }
        const physics::span_of e = physics::extremes(on, box);
        return range{e.low, e.high};
    };
    spread s{d, over_range(false), over_range(true), std::nullopt};
    s.whole = hull(s.whole, s.in_use);
    if (s.whole.low == s.whole.high) {
        s.nominal = s.whole.low;
    }
    const bool nowhere = s.whole.low == unbounded || s.in_use.low == unbounded; // it has no finite value at all
    if (std::isnan(s.whole.low) || std::isnan(s.whole.high) || nowhere) {
        v.missing.push_back("figures for which " + formula + " has an answer");
        return v;
    }
    v.numbers.push_back(s);
    return v;
}

std::optional<range> stage_model::plain(std::vector<given> needs, const form& f) const
{
    const value v = figure({}, {}, std::move(needs), f);
    return v.numbers.empty() || !v.missing.empty() ? std::nullopt : std::optional(v.numbers.front().whole);
}

} // namespace onehand
