#pragma once
// The one public entry: text in, result or complaints out. Runs the sweep: read, solve, judge, conclude. No file system, no printing, no globals, no
// exceptions out; two threads may call it at once. The result holds everything the reports show; it is an aid to a competent person and no
// certificate.
#include "rule/rules.hpp"
#include "supply/change.hpp"

#include <memory>

namespace onehand {

struct session; // library and compiled rules, immutable, shared between audits

struct session_result {
    std::shared_ptr<const session> ready; // null if there are complaints of weight
    std::vector<complaint> complaints;
};
/// Loads the built-in data and a shop's own files. A broken set is refused whole.
session_result open_session(const std::vector<rule_text>& own = {});
const library& library_of(const session& s);
const rule_set& rules_of(const session& s);

struct audit_request {
    std::string text;
    std::string file;                    // the name to show
    std::vector<std::string> settings;   // --set
    std::vector<std::string> limit_sets; // --limit-sets; empty: the file's, else the setting's
};

struct net_facts {
    std::string net;
    std::vector<std::pair<state, value>> potential; // against the return
    bool floating = false;
};

struct part_facts {
    std::string ref;
    std::string kind;
    struct in_state {
        state in;
        value voltage, current, power;
    };
    std::vector<in_state> states;
};

struct set_point_facts {
    value output;
    std::string basis; // "held by FB" | "as declared"
    struct end {
        std::string part;            // "R7", "threshold", "P1 position"
        std::string at_low, at_high; // the end of its range that gives the low and the high set point: "low", "high", "inside"
    };
    std::vector<end> set_by;
};

/// The converter's figures by name, in the order they are told ("inductor.peak": a name before the point groups).
struct converter_facts {
    std::string mode; // continuous | discontinuous | either; empty: unknown
    std::vector<std::string> mode_missing;
    struct figure {
        std::string name;
        std::string words; // for people
        value told;
    };
    std::vector<figure> figures;
    struct passed {
        std::string part, rating;
        double rail = 0.0;
        value time;
    };
    std::vector<passed> runaway_order;
    std::vector<std::string> runaway_story;
    std::string shorted; // what limits a shorted output
};

struct access_facts {
    access where;
    subject about;
    struct in_state {
        state in;
        std::string change;
        value voltage, current, charge;
        std::vector<class_told> classes;
    };
    std::vector<in_state> states;
};

struct stored_facts {
    subject about; // one capacitor ("C4") or one accessible pair ("HT-0V")
    bool is_pair = false;
    std::vector<std::string> parts; // the capacitors that can reach it
    value capacitance, voltage, energy, charge;
    value at_once_energy, at_once_charge; // into the body within 10 ms (pairs)
    std::vector<class_told> classes;
};

struct discharge_facts {
    std::vector<std::string> nets;
    std::string input_end;  // open | shorted
    std::string output_end; // fitted | unplugged
    std::string change;     // none, or the path broken
    struct limit {
        quantity to;
        value time; // never and reason where it never comes
        std::string limit_set;
        std::optional<double> within_s; // what the set asks of this pair; empty: told for reading
        bool exempt = false;            // by little charge, by a marking, by where it is
        bool governs = false;           // of what is asked and not exempt, the one that is nearest to being missed or missed by most
    };
    std::vector<limit> limits;
    struct remainder {
        double after_s = 0.0;
        value voltage;
    };
    std::vector<remainder> left;
    value final_voltage;
    std::string only_path; // a single part that alone discharges the pair; empty: none or several
    std::string measured;  // what [[decay]] readings say of it
};

struct spacing_facts {
    subject about; // net pair
    value working_voltage;
    struct required {
        std::string limit_set;
        value clearance, creepage;
        std::optional<basis> rests_on; // the weakest of the tables read; empty: none was
    };
    std::vector<required> asked;
    struct measured_gap {
        std::string where;
        value clearance, creepage;
        bool floor = false; // from a "*" gap
    };
    std::vector<measured_gap> measured;
    std::string insulation;
    std::string clearance_governs, creepage_governs; // the set that asks most; empty: none told
    std::string covered;                             // "gap", "floor", "none"
    verdict kept = verdict::not_shown; // measured against all that is asked; functional and not kept is marginal: what a bridge does is judged apart
};

struct label_facts {
    value voltage, energy;
    value wait; // the longest time that is asked; never or missing: measure
    std::string reason;
};

struct audit_result {
    std::string name;
    std::string file;
    std::string sha256;      // of the description's text
    std::string rules_stamp; // of the rule set
    std::vector<std::string> limit_sets, left_out, loosened;
    conclusions concluded;
    judgement judged;
    std::vector<net_facts> nets;
    std::vector<part_facts> parts;
    std::optional<set_point_facts> set_point;
    std::optional<converter_facts> converter;
    std::vector<access_facts> accesses;
    std::vector<stored_facts> stored;
    std::vector<discharge_facts> discharges;
    std::vector<spacing_facts> spacings;
    std::optional<label_facts> label;
    std::vector<std::string> assumptions; // listed, each in words
    std::vector<std::string> cautions;
    std::vector<std::string> not_seen; // what the tool did not look at
};

struct audit_outcome {
    std::optional<audit_result> result; // nothing if the description is unusable
    std::vector<complaint> complaints;  // notes may be there even with a result
};
audit_outcome audit(const session& s, const audit_request& request);

/// 0, 1, 2 or 4 for one outcome (design section 8); 3 is the caller's.
int exit_code(const audit_outcome& outcome);

} // namespace onehand
