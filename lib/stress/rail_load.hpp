#pragma once
// What hangs on the output: the current it may draw, what surely loads it, the capacitance the stage pumps into, the chain that senses it. Inside the
// room only.
#include "stress/solution.hpp"

namespace onehand {

/// The output's net that is not the return, and every net that fuses, wires, coils and plugs make one with it.
std::set<std::string> live_nets(const supply& s, const library& lib, const rail& output);
/// The same of the output's other net.
std::set<std::string> quiet_nets(const supply& s, const library& lib, const rail& output);

/// The current that everything hanging on the output draws together, none to its most: the sum of the parts' own extremes.
value rail_load(const supply& s, const library& lib, const rail& output, const dc_solution& running);

/// Conductance that soldered resistances surely put across the output, at its least; the chain that senses it is counted or not.
double sure_conductance(const supply& s, const library& lib, const rail& output, bool with_sense);

/// Conductance across the output at its most, where nothing but resistances hangs on it; nothing else.
std::optional<double> most_conductance(const supply& s, const library& lib, const rail& output);

/// Nets of the sensing chain: reached from the feedback net through soldered resistances without passing the output or the return.
std::set<std::string> sense_nets(const supply& s, const library& lib, const rail& output);
/// Time constant of the capacitors on that chain, at its greatest: sum of C times the resistance that feeds its net; none is 0 s.
value sense_filter(const supply& s, const library& lib, const rail& output);

/// Capacitance of the output: least, what stands straight across it, a class 2 ceramic with the most it loses under voltage; greatest, all that a
/// path through parts leads to.
value rail_capacitance(const supply& s, const library& lib, const rail& output);

/// Greatest resistance that a net is fed through with the stiff nets joined; unbounded where nothing ties it.
std::optional<double> feeding_resistance(const std::vector<element>& elements, const std::set<std::string>& stiff, const std::string& net);

} // namespace onehand
