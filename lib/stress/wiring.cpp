#include "stress/wiring.hpp"

#include <algorithm>

namespace onehand {

namespace {

using form = element_spec::form;

std::string form_name(form f)
{
    switch (f) {
    case form::resistance:
        return "resistance";
    case form::clamp:
        return "clamp";
    case form::current:
        return "current";
    case form::capacitance:
        return "capacitance";
    case form::inductance:
        return "inductance";
    case form::track:
        return "track";
    default:
        return {};
    }
}

bool applies(const element_spec& spec, state in)
{
    return spec.states.empty() || std::find(spec.states.begin(), spec.states.end(), word_for(in)) != spec.states.end();
}

/// The elements that stand: those of the kind, save where a fault mode puts others between the same terminals.
std::vector<element_spec> specs_of(const part& p, const kind_spec& kind)
{
    const auto mode = std::find_if(kind.failures.begin(), kind.failures.end(), [&](const failure_spec& f) { return f.mode == p.fault; });
    if (p.fault.empty() || mode == kind.failures.end()) {
        return kind.elements;
    }
    std::vector<element_spec> specs = mode->elements;
    for (const element_spec& whole : kind.elements) {
        const bool replaced =
            std::any_of(specs.begin(), specs.end(), [&](const element_spec& s) { return s.from == whole.from && s.to == whole.to; });
        if (!replaced) {
            specs.push_back(whole);
        }
    }
    return specs;
}

std::string at_number(const std::string& name, int number)
{
    const std::size_t star = name.find('*');
    return star == std::string::npos ? name : name.substr(0, star) + std::to_string(number) + name.substr(star + 1);
}

std::optional<element> element_from(const element_spec& spec, int index, const part& p, const kind_spec& kind, const library& lib)
{
    const std::string from_name = at_number(spec.from, index);
    const std::string to_name = at_number(spec.to, index);
    const std::string& from = p.net(from_name);
    const std::string& to = p.net(to_name);
    if (from.empty() || to.empty()) {
        return std::nullopt;
    }
    const bool main = from_name == kind.voltage_from && to_name == kind.voltage_to;
    const bool turned = from_name == kind.voltage_to && to_name == kind.voltage_from;
    element e{p.ref, from, to, spec.forms, {}, {}, {}, spec.holds_charge_path, main || turned};
    for (const form f : spec.forms) {
        if (const auto named = spec.field.find(form_name(f)); named != spec.field.end()) {
            e.values[f] = field_value(p, kind, lib, named->second);
        }
    }
    if (std::find(spec.forms.begin(), spec.forms.end(), form::track) != spec.forms.end()) {
        e.wiper = p.net("wiper");
        const field* position = p.find("position");
        e.position = number(position != nullptr && position->number() != nullptr ? *position->number() : between(dim::none, 0.0, 1.0));
    }
    return e;
}

} // namespace

std::vector<element> elements_of(const part& p, const library& lib, state in)
{
    std::vector<element> list;
    const kind_spec* kind = lib.find_kind(p.kind);
    if (kind == nullptr) {
        return list;
    }
    for (const element_spec& spec : specs_of(p, *kind)) {
        if (!applies(spec, in)) {
            continue;
        }
        // A starred terminal stands once for each that is there.
        const bool starred = spec.from.find('*') != std::string::npos || spec.to.find('*') != std::string::npos;
        for (int number = 1;; ++number) {
            auto e = element_from(spec, number, p, *kind, lib);
            if (!e) {
                break;
            }
            list.push_back(std::move(*e));
            if (!starred) {
                break;
            }
        }
    }
    return list;
}

std::vector<element> wire(const supply& s, const library& lib, state in, const std::vector<std::string>& left_out)
{
    std::vector<element> list;
    for (const part& p : s.parts) {
        if (std::find(left_out.begin(), left_out.end(), p.ref) == left_out.end()) {
            for (element& e : elements_of(p, lib, in)) {
                list.push_back(std::move(e));
            }
        }
    }
    return list;
}

bool may_conduct(const element& e)
{
    return std::any_of(e.forms.begin(), e.forms.end(), [](form f) { return f != form::open && f != form::capacitance; });
}

bool joins_nets(const element& e)
{
    return std::all_of(e.forms.begin(), e.forms.end(),
                       [](element_spec::form f) { return f == element_spec::form::closed || f == element_spec::form::inductance; });
}

bool surely_conducts(const element& e)
{
    return std::all_of(e.forms.begin(), e.forms.end(),
                       [](form f) { return f == form::closed || f == form::resistance || f == form::track || f == form::inductance; });
}

} // namespace onehand
