#pragma once
// A look over the raw text before it is parsed: what the TOML reader answers badly or what it must not be given at all. Inside the room only.
#include "document/document.hpp"

namespace onehand {

inline constexpr std::size_t size_limit = 1U << 20U; // bytes
inline constexpr int depth_limit = 32;

/// The first thing that stands outside quotes and comments and can be no TOML: an unquoted quantity, a character beyond ASCII, a word instead of a
/// value.
std::optional<complaint> check_text(std::string_view text, const document& doc);

} // namespace onehand
