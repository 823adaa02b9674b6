#pragma once
// What `cite`, `rules` and `kinds` print: a rule in words with its figures, source, basis and examples; a table as printed; a source; the kinds of
// part with their fields.
#include "rule/rules.hpp"

namespace onehand {

/// Everything that has the word in its id, title, source or standard; an exact id first. `found` tells whether there was any.
std::string cite_text(const library& lib, const rule_set& rules, const std::string& word, bool& found);

/// One line a rule, those of one limit set if it is named.
std::string rules_text(const library& lib, const rule_set& rules, const std::string& limit_set);

/// One line a kind, or one kind whole.
std::string kinds_text(const library& lib, const std::string& kind, bool& found);

} // namespace onehand
