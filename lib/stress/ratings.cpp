// What insulation stands off, what the input delivers, capacitors towards a person.
#include "stress/part_facts.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

namespace {

std::string choice_word(const solved_supply& s, const part& p, const std::string& name)
{
    const kind_spec* kind = s.data().find_kind(p.kind);
    return kind == nullptr ? std::string{} : field_value(p, *kind, s.data(), name).choice;
}

/// One net can be touched and is neither the return nor bonded to it: the capacitor bridges towards a person.
value bridges_touchable(const solved_supply& s, const part& p)
{
    const supply& built = s.written();
    const std::set<std::string> touchable = touchable_nets(built);
    const bool bonded = built.return_bonded && built.return_bonded->truth() != nullptr && *built.return_bonded->truth();
    const auto counts = [&](const std::string& net) {
        return touchable.contains(net) && net != built.return_net && !(bonded && net == built.chassis);
    };
    const std::string& a = p.terminals[0].net;
    const std::string& b = p.terminals[1].net;
    return truth_of(counts(a) != counts(b));
}

} // namespace

value insulation_voltage(const solved_supply& s, const part& p)
{
    value v;
    const auto add = [&](const std::string& a, const std::string& b) {
        for (const dc_solution& d : s.states()) {
            const value one = magnitude(d.voltage(a, b));
            v = v.numbers.empty() && v.missing.empty() ? one : greater(v, one);
        }
    };
    for (std::size_t i = 0; i < p.terminals.size(); ++i) {
        const std::string& net = p.terminals[i].net;
        if (net != s.written().return_net) {
            add(net, s.written().return_net);
        }
        for (std::size_t j = i + 1; j < p.terminals.size(); ++j) {
            if (p.terminals[j].net != net) {
                add(net, p.terminals[j].net);
            }
        }
    }
    if (v.numbers.empty() && v.missing.empty()) {
        v = number(exactly({0.0, dim::voltage}));
    }
    v.shown.formula = "greatest voltage between its nets, or of one against the return";
    return v;
}

value source_current(const solved_supply& s)
{
    return written_value(s.written().fed.current_limit, value::type::number, "input.current-limit");
}

std::optional<value> capacitor_fact(const solved_supply& s, const part& p, const std::string& name)
{
    if (name == "class-2") {
        const std::string d = choice_word(s, p, "dielectric");
        return d.empty() ? missing_value(value::type::truth, {p.ref + ".dielectric"})
                         : truth_of(d == "X7R" || d == "X5R" || d == "Y5V" || d == "Z5U");
    }
    if (name == "rated-voltage" && p.find("rated-voltage") == nullptr) {
        // A class X or Y part is sold by its a.c. voltage: the d.c. figure of its maker counts.
        const kind_spec* kind = s.data().find_kind(p.kind);
        const bool by_class = !choice_word(s, p, "safety-class").empty();
        return p.find("rated-voltage-dc") != nullptr || by_class ? field_value(p, *kind, s.data(), "rated-voltage-dc")
                                                                 : field_value(p, *kind, s.data(), name);
    }
    if (name == "bridges-touchable") {
        return bridges_touchable(s, p);
    }
    if (name == "leakage-drop") {
        value v = leakage_of(s, p);
        const auto ohms = source_resistance(s, p.terminals[0].net);
        for (spread& x : v.numbers) {
            x = scaled(x, ohms.value_or(unbounded), dim::resistance);
        }
        v.shown.formula = "greatest leakage times the resistance that feeds it";
        return v;
    }
    if (name == "in-series" || name == "balanced" || name == "balancing-resistance" || name == "balancing-limit" || name == "initial-share") {
        return string_fact(s, p, name);
    }
    return std::nullopt;
}

value leakage_of(const solved_supply& s, const part& p)
{
    if (const field* written = p.find("leakage")) {
        value v = number(*written->number());
        v.shown = {"as written", {input_of(p.ref + ".leakage", *written)}, false, 0.0};
        return v;
    }
    const table* t = s.data().find_table("electrolytic-leakage");
    const field* farads = p.find("value");
    const field* volts = p.find("rated-voltage");
    if (t == nullptr || choice_word(s, p, "dielectric") != "aluminium electrolytic" || farads == nullptr || volts == nullptr ||
        farads->number() == nullptr || volts->number() == nullptr) {
        return missing_value(value::type::number, {p.ref + ".leakage"});
    }
    const double cv = farads->number()->whole.high * 1e6 * volts->number()->whole.high;
    double most = 0.0;
    for (std::size_t row = 0; row < t->choices.size(); ++row) {
        most = std::max(most, t->cells[row][0].front() * cv + t->cells[row][1].front());
    }
    value v = number(between(dim::current, 0.0, most * 1e-6));
    v.shown.formula = "greater of the makers' limits at C and U";
    v.shown.inputs = {input_of(p.ref + ".value", *farads), input_of(p.ref + ".rated-voltage", *volts), {t->title, "all rows", t->at}};
    return v;
}

} // namespace onehand
