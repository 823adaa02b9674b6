#include "stress/spacing.hpp"

#include <algorithm>
#include <functional>
#include <numeric>

namespace onehand {

namespace {

/// Plain union-find over net names.
class groups {
public:
    explicit groups(const std::vector<std::string>& nets)
    {
        for (const std::string& n : nets) {
            index_.emplace(n, index_.size());
        }
        parent_.resize(index_.size());
        std::iota(parent_.begin(), parent_.end(), std::size_t{0});
    }

    void join(const std::string& a, const std::string& b)
    {
        const auto i = index_.find(a);
        const auto j = index_.find(b);
        if (i != index_.end() && j != index_.end()) {
            parent_[root(i->second)] = root(j->second);
        }
    }

    std::map<std::string, int> numbered()
    {
        std::map<std::string, int> out;
        for (const auto& [net, i] : index_) {
            out[net] = static_cast<int>(root(i));
        }
        return out;
    }

private:
    std::size_t root(std::size_t i)
    {
        while (parent_[i] != i) {
            i = parent_[i];
        }
        return i;
    }

    std::map<std::string, std::size_t> index_;
    std::vector<std::size_t> parent_;
};

} // namespace

std::map<std::string, int> circuits_of(const supply& s, const library& lib)
{
    groups joined(s.nets);
    for (const part& p : s.parts) {
        for (const element& e : elements_of(p, lib, state::running)) {
            if (may_conduct(e)) {
                joined.join(e.from, e.to);
                joined.join(e.from, e.wiper);
            }
        }
        // Switch, rectifier and winding nets are one circuit even where the d.c. network leaves them out.
        if (p.kind == "mosfet" || p.kind == "bjt" || p.kind == "diode" || p.kind == "inductor") {
            for (const terminal& t : p.terminals) {
                joined.join(p.terminals.front().net, t.net);
            }
        }
    }
    return joined.numbered();
}

std::set<std::string> touchable_nets(const supply& s)
{
    std::set<std::string> nets;
    for (const access& a : s.accesses) {
        if (a.when == "always" || a.when == "plug withdrawn") {
            nets.insert(a.nets.begin(), a.nets.end());
        }
    }
    if (!s.chassis.empty()) {
        nets.insert(s.chassis);
    }
    return nets;
}

std::string default_insulation(const std::string& a, const std::string& b, const std::map<std::string, int>& circuits,
                               const std::set<std::string>& touchable)
{
    if (touchable.contains(a) != touchable.contains(b)) {
        return "reinforced";
    }
    const auto i = circuits.find(a);
    const auto j = circuits.find(b);
    return i != circuits.end() && j != circuits.end() && i->second == j->second ? "functional" : "basic";
}

namespace {

bool wider(const gap& a, const gap& b)
{
    const auto along = [](const gap& g) { return g.creepage && g.creepage->number() != nullptr ? g.creepage->number()->whole.low : 0.0; };
    return along(a) > along(b);
}

} // namespace

const gap* gap_for(const supply& s, const std::string& a, const std::string& b)
{
    const gap* floor = nullptr;
    for (const gap& g : s.gaps) {
        if (g.nets.size() != 2) {
            continue;
        }
        if ((g.nets[0] == a && g.nets[1] == b) || (g.nets[0] == b && g.nets[1] == a)) {
            return &g;
        }
        // Two floor gaps may hold for one pair: both are true, so the wider one is.
        if (g.nets[1] == "*" && (g.nets[0] == a || g.nets[0] == b) && (floor == nullptr || wider(g, *floor))) {
            floor = &g;
        }
    }
    return floor;
}

} // namespace onehand
