#pragma once
// What flows when a supply is switched on, what a fuse sees of it, and how far a rail is carried past its set point by feedback that lags.
#include "quantity/bridge.hpp"

namespace onehand::physics {

using melting_integral =
    bu::quantity<bu::multiply_typeof_helper<bu::power_typeof_helper<bu::si::current, bu::static_rational<2>>::type, bu::si::time>::type>;

/// Peak of a capacitor charged through a coil from nothing: U sqrt(C/L), after a quarter period (University Physics vol. 2, 14.5).
ampere coil_inrush(volt u, farad c, henry l);
/// Half a sine of that peak, pi sqrt(L C) long: I^2 t/2 (fuse makers' pulse shapes).
melting_integral coil_inrush_integral(volt u, farad c, henry l);
/// Through a resistance: U^2 C/(2 R).
melting_integral resistive_inrush_integral(volt u, farad c, ohm r);
/// Greatest integral of two pulses that may fall together: (sqrt a + sqrt b)^2.
melting_integral together(melting_integral a, melting_integral b);

/// Nominal melting integral a fuse needs for a pulse that may be a share of it.
melting_integral needed_melting(melting_integral pulse, double share);

/// A stage that hands the same packet to the output every cycle while the sensed voltage follows the rail through a first-order filter.
struct pumped_rail {
    volt from;      // where the filter is taken as empty and the rail starts
    volt set_point; // where the sensed voltage stops the stage
    volt input;     // boost: counts against the rail; flyback: zero
    double turns = 1.0;
    watt stored;  // L i^2/(2 T) of full cycles
    joule packet; // energy of the last cycle
    farad rail;
    second filter; // its time constant, zero for none
    second lag;    // pure delay behind it
};
/// Where the rail ends, one further packet included: never less than the exact solution of the averaged stage (the filter is fed by chords of a rail
/// that rises ever more slowly, so it is late).
volt carried_to(const pumped_rail& p);

/// Time from one rail voltage to another at full cycles (derived: the charge current of the averaged stage).
second pumping_time(const pumped_rail& p, volt to);

} // namespace onehand::physics
