#pragma once
// The d.c. solution of a supply in one state: the potential of every net, the voltage between any two, and what every body of a part sees. All of it
// spreads that hold for every combination inside the stated ranges; what rests on something unknown says so.
#include "stress/rail.hpp"
#include "stress/wiring.hpp"

#include <map>
#include <set>

namespace onehand {

struct body_solution {
    value voltage; // first terminal positive
    value current; // into the first terminal
    value power;
    std::optional<value> track_current; // trimmers
    std::optional<value> span_voltage;  // trimmers: between any two terminals, magnitude
};

struct dc_solution {
    state in = state::running;
    std::vector<std::string> nets;
    std::map<std::string, value> potential;                       // against the return
    std::map<std::pair<std::string, std::string>, value> between; // first above second; names in order
    std::map<std::string, body_solution> bodies;                  // by reference of the body
    std::set<std::string> floating;                               // nothing holds it in some case: bounded by what it touches
    std::set<std::pair<std::string, std::string>> solved;         // of `between`: what follows from the circuit, not from the bounds of both ends

    /// Signed voltage of a above b.
    value voltage(const std::string& a, const std::string& b) const;
};

/// `s` has single bodies only (expand_bodies).
dc_solution solve_dc(const supply& s, const library& lib, const rail& output, state in);

/// Touch current and similar questions: the current through a resistance put from a to b, the rail held as stiff as it can be.
value current_through(const supply& s, const library& lib, const rail& output, state in, const std::string& a, const std::string& b, double ohms);

} // namespace onehand
