#include "stress/solved.hpp"

#include "stress/paths.hpp"
#include "stress/rail_load.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_rail.hpp"

#include <algorithm>

namespace onehand {

namespace {

std::string pair_name(const std::string& a, const std::string& b)
{
    return a + " to " + b;
}

bool can_exceed(const value& v, double volts)
{
    return v.numbers.empty() || !highest(v) || *highest(v) > volts;
}

bool has_plug(const supply& s)
{
    return std::any_of(s.parts.begin(), s.parts.end(), [](const part& p) { return p.kind == "connector"; });
}

/// Greatest magnitude between two nets over all solved states.
value working_voltage(const std::vector<dc_solution>& states, const std::string& a, const std::string& b)
{
    value v = magnitude(states.front().voltage(a, b));
    for (std::size_t i = 1; i < states.size(); ++i) {
        v = hull(v, magnitude(states[i].voltage(a, b)));
    }
    for (spread& x : v.numbers) {
        x = {x.dim, {x.in_use.high, x.in_use.high}, {x.in_use.high, x.whole.high}, std::nullopt};
    }
    v.shown.formula = "greatest |" + a + " - " + b + "| over start-up, running, no-load and standby";
    return v;
}

} // namespace

solved_supply::solved_supply(supply s, const library& lib)
    : written_(std::move(s)), bodies_(expand_bodies(written_)), lib_(lib), output_(find_rail(bodies_, lib_))
{
    for (const state in : {state::running, state::no_load, state::standby, state::start_up}) {
        states_.push_back(solve_dc(bodies_, lib_, output_, in));
    }
    load_stage();
    capacitors_ = charged_capacitors(bodies_, lib_, output_, states_);
    for (const bool shorted : {false, true}) {
        off_cases_.push_back({shorted, false, {}});
        if (has_plug(bodies_)) {
            off_cases_.push_back({shorted, true, {}});
        }
    }
    list_accesses();
    list_stored();
    list_pairs();
    list_gaps();
    list_subjects();
}

solved_supply::~solved_supply() = default;

void solved_supply::load_stage()
{
    load_ = rail_load(bodies_, lib_, output_, states_.front());
    stage_ = output_.model;
    // A ladder draws at its port as many times the current as it lifts the voltage.
    const double multiple = output_.topology == "boost-multiplier" && output_.rungs.multiple > 0.0 ? output_.rungs.multiple : 1.0;
    value at_port = load_;
    for (spread& s : at_port.numbers) {
        s = scaled(s, multiple);
    }
    if (stage_.there()) {
        stage_.set(stage_model::given::load, at_port, "load");
    }
}

const decay_network& solved_supply::after(const off_case& how) const
{
    for (const auto& [known, network] : decays_) {
        if (known == how) {
            return *network;
        }
    }
    decays_.emplace_back(how, std::make_unique<decay_network>(bodies_, lib_, capacitors_, how));
    return *decays_.back().second;
}

value solved_supply::worst_time(const std::string& a, const std::string& b, double volts) const
{
    value worst;
    for (const off_case& how : off_cases_) {
        const value t = after(how).time_to(a, b, volts);
        if (t.never) {
            return t;
        }
        worst = worst.numbers.empty() && worst.missing.empty() ? t : greater(worst, t);
    }
    return worst;
}

value solved_supply::worst_left(const std::string& a, const std::string& b, double seconds) const
{
    value worst;
    for (const off_case& how : off_cases_) {
        const value v = after(how).left_after(a, b, seconds);
        worst = worst.numbers.empty() && worst.missing.empty() ? v : greater(worst, v);
    }
    return worst;
}

/// A resistor that passed the tests of a standard for it is not itself faulted.
value solved_supply::worst_left_broken(const std::string& a, const std::string& b, double seconds) const
{
    value worst = worst_left(a, b, seconds);
    for (const std::string& ref : paths_to_break()) {
        const part* p = bodies_.find_part(ref);
        const field* qualified = p == nullptr ? nullptr : p->find("qualified");
        if (qualified != nullptr && qualified->truth() != nullptr && *qualified->truth()) {
            continue;
        }
        for (const off_case& how : off_cases_without(ref)) {
            worst = greater(worst, after(how).left_after(a, b, seconds));
        }
    }
    worst.shown.formula = "greatest voltage left, each discharge path open in turn";
    return worst;
}

std::vector<off_case> solved_supply::off_cases_without(const std::string& ref) const
{
    std::vector<off_case> cases = off_cases_;
    for (off_case& how : cases) {
        how.broken = ref;
    }
    return cases;
}

std::vector<std::string> solved_supply::paths_to_break() const
{
    std::vector<std::string> refs;
    for (const element& e : wire(bodies_, lib_, state::switched_off, output_.stage_parts)) {
        if (discharges(e) && std::find(e.forms.begin(), e.forms.end(), element_spec::form::resistance) != e.forms.end() &&
            std::find(refs.begin(), refs.end(), e.ref) == refs.end()) {
            refs.push_back(e.ref);
        }
    }
    return refs;
}

void solved_supply::list_accesses()
{
    std::vector<access> all = written_.accesses;
    if (all.empty()) {
        // No access written: every net, cover off.
        for (const std::string& net : written_.nets) {
            if (net != written_.return_net && can_exceed(working_voltage(states_, net, written_.return_net), low_voltage)) {
                all.push_back({{net, written_.return_net}, "anywhere inside", "cover off", written_.at});
            }
        }
    }
    const std::vector<element> off = wire(bodies_, lib_, state::switched_off, output_.stage_parts);
    for (const access& a : all) {
        access_item item;
        item.where = a;
        item.about = {"access", pair_name(a.nets[0], a.nets[1]), a.nets, a.at};
        item.touchable = a.when != "cover off";
        for (const state in : {state::running, state::no_load, state::standby}) {
            item.voltage[in] = magnitude(at(in).voltage(a.nets[0], a.nets[1]));
            item.touch_current[in] = magnitude(touch_current(bodies_, lib_, output_, in, a.nets[0], a.nets[1], standard_body));
        }
        item.discharge_path = soldered_path(off, a.nets[0], a.nets[1]);
        accesses_.push_back(std::move(item));
    }
}

void solved_supply::list_subjects()
{
    for (const part& p : bodies_.parts) {
        std::vector<std::string> nets;
        for (const terminal& t : p.terminals) {
            nets.push_back(t.net);
        }
        subjects_.push_back({p.kind, p.ref, std::move(nets), p.at});
    }
    const auto add = [this](const auto& list) {
        for (const auto& item : list) {
            subjects_.push_back(item.about);
        }
    };
    add(gaps_);
    add(pairs_);
    add(stored_);
    add(accesses_);
    if (bodies_.stage) {
        subjects_.push_back({"converter", bodies_.stage->name, {}, bodies_.stage->at});
    }
    subjects_.push_back({"supply", written_.name.empty() ? "supply" : written_.name, {}, written_.at});
}

void solved_supply::list_pairs()
{
    const std::set<std::string> touchable = touchable_nets(written_);
    const std::vector<std::string>& nets = written_.nets;
    for (std::size_t i = 0; i < nets.size(); ++i) {
        for (std::size_t j = i + 1; j < nets.size(); ++j) {
            value v = working_voltage(states_, nets[i], nets[j]);
            if (!can_exceed(v, low_voltage)) {
                continue;
            }
            const gap* g = gap_for(written_, nets[i], nets[j]);
            pair_item item;
            const bool turned = nets[i] == written_.return_net; // the return is told last
            const std::vector<std::string> ends{nets[turned ? j : i], nets[turned ? i : j]};
            item.about = {"net-pair", pair_name(ends[0], ends[1]), ends, written_.net_at.contains(nets[i]) ? written_.net_at.at(nets[i]) : place{}};
            item.voltage = std::move(v);
            item.covered = g == nullptr ? "none" : g->nets[1] == "*" ? "floor" : "gap";
            item.person_side = touchable.contains(nets[i]) != touchable.contains(nets[j]);
            pairs_.push_back(std::move(item));
        }
    }
    std::stable_sort(pairs_.begin(), pairs_.end(), [](const pair_item& a, const pair_item& b) {
        return highest(a.voltage).value_or(unbounded) > highest(b.voltage).value_or(unbounded);
    });
}

} // namespace onehand
