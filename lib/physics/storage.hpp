#pragma once
// Energy and charge in capacitors and what they do through a resistance; each formula with its limits. Typed by Boost.Units: a wrong dimension does
// not compile. Textbook relations (University Physics vol. 2, chapters 8 and 10).
#include "quantity/bridge.hpp"

#include <optional>

namespace onehand::physics {

/// E = C U^2 / 2.
joule stored_energy(farad c, volt u);

/// Q = C U.
coulomb stored_charge(farad c, volt u);

/// U = E/Q for a pulse, and the like of it; nothing where no charge flows.
std::optional<volt> pulse_voltage(joule e, coulomb q);

/// tau = R C.
second time_constant(ohm r, farad c);

/// t = R C ln[(U0 - Uf)/(U - Uf)]; nothing where the final voltage Uf is not below U: it never comes there.
std::optional<second> time_to_voltage(ohm r, farad c, volt start, volt target, volt last = volt{});

/// u(t) = Uf + (U0 - Uf) e^(-t/RC).
volt voltage_after(ohm r, farad c, volt start, second t, volt last = volt{});

/// t = C (U0 - U)/I under a constant current.
second constant_current_time(farad c, volt start, volt target, ampere i);

/// Peak, time constant and share of a capacitor's energy that goes into a body through a series resistance: E Rb/(Rb + Rs).
struct body_pulse {
    ampere peak;
    second tau;
    joule into_body;
};
body_pulse pulse_into_body(farad c, volt u, ohm body, ohm series);

/// 1/C = sum 1/Ci for two.
farad in_series(farad a, farad b);

/// Warming of a mass m with specific heat c by an energy, dT = E/(m c).
kelvin warming(joule e, double kilograms, double joule_per_kilogram_kelvin);

} // namespace onehand::physics
