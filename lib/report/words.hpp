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
std::string source_words(const library* lib, const citation& c);

} // namespace onehand
