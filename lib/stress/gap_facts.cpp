// Facts of written gaps and of pairs of nets.
#include "stress/items.hpp"
#include "stress/solved.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

namespace {

/// A figure that a set does not ask at all: nothing, as against unknown.
value asked(const value& v)
{
    return v.numbers.empty() && v.missing.empty() ? number(exactly({0.0, dim::length})) : v;
}

/// The lesser of the distances through air and along the surface.
value least_distance(const value& clearance, const value& creepage)
{
    value v;
    inherit(v, clearance);
    inherit(v, creepage);
    if (!clearance.numbers.empty() && !creepage.numbers.empty()) {
        const spread& a = clearance.numbers.front();
        const spread& b = creepage.numbers.front();
        v.numbers.push_back({dim::length,
                             {std::min(a.in_use.low, b.in_use.low), std::min(a.in_use.high, b.in_use.high)},
                             {std::min(a.whole.low, b.whole.low), std::min(a.whole.high, b.whole.high)},
                             std::nullopt});
    }
    v.shown.formula = "lesser of clearance and creepage";
    return v;
}

} // namespace

value solved_supply::gap_fact(const subject& s, const std::string& name) const
{
    const gap_item* g = item_of(gaps_, s);
    if (g == nullptr) {
        return no_fact(s, name);
    }
    const std::pair<const char*, const value*> figures[] = {{"voltage", &g->voltage},
                                                            {"required-creepage", &g->need.creepage},
                                                            {"required-clearance", &g->need.clearance},
                                                            {"iec-61010-1-creepage", &g->need.lab_creepage},
                                                            {"iec-61010-1-clearance", &g->need.lab_clearance},
                                                            {"iec-62368-1-creepage", &g->need.equipment_creepage},
                                                            {"iec-62368-1-clearance", &g->need.equipment_clearance},
                                                            {"ipc-2221-spacing", &g->need.board}};
    for (const auto& [word, figure] : figures) {
        if (name == word) {
            return asked(*figure);
        }
    }
    const std::pair<const char*, bool> truths[] = {
        {"person-side", g->person_side}, {"bridge-worse", g->bridge_worse}, {"grooved", g->written->groove.has_value()}, {"switches", g->switches}};
    for (const auto& [word, truth] : truths) {
        if (name == word) {
            return truth_of(truth);
        }
    }
    const spacing_site site = g->site(written_, lib_);
    if (name == "insulation") {
        return choice_of(g->insulation);
    }
    if (name == "board-column") {
        return g->need.board_column.empty() ? missing_value(value::type::choice, {s.name + ".surface"}) : choice_of(g->need.board_column);
    }
    if (name == "clearance") {
        return written_value(g->written->clearance, value::type::number, s.name + ".clearance");
    }
    if (name == "creepage") {
        value v = creepage_of(site);
        v.missing = v.numbers.empty() ? std::vector<std::string>{s.name + ".creepage"} : v.missing;
        return v;
    }
    if (name == "least-distance") {
        return least_distance(gap_fact(s, "clearance"), gap_fact(s, "creepage"));
    }
    if (name == "groove") {
        return written_value(g->written->groove, value::type::number, s.name + ".groove");
    }
    if (name == "least-groove") {
        return least_groove(site);
    }
    if (name == "switching-frequency") {
        return bodies_.stage ? converter_fact("frequency") : missing_value(value::type::number, {"converter.drive"});
    }
    if (name == "pollution-degree") {
        return written_value(bodies_.used.pollution_degree, value::type::number, "use.pollution-degree");
    }
    return no_fact(s, name);
}

value solved_supply::pair_fact(const subject& s, const std::string& name) const
{
    const pair_item* p = item_of(pairs_, s);
    if (p == nullptr) {
        return no_fact(s, name);
    }
    if (name == "voltage") {
        return p->voltage;
    }
    if (name == "person-side") {
        return truth_of(p->person_side);
    }
    if (name == "covered") {
        return choice_of(p->covered);
    }
    return no_fact(s, name);
}

} // namespace onehand
