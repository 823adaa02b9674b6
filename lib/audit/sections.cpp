#include "audit/sections.hpp"

#include "stress/paths.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

std::vector<class_told> classes_of(const judgement& judged, const subject& about, std::optional<state> in = std::nullopt)
{
    std::vector<class_told> list;
    for (const class_told& c : judged.classes) {
        if (c.about == about && (!in || c.in == *in)) {
            list.push_back(c);
        }
    }
    return list;
}

} // namespace

std::vector<net_facts> net_section(const solved_supply& s)
{
    std::vector<net_facts> list;
    for (const std::string& net : s.written().nets) {
        net_facts f;
        f.net = net;
        for (const dc_solution& d : s.states()) {
            if (const auto v = d.potential.find(net); v != d.potential.end()) {
                f.potential.emplace_back(d.in, v->second);
            }
            f.floating |= d.floating.contains(net);
        }
        list.push_back(std::move(f));
    }
    return list;
}

std::vector<part_facts> part_section(const solved_supply& s)
{
    std::vector<part_facts> list;
    for (const part& p : s.bodies().parts) {
        part_facts f;
        f.ref = p.ref;
        f.kind = p.kind;
        for (const dc_solution& d : s.states()) {
            if (const auto b = d.bodies.find(p.ref); b != d.bodies.end()) {
                f.states.push_back({d.in, b->second.voltage, b->second.current, b->second.power});
            }
        }
        list.push_back(std::move(f));
    }
    std::stable_sort(list.begin(), list.end(), [](const part_facts& a, const part_facts& b) { return natural_less(a.ref, b.ref); });
    return list;
}

std::optional<set_point_facts> set_point_section(const solved_supply& s)
{
    const rail& r = s.output();
    if (r.topology.empty()) {
        return std::nullopt;
    }
    set_point_facts f;
    f.output = r.output;
    f.basis = r.basis;
    for (const rail::end& e : r.set_by) {
        f.set_by.push_back({e.part, e.at_low, e.at_high});
    }
    return f;
}

std::vector<access_facts> access_section(const solved_supply& s, const judgement& judged)
{
    std::vector<access_facts> list;
    for (const access_item& a : s.accesses()) {
        access_facts f;
        f.where = a.where;
        f.about = a.about;
        for (const auto& [in, v] : a.voltage) {
            const auto i = a.touch_current.find(in);
            f.states.push_back({in, "none", v, i == a.touch_current.end() ? value{} : i->second, a.charge, classes_of(judged, a.about, in)});
        }
        list.push_back(std::move(f));
    }
    return list;
}

std::vector<stored_facts> stored_section(const solved_supply& s, const judgement& judged)
{
    std::vector<stored_facts> list;
    for (const stored_item& i : s.stored()) {
        stored_facts f;
        f.about = i.about;
        f.is_pair = i.is_pair;
        f.parts = i.parts;
        f.capacitance = i.capacitance;
        f.voltage = i.voltage;
        f.energy = i.energy;
        f.charge = i.charge;
        f.at_once_energy = i.at_once_energy;
        f.at_once_charge = i.at_once_charge;
        f.classes = classes_of(judged, i.about);
        list.push_back(std::move(f));
    }
    return list;
}

} // namespace onehand
