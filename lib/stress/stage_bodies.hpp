#pragma once
// Voltages of the stage's own parts, which the d.c. network does not tell: rectifier, ladder. Inside the room only.
#include "stress/solution.hpp"

namespace onehand {

/// What the rectifier blocks while the switch is on: the output, and what the secondary stands the other way; anode above cathode.
value rectifier_voltage(const supply& s, const rail& r, state in);

/// The port's voltage that a ladder multiplies, in a state.
value ladder_port(const rail& r, state in);

/// From nothing to so many times the port's voltage: a ladder fills from nothing, and a load takes part of it.
value in_units(value port, double units);

/// By reference: in a ladder a capacitor holds the same over both phases, a diode blocks the greater of them. Empty in standby.
std::map<std::string, value> ladder_voltages(const supply& s, const rail& r, state in);

} // namespace onehand
