#include "stress/paths.hpp"

#include <algorithm>

namespace onehand {

std::set<std::string> reach(const std::vector<element>& elements, const std::string& start, const std::function<bool(const element&)>& counts)
{
    std::set<std::string> found{start};
    for (bool grew = true; grew;) {
        grew = false;
        for (const element& e : elements) {
            if (!counts(e)) {
                continue;
            }
            std::vector<std::string> ends{e.from, e.to};
            if (!e.wiper.empty()) {
                ends.push_back(e.wiper);
            }
            const bool touched = std::any_of(ends.begin(), ends.end(), [&](const std::string& n) { return found.contains(n); });
            for (const std::string& n : ends) {
                grew |= touched && found.insert(n).second;
            }
        }
    }
    return found;
}

bool discharges(const element& e)
{
    return e.charge_path && std::all_of(e.forms.begin(), e.forms.end(), [](element_spec::form f) {
               return f == element_spec::form::resistance || f == element_spec::form::track || f == element_spec::form::closed ||
                      f == element_spec::form::inductance;
           });
}

bool soldered_path(const std::vector<element>& elements, const std::string& a, const std::string& b, const std::string& without)
{
    return reach(elements, a, [&](const element& e) { return e.ref != without && discharges(e); }).contains(b);
}

std::string only_path(const std::vector<element>& elements, const std::string& a, const std::string& b)
{
    if (!soldered_path(elements, a, b)) {
        return {};
    }
    for (const element& e : elements) {
        if (discharges(e) && !soldered_path(elements, a, b, e.ref)) {
            return e.ref;
        }
    }
    return {};
}

} // namespace onehand
