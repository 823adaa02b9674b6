#pragma once
// What the user wrote wrongly, located. Complaints are collected, sorted in file order and reported in one run; they are no failures of the program.
#include "document/place.hpp"

#include <optional>
#include <string>
#include <vector>

namespace onehand {

enum class gravity { mistake, note }; // a note does not stop an audit

struct complaint {
    place at;
    std::string message; // one line, lower case start, no full stop: "unknown key 'valeu'; nearest known name: value"
    std::string excerpt; // the line it stands on, as written
    gravity weight = gravity::mistake;
    std::optional<place> also; // the second place of a contradiction
    std::string also_excerpt;
};

/// `file:line:column: message`, the line, a caret under the column; then "also here:" with the second place. No gutter, no arrows.
std::string format_complaint(const complaint& c);
std::string format_complaints(const std::vector<complaint>& list);

/// True if one of them is a mistake.
bool any_mistake(const std::vector<complaint>& list);

/// Stable sort by place.
void sort_by_place(std::vector<complaint>& list);

/// "a, b, c".
std::string listed(const std::vector<std::string>& words, const char* between = ", ");

/// The known name with the least edit distance to `word` (ties: first), if it is near enough to be meant (distance <= 1 + length/4); else empty.
std::string nearest_name(const std::string& word, const std::vector<std::string>& known);

} // namespace onehand
