#pragma once
// The rule engine's doors: load a set of rules against the library and the fact catalogue, judge a solved supply, draw the conclusions.
// A rule set with any mistake is refused whole, with places inside the expressions. Rule language: style guide section 3, DEVELOPERS.md.
#include "rule/finding.hpp"

#include <memory>

namespace onehand {

struct rule_set; // compiled; immutable; shared

struct rules_result {
    std::shared_ptr<const rule_set> rules;
    std::vector<complaint> complaints;
};
/// Compiles every rule document and class of the library.
rules_result compile_rules(const library& lib);

struct judging_options {
    std::vector<std::string> limit_sets; // sets in force; "practice" rules always are
};

/// The class of each subject that a class is about, e.g. {"iec-62368-1-steady", "ES3"}; empty name: not shown.
struct class_told {
    subject about;
    state in = state::running;
    std::string id;
    std::string name;
    std::vector<std::string> missing;
};

struct judgement {
    std::vector<finding> findings; // ordered by verdict, signal, rule, natural order of reference
    std::vector<class_told> classes;
    std::vector<std::string> loosened; // shop rules milder than the published one they name
};
/// `changed` names the change under which the facts hold ("none" as built): only rules for such changes are judged. `changes_kind` is "none",
/// "single-fault", "input-event", "unplugged".
judgement judge(const rule_set& rules, const library& lib, const std::vector<subject>& subjects, const fact_source& facts,
                const judging_options& options, const std::string& changed = "none", const std::string& change_kind = "none");

/// The findings of both in one order; classes are those of the first.
judgement together(judgement a, judgement b);

/// Design section 3. `unattested` are the lines for what the description does not attest as complete.
conclusions conclude(const std::vector<finding>& findings, bool waiting_time_known);

/// Runs the examples of every rule and class.
struct example_result {
    std::string rule;
    std::string example;
    std::string expected;
    std::string got;
    bool agrees = false;
};
std::vector<example_result> run_examples(const rule_set& rules, const library& lib);

/// What `cite` and `rules` show of a rule.
struct rule_view {
    std::string id, title, subject, when, require, advise, message, why, remedy, limit_set;
    std::vector<std::string> states, bears_on;
    signal_word signal = signal_word::notice;
    bool protects_person = false;
    citation from;
    struct example {
        std::string name, verdict;
        std::vector<std::pair<std::string, std::string>> given;

        friend bool operator==(const example&, const example&) = default;
    };
    std::vector<example> examples;
    place at;
    bool shop = false;

    friend bool operator==(const rule_view&, const rule_view&) = default;
};
/// What the rules in force ask of a discharge: at most so many volts after so many seconds. Read off rules of the form `time-to(U) <= t`.
struct asked_time {
    std::string rule;
    std::string limit_set;
    double volts = 0.0;
    double seconds = 0.0;
};
std::vector<asked_time> times_asked(const rule_set& rules, const std::vector<std::string>& limit_sets);

/// What a limit set holds, with its figures (constants of rules and classes, printed cells of tables) by how they are known. A rule or table that
/// rests on memory in part counts as memory whole.
struct set_counts {
    std::string limit_set;
    std::vector<std::string> rules, classes, tables;
    int confirmed = 0;
    int memory = 0;
    int practice = 0;
};
std::vector<set_counts> count_by_set(const rule_set& rules, const library& lib);
std::vector<rule_view> view_rules(const rule_set& rules, const library& lib);

} // namespace onehand
