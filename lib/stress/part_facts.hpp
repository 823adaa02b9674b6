#pragma once
// Facts of single parts that go beyond the voltage, current and power of their bodies: what their insulation stands off, what feeds them, where they
// stand in a string of capacitors, what a short of one of them does to a person. Inside the room only.
#include "stress/solved.hpp"

namespace onehand {

/// Greatest voltage between any two of the part's nets, or of any of them against the return, over running, no-load and standby.
value insulation_voltage(const solved_supply& s, const part& p);

/// What the input can deliver for long, as written: it bounds what a fuse behind it carries or has to break.
value source_current(const solved_supply& s);

/// Facts of capacitors beyond their bodies; nothing if the name is none of them.
std::optional<value> capacitor_fact(const solved_supply& s, const part& p, const std::string& name);

/// A capacitor's place in a string that divides a voltage; null where it stands alone.
struct capacitor_string {
    std::vector<const part*> members; // in order along the string
    std::string from, to;             // nets of its ends
};
std::optional<capacitor_string> string_of(const solved_supply& s, const part& p);
/// in-series, balanced, balancing-resistance, balancing-limit, initial-share.
value string_fact(const solved_supply& s, const part& p, const std::string& name);

/// Greatest leakage: as written, else for an electrolytic the greater of two makers' formulas at its capacitance and rated voltage.
value leakage_of(const solved_supply& s, const part& p);

/// Nets whose voltage a load does not move: rail, input, return, and what is joined to them without resistance.
std::set<std::string> stiff_nets(const solved_supply& s);
/// The nets between those given and the stiff ones, those given included where they are not stiff.
std::set<std::string> weak_nets(const solved_supply& s, const std::vector<std::string>& from);
/// Greatest resistance that a net is fed through, everything stiff joined: rail, input, return. Unbounded where nothing ties it.
std::optional<double> source_resistance(const solved_supply& s, const std::string& net);
/// How much too low a 10 Mohm meter reads at worst on any net, and on which.
struct meter_error {
    std::string net;
    double share = 0.0;
};
meter_error worst_meter_error(const solved_supply& s);

/// Of a touchable pair, with each single part on its way to the stiff nets failed in each mode of its kind: greatest voltage, and greatest current
/// through the standard's body.
value faulted_voltage(const solved_supply& s, const access_item& a);
value faulted_touch_current(const solved_supply& s, const access_item& a);

/// Where the input pins settle when a part that keeps the output from them fails: charge shared with the input's own capacitors.
value input_after_fault(const solved_supply& s);

} // namespace onehand
