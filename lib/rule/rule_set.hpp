#pragma once
// Compiled rules and classes. Inside the room only.
#include "rule/expression.hpp"
#include "rule/rules.hpp"

namespace onehand {

struct rule_example {
    std::string name;
    std::string verdict;
    std::optional<bool> advice; // whether good practice is told as not met; unsaid: not looked at
    std::vector<std::string> missing;
    given_figures given;
    place at;

    friend bool operator==(const rule_example&, const rule_example&) = default;
};

struct rule {
    rule_view shown;
    std::vector<state> states;
    std::vector<std::string> changes{"none"};
    std::optional<expression> when, require, advise;
    std::vector<rule_example> examples;
    std::string names;   // a shop rule: the published rule it stands beside
    std::string settles; // the measurement or datum that settles a marginal or a not-shown; empty: told from what is missing
    bool gather = false;
    verdict at_worst = verdict::fail; // a breach is told as no more than this: what would make it a failure is judged by another rule

    friend bool operator==(const rule&, const rule&) = default;
};

struct compiled_class {
    class_text text;
    std::vector<state> states;
    std::vector<expression> holds;

    friend bool operator==(const compiled_class&, const compiled_class&) = default;
};

struct rule_set {
    std::vector<rule> rules; // by id
    std::vector<compiled_class> classes;
};

/// The classes of a subject in a state: id -> name, empty where it is not shown.
std::map<std::string, std::string> classes_of(const rule_set& set, const library& lib, const subject& about, state in, const fact_source& facts,
                                              std::vector<class_told>* told);

/// One rule on one subject in one state.
finding judge_one(const rule& r, const library& lib, const subject& about, state in, const fact_source& facts,
                  const std::map<std::string, std::string>& classes);

/// Of a set that is used, or of none: practice is always in force.
bool in_force(const rule& r, const std::vector<std::string>& limit_sets);

/// One rule's or class's own examples.
std::vector<example_result> run_examples_of(const rule& r, const library& lib);
std::vector<example_result> run_examples_of(const compiled_class& c, const library& lib);

} // namespace onehand
