// The discharge times that rules ask, read off their expressions.
#include "rule/rule_set.hpp"

namespace onehand {

std::vector<asked_time> times_asked(const rule_set& rules, const std::vector<std::string>& limit_sets)
{
    using op = expression::op;
    std::vector<asked_time> list;
    for (const rule& r : rules.rules) {
        const bool shaped = r.require && r.shown.subject == "access" && (r.require->is == op::less_equal || r.require->is == op::less) &&
                            r.require->parts[0].is == op::call && r.require->parts[0].word == "time-to" &&
                            r.require->parts[0].parts[0].is == op::constant && r.require->parts[1].is == op::constant;
        if (shaped && in_force(r, limit_sets)) {
            list.push_back({r.shown.id, r.shown.limit_set, r.require->parts[0].parts[0].constant.si, r.require->parts[1].constant.si});
        }
    }
    return list;
}

} // namespace onehand
