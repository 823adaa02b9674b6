#pragma once
// What judging gives: one finding a rule, subject, state and change; and the two conclusions drawn from all of them (design sections 2, 3 and 8).
#include "published/library.hpp"
#include "stress/facts.hpp"

namespace onehand {

enum class verdict { fail, not_shown, marginal, pass, not_applicable }; // in order of gravity
enum class signal_word { danger, warning, caution, notice };            // in order of gravity, ANSI Z535.4
std::string word_for(verdict v);                                        // "not-shown"
std::string word_for(signal_word s);                                    // "DANGER"

struct finding {
    std::string id; // stable: "<rule>:<subject>:<state>[:<change>]"
    std::string rule;
    std::string title;
    std::string limit_set; // "IEC 62368-1"; "practice" where the rule's source belongs to no set
    subject about;
    state in = state::running;
    std::string change; // "none" as built
    verdict judged = verdict::not_shown;
    std::string marginal_by; // "tolerance" | "assumption" | empty
    signal_word signal = signal_word::notice;
    std::vector<std::string> bears_on; // "energise", "reach-in"
    bool protects_person = false;
    std::optional<value> left; // the value, as compared
    std::optional<value> limit;
    std::string comparison;       // "<="
    std::optional<double> margin; // (limit - value)/limit at the worst ends for an upper limit, mirrored for a lower one; negative: exceeded
    std::string message;          // fields filled in
    std::string why;
    std::string remedy;
    std::string settles; // what would settle a marginal or not-shown: "measure R8", "give C5.rated-voltage"
    std::string advice;  // empty, or the good practice that is not met
    std::vector<std::string> missing;
    std::vector<std::string> assumed;
    std::vector<evidence> shown;
    citation from;
    std::vector<subject> gathered; // gather = true: all its subjects
};

struct conclusions {
    std::string energise;                // "hold" | "conditional" | "no-objection"
    std::string reach_in;                // "hold" | "only-after"
    bool time_known = true;              // only-after without a time: "no time can be told: measure"
    std::vector<std::string> because;    // ids of the findings that hold
    std::vector<std::string> conditions; // each in one line, gravest first
    std::vector<std::string> first;      // what to do first, in order
};

} // namespace onehand
