#pragma once
// Published data as loaded from rules/: sources, tables, kinds of part, classes, limit sets. Values stay as printed; look-ups never extrapolate.
// Loading checks everything that needs no rule language (ids unique, units, citations resolve, check points come out) and returns located complaints;
// a library with a mistake is never used.
#include "document/document.hpp"
#include "published/rule_text.hpp"
#include "quantity/spread.hpp"

#include <map>
#include <optional>

namespace onehand {

enum class basis { confirmed, memory, practice };
std::string word_for(basis b);

/// One document in rules/sources.toml.
struct source {
    std::string key; // "iec-62368-1"
    std::string title;
    std::string edition;
    std::string year;
    std::string seen; // what was seen and where; what is from memory
    place at;

    friend bool operator==(const source&, const source&) = default;
};

/// What a figure rests on: source key, clause or table, basis.
struct citation {
    std::string cite;
    std::string clause;
    basis rests_on = basis::practice;
    place at;

    friend bool operator==(const citation&, const citation&) = default;
};

/// How a table may be read between its printed rows.
enum class interpolation { linear, step_up, none };

/// A published table: rows over one numeric axis, or over a choice (package, surface). The printed cells are kept as text; the numbers are SI.
struct table {
    struct column {
        std::string name; // "PD2-III", "ES2", "limiting-voltage"
        std::string unit; // as printed, "mm"
        dimension dim{};

        friend bool operator==(const column&, const column&) = default;
    };
    std::string id;
    std::string title;
    citation from;
    std::string conditions;
    std::string axis_name; // "voltage" or, for a choice table, the field name "package"
    std::string axis_unit; // empty for a choice table
    dimension axis_dim{};
    bool by_choice = false;
    std::vector<column> columns;
    interpolation between_rows = interpolation::none;
    std::string interpolation_source;
    bool open_low = false;                         // the first row is printed "or less": it holds below
    bool open_high = false;                        // the last row is printed "or greater": it holds above
    std::vector<std::vector<std::string>> printed; // axis cell first, then one cell a column; "-" where the source prints none; a cell of a choice
                                                   // table may hold several values "50 V, 75 V"
    std::vector<double> axis;                      // SI, ascending or descending as printed
    std::vector<std::string> choices;              // by_choice
    std::vector<std::vector<std::vector<double>>> cells; // [row][column] -> SI values (none, one, or several where sources disagree)
    struct check {
        std::string at; // axis value or choice
        std::string column;
        std::string gives; // empty: must be refused
        place where;

        friend bool operator==(const check&, const check&) = default;
    };
    std::vector<check> checks;
    place at;

    friend bool operator==(const table&, const table&) = default;
};

/// The extremes of a table column over an axis spread, every printed row inside the spread counted. Empty with a reason outside the printed rows or
/// on a "-" cell.
struct table_answer {
    std::optional<spread> figure;
    std::string reason; // "8 V is below the first printed row, 10 V"
    std::string rows;   // "rows 160 V to 200 V" for the evidence
};
table_answer look_up(const table& t, const std::string& column, const spread& axis_value);
/// The reverse reading (axis against a column, as IEC 62368-1 table 5 allows): the axis value at a column value. Only for strictly monotone columns.
table_answer look_up_reverse(const table& t, const std::string& column, const spread& column_value);
/// All printed values of a choice; the worst end is the caller's to take. Unknown choice name: empty.
std::vector<spread> look_up_choice(const table& t, const std::string& column, const std::string& choice);

/// One field a kind of part may have.
struct field_spec {
    enum class type { quantity, truth, choice, text, count };
    std::string name;
    type holds = type::quantity;
    dimension dim{};
    std::string meaning;
    bool varies = false;  // its range is use, not tolerance (load current, position)
    bool positive = true; // negative values are refused; one-sided figures end at zero
    std::vector<std::string> choices;
    std::string from_table; // where a missing value comes from: table id, read by the choice field `by`
    std::string by;
    std::string column;
    bool limit_is_low = true; // the worst end of several published values: low for a rating
    std::string bounds;       // which fact this rating bounds: "voltage", "power", "current"
    std::string not_with;     // a field beside which this one says nothing
    std::string instead;      // what is written there in its place
    std::string per;          // may be written per this other field (a cable's capacitance per length)
    place at;

    friend bool operator==(const field_spec&, const field_spec&) = default;
};

/// How terminals are written: `nets = [a, b]`, or one key a terminal.
struct terminal_key {
    std::string key; // "nets", "ends", "anode", "cathodes", "poles", "wiper"
    int count = 1;   // 1: one net as text; n > 1: an array of n nets; 0: an array of one or more nets; -1: an array of pairs (connector poles)
    std::vector<std::string> names; // canonical terminal names it fills ("first","second"); a star is replaced by 1, 2, ... ("cathode-*")
    bool optional = false;

    friend bool operator==(const terminal_key&, const terminal_key&) = default;
};
struct terminal_form {
    std::vector<terminal_key> keys;
    bool polarised = false;

    friend bool operator==(const terminal_form&, const terminal_form&) = default;
};

/// One ideal element between two canonical terminals, as solved in given states.
struct element_spec {
    enum class form { open, closed, resistance, clamp, current, capacitance, inductance, track };
    std::string from; // canonical terminal name; with a star it stands once for each that is there
    std::string to;
    std::vector<form> forms;                  // several: any one of them may be the case (a tube dark or lit)
    std::map<std::string, std::string> field; // form name -> field that gives its value ("resistance" -> "value")
    std::vector<std::string> states;          // empty: all; else "running", "no-load", "standby", "switched-off", "start-up"
    bool holds_charge_path = false;           // a soldered resistive path: counts for discharge (law 4)
    place at;

    friend bool operator==(const element_spec&, const element_spec&) = default;
};

struct failure_spec {
    std::string mode; // "open", "short", "wiper-open", "track-open-1", ...
    std::string meaning;
    std::vector<element_spec> elements; // what replaces the elements between the same terminals
    citation from;

    friend bool operator==(const failure_spec&, const failure_spec&) = default;
};

/// A kind of part as rules/kinds/<name>.toml describes it.
struct kind_spec {
    std::string name;
    std::string title;
    std::vector<terminal_form> forms;
    std::vector<field_spec> fields;
    std::vector<element_spec> elements;
    std::vector<failure_spec> failures;
    std::string main_field;   // what --set R9=470k sets: the first quantity
    std::string voltage_from; // canonical terminals its `voltage` fact is told between
    std::string voltage_to;
    place at;

    const field_spec* find(const std::string& field) const;

    friend bool operator==(const kind_spec&, const kind_spec&) = default;
};

/// Facts of an example as written: name and figure, a truth as "true" or "false".
using given_figures = std::vector<std::pair<std::string, std::string>>;
given_figures given_of(const node& table);

/// An ordered set of conditions from a standard; the expressions are compiled by the rule room.
struct class_text {
    struct step {
        std::string name;  // "ES1"
        std::string holds; // expression
        place holds_at;
        bool basic_text = true;

        friend bool operator==(const step&, const step&) = default;
    };
    std::string id;
    std::string title;
    std::string subject;
    std::vector<std::string> states;
    citation from;
    /// What the class is for given facts; an empty `name_due` with what is missing: open.
    struct example {
        std::string name;
        std::string name_due; // "ES2"
        std::vector<std::string> missing;
        given_figures given;
        place at;

        friend bool operator==(const example&, const example&) = default;
    };
    std::vector<step> steps;
    std::vector<example> examples;
    place at;

    friend bool operator==(const class_text&, const class_text&) = default;
};

/// A limit set: the rules that cite one of these sources; the settings that pick it.
struct limit_set {
    std::string name;                  // "IEC 62368-1"
    std::vector<std::string> sources;  // source keys
    std::vector<std::string> settings; // "teaching lab", ...
    std::string note;
    place at;

    friend bool operator==(const limit_set&, const limit_set&) = default;
};

struct library {
    std::vector<source> sources;
    std::vector<table> tables;
    std::vector<kind_spec> kinds;
    std::vector<class_text> classes;
    std::vector<limit_set> limit_sets;
    std::vector<document> rule_documents; // everything at the top of rules/ that is a rule: parsed, not yet compiled

    const source* find_source(const std::string& key) const;
    const table* find_table(const std::string& id) const;
    const kind_spec* find_kind(const std::string& name) const;
    const class_text* find_class(const std::string& id) const;
    const limit_set* find_limit_set(const std::string& name) const;
    const limit_set* limit_set_of(const std::string& source_key) const;
};

struct library_result {
    library lib;
    std::vector<complaint> complaints;
};

/// `own` are a shop's files (from --rules DIR), named as shown to the user; they may add sources, tables, kinds, classes and rules; a reused id is a
/// complaint.
library_result load_library(const std::vector<rule_text>& built_in, const std::vector<rule_text>& own = {});

} // namespace onehand
