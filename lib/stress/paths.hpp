#pragma once
// Who is joined to whom: by soldered resistive paths that surely discharge, or by anything through which charge may come.
#include "stress/wiring.hpp"

#include <functional>
#include <set>

namespace onehand {

/// The nets reachable from `start` through elements that `counts` accepts, `start` included.
std::set<std::string> reach(const std::vector<element>& elements, const std::string& start, const std::function<bool(const element&)>& counts);

/// True if soldered resistances (with the wires, fuses and coils between them) join a and b; elements of `without` are taken out.
bool soldered_path(const std::vector<element>& elements, const std::string& a, const std::string& b, const std::string& without = {});

/// The one part whose loss leaves no soldered path between a and b; empty if there is none, or if there is no path at all.
std::string only_path(const std::vector<element>& elements, const std::string& a, const std::string& b);

/// Counts for discharge: soldered resistances and what is closed for certain, but no plug and no switch.
bool discharges(const element& e);

} // namespace onehand
