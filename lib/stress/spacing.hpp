#pragma once
// What the gaps must be: which nets are one circuit, what can be touched, the insulation a pair needs, and the spacings that IEC 60664-1,
// IEC 61010-1, IEC 62368-1 and IPC-2221 ask at the pair's working voltage, side by side. Beyond 1500 V d.c. the tables are read as guidance only and
// a rule says so.
#include "stress/solution.hpp"

namespace onehand {

/// Groups of nets that one circuit joins: everything but a transformer's two windings, a capacitor or a gap.
std::map<std::string, int> circuits_of(const supply& s, const library& lib);

/// Nets of an access that is open always or by plug withdrawn, and the chassis.
std::set<std::string> touchable_nets(const supply& s);

/// "functional", "basic" or "reinforced" where a gap does not say (design section 4).
std::string default_insulation(const std::string& a, const std::string& b, const std::map<std::string, int>& circuits,
                               const std::set<std::string>& touchable);

/// Where a spacing stands: what is written of the gap (null: nothing is), of the use and of the input.
struct spacing_site {
    std::string insulation; // "functional" | "basic" | "supplementary" | "reinforced"
    const gap* written = nullptr;
    const use* used = nullptr;
    const input* fed = nullptr;
    const library* lib = nullptr;
};

/// What each set asks; a figure without numbers and without anything missing is not asked there.
struct spacing_need {
    value creepage;           // IEC 60664-1
    value clearance;          // IEC 60664-1: steady peak, transient and least by pollution degree
    value lab_creepage;       // IEC 61010-1: the figures of IEC 60664-1 (from memory)
    value lab_clearance;      // IEC 61010-1, table K.11
    value equipment_creepage; // IEC 62368-1, table 17: the figures of IEC 60664-1
    value equipment_clearance;
    value board;              // IPC-2221: functional spacing of conductors on a board
    std::string board_column; // "B2" ...; "none" where it is no board; empty: unknown
};
spacing_need spacing_needed(const value& working_voltage, const spacing_site& site);

/// Clearance and creepage that a limit set asks, by the sources it cites; null where it speaks of no spacing.
struct set_need {
    const value* clearance = nullptr;
    const value* creepage = nullptr;
};
set_need need_of(const spacing_need& need, const limit_set& set);

/// The greatest transient the mains can bring, by IEC 60664-1 table F.1 or as declared; 0 V from a battery; several where the category is not said.
value mains_impulse(const input& fed, const library& lib);

/// X, the least width of a groove that counts in a path: by pollution degree, a third of the clearance where that is below 3 mm.
value least_groove(const spacing_site& site);

/// The creepage that counts: along a groove that is at least X wide, else straight across.
value creepage_of(const spacing_site& site);

/// The written gap that holds for a pair: its own, else the floor gap of either net; null if none.
const gap* gap_for(const supply& s, const std::string& a, const std::string& b);

} // namespace onehand
