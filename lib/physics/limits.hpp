#pragma once
// What a part may take and what a source can push, as closed forms.
#include "quantity/bridge.hpp"

#include <optional>

namespace onehand::physics {

/// Rated voltage of a resistor: min(sqrt(P R), limiting element voltage) (IEC 60115-1, from memory).
volt rated_voltage(watt p, ohm r, volt limiting);

/// Power left at an air temperature: full up to `full_to`, linearly to nothing at `none_at`.
watt derated(watt full, kelvin air, kelvin full_to, kelvin none_at);

/// Current into a body from a source with series resistance, power limit and current limit: the least of U/(Rb + Rs), sqrt(P/Rb) and the limit
/// (derived).
ampere body_current(volt open_circuit, ohm body, ohm series, watt power_limit, ampere current_limit);

/// U R2/(R1 + R2).
volt divided(volt u, ohm upper, ohm lower);

/// Junction or body temperature: air + P Rth.
kelvin heated(kelvin air, watt p, kelvin_per_watt rth);

/// Pressure of the standard atmosphere up to 11 km, and by the isothermal layer to 20 km (ISO 2533). Height above sea level; nothing outside 0 to 20
/// km.
std::optional<pascal> standard_pressure(metre height);

} // namespace onehand::physics
