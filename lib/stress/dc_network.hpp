#pragma once
// From elements to a circuit::network: nets become nodes, values become boxes, the rail and the stage's nets are held. Inside the room only.
#include "circuit/network.hpp"
#include "stress/solution.hpp"

namespace onehand {

enum class over { in_use, whole };

/// The description as a network over one of the two ranges, with the way back from nodes and branches to names.
struct dc_network {
    circuit::network net;
    std::map<std::string, int> node;
    std::vector<element> elements;                   // those that became branches, in order
    std::vector<int> branch_of;                      // per element; -1: a track
    std::vector<int> track_of;                       // per element; -1: a branch
    std::map<int, std::vector<std::string>> missing; // per node: what is not known of the elements that touch it
    std::vector<std::string> source_names;           // per source of the network
    std::set<std::string> assumed_nets;              // nets held by an assumption
    std::vector<std::string> unheld;                 // what could not be held: its name
};

circuit::box box_of(const spread& s, over which);
circuit::box box_of(const value& v, over which);

/// `held_by_feedback`: the output is left to the solver; else it is a source of `output`'s value.
dc_network build_network(const supply& s, const library& lib, const rail& output, state in, over which, bool held_by_feedback);

/// Turns two extremes, over use and over the whole, into a value.
value to_value(const circuit::extreme& in_use, const circuit::extreme& whole, const dimension& d);

} // namespace onehand
