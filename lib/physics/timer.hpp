#pragma once
// The bipolar astable timer with two resistors and a capacitor: its two times from its parts, the control pin and the supply (Boylestad, chapter 13;
// Franco, example 10.4). Thresholds at the control voltage and at half of it.
#include "physics/interval.hpp"

namespace onehand::physics {

template<class N>
struct astable_times {
    seconds<N> high; // charging through both resistors
    seconds<N> low;  // discharging through the lower one
};

/// `share`: control voltage over supply voltage, 2/3 where the pin is left alone. High: (Ra + Rb) C ln[(1 - share/2)/(1 - share)]; it never ends
/// where the share reaches one.
template<class N>
astable_times<N> astable(const ohms<N>& ra, const ohms<N>& rb, const farads<N>& c, const N& share);

/// With a diode across Rb the charge goes through Ra alone: Ra C ln[(1 - share/2 - d)/(1 - share - d)], d the diode's drop over the supply.
template<class N>
astable_times<N> astable_bypassed(const ohms<N>& ra, const ohms<N>& rb, const farads<N>& c, const N& share, const N& drop);

/// high/(high + low), in which each resistor and the share stand once and the capacitor not at all.
template<class N>
N astable_duty(const ohms<N>& ra, const ohms<N>& rb, const N& share, const N& drop, bool bypassed);

} // namespace onehand::physics
