// How weakly a net is fed, and what a meter's own resistance makes of it.
#include "circuit/network.hpp"
#include "stress/part_facts.hpp"
#include "stress/paths.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using form = element_spec::form;

constexpr double usual_meter = 10e6; // ohm, common practice
constexpr double least_ohms = 1e-3;  // of what is closed

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
    const std::set<std::string> stiff = stiff_nets(s);
    if (stiff.contains(net)) {
        return 0.0;
    }
    const std::vector<element> all = wired(s);
    const std::set<std::string> near = weak_nets(s, {net});
    circuit::network n;
    std::map<std::string, int> node;
    const auto at = [&](const std::string& name) {
        return stiff.contains(name) ? 0 : node.emplace(name, static_cast<int>(node.size()) + 1).first->second;
    };
    const int self = at(net);
    bool tied = false;
    for (const element& e : all) {
        if (!near.contains(e.from) && !near.contains(e.to) && !near.contains(e.wiper)) {
            continue;
        }
        const auto v = e.values.find(e.wiper.empty() ? form::resistance : form::track);
        const bool closed = joins_nets(e);
        if (!closed && (v == e.values.end() || v->second.numbers.empty())) {
            continue;
        }
        const range ohms = closed ? range{least_ohms, least_ohms} : v->second.numbers.front().whole;
        if (!e.wiper.empty()) {
            const range travel = e.position.numbers.empty() ? range{0.0, 1.0} : e.position.numbers.front().whole;
            n.tracks.push_back({at(e.from), at(e.wiper), at(e.to), {ohms.low, ohms.high}, {travel.low, travel.high}});
            tied = true;
        } else if (at(e.from) != at(e.to)) {
            n.branches.push_back({at(e.from), at(e.to), {{circuit::form::resistance, {ohms.low, ohms.high}}}});
            tied |= at(e.from) == self || at(e.to) == self;
        }
    }
    if (!tied) {
        return std::nullopt;
    }
    const int feed = static_cast<int>(node.size()) + 1;
    n.branches.push_back({feed, self, {{circuit::form::resistance, {least_ohms, least_ohms}}}});
    n.sources.push_back({feed, 0, {1.0, 1.0}});
    n.nodes = feed + 1;
    const double least = circuit::solve(n).current.back().low;
    return least > 0.0 ? std::optional(1.0 / least) : std::nullopt;
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
