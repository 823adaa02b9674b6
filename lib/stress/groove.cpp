// Grooves and slots in a path along a surface.
#include "stress/fields.hpp"
#include "stress/spacing_site.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

value least_groove(const spacing_site& site)
{
    value v;
    const degree_told degree = degree_of(site);
    if (!degree.degree) {
        v.missing.push_back(degree.missing);
        return v;
    }
    const auto width = read_column(v, site, "iec-60664-1-groove", "X", exactly({static_cast<double>(*degree.degree), dim::none}));
    if (!width) {
        return v;
    }
    v.numbers.push_back(*width);
    constexpr double narrow = 3e-3; // metres of clearance below which a third of it will do
    const std::optional<field> none;
    const value clearance = written_value(site.written != nullptr ? site.written->clearance : none, value::type::number, "clearance");
    if (!clearance.numbers.empty() && clearance.numbers.front().whole.high < narrow) {
        const spread third = scaled(clearance.numbers.front(), 1.0 / 3.0);
        spread& x = v.numbers.front();
        x.in_use = {std::min(x.in_use.low, third.in_use.low), std::min(x.in_use.high, third.in_use.high)};
        x.whole = {std::min(x.whole.low, third.whole.low), std::min(x.whole.high, third.whole.high)};
        x.nominal.reset();
    }
    v.shown.formula = "X by pollution degree; a third of the clearance where that is below 3 mm";
    return v;
}

value creepage_of(const spacing_site& site)
{
    const gap* g = site.written;
    const std::optional<field> none;
    value straight = written_value(g != nullptr ? g->creepage : none, value::type::number, "creepage");
    if (g == nullptr || !g->groove_creepage || !g->groove || g->groove->number() == nullptr) {
        return straight;
    }
    const value x = least_groove(site);
    if (!x.missing.empty() || x.numbers.empty() || g->groove->number()->whole.low < x.numbers.front().whole.high) {
        straight.shown.formula = "as written, straight across the groove: it is narrower than X or X is not known";
        return straight;
    }
    value around = written_value(g->groove_creepage, value::type::number, "groove-creepage");
    around.shown.formula = "as written, along the groove: it is at least X wide";
    inherit(around, x);
    return around;
}

} // namespace onehand
