#pragma once
// The result as JSON (design section 8; schema: result.schema.json beside this file). SI base units; a spread is an object with both ranges; null at
// an end means never there, and `reason` says why. The same result gives the same bytes.
#include "audit/audit.hpp"

namespace onehand {

struct json_input {
    const audit_outcome* outcome = nullptr;
};

/// One document for all files of a run, in their order. `parts` restricts the sections: empty all, else "discharge" or "spacing".
std::string json_report(const std::vector<json_input>& outcomes, const std::string& version, const std::string& rules_stamp,
                        const std::string& section = {});

} // namespace onehand
