#pragma once
// The sections of a result, each laid out from the solved supply.
#include "audit/audit.hpp"
#include "stress/solved.hpp"

namespace onehand {

std::vector<net_facts> net_section(const solved_supply& s);
std::vector<part_facts> part_section(const solved_supply& s);
std::optional<set_point_facts> set_point_section(const solved_supply& s);
std::optional<converter_facts> converter_section(const solved_supply& s);
std::vector<access_facts> access_section(const solved_supply& s, const judgement& judged);
std::vector<stored_facts> stored_section(const solved_supply& s, const judgement& judged);
/// Every accessible pair in every case of switch-off, against 60 V and against every time that a rule in force asks of the pair.
std::vector<discharge_facts> discharge_section(const solved_supply& s, const rule_set& rules, const judgement& judged,
                                               const std::vector<std::string>& sets);
/// Every pair above 60 V and every written gap: what each of the sets asks, what was measured, which set governs.
std::vector<spacing_facts> spacing_section(const solved_supply& s, const std::vector<std::string>& sets);
std::optional<label_facts> label_section(const solved_supply& s);

} // namespace onehand
