// Full cycles without feedback: where the rail ends.
#include "stress/stage_rail.hpp"

#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using given = stage_model::given;
using physics::interval;
using view = stage_model::view;

constexpr double breakdown_over_rating = 1.3; // of a switch, at most (from memory of a maker's application note)

} // namespace

free_run run_free(const supply& s, const rail& r, double siemens)
{
    free_run out;
    const stage_model& m = r.model;
    const double multiple = lift_of(r);
    if (!m.there() || (r.topology == "boost-multiplier" && !(multiple > 0.0))) {
        out.rail = missing_value(value::type::number, {m.there() ? "a ladder that can be solved" : "the converter's own stage"});
        return out;
    }
    std::vector<std::pair<value, std::string>> ends;
    std::vector<std::string> missing;
    const auto cycle = with_cycle(m, {given::in, given::inductance, given::turns});
    const auto offer = [&](value v, const std::string& what, double factor) {
        if (v.numbers.empty() || !v.missing.empty()) {
            missing.insert(missing.end(), v.missing.begin(), v.missing.end());
            return;
        }
        ends.emplace_back(scaled_by(std::move(v), factor), what);
    };
    if (siemens > 0.0) {
        const double ohms = 1.0 / (siemens * multiple * multiple);
        offer(m.figure("full cycles into what surely loads the output", dim::voltage, cycle,
                       [ohms](const view& v) { return physics::open_loop(v.stage, physics::ohms<interval>::from_value(interval(ohms))).value(); }),
              "what surely loads it", multiple);
    }
    const part* q = first_body(s, s.stage->power_switch);
    const auto field_of = [&](const char* name) { return q == nullptr ? nullptr : q->find(name); };
    if (const field* co = field_of("output-capacitance"); co != nullptr && co->number() != nullptr && co->number()->whole.low > 0.0) {
        const range c = co->number()->whole;
        offer(m.figure("Uin + sqrt(Uin^2 + i^2 L/C)", dim::voltage, cycle,
                       [c](const view& v) {
                           const auto farads = physics::farads<interval>::from_value(interval(c.low, c.high));
                           const auto node = physics::unloaded_peak(v.stage.in, physics::full_peak(v.stage), v.stage.inductance, farads);
                           return v.stage.is == physics::shape::boost ? node.value() : ((node - v.stage.in) * v.stage.turns).value();
                       }),
              s.stage->power_switch + "'s own capacitance", multiple);
    }
    if (const field* rated = field_of("rated-voltage"); rated != nullptr && rated->number() != nullptr && rated->number()->whole.bounded()) {
        const range u = rated->number()->whole;
        offer(m.figure("breakdown of the switch, anywhere from its rating to 1.3 times it", dim::voltage, {given::in, given::turns},
                       [u](const view& v) {
                           const interval node(u.low, u.high * breakdown_over_rating);
                           return v.stage.is == physics::shape::boost ? node : (node - v.stage.in.value()) * v.stage.turns;
                       }),
              s.stage->power_switch + " breaks down", multiple);
    } else {
        missing.push_back(s.stage->power_switch.empty() ? s.stage->name + ".switch" : s.stage->power_switch + ".rated-voltage");
    }
    if (ends.empty()) {
        out.rail = missing_value(value::type::number, missing);
        return out;
    }
    const auto least = std::min_element(ends.begin(), ends.end(), [](const auto& a, const auto& b) {
        return a.first.numbers.front().whole.high < b.first.numbers.front().whole.high;
    });
    out.rail = least->first;
    for (const auto& [v, what] : ends) {
        spread& x = out.rail.numbers.front();
        x.in_use.high = std::min(x.in_use.high, v.numbers.front().in_use.high);
        x.in_use.low = std::min(x.in_use.low, v.numbers.front().in_use.low);
        x.whole.low = std::min(x.whole.low, v.numbers.front().whole.low);
    }
    out.rail.numbers.front().nominal.reset();
    out.ends = least->second;
    return out;
}

} // namespace onehand
