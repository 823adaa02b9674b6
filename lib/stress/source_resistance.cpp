// How weakly a net is fed, and what a meter's own resistance makes of it.
#include "stress/part_facts.hpp"
#include "stress/paths.hpp"
#include "stress/rail_load.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

constexpr double usual_meter = 10e6; // ohm, common practice

std::vector<element> wired(const solved_supply& s)
{
    return wire(s.bodies(), s.data(), state::no_load, s.output().stage_parts);
}

} // namespace

std::set<std::string> stiff_nets(const solved_supply& s)
{
    std::set<std::string> held{s.written().return_net, s.output().positive, s.output().negative};
    held.insert(s.written().fed.nets.begin(), s.written().fed.nets.end());
    if (s.written().stage) {
        held.insert(s.written().stage->inputs.begin(), s.written().stage->inputs.end());
    }
    held.erase("");
    const std::vector<element> all = wired(s);
    std::set<std::string> nets;
    for (const std::string& net : held) {
        nets.merge(reach(all, net, joins_nets));
    }
    return nets;
}

std::set<std::string> weak_nets(const solved_supply& s, const std::vector<std::string>& from)
{
    const std::set<std::string> stiff = stiff_nets(s);
    const std::vector<element> all = wired(s);
    std::set<std::string> near;
    const auto add = [&](const std::string& net) { return !net.empty() && !stiff.contains(net) && near.insert(net).second; };
    std::for_each(from.begin(), from.end(), add);
    for (bool grew = true; grew;) {
        grew = false;
        for (const element& e : all) {
            if (may_conduct(e) && (near.contains(e.from) || near.contains(e.to) || near.contains(e.wiper))) {
                for (const std::string& net : {e.from, e.to, e.wiper}) {
                    grew = add(net) || grew;
                }
            }
        }
    }
    return near;
}

std::optional<double> source_resistance(const solved_supply& s, const std::string& net)
{
    return feeding_resistance(wired(s), stiff_nets(s), net);
}

meter_error worst_meter_error(const solved_supply& s)
{
    meter_error worst;
    for (const std::string& net : s.written().nets) {
        const auto ohms = source_resistance(s, net);
        const double share = ohms ? *ohms / (*ohms + usual_meter) : 0.0;
        if (share > worst.share * (1.0 + 1e-12)) {
            worst = {net, share};
        }
    }
    return worst;
}

} // namespace onehand
