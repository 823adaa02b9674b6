#pragma once
// The text of every file under rules/, compiled into the program at build time, so that it runs without any file beside it.
#include "published/rule_text.hpp"

#include <vector>

namespace onehand {

/// Every built-in file in name order: "tables/....toml", "kinds/....toml", "<rule id>.toml", ...
std::vector<rule_text> embedded_rules();
/// SHA-256 of all their names and texts, hexadecimal.
std::string embedded_stamp();

} // namespace onehand
