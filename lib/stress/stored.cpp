// What is stored: per capacitor and per accessible pair, in the end (all that can reach the pair) and at once (into a body within 10 ms).
#include "stress/paths.hpp"
#include "stress/solved.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <map>

namespace onehand {

namespace {

/// The greatest voltage of table 5 at a capacitance: ES1 or ES2 of IEC 62368-1.
value class_voltage(const library& lib, const value& capacitance, const std::string& column)
{
    const table* t = lib.find_table("iec-62368-1-charged-capacitor");
    value v;
    inherit(v, capacitance);
    if (t == nullptr || capacitance.numbers.empty()) {
        return v;
    }
    for (const spread& c : capacitance.numbers) {
        const table_answer a = look_up(*t, column, c);
        if (!a.figure) {
            v.missing.push_back("table 5: " + a.reason);
            continue;
        }
        v.numbers.push_back(*a.figure);
        v.shown.inputs.push_back({"rows", a.rows, t->at});
    }
    v.shown.formula = "IEC 62368-1 table 5, " + column + ", at the capacitance with its tolerance";
    return v;
}

stored_item of_capacitor(const charged_capacitor& c, const supply& s)
{
    stored_item item;
    const part* p = s.find_part(c.ref);
    item.about = {"stored", c.ref, {c.positive, c.negative}, p != nullptr ? p->at : s.stage ? s.stage->at : place{}};
    item.parts = {c.ref};
    item.capacitance = c.capacitance;
    item.voltage = magnitude(c.voltage);
    item.energy = c.energy;
    item.charge = c.charge;
    item.discharge_path = c.discharge_path;
    item.paths = !c.discharge_path ? "none" : c.only_part.empty() ? "several" : "one";
    item.only_part = c.only_part;
    return item;
}

/// Capacitors whose charge can come to the pair: both their nets join the pair's nets through anything that may conduct, the rectifier too.
std::vector<const charged_capacitor*> reaching(const std::vector<charged_capacitor>& all, const std::vector<element>& running, const std::string& a,
                                               const std::string& b)
{
    std::set<std::string> near = reach(running, a, may_conduct);
    near.merge(reach(running, b, may_conduct));
    std::vector<const charged_capacitor*> found;
    for (const charged_capacitor& c : all) {
        // One that never exceeds 60 V is no hazard behind a rectifier: its charge comes at its own voltage.
        const bool counts = !highest(c.voltage) || highest(magnitude(c.voltage)).value_or(unbounded) > low_voltage;
        if (counts && near.contains(c.positive) && near.contains(c.negative)) {
            found.push_back(&c);
        }
    }
    return found;
}

/// Nothing but what hurts: fewest paths among the capacitors that reach the pair with charge worth telling.
void paths_of_pair(stored_item& item, const std::vector<const charged_capacitor*>& caps)
{
    item.paths = "several";
    item.discharge_path = true;
    for (const charged_capacitor* c : caps) {
        if (!c->discharge_path) {
            item.paths = "none";
            item.discharge_path = false;
            item.only_part.clear();
            return;
        }
        if (!c->only_part.empty() && item.paths == "several") {
            item.paths = "one";
            item.only_part = c->only_part;
        }
    }
}

/// What is not known of one capacitor leaves the others' share certain: it adds anything from nothing up.
value at_least_nothing(const value& v, const dimension& d)
{
    if (!v.numbers.empty()) {
        return v;
    }
    value out = number(between(d, 0.0, unbounded));
    out.missing = v.missing;
    return out;
}

/// IEC 62368-1 tables 6 and 7 at a duration: between rows the stricter one; a time that is never over is the last row's.
value pulse_limit(const library& lib, const char* id, const value& duration)
{
    value v;
    inherit(v, duration);
    const table* t = lib.find_table(id);
    if (t == nullptr || (duration.numbers.empty() && !duration.never)) {
        return v;
    }
    const double seconds = duration.never ? t->axis.back() : duration.numbers.front().whole.high;
    const table_answer a = look_up(*t, "ES2", exactly({seconds, dim::time}));
    if (a.figure) {
        v.numbers.push_back(*a.figure);
        v.shown.inputs.push_back({t->title, a.rows, t->at});
    } else {
        v.missing.push_back(t->title + ": " + a.reason);
    }
    v.shown.formula = "ES2 limit of a single pulse of that length";
    return v;
}

/// What a body sees in the first instant, for how long, and what the pulse tables allow for that long.
void add_pulse(stored_item& item, const decay_network& network, const library& lib)
{
    const decay_network::touch t = network.touched(item.about.nets[0], item.about.nets[1], standard_body, low_voltage);
    item.pulse_current = t.peak;
    for (spread& s : item.pulse_current.numbers) {
        s = scaled(s, 1.0 / standard_body, dim::conductance);
        s.dim = dim::current;
    }
    item.pulse_current.shown.formula = "first instant, into 2 kohm";
    item.pulse_time = t.above;
    item.pulse_es2_voltage = pulse_limit(lib, "iec-62368-1-pulse-voltage", network.time_to(item.about.nets[0], item.about.nets[1], low_voltage));
    item.pulse_es2_current = pulse_limit(lib, "iec-62368-1-pulse-current", t.above);
}

/// Capacitance that would hold the same charge at the pair's voltage, so that one table serves any network.
value equivalent_capacitance(const value& charge, const value& voltage)
{
    value v;
    inherit(v, charge);
    inherit(v, voltage);
    for (const spread& q : charge.numbers) {
        for (const spread& u : voltage.numbers) {
            if (u.whole.high <= 0.0) {
                continue;
            }
            const auto per_volt = [](double coulomb, double volt) { return volt > 0.0 ? coulomb / volt : 0.0; };
            v.numbers.push_back({dim::capacitance,
                                 {per_volt(q.in_use.low, u.in_use.low), per_volt(q.in_use.high, u.in_use.high)},
                                 {per_volt(q.whole.low, u.whole.low), per_volt(q.whole.high, u.whole.high)},
                                 std::nullopt});
        }
    }
    for (spread& s : v.numbers) {
        for (range* r : {&s.in_use, &s.whole}) {
            *r = {std::min(r->low, r->high), std::max(r->low, r->high)};
        }
    }
    v.shown.formula = "charge within 10 ms / voltage";
    return v;
}

} // namespace

void solved_supply::list_stored()
{
    for (const charged_capacitor& c : capacitors_) {
        stored_item item = of_capacitor(c, bodies_);
        item.es1_voltage = class_voltage(lib_, item.capacitance, "ES1");
        item.es2_voltage = class_voltage(lib_, item.capacitance, "ES2");
        stored_.push_back(std::move(item));
    }
    const std::vector<element> running = wire(bodies_, lib_, state::running, {});
    for (access_item& a : accesses_) {
        const std::string& from = a.where.nets[0];
        const std::string& to = a.where.nets[1];
        const auto caps = reaching(capacitors_, running, from, to);
        stored_item item;
        item.about = {"stored", a.about.name, a.where.nets, a.about.at};
        item.is_pair = true;
        item.touchable = a.touchable;
        item.voltage = hull(a.voltage[state::running], a.voltage[state::no_load]);
        item.energy = number(exactly({0.0, dim::energy}));
        item.charge = number(exactly({0.0, dim::charge}));
        for (const charged_capacitor* c : caps) {
            item.parts.push_back(c->ref);
            item.energy = sum(item.energy, at_least_nothing(c->energy, dim::energy));
            item.charge = sum(item.charge, at_least_nothing(c->charge, dim::charge));
        }
        item.energy.shown.formula = "sum of C U^2 / 2 of all that can reach the pair";
        item.charge.shown.formula = "sum of C U of all that can reach the pair";
        const decay_network::pulse pulse = after(off_cases_.front()).into_body(from, to, standard_body, at_once);
        item.at_once_charge = pulse.charge;
        item.at_once_energy = pulse.energy;
        item.capacitance = equivalent_capacitance(item.at_once_charge, item.voltage);
        item.es1_voltage = class_voltage(lib_, item.capacitance, "ES1");
        item.es2_voltage = class_voltage(lib_, item.capacitance, "ES2");
        add_pulse(item, after(off_cases_.front()), lib_);
        paths_of_pair(item, caps);
        if (item.paths == "one") {
            const part* only = bodies_.find_part(item.only_part);
            const field* passed = only == nullptr ? nullptr : only->find("qualified");
            item.paths = passed != nullptr && passed->truth() != nullptr && *passed->truth() ? "qualified" : item.paths;
        }
        a.charge = item.charge;
        a.capacitance = equivalent_capacitance(item.charge, item.voltage);
        a.capacitance.shown.formula = "all the charge that can flow / voltage";
        a.es1_voltage = item.es1_voltage;
        a.es2_voltage = item.es2_voltage;
        stored_.push_back(std::move(item));
    }
}

} // namespace onehand
