#pragma once
// Shunt ballasts: a series resistance that feeds a gas tube or a zener, and when it stops regulating (NEETS module 6; Lessons in Electric Circuits
// vol. 3; Boylestad, chapter 2).
#include "quantity/bridge.hpp"

namespace onehand::physics {

/// (Us - Um)/(Im + IL).
ohm ballast_resistance(volt source, volt held, ampere shunt, ampere load);

struct shunt_state {
    bool regulating = false;
    volt across;   // the load
    ampere series; // through the series resistance
    ampere shunt;  // through the tube or zener
    ampere load;
    watt in_series, in_shunt;
};
/// A shunt that holds `held` where the divider alone would stand above it, else carries nothing. A load of infinite resistance draws nothing.
shunt_state shunt_regulator(volt source, ohm series, volt held, ohm load);

/// Load resistance below which it no longer regulates: held Rs/(Us - held).
ohm least_load(volt source, ohm series, volt held);

} // namespace onehand::physics
