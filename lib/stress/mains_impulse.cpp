// What the mains behind the input can bring.
#include "stress/fields.hpp"
#include "stress/spacing.hpp"
#include "stress/spread_math.hpp"

namespace onehand {

value mains_impulse(const input& fed, const library& lib)
{
    const auto declared = fed.fields.find("transient");
    if (declared != fed.fields.end()) {
        return written_value(declared->second, value::type::number, "input.transient");
    }
    const auto feed = fed.fields.find("feed");
    if (feed == fed.fields.end() || feed->second.text() == nullptr) {
        return missing_value(value::type::number, {"input.feed"});
    }
    if (*feed->second.text() == "battery") {
        value v = number(exactly({0.0, dim::voltage}));
        v.shown.formula = "no mains behind a battery";
        return v;
    }
    const auto mains = fed.fields.find("mains-voltage");
    const table* t = lib.find_table("iec-60664-1-impulse");
    if (mains == fed.fields.end() || mains->second.number() == nullptr || t == nullptr) {
        return missing_value(value::type::number, {"input.mains-voltage"});
    }
    // What plugs in is category II by the standard's own words; what is wired in may be any.
    const auto said = fed.fields.find("overvoltage-category");
    std::vector<std::string> categories{"I", "II", "III", "IV"};
    value v;
    if (said != fed.fields.end() && said->second.text() != nullptr) {
        categories = {*said->second.text()};
    } else if (*feed->second.text() != "mains") {
        categories = {"II"};
    } else {
        v.missing.emplace_back("input.overvoltage-category");
    }
    for (const std::string& category : categories) {
        const table_answer a = look_up(*t, category, clamped(*mains->second.number(), 0.0, unbounded));
        if (a.figure) {
            v.numbers.push_back(exactly({a.figure->whole.high, dim::voltage}));
            v.shown.inputs.push_back({t->title, a.rows + ", category " + category, t->at});
        } else {
            v.missing.push_back("rated impulse: " + a.reason);
        }
    }
    v.shown.formula = "rated impulse of the mains and its category";
    return v;
}

} // namespace onehand
