#pragma once
// From a description that reads to the whole result: solve, judge, conclude, and lay the figures out for the reports.
#include "audit/session.hpp"

namespace onehand {

audit_result gather(const supply& s, const session& opened, const std::vector<std::string>& sets);

/// The sets that the setting picks; every set where no setting is written.
std::vector<std::string> sets_for_setting(const supply& s, const library& lib);

} // namespace onehand
