#pragma once
// Facts: computed or written values of a subject, in a state, with evidence. A number is a spread, or one of several spreads where an unknown choice
// leaves several published values possible; it may be missing altogether and then names what is missing. The rule room asks for facts by name only.
#include "document/place.hpp"
#include "quantity/spread.hpp"

#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace onehand {

enum class state { start_up, running, no_load, standby, switched_off };
std::string word_for(state s); // "no-load"
std::optional<state> state_named(std::string_view word);

/// What a figure was made of.
struct evidence {
    struct input {
        std::string name;   // "R9.value"
        std::string figure; // "1 MΩ (950 kΩ .. 1.05 MΩ)"
        place at;
    };
    std::string formula; // "t = R C ln(U0/U)"
    std::vector<input> inputs;
    bool searched = false; // else proved
    double margin = 0.0;   // relative, added to a searched figure
};

struct value {
    enum class type { number, truth, choice };
    type holds = type::number;
    std::vector<spread> numbers; // one: known; several: one of these; none: missing, or never (see reason)
    std::optional<bool> truth;
    std::string choice; // empty: unknown
    std::vector<std::string>
        missing; // names what would be needed: "C4.value". A number with missing inputs may still have a spread: what is certain all the same
    std::vector<std::string> assumed; // assumptions it rests on, in words: a verdict on it is marginal at best
    std::string reason; // why there is no number although nothing is missing ("never: nothing discharges C4"); such a time exceeds every limit
    bool never = false; // a time that never comes
    evidence shown;

    bool known() const { return missing.empty(); }
};

value number(const spread& s);
value truth_of(bool t);
value choice_of(std::string word);
value missing_value(value::type t, std::vector<std::string> names);

/// The value for people: "184 V (166 V .. 192 V)", "never", "yes", "one of 50 V .. 250 V", "unknown".
std::string in_words(const value& v, int digits = 4);

/// What a rule is about.
struct subject {
    std::string kind; // a part kind, "gap", "net-pair", "stored", "access", "converter" or "supply"
    std::string name; // "R7", "R7/1", "HT-0V", "C4 pads"
    std::vector<std::string> nets;
    place at;

    friend bool operator==(const subject&, const subject&) = default;
};

/// A fact that the solver can give for a kind of subject; rules are checked against this list at load.
struct fact_spec {
    std::string subject;
    std::string name;
    value::type type = value::type::number;
    dimension dim{};
    std::string meaning;
    bool solved = false;                 // correlated with others of the same solution: at most one in a comparison
    std::vector<std::string> depends_on; // fields it is computed from: not to be compared with each other
    std::vector<std::string> choices;    // for choices
};

/// Subjects "part" in the list hold for every part kind.
const std::vector<fact_spec>& fact_catalogue();

/// What rule evaluation may ask. The stress room implements it for a solved supply, examples of rules for given values.
class fact_source {
public:
    virtual ~fact_source() = default;
    /// A field or fact of the subject in a state; missing if the subject has none.
    virtual value look_up(const subject& s, state in, const std::string& name) const = 0;
    /// The last time after switch-off at which the pair of the subject exceeds the limit.
    virtual value time_to(const subject& s, const quantity& limit) const = 0;
};

} // namespace onehand
