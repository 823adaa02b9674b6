#pragma once
// What was built: parts, nets, gaps, accesses, converter, use, exactly as written; nothing is guessed and nothing absent is filled in.
// Law 6 (as built) is applied by the rooms that read this: protection not written is absent, danger not written is unknown.
#include "document/document.hpp"
#include "published/library.hpp"
#include "quantity/spread.hpp"

#include <map>
#include <variant>

namespace onehand {

/// A written value of a part or section, with its place and its text as written.
struct field {
    std::variant<spread, bool, std::string> value;
    place at;
    std::string written;
    std::optional<place> nominal_at; // where `measured` replaced a value: the place of the value replaced

    const spread* number() const { return std::get_if<spread>(&value); }
    const bool* truth() const { return std::get_if<bool>(&value); }
    const std::string* text() const { return std::get_if<std::string>(&value); }
};

struct terminal {
    std::string name; // canonical, from the kind
    std::string net;
    place at;
};

struct part {
    std::string ref;
    std::string kind;
    place at;
    std::vector<terminal> terminals;
    bool polarised = false;
    std::map<std::string, field> fields; // as written, series/parallel/role included below instead
    int series = 1;
    int parallel = 1;
    std::string role;  // "bleeder", "balance", "limiting", ... as written
    std::string fault; // failure mode put on by a change; empty: whole

    const terminal* find_terminal(const std::string& name) const;
    const std::string& net(const std::string& terminal_name) const; // empty text if it has none
    const field* find(const std::string& name) const;
};

struct gap {
    std::vector<std::string> nets; // second may be "*"
    std::string where;             // "C4 pads"
    std::optional<field> clearance;
    std::optional<field> creepage;
    std::optional<field> surface;
    std::optional<field> cti;
    std::optional<field> insulation;
    std::optional<field> coating;         // "none" | "solder mask" | "lacquer" | "qualified"
    std::optional<field> layer;           // "external" | "internal"
    std::optional<field> groove;          // width of the narrowest groove or slot in the path
    std::optional<field> groove_creepage; // path along that groove; `creepage` is straight across
    place at;
};

struct access {
    std::vector<std::string> nets;
    std::string where;
    std::string when; // "always" | "cover off" | "plug withdrawn"
    place at;
};

/// A measured discharge.
struct decay {
    std::vector<std::string> nets;
    std::optional<field> from, to, time, meter;
    place at;
};

struct use {
    std::optional<field> setting, person, ambient, inside_rise, altitude, pollution_degree, derating, location;
    std::vector<std::string> limit_sets;
    place limit_sets_at;
    place at;
};

struct input {
    std::vector<std::string> nets; // positive first
    std::optional<field> voltage, current_limit, isolated;
    std::map<std::string, field> fields; // the others
    place at;
};

struct astable_drive {
    std::string ra, rb, c;
    std::string bypass; // diode across rb; empty: none
};

/// What takes the leakage energy of a flyback's primary.
struct switch_clamp {
    std::string resistor, capacitor, diode; // resistor and capacitor side by side behind the diode
    std::string suppressor;                 // in place of those two
    place at;
};

struct converter {
    std::string name;     // K1
    std::string topology; // boost | flyback | boost-multiplier | module
    std::string inductor, power_switch, rectifier;
    std::vector<std::string> inputs;  // what feeds it, positive net first; may be unsaid
    std::vector<std::string> outputs; // positive net first
    std::vector<std::string> ladder;
    std::string gate;
    std::optional<field> frequency, duty;
    std::optional<astable_drive> astable;
    std::map<std::string, field> drive; // high, low, supply, control, peak-current, delay, inverted
    std::optional<switch_clamp> clamp;
    std::vector<std::string> zeners; // of the feedback: they conduct where it holds
    std::string feedback_net;
    std::string feedback_return;           // the return net if unsaid
    std::map<std::string, field> feedback; // threshold, bias-current, lag, mode
    std::map<std::string, field> fields;   // output-voltage, source-resistance, power-limit, internal-capacitance, internal-bleeder, spike ...
    place at;

    const field* find(const std::string& key) const;
};

struct protection {
    std::map<std::string, field> fields; // enclosure, interlock, indicator, label
    place at;
};

struct supply {
    std::string name;
    std::string file;
    std::string return_net;
    std::string chassis;
    std::optional<field> return_bonded;
    std::vector<std::string> complete; // "capacitors", "sources", "access"
    place at;
    use used;
    input fed;
    std::optional<converter> stage;
    std::vector<part> parts; // in document order
    std::vector<gap> gaps;
    std::vector<access> accesses; // empty: every net, cover off
    std::vector<decay> decays;
    protection guarded;
    std::vector<std::string> nets; // every net named, in order of first naming; the inner nets of strings are not among them
    std::map<std::string, place> net_at;

    const part* find_part(const std::string& ref) const;
    bool attests(const std::string& what) const;
};

struct supply_result {
    supply built;
    std::vector<complaint> complaints; // notes may be there even where it is usable
};

/// Reads and checks a whole description; every mistake of meaning in one run. `settings` are --set edits ("R9=470k", "R9.value=470k",
/// "use.altitude=2500 m"), applied before checking; a mistake in one is a complaint in file "--set".
supply_result read_supply(const document& doc, const library& lib, const std::vector<std::string>& settings = {});

/// Every part with series or parallel above one becomes single bodies, R7/1, R7/2 ...; the nets between bodies are R7~1 ... and appear in no list of
/// nets.
supply expand_bodies(const supply& s);

/// R2 before R10, R7/1 before R7/2.
bool natural_less(const std::string& a, const std::string& b);

} // namespace onehand
