#pragma once
// What `cite`, `rules` and `kinds` print: a rule in words with its figures, source, basis and examples; a table as printed; a source; the kinds of
// part with their fields.
#include "rule/rules.hpp"

namespace onehand {

/// Everything that has the word in its id, title, standard, clause or reason: whole where it is one id or a few hits, else a line each. `found` tells
/// whether there was any.
std::string cite_text(const library& lib, const rule_set& rules, const std::string& word, bool& found);

/// Set by set: where it is used, its rules, classes and tables, a line each; only the sets named, if any. `found` is false for a name that is no set,
/// which is then answered with the nearest.
std::string rules_text(const library& lib, const rule_set& rules, const std::vector<std::string>& limit_sets, bool& found);

/// Every limit set with counts of rules and of figures by how they are known, as a table in Markdown.
std::string limit_set_table(const library& lib, const rule_set& rules);

/// One line a kind, or one kind whole.
std::string kinds_text(const library& lib, const std::string& kind, bool& found);

} // namespace onehand
