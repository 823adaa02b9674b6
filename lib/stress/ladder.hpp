#pragma once
// A diode-capacitor ladder hung on the switch node, unloaded: each net stands still or moves with the switch node, and the diodes let every net rest
// where a chain of them has pumped it. The potentials are the tightest solution of the difference constraints that the diodes set in both phases
// (switch node at the return, switch node at its peak), in units of that peak. Forward drops are left out: they only lower it.
#include "physics/ladder.hpp"
#include "stress/fields.hpp"

#include <map>
#include <set>

namespace onehand {

struct ladder {
    struct net {
        double base = 0.0;   // in units of the switch node's peak, switch node at the return
        bool moving = false; // adds the switch node's own potential
    };
    struct stressed {
        std::string ref;
        double voltage = 0.0; // first terminal above second (capacitor), or reverse (diode); in units of the peak
    };
    bool there = false; // a ladder is written
    std::string why;    // empty, or why it cannot be solved
    std::map<std::string, net> nets;
    std::vector<stressed> capacitors; // constant over both phases
    std::vector<stressed> diodes;     // greatest over both phases
    double multiple = 0.0;            // output over the peak; positive for either polarity
    int drops = 0;                    // diodes between the switch node or return and the output
    // Under load: capacitors in order along the diodes; empty with `loaded_why` where the form is not one whose sums are known.
    std::vector<std::string> chain;
    physics::ladder_form form = physics::ladder_form::stacked;
    std::string loaded_why;

    /// True if no part but the ladder's own hangs on the net: it is told by the ladder alone and needs no place in a network.
    bool alone(const supply& s, const std::string& name) const;
    /// Extremes of a above b over both phases, in units of the peak; nothing where a net is not of the ladder.
    std::optional<range> between(const std::string& a, const std::string& b) const;
};

/// `switch_net` swings from the return to its peak; `still` are nets that stand where they are (return, input).
ladder solve_ladder(const supply& s, const std::string& switch_net, const std::set<std::string>& still);

} // namespace onehand
