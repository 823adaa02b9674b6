// The written gaps with the voltage they stand at, what they need, and what bridging one would do to a person.
#include "stress/solved.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

namespace {

const value* voltage_of(const std::vector<pair_item>& pairs, const std::string& a, const std::string& b)
{
    for (const pair_item& p : pairs) {
        if ((p.about.nets[0] == a && p.about.nets[1] == b) || (p.about.nets[0] == b && p.about.nets[1] == a)) {
            return &p.voltage;
        }
    }
    return nullptr;
}

std::string gap_name(const gap& g, const std::string& insulation, bool floor)
{
    const std::string nets = floor ? g.nets[0] + " to any net" : g.nets[0] + " to " + g.nets[1];
    const std::string where = g.where.empty() ? "" : " at " + g.where;
    return nets + where + (floor && insulation != "functional" ? ", " + insulation : "");
}

/// The higher voltage speaks for a floor gap; at the same voltage the one that rests on fewer assumptions.
bool graver(const gap_item& a, const gap_item& b)
{
    const double x = highest(a.voltage).value_or(unbounded);
    const double y = highest(b.voltage).value_or(unbounded);
    return x > y * (1.0 + 1e-12) || (x >= y * (1.0 - 1e-12) && a.voltage.assumed.size() < b.voltage.assumed.size());
}

/// Voltage on something that can be touched, above the low-voltage limit, that was not there before.
bool puts_voltage_on_touchable(const dc_solution& before, const dc_solution& after, const std::set<std::string>& touchable, const std::string& ground)
{
    return std::any_of(touchable.begin(), touchable.end(), [&](const std::string& net) {
        const auto was = highest(magnitude(before.voltage(net, ground)));
        const auto is = highest(magnitude(after.voltage(net, ground)));
        return (!is || *is > low_voltage) && was && *was <= low_voltage;
    });
}

/// Moves with every cycle: the switch node, the secondary's live end, a coupling net of a ladder.
bool swings(const rail& r, const std::string& net)
{
    const auto rung = r.rungs.nets.find(net);
    const bool coupled = rung != r.rungs.nets.end() && rung->second.moving;
    return !net.empty() && (net == r.switch_net || net == r.secondary_net || coupled);
}

} // namespace

void solved_supply::list_gaps()
{
    const std::map<std::string, int> circuits = circuits_of(bodies_, lib_);
    const std::set<std::string> touchable = touchable_nets(written_);
    for (const gap& g : written_.gaps) {
        const bool floor = g.nets.size() == 2 && g.nets[1] == "*";
        std::vector<gap_item> found; // one an insulation: the pair of the highest voltage
        for (const std::string& other : floor ? written_.nets : std::vector<std::string>{g.nets[1]}) {
            if (other == g.nets[0] || (floor && gap_for(written_, g.nets[0], other) != &g)) {
                continue;
            }
            gap_item item;
            item.written = &g;
            item.floor = floor;
            item.insulation =
                g.insulation && g.insulation->text() != nullptr ? *g.insulation->text() : default_insulation(g.nets[0], other, circuits, touchable);
            const value* v = voltage_of(pairs_, g.nets[0], other);
            if (v == nullptr && floor) {
                continue; // 60 V or less: needs no gap of its own
            }
            item.voltage =
                v != nullptr ? *v
                             : hull(magnitude(at(state::running).voltage(g.nets[0], other)), magnitude(at(state::no_load).voltage(g.nets[0], other)));
            item.switches = swings(output_, g.nets[0]) || swings(output_, other);
            item.person_side = touchable.contains(g.nets[0]) != touchable.contains(other);
            item.about = {"gap", gap_name(g, item.insulation, floor), {g.nets[0], other}, g.at};
            const auto same = std::find_if(found.begin(), found.end(), [&](const gap_item& i) { return i.insulation == item.insulation; });
            if (same == found.end()) {
                found.push_back(std::move(item));
            } else {
                item.switches = same->switches = item.switches || same->switches;
                if (graver(item, *same)) {
                    *same = std::move(item);
                }
            }
        }
        for (gap_item& item : found) {
            item.need = spacing_needed(item.voltage, item.site(written_, lib_));
            change bridge;
            bridge.sort = change::what::bridge;
            bridge.nets = item.about.nets;
            if (item.insulation == "functional" && !touchable.empty()) {
                const change_result bridged = apply(written_, lib_, bridge);
                const supply bodies = expand_bodies(bridged.edited);
                const dc_solution after_bridge = solve_dc(bodies, lib_, output_, state::no_load);
                item.bridge_worse = puts_voltage_on_touchable(at(state::no_load), after_bridge, touchable, written_.return_net);
            }
            gaps_.push_back(std::move(item));
        }
    }
}

} // namespace onehand
