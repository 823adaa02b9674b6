#pragma once
// What the gaps must be: which nets are one circuit, what can be touched, the insulation a pair needs, and the spacings IEC 60664-1 asks at the
// pair's working voltage. Beyond 1500 V d.c. the tables are read as guidance only and say so.
#include "stress/solution.hpp"

namespace onehand {

/// Groups of nets that one circuit joins: everything but a transformer's two windings, a capacitor or a gap.
std::map<std::string, int> circuits_of(const supply& s, const library& lib);

/// Nets of an access that is open always or by plug withdrawn, and the chassis.
std::set<std::string> touchable_nets(const supply& s);

/// "functional", "basic" or "reinforced" where a gap does not say (design section 4).
std::string default_insulation(const std::string& a, const std::string& b, const std::map<std::string, int>& circuits,
                               const std::set<std::string>& touchable);

struct spacing_need {
    value creepage;
    value clearance;
};
/// IEC 60664-1: creepage by pollution degree and material group, twice for reinforced; clearance at the steady peak (160 % of it for reinforced),
/// never below the least by pollution degree, altitude counted, and creepage never below clearance.
spacing_need spacing_needed(const value& working_voltage, const std::string& insulation, const std::optional<field>& surface,
                            const std::optional<field>& cti, const use& used, const library& lib);

/// The written gap that holds for a pair: its own, else the floor gap of either net; null if none.
const gap* gap_for(const supply& s, const std::string& a, const std::string& b);

} // namespace onehand
