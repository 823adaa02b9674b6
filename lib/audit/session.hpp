#pragma once
// What every audit of one run shares: the published data and the compiled rules, never altered once opened.
#include "audit/audit.hpp"

#include <string_view>

namespace onehand {

struct session {
    library lib;
    std::shared_ptr<const rule_set> rules;
    std::string stamp; // of all rule texts, the first twelve digits of their SHA-256
};

/// The built-in rules as packed while building (rule/packed.hpp).
std::string_view packed_rules();

} // namespace onehand
