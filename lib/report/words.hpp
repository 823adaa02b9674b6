#pragma once
// Figures and places in words, for every printed form. Display columns are counted in code points.
#include "audit/audit.hpp"

namespace onehand {

/// "184 V (166 V .. 192 V)", "never", "unknown: needs C5.value", "one of ...", with its reason.
std::string figure(const value& v, int digits = 4);
/// The greatest figure alone: "192 V"; "never"; "unknown".
std::string greatest(const value& v, int digits = 4);
std::string at_place(const place& p);
std::size_t columns_of(const std::string& text);
/// Lines of at most `width` columns; later lines begin with `indent` blanks.
std::vector<std::string> wrapped(const std::string& text, std::size_t width, std::size_t indent);
std::string padded(const std::string& text, std::size_t width);
/// "Limit sets" with those used, left out and loosened, as every report tells them.
std::string limit_set_lines(const audit_result& r);
/// What every text ends with.
std::string last_line();
/// Limit sets and the last line, for the views that tell one section.
std::string closing_lines(const audit_result& r);
std::string source_words(const library* lib, const citation& c);

} // namespace onehand
