#pragma once
// What every audit of one run shares: the published data and the compiled rules, never altered once opened.
#include "audit/audit.hpp"

namespace onehand {

struct session {
    library lib;
    std::shared_ptr<const rule_set> rules;
    std::string stamp; // of all rule texts, the first twelve digits of their SHA-256
};

} // namespace onehand
