#pragma once
// The rule language: parsed, dimension-checked, evaluated three-valued over both ranges of every figure. Operators + - * / ^ < <= > >= = and or not,
// functions min max abs sqrt ln exp, table("id", "column", x), time-to(60 V). Names carry hyphens, so minus needs blanks. Every mistake has its
// column. Inside the room only.
#include "published/library.hpp"
#include "stress/facts.hpp"

#include <memory>

namespace onehand {

/// Where the text of an expression stands, for complaints inside it.
struct expression_place {
    const document* doc = nullptr;
    place at;
    bool basic_text = true;

    complaint complain(std::size_t offset, std::string message) const;
};

struct expression {
    enum class op {
        constant,
        name,
        choice,
        negate,
        add,
        subtract,
        multiply,
        divide,
        power,
        less,
        less_equal,
        greater,
        greater_equal,
        equal,
        logic_and,
        logic_or,
        logic_not,
        call
    };
    op is = op::constant;
    quantity constant;          // constant
    std::string word;           // name, choice text, function, table id
    std::string column;         // table
    std::optional<state> other; // name of another state
    std::vector<expression> parts;
    std::size_t offset = 0; // in code points
    // Filled in by the check:
    value::type type = value::type::number;
    dimension dim{};
    bool solved = false;

    friend bool operator==(const expression&, const expression&) = default;
};

/// Parses the text; complaints are added and nothing is returned if it is no expression.
std::optional<expression> parse_expression(const std::string& text, const expression_place& where, std::vector<complaint>& complaints);

/// "<=", "and", "*" ... as the language writes them.
std::string sign_word(expression::op is);

/// "(a <= (0.8 * b))": the tree in one line, for tests and people.
std::string print(const expression& e);

/// What a name may be for a subject.
struct name_spec {
    value::type type = value::type::number;
    dimension dim{};
    bool solved = false;
    std::vector<std::string> choices;
    std::vector<std::string> depends_on;
};
using name_lookup = std::optional<name_spec> (*)(const library& lib, const std::string& subject, const std::string& name);

/// Checks names, dimensions and types in place; false with complaints if it does not hold.
bool check_expression(expression& e, const library& lib, const std::string& subject, const expression_place& where,
                      std::vector<complaint>& complaints);

/// The spec of a field, fact or class of a subject; nothing if there is none. `known`, if given, is filled with all names there are.
std::optional<name_spec> name_of_subject(const library& lib, const std::string& subject, const std::string& name,
                                         std::vector<std::string>* known = nullptr);

/// Three-valued truth over one of the two ranges.
enum class tri { no, unknown, yes };
tri both(tri a, tri b);
tri either(tri a, tri b);
tri turned(tri a);

/// What evaluation needs: facts of one subject and the classes told so far.
struct surroundings {
    const library* lib = nullptr;
    const fact_source* facts = nullptr;
    const subject* about = nullptr;
    state in = state::running;
    const std::map<std::string, std::string>* classes = nullptr; // class id -> name, "" unknown
};

/// A number, truth or choice of the expression.
value evaluate(const expression& e, const surroundings& s);

/// Outcome of a truth expression over in-use and whole ranges, with what is missing or assumed.
struct truth_outcome {
    tri in_use = tri::unknown; // true throughout, false throughout, or neither
    tri whole = tri::unknown;
    bool certain_fail = false;    // false for every possibility, whatever is missing
    bool breached_in_use = false; // some known point in use is false
    bool breached = false;        // some known point of the whole is false
    std::vector<std::string> missing;
    std::vector<std::string> assumed;
};
truth_outcome judge_truth(const expression& e, const surroundings& s);

} // namespace onehand
