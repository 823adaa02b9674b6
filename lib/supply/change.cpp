#include "supply/change.hpp"

#include "quantity/text.hpp"

#include <algorithm>
#include <fmt/format.h>

namespace onehand {

namespace {

using what = change::what;

bool has_net(const supply& s, const std::string& net)
{
    return std::find(s.nets.begin(), s.nets.end(), net) != s.nets.end();
}

std::string missing_net(const supply& s, const std::vector<std::string>& nets)
{
    if (nets.size() != 2) {
        return "two nets are needed";
    }
    for (const std::string& n : nets) {
        if (!has_net(s, n)) {
            return n + " is no net of this supply";
        }
    }
    return nets[0] == nets[1] ? "both are the same net" : "";
}

part* find_part(supply& s, const std::string& ref)
{
    const auto it = std::find_if(s.parts.begin(), s.parts.end(), [&](const part& p) { return p.ref == ref; });
    return it == s.parts.end() ? nullptr : &*it;
}

/// A part of a string is reached by opening the string into its bodies.
part* find_body(supply& s, const std::string& ref)
{
    if (part* p = find_part(s, ref)) {
        return p;
    }
    if (ref.find('/') == std::string::npos) {
        return nullptr;
    }
    s = expand_bodies(s);
    return find_part(s, ref);
}

part joined(const std::string& ref, const std::string& kind, const std::vector<std::string>& nets)
{
    part p;
    p.ref = ref;
    p.kind = kind;
    p.terminals = {{"first", nets[0], {}}, {"second", nets[1], {}}};
    return p;
}

std::string put_fault(supply& s, const library& lib, const change& c)
{
    part* p = find_body(s, c.ref);
    if (p == nullptr) {
        return c.ref + " is no part of this supply";
    }
    const kind_spec* kind = lib.find_kind(p->kind);
    const bool known =
        kind != nullptr && std::any_of(kind->failures.begin(), kind->failures.end(), [&](const failure_spec& f) { return f.mode == c.mode; });
    if (!known) {
        return "a " + p->kind + " has no failure mode '" + c.mode + "'";
    }
    p->fault = c.mode;
    return {};
}

std::string put_meter(supply& s, const change& c)
{
    if (std::string why = missing_net(s, c.nets); !why.empty()) {
        return why;
    }
    if (!c.value || c.value->dim != dim::resistance) {
        return "its resistance is needed";
    }
    part p = joined(c.sort == what::body ? "body" : "meter", "meter", c.nets);
    p.fields["resistance"] = {*c.value, {}, write_spread(*c.value), {}};
    s.parts.push_back(std::move(p));
    return {};
}

std::string put_bridge(supply& s, const std::vector<std::string>& nets)
{
    if (std::string why = missing_net(s, nets); !why.empty()) {
        return why;
    }
    s.parts.push_back(joined("bridge", "wire", nets));
    return {};
}

std::string put_input_event(supply& s, const change& c)
{
    if (c.mode == "reversed") {
        if (!s.fed.voltage || s.fed.voltage->number() == nullptr) {
            return "the input voltage is not written";
        }
        s.fed.voltage->value = negated(*s.fed.voltage->number());
        return {};
    }
    if (c.mode == "highest-adapter" || c.mode == "brown-out") {
        if (!c.value || c.value->dim != dim::voltage) {
            return "its voltage is needed";
        }
        s.fed.voltage = field{*c.value, s.fed.at, write_spread(*c.value), {}};
        return {};
    }
    return "no input event '" + c.mode + "' here: reversed, brown-out or highest-adapter";
}

std::string unplug(supply& s)
{
    bool any = false;
    for (part& p : s.parts) {
        if (p.kind != "connector") {
            continue;
        }
        any = true;
        // Each half keeps its charge: the load side goes to nets of its own.
        for (terminal& t : p.terminals) {
            if (t.name.ends_with("-load")) {
                t.net += "~" + p.ref;
            }
        }
    }
    std::erase_if(s.parts, [](const part& p) { return p.kind == "load"; });
    return any ? "" : "there is no connector";
}

std::string set_wiper(supply& s, const change& c)
{
    part* p = find_part(s, c.ref);
    if (p == nullptr || p->kind != "trimmer") {
        return c.ref + " is no trimmer of this supply";
    }
    if (!c.value || c.value->dim != dim::none || c.value->whole.low < 0.0 || c.value->whole.high > 1.0) {
        return "a wiper stands between 0 and 1";
    }
    p->fields["position"] = {*c.value, {}, write_spread(*c.value), {}};
    return {};
}

std::string open_terminal(supply& s, const change& c)
{
    part* p = find_body(s, c.ref);
    if (p == nullptr) {
        return c.ref + " is no part of this supply";
    }
    for (terminal& t : p->terminals) {
        if (t.name == c.mode) {
            t.net += "~" + p->ref;
            s.nets.push_back(t.net);
            return {};
        }
    }
    return "a " + p->kind + " has no terminal '" + c.mode + "'";
}

std::string edit(supply& s, const library& lib, const change& c)
{
    switch (c.sort) {
    case what::none:
        return {};
    case what::part_fault:
        return put_fault(s, lib, c);
    case what::meter:
    case what::body:
        return put_meter(s, c);
    case what::bridge:
        return put_bridge(s, c.nets);
    case what::input_event:
        return put_input_event(s, c);
    case what::output_unplugged:
        return unplug(s);
    case what::output_shorted:
        return s.stage && s.stage->outputs.size() == 2 ? put_bridge(s, s.stage->outputs) : "there is no output";
    case what::wiper:
        return set_wiper(s, c);
    case what::terminal_open:
        return open_terminal(s, c);
    }
    return "no such change";
}

} // namespace

std::string describe(const change& c)
{
    const std::string figure = c.value ? format_spread(*c.value) : "";
    const auto pair = [&](const char* word) { return c.nets.size() == 2 ? c.nets[0] + word + c.nets[1] : std::string("?"); };
    switch (c.sort) {
    case what::none:
        return "none";
    case what::part_fault:
        return c.ref + " " + c.mode;
    case what::meter:
        return "meter of " + figure + " from " + pair(" to ");
    case what::body:
        return "a body of " + figure + " from " + pair(" to ");
    case what::bridge:
        return pair(" bridged to ");
    case what::input_event:
        return "input " + c.mode + (figure.empty() ? "" : " at " + figure);
    case what::output_unplugged:
        return "output unplugged";
    case what::output_shorted:
        return "output shorted";
    case what::wiper:
        return c.ref + " wiper at " + figure;
    case what::terminal_open:
        return c.ref + " " + c.mode + " off";
    }
    return "none";
}

std::vector<change> single_faults(const supply& s, const library& lib)
{
    std::vector<change> list;
    const supply bodies = expand_bodies(s);
    for (const part& p : bodies.parts) {
        if (const kind_spec* kind = lib.find_kind(p.kind)) {
            for (const failure_spec& f : kind->failures) {
                change c;
                c.sort = what::part_fault;
                c.ref = p.ref;
                c.mode = f.mode;
                list.push_back(std::move(c));
            }
        }
    }
    return list;
}

change_result apply(const supply& s, const library& lib, const change& c)
{
    change_result result{s, {}};
    result.refused = edit(result.edited, lib, c);
    if (!result.refused.empty()) {
        result.edited = s;
    }
    return result;
}

} // namespace onehand
