#pragma once
// One edit to a description as it stands: a part fault, a meter across two nets, an input event, the output unplugged or shorted, a wiper
// position, two nets bridged, a net broken at a terminal. Faults, broken discharge paths, readings, spacing and proposals all use changes. Applying
// one never alters the original.
#include "supply/supply.hpp"

namespace onehand {

struct change {
    enum class what { none, part_fault, meter, input_event, output_unplugged, output_shorted, wiper, bridge, terminal_open, body };
    what sort = what::none;
    std::string ref;               // part (fault, wiper, terminal_open)
    std::string mode;              // failure mode; input event "reversed" | "brown-out" | "hot-plugged" | "highest-adapter"; terminal name
    std::vector<std::string> nets; // meter, bridge, body
    std::optional<spread> value;   // meter or body resistance, wiper position, adapter voltage

    friend bool operator==(const change&, const change&) = default;
};

/// "R9 open", "HT bridged to 0V", "meter of 10 MΩ from HT to 0V", "none" ... one line for people and for the JSON.
std::string describe(const change& c);

/// Every fault of every part in the modes of its kind, in document order.
std::vector<change> single_faults(const supply& s, const library& lib);

struct change_result {
    supply edited;
    std::string refused; // empty, or why it makes no sense here ("R99 is no part of this supply")
};
change_result apply(const supply& s, const library& lib, const change& c);

} // namespace onehand
