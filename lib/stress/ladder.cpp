#include "stress/ladder.hpp"

#include <algorithm>
#include <set>

namespace onehand {

namespace {

struct link {
    std::string ref, from, to; // diode: anode, cathode; capacitor: first, second
};

class ladder_solver {
public:
    ladder_solver(const supply& s, std::string switch_net, std::set<std::string> still)
        : s_(s), switch_(std::move(switch_net)), still_(std::move(still))
    {
    }

    ladder run()
    {
        out_.there = true;
        sort_parts();
        if (!find_motion() || !find_bases()) {
            return out_;
        }
        fill_parts();
        find_output();
        find_chain();
        return out_;
    }

private:
    void sort_parts()
    {
        for (const std::string& ref : s_.stage->ladder) {
            for (const part& p : s_.parts) {
                if (p.ref == ref || p.ref.starts_with(ref + "/")) {
                    (p.kind == "diode" ? diodes_ : capacitors_).push_back({p.ref, p.terminals[0].net, p.terminals[1].net});
                }
            }
        }
    }

    /// What a capacitor joins to the switch node moves with it, what it joins to a still net stands; a net that is joined to both stands too.
    bool find_motion()
    {
        for (const auto* list : {&diodes_, &capacitors_}) {
            for (const link& l : *list) {
                out_.nets[l.from];
                out_.nets[l.to];
            }
        }
        out_.nets[switch_] = {0.0, true};
        std::set<std::string> moving = spread_from({switch_}, still_);
        const std::set<std::string> standing = spread_from(still_, {switch_});
        for (auto& [name, net] : out_.nets) {
            net.moving = name == switch_ || (moving.contains(name) && !standing.contains(name));
            if (!net.moving && !standing.contains(name) && !still_.contains(name)) {
                out_.why = name + " hangs on no capacitor of the ladder that leads to the switch node or a still net";
                return false;
            }
        }
        return true;
    }

    std::set<std::string> spread_from(std::set<std::string> reached, const std::set<std::string>& bar) const
    {
        for (bool grew = true; grew;) {
            grew = false;
            for (const link& c : capacitors_) {
                for (const auto& [here, there] : {std::pair(c.from, c.to), std::pair(c.to, c.from)}) {
                    if (reached.contains(here) && !bar.contains(here) && !bar.contains(there)) {
                        grew = reached.insert(there).second || grew;
                    }
                }
            }
        }
        return reached;
    }

    double moves(const std::string& net) const { return out_.nets.at(net).moving ? 1.0 : 0.0; }
    bool fixed(const std::string& net) const { return net == switch_ || still_.contains(net); }

    /// base(cathode) - base(anode) >= what the phases ask; pushed up from the fixed nets, or down to them where diodes only lead there.
    bool find_bases()
    {
        std::map<std::string, double> up;
        std::map<std::string, double> down;
        for (const auto& [name, net] : out_.nets) {
            if (fixed(name)) {
                up[name] = down[name] = 0.0;
            }
        }
        const std::size_t rounds = out_.nets.size() + 1;
        for (std::size_t i = 0; i <= rounds; ++i) {
            bool grew = false;
            for (const link& d : diodes_) {
                const double rise = std::max(0.0, moves(d.from) - moves(d.to));
                grew = push(up, d.from, d.to, rise, 1.0) || grew;
                grew = push(down, d.to, d.from, rise, -1.0) || grew;
            }
            if (!grew) {
                break;
            }
            if (i == rounds) {
                out_.why = "its diodes lead round in a ring";
                return false;
            }
        }
        return settle(up, down);
    }

    bool push(std::map<std::string, double>& level, const std::string& from, const std::string& to, double rise, double sign) const
    {
        const auto start = level.find(from);
        if (start == level.end() || fixed(to)) {
            return false;
        }
        const double reached = start->second + sign * rise;
        const auto [it, fresh] = level.emplace(to, reached);
        const bool further = sign * (reached - it->second) > 1e-12;
        it->second = further ? reached : it->second;
        return fresh || further;
    }

    bool settle(const std::map<std::string, double>& up, const std::map<std::string, double>& down)
    {
        for (auto& [name, net] : out_.nets) {
            const auto u = up.find(name);
            const auto d = down.find(name);
            if (u == up.end() && d == down.end()) {
                out_.why = "no diode of the ladder leads to or from " + name;
                return false;
            }
            if (u != up.end() && d != down.end() && u->second > d->second + 1e-12) {
                out_.why = "its diodes conduct from one fixed net to another: it settles nowhere";
                return false;
            }
            net.base = u != up.end() ? u->second : d->second;
        }
        return true;
    }

    void fill_parts()
    {
        for (const link& c : capacitors_) {
            out_.capacitors.push_back({c.ref, out_.nets[c.from].base - out_.nets[c.to].base});
        }
        for (const link& d : diodes_) {
            double most = 0.0;
            for (const double phase : {0.0, 1.0}) {
                const double anode = out_.nets[d.from].base + moves(d.from) * phase;
                const double cathode = out_.nets[d.to].base + moves(d.to) * phase;
                most = std::max(most, cathode - anode);
            }
            out_.diodes.push_back({d.ref, most});
        }
    }

    void find_output()
    {
        if (s_.stage->outputs.size() != 2) {
            return;
        }
        const auto level = [&](const std::string& net) {
            const auto it = out_.nets.find(net);
            return it == out_.nets.end() ? (still_.contains(net) ? std::optional(0.0) : std::nullopt) : std::optional(it->second.base);
        };
        const auto plus = level(s_.stage->outputs[0]);
        const auto minus = level(s_.stage->outputs[1]);
        if (plus && minus) {
            out_.multiple = *plus - *minus;
        }
    }

    /// The nets in the order the charge passes them, each with its own capacitor.
    void find_chain()
    {
        std::vector<std::string> order = chain_nets();
        if (order.empty()) {
            out_.loaded_why = "its diodes form no single chain to the output";
            return;
        }
        bool stacked = true;
        bool based = true;
        std::vector<std::string> caps;
        for (std::size_t i = 0; i < order.size(); ++i) {
            const link* own = nullptr;
            for (const link& c : capacitors_) {
                if (c.from == order[i] || c.to == order[i]) {
                    const std::string& other = c.from == order[i] ? c.to : c.from;
                    const bool later = std::find(order.begin() + static_cast<std::ptrdiff_t>(i), order.end(), other) != order.end();
                    own = later ? own : &c;
                }
            }
            if (own == nullptr) {
                out_.loaded_why = "no capacitor of its own at " + order[i];
                return;
            }
            const std::string& other = own->from == order[i] ? own->to : own->from;
            const bool on_base = fixed(other);
            const bool on_below = i >= 2 && other == order[i - 2];
            stacked = stacked && (i < 2 ? on_base : on_below);
            based = based && on_base;
            caps.push_back(own->ref);
        }
        if (!stacked && !based) {
            out_.loaded_why = "its capacitors hang neither all in two columns nor all on the base";
            return;
        }
        out_.chain = std::move(caps);
        out_.form = stacked ? physics::ladder_form::stacked : physics::ladder_form::from_base;
    }

    std::vector<std::string> chain_nets()
    {
        if (s_.stage->outputs.size() != 2) {
            return {};
        }
        const bool positive = out_.nets.contains(s_.stage->outputs[0]) && !fixed(s_.stage->outputs[0]);
        std::string here = positive ? s_.stage->outputs[0] : s_.stage->outputs[1];
        std::vector<std::string> back;
        while (!fixed(here)) {
            if (back.size() > diodes_.size()) {
                return {};
            }
            back.push_back(here);
            std::vector<std::string> next;
            for (const link& d : diodes_) {
                if ((positive ? d.to : d.from) == here) {
                    next.push_back(positive ? d.from : d.to);
                }
            }
            if (next.size() != 1) {
                return {};
            }
            here = next.front();
        }
        out_.drops = static_cast<int>(back.size());
        std::reverse(back.begin(), back.end());
        return back;
    }

    const supply& s_;
    std::string switch_;
    std::set<std::string> still_;
    std::vector<link> diodes_, capacitors_;
    ladder out_;
};

} // namespace

bool ladder::alone(const supply& s, const std::string& name) const
{
    if (!there || !why.empty() || !nets.contains(name) || !s.stage) {
        return false;
    }
    const auto own = [&](const part& p) {
        const auto named = [&](const std::string& ref) { return p.ref == ref || p.ref.starts_with(ref + "/"); };
        return std::any_of(s.stage->ladder.begin(), s.stage->ladder.end(), named);
    };
    return std::all_of(s.parts.begin(), s.parts.end(), [&](const part& p) {
        return own(p) || std::none_of(p.terminals.begin(), p.terminals.end(), [&](const terminal& t) { return t.net == name; });
    });
}

std::optional<range> ladder::between(const std::string& a, const std::string& b) const
{
    const auto x = nets.find(a);
    const auto y = nets.find(b);
    if (!there || !why.empty() || x == nets.end() || y == nets.end()) {
        return std::nullopt;
    }
    const double low = x->second.base - y->second.base;
    const double high = low + (x->second.moving ? 1.0 : 0.0) - (y->second.moving ? 1.0 : 0.0);
    return range{std::min(low, high), std::max(low, high)};
}

ladder solve_ladder(const supply& s, const std::string& switch_net, const std::set<std::string>& still)
{
    if (!s.stage || s.stage->ladder.empty()) {
        return {};
    }
    if (switch_net.empty()) {
        ladder none;
        none.there = true;
        none.why = "no switch whose node drives it";
        return none;
    }
    return ladder_solver(s, switch_net, still).run();
}

} // namespace onehand
