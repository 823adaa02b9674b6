#pragma once
// One switching stage that charges an inductance from the input and empties it into the output, cycle by cycle: boost (turns 1, the input feeds on
// while it empties) and flyback (turns = secondary over primary). Continuous or discontinuous current is decided, not assumed. Textbook relations
// (Erickson and Maksimovic, chapters 2 and 5; Hart, chapters 6 and 7); those with series resistances are derived by volt-seconds and charge. Every
// form runs on plain numbers and on intervals; lossless where no resistance is among its inputs.
#include "physics/interval.hpp"

namespace onehand::physics {

enum class shape { boost, flyback };

template<class N>
using webers = boost::units::quantity<boost::units::si::magnetic_flux, N>;

template<class N>
struct stage {
    shape is = shape::boost;
    volts<N> in;
    henries<N> inductance; // of the coil, or of the primary
    seconds<N> on;         // of a full cycle
    seconds<N> period;     // of a full cycle
    N duty = N(0.0);       // on over period, in a form of its own: intervals of the two would not know that they move together
    N turns = N(1.0);      // secondary over primary; 1 for a boost stage
    volts<N> out;          // of the port it feeds, at the rectifier's cathode
    volts<N> drop;         // of the rectifier
    amperes<N> load;       // drawn from that port
    ohms<N> coil;          // series resistance of the winding
    ohms<N> on_resistance; // of the switch
    bool limited = false;  // a comparator ends each cycle at a peak current
    amperes<N> limit;      // that current
    seconds<N> delay;      // of that comparator
};

/// Voltage across the (primary) inductance while it empties: out + drop - in of a boost stage, (out + drop)/turns of a flyback. At least a millivolt.
template<class N>
volts<N> reset_voltage(const stage<N>& s);

/// Peak current of a full cycle that starts from nothing: in on/L, or limit + in delay/L where a comparator ends it earlier.
template<class N>
amperes<N> full_peak(const stage<N>& s);
/// The same with the series resistances: (in/R)(1 - e^(-R on/L)).
template<class N>
amperes<N> full_peak_lossy(const stage<N>& s);

/// Volt-seconds of a full cycle, L i: in on, or L limit + in delay.
template<class N>
webers<N> full_flux(const stage<N>& s);

/// Time that a full cycle takes to run out: L i/reset.
template<class N>
seconds<N> emptying_time(const stage<N>& s);

/// Energy of a full cycle L i^2/2, and the power of full cycles without a pause, L i^2/(2 T).
template<class N>
joules<N> full_energy(const stage<N>& s);
template<class N>
watts<N> full_power(const stage<N>& s);

/// 1 - (on + emptying)/period of a full cycle: not negative where even full cycles run empty (discontinuous).
template<class N>
N slack(const stage<N>& s);

/// K - Kcrit of the load: K = 2 L turns^2/(R T), Kcrit = D (1 - D)^2 (boost) or (1 - D)^2 (flyback) at the duty that the voltage asks in continuous
/// mode; not negative where a regulated stage runs continuous.
template<class N>
N continuity(const stage<N>& s);

/// 1 - D in continuous mode, series resistances counted; zero where no duty holds the load.
template<class N>
N off_share(const stage<N>& s);

/// Average and peak current of the (primary) inductance of a stage whose duty is adjusted to the load.
template<class N>
amperes<N> regulated_average(const stage<N>& s);
template<class N>
amperes<N> regulated_peak(const stage<N>& s);
template<class N>
amperes<N> regulated_ripple(const stage<N>& s);

/// Charge a full discontinuous cycle hands to the output, i emptying/(2 turns), and the current of full cycles without a pause.
template<class N>
coulombs<N> packet(const stage<N>& s);
template<class N>
amperes<N> full_current(const stage<N>& s);

/// Greatest load current at the output voltage: full cycles without a pause, series resistances counted.
template<class N>
amperes<N> most_load(const stage<N>& s);
/// The same times the output voltage.
template<class N>
watts<N> most_power(const stage<N>& s);

/// Root-mean-square currents at most: of the inductance, of the switch, of the rectifier (secondary side).
template<class N>
struct effective {
    amperes<N> coil, power_switch, rectifier;
};
template<class N>
effective<N> effective_full(const stage<N>& s);
template<class N>
effective<N> effective_regulated(const stage<N>& s);
/// Full discontinuous cycles as often as the load asks: of the inductance 2 load on turns (reset + in)/(3 L), and so on, squared. The average of the
/// inductance: load turns (reset + in)/in.
template<class N>
effective<N> effective_paced(const stage<N>& s);
template<class N>
amperes<N> average_paced(const stage<N>& s);

/// Output over its own average: peak to peak on an ideal capacitor. Discontinuous: (i/turns - load)^2 L turns^2/(2 reset turns C) of the charge above
/// the load; continuous: load D T/C.
template<class N>
volts<N> output_ripple(const stage<N>& s, const amperes<N>& peak, const farads<N>& c);

/// Output with full cycles into a resistance: the discontinuous power balance, or in turns D/(1-D) (boost: in/(1-D)) where that is more.
template<class N>
volts<N> open_loop(const stage<N>& s, const ohms<N>& load);

/// Peak of the switch node when nothing takes the energy but a capacitance: in + sqrt(in^2 + i^2 L/C) (derived from energy).
template<class N>
volts<N> unloaded_peak(const volts<N>& in, const amperes<N>& peak, const henries<N>& l, const farads<N>& c);

/// What a leakage inductance adds without a clamp: i sqrt(Llk/C) (derived from energy, an upper bound).
template<class N>
volts<N> leakage_spike(const amperes<N>& peak, const henries<N>& leakage, const farads<N>& c);

/// Power that a leakage inductance carries in full cycles: Llk i^2/(2 T).
template<class N>
watts<N> leakage_power(const stage<N>& s, const henries<N>& leakage);
/// Voltage above the input of a resistor-capacitor-diode clamp: Vc (Vc - VR) = R P (derived; Hart, chapter 7).
template<class N>
volts<N> clamp_voltage(const volts<N>& reflected, const watts<N>& leakage_power, const ohms<N>& r);
/// Power in it: P Vc/(Vc - VR).
template<class N>
watts<N> clamp_power(const volts<N>& reflected, const watts<N>& leakage_power, const volts<N>& clamp);

/// Energy of one avalanche: E V/(V - in), E what the inductance holds, V the voltage at which the switch breaks down.
template<class N>
joules<N> avalanche_energy(const joules<N>& held, const volts<N>& breakdown, const volts<N>& in);

} // namespace onehand::physics
