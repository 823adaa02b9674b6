// Spacings side by side: what every set in force asks of a pair, what was measured, which set asks most.
#include "audit/sections.hpp"

#include "stress/fields.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

namespace {

bool told(const value* v)
{
    return v != nullptr && (!v->numbers.empty() || !v->missing.empty());
}

/// The set whose known figure is the greatest.
std::string strictest(const std::vector<spacing_facts::required>& asked, value spacing_facts::required::*figure)
{
    std::string name;
    double most = 0.0;
    for (const auto& r : asked) {
        if (const auto high = highest(r.*figure); high && *high > most * (1.0 + 1e-12)) {
            most = *high;
            name = r.limit_set;
        }
    }
    return name;
}

/// The weakest basis among the tables that the figures were read from.
std::optional<basis> weakest_basis(const library& lib, const set_need& need)
{
    std::optional<basis> weakest;
    for (const value* v : {need.clearance, need.creepage}) {
        for (const evidence::input& i : v->shown.inputs) {
            const auto t =
                std::find_if(lib.tables.begin(), lib.tables.end(), [&](const table& one) { return one.at == i.at && one.title == i.name; });
            if (t != lib.tables.end()) {
                weakest = weakest ? std::max(*weakest, t->from.rests_on) : t->from.rests_on;
            }
        }
    }
    return weakest;
}

/// One figure against one limit at their worst ends.
verdict kept(const value& measured, const value& asked, bool functional)
{
    if (asked.numbers.empty() && asked.missing.empty()) {
        return verdict::pass;
    }
    if (measured.numbers.empty() || asked.numbers.empty()) {
        return verdict::not_shown;
    }
    double least = unbounded;
    for (const spread& s : measured.numbers) {
        least = std::min(least, s.whole.low);
    }
    const auto most = highest(asked);
    const bool enough = most && least >= *most;
    if (enough) {
        return asked.missing.empty() && measured.missing.empty() ? verdict::pass : verdict::not_shown;
    }
    const bool surely = std::all_of(asked.numbers.begin(), asked.numbers.end(), [&](const spread& s) { return least < s.whole.high; });
    if (!surely || !most) {
        return verdict::not_shown;
    }
    return functional ? verdict::marginal : asked.missing.empty() ? verdict::fail : verdict::not_shown;
}

verdict verdict_of(const spacing_facts& f)
{
    if (f.measured.empty()) {
        return verdict::not_shown;
    }
    verdict worst = verdict::pass;
    for (const auto& r : f.asked) {
        const bool functional = f.insulation == "functional";
        worst = std::min(worst, kept(f.measured.front().clearance, r.clearance, functional));
        worst = std::min(worst, kept(f.measured.front().creepage, r.creepage, functional));
    }
    return worst;
}

spacing_facts facts_of(const solved_supply& s, const subject& about, const value& voltage, const std::map<std::string, int>& circuits,
                       const std::vector<std::string>& sets)
{
    spacing_facts f;
    f.about = about;
    f.working_voltage = voltage;
    const gap* g = gap_for(s.written(), about.nets[0], about.nets[1]);
    f.covered = g == nullptr ? "none" : g->nets[1] == "*" ? "floor" : "gap";
    f.insulation = g != nullptr && g->insulation && g->insulation->text() != nullptr
                       ? *g->insulation->text()
                       : default_insulation(about.nets[0], about.nets[1], circuits, touchable_nets(s.written()));
    const spacing_site site{f.insulation, g, &s.written().used, &s.written().fed, &s.data()};
    const spacing_need need = spacing_needed(voltage, site);
    for (const std::string& name : sets) {
        const limit_set* set = s.data().find_limit_set(name);
        const set_need one = set != nullptr ? need_of(need, *set) : set_need{};
        if (told(one.clearance) || told(one.creepage)) {
            f.asked.push_back({name, *one.clearance, *one.creepage, weakest_basis(s.data(), one)});
        }
    }
    f.clearance_governs = strictest(f.asked, &spacing_facts::required::clearance);
    f.creepage_governs = strictest(f.asked, &spacing_facts::required::creepage);
    if (g != nullptr) {
        f.measured.push_back({g->where, written_value(g->clearance, value::type::number, "clearance"), creepage_of(site), f.covered == "floor"});
    }
    f.kept = verdict_of(f);
    return f;
}

bool listed_already(const std::vector<spacing_facts>& list, const std::vector<std::string>& nets)
{
    return std::any_of(list.begin(), list.end(), [&](const spacing_facts& f) {
        return (f.about.nets[0] == nets[0] && f.about.nets[1] == nets[1]) || (f.about.nets[0] == nets[1] && f.about.nets[1] == nets[0]);
    });
}

} // namespace

std::vector<spacing_facts> spacing_section(const solved_supply& s, const std::vector<std::string>& sets)
{
    const std::map<std::string, int> circuits = circuits_of(s.bodies(), s.data());
    std::vector<spacing_facts> list;
    for (const pair_item& p : s.pairs()) {
        list.push_back(facts_of(s, p.about, p.voltage, circuits, sets));
    }
    // A gap that somebody measured is answered at any voltage.
    for (const gap_item& g : s.gaps()) {
        if (!g.floor && !listed_already(list, g.about.nets)) {
            subject about = g.about;
            about.name = about.nets[0] + " to " + about.nets[1];
            list.push_back(facts_of(s, about, g.voltage, circuits, sets));
        }
    }
    return list;
}

} // namespace onehand
