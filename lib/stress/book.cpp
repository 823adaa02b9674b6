// The look-ups of solved_supply: a fact by subject, state and name.
#include "stress/items.hpp"
#include "stress/part_facts.hpp"
#include "stress/solved.hpp"
#include "stress/spread_math.hpp"
#include "stress/stage_facts.hpp"

#include <algorithm>

namespace onehand {

namespace {

/// The largest of a signed value's negatives: how far it goes below zero, told as a positive number.
value below_zero(value v)
{
    for (spread& s : v.numbers) {
        s = clamped(negated(s), 0.0, unbounded);
    }
    return v;
}

bool is_electrolytic(const std::string& dielectric)
{
    return dielectric.find("electrolytic") != std::string::npos || dielectric.find("tantalum") != std::string::npos;
}

} // namespace

const dc_solution& solved_supply::at(state in) const
{
    const auto it = std::find_if(states_.begin(), states_.end(), [&](const dc_solution& d) { return d.in == in; });
    return it == states_.end() ? states_.front() : *it;
}

value solved_supply::part_fact(const subject& s, state in, const std::string& name) const
{
    const part* p = bodies_.find_part(s.name);
    const kind_spec* kind = p == nullptr ? nullptr : lib_.find_kind(p->kind);
    if (kind == nullptr) {
        return no_fact(s, name);
    }
    if (name == "ambient") {
        return inside_temperature(bodies_.used);
    }
    if (name == "derating") {
        const std::optional<field>& said = bodies_.used.derating;
        return choice_of(said && said->text() != nullptr ? *said->text() : "none");
    }
    if (name == "polarised") {
        return truth_of(p->polarised);
    }
    if (name == "electrolytic") {
        const value d = field_value(*p, *kind, lib_, "dielectric");
        return d.choice.empty() ? missing_value(value::type::truth, {p->ref + ".dielectric"}) : truth_of(is_electrolytic(d.choice));
    }
    if (name == "insulation-voltage") {
        return insulation_voltage(*this, *p);
    }
    if (name == "source-current") {
        return source_current(*this);
    }
    if (name == "indicates") {
        // Whoever sees a lamp reads it: only a written role says that it is there for something else.
        return p->role.empty() ? missing_value(value::type::truth, {p->ref + ".role"}) : truth_of(p->role == "indicator");
    }
    if (p->kind == "capacitor") {
        if (const auto v = capacitor_fact(*this, *p, name)) {
            return *v;
        }
    }
    if (const auto v = stage_part_fact(*this, *p, name)) {
        return *v;
    }
    const auto found = at(in).bodies.find(s.name);
    const bool stage_switch = bodies_.stage && (p->ref == bodies_.stage->power_switch || p->ref.starts_with(bodies_.stage->power_switch + "/"));
    if (name == "peak-voltage" && stage_switch) {
        return output_.peak;
    }
    if (found != at(in).bodies.end()) {
        const body_solution& b = found->second;
        if (name == "voltage") {
            return b.voltage;
        }
        if (name == "peak-voltage") {
            return magnitude(b.voltage); // no switch of the stage: what stands across it
        }
        if (name == "current") {
            return b.current;
        }
        if (name == "power") {
            const bool clamps =
                bodies_.stage && bodies_.stage->clamp && !bodies_.stage->clamp->suppressor.empty() && bodies_.stage->clamp->suppressor == p->ref;
            return clamps ? output_.clamp_power : b.power;
        }
        if (name == "reverse-voltage") {
            return below_zero(b.voltage);
        }
        if (name == "track-current" && b.track_current) {
            return *b.track_current;
        }
        if (name == "span-voltage" && b.span_voltage) {
            return *b.span_voltage;
        }
    }
    return kind->find(name) != nullptr ? field_value(*p, *kind, lib_, name) : no_fact(s, name);
}

value solved_supply::stored_fact(const subject& s, const std::string& name) const
{
    const stored_item* i = item_of(stored_, s);
    if (i == nullptr) {
        return no_fact(s, name);
    }
    if (name == "is-pair") {
        return truth_of(i->is_pair);
    }
    if (name == "touchable") {
        return truth_of(i->touchable);
    }
    if (name == "discharge-path") {
        return truth_of(i->discharge_path);
    }
    if (name == "paths") {
        return choice_of(i->paths);
    }
    if (name == "person" || name == "label" || name == "discharge-procedure" || name == "shorting-lead" || name == "discharge-resistor") {
        return supply_fact(name);
    }
    const std::pair<const char*, const value*> figures[] = {{"voltage", &i->voltage},
                                                            {"capacitance", &i->capacitance},
                                                            {"energy", &i->energy},
                                                            {"charge", &i->charge},
                                                            {"at-once-energy", &i->at_once_energy},
                                                            {"at-once-charge", &i->at_once_charge},
                                                            {"es1-voltage", &i->es1_voltage},
                                                            {"es2-voltage", &i->es2_voltage},
                                                            {"pulse-current", &i->pulse_current},
                                                            {"pulse-time", &i->pulse_time},
                                                            {"pulse-es2-voltage", &i->pulse_es2_voltage},
                                                            {"pulse-es2-current", &i->pulse_es2_current}};
    for (const auto& [word, figure] : figures) {
        if (name == word) {
            return *figure;
        }
    }
    return no_fact(s, name);
}

value solved_supply::access_fact(const subject& s, state in, const std::string& name) const
{
    const access_item* a = item_of(accesses_, s);
    if (a == nullptr) {
        return no_fact(s, name);
    }
    if (name == "voltage") {
        const auto v = a->voltage.find(in == state::switched_off ? state::no_load : in);
        return v == a->voltage.end() ? no_fact(s, name) : v->second;
    }
    if (name == "touch-current") {
        const auto i = a->touch_current.find(in == state::switched_off ? state::no_load : in);
        return i == a->touch_current.end() ? no_fact(s, name) : i->second;
    }
    if (name == "charge") {
        return a->charge;
    }
    if (name == "when") {
        return choice_of(a->where.when);
    }
    if (name == "touchable") {
        return truth_of(a->touchable);
    }
    if (name == "person" || name == "label" || name == "wet") {
        return supply_fact(name);
    }
    if (name == "discharge-path") {
        return truth_of(a->discharge_path);
    }
    const std::pair<const char*, const value*> figures[] = {
        {"capacitance", &a->capacitance}, {"es1-voltage", &a->es1_voltage}, {"es2-voltage", &a->es2_voltage}};
    for (const auto& [word, figure] : figures) {
        if (name == word) {
            return *figure;
        }
    }
    if (name == "faulted-voltage") {
        return faulted_voltage(*this, *a);
    }
    if (name == "faulted-touch-current") {
        return faulted_touch_current(*this, *a);
    }
    if (name == "broken-after-2-s") {
        return worst_left_broken(s.nets[0], s.nets[1], 2.0);
    }
    const std::pair<const char*, double> left[] = {{"after-1-s", 1.0}, {"after-2-s", 2.0}, {"after-5-s", 5.0}, {"after-10-s", 10.0}};
    for (const auto& [word, seconds] : left) {
        if (name == word) {
            return worst_left(s.nets[0], s.nets[1], seconds);
        }
    }
    return no_fact(s, name);
}

value solved_supply::converter_fact(const std::string& name) const
{
    if (name == "set-point") {
        return output_.output;
    }
    if (name == "feedback-lost") {
        return truth_of(output_.feedback_lost);
    }
    if (name == "topology") {
        return choice_of(output_.topology);
    }
    if (name == "isolates") {
        const field* written = bodies_.stage ? bodies_.stage->find("isolates") : nullptr;
        if (written != nullptr && written->truth() != nullptr) {
            return truth_of(*written->truth());
        }
        return output_.topology == "boost" || output_.topology == "boost-multiplier"
                   ? truth_of(false)
                   : missing_value(value::type::truth, {(bodies_.stage ? bodies_.stage->name : std::string("converter")) + ".isolates"});
    }
    if (bodies_.stage) {
        if (const auto v = stage_fact(*this, name)) {
            return *v;
        }
    }
    return missing_value(value::type::number, {"converter." + name});
}

value solved_supply::look_up(const subject& s, state in, const std::string& name) const
{
    // One judgement asks for a fact several times, and some are solved anew each time.
    const auto key = std::tuple(s.kind, s.name, s.at.line, s.at.column, in, name);
    const auto known = memo_.find(key);
    return known != memo_.end() ? known->second : memo_.emplace(key, fact(s, in, name)).first->second;
}

value solved_supply::fact(const subject& s, state in, const std::string& name) const
{
    if (s.kind == "gap") {
        return gap_fact(s, name);
    }
    if (s.kind == "net-pair") {
        return pair_fact(s, name);
    }
    if (s.kind == "stored") {
        return stored_fact(s, name);
    }
    if (s.kind == "access") {
        return access_fact(s, in, name);
    }
    if (s.kind == "converter") {
        return converter_fact(name);
    }
    if (s.kind == "supply") {
        return supply_fact(name);
    }
    return part_fact(s, in, name);
}

value solved_supply::time_to(const subject& s, const quantity& limit) const
{
    if (s.nets.size() != 2) {
        return missing_value(value::type::number, {s.name + " discharge"});
    }
    return worst_time(s.nets[0], s.nets[1], limit.si);
}

} // namespace onehand
