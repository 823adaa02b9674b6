#pragma once
// A spread is what is known of a quantity: two nested ranges. `in_use` is everything that will happen with every tolerance at nominal;
// `whole` adds the tolerances. An infinite end means "nothing is known on this side" (a data sheet's one-sided figure), never a real infinity.
// `nominal` is for reading only and is never judged.
#include "quantity/quantity.hpp"

#include <limits>
#include <optional>

namespace onehand {

inline constexpr double unbounded = std::numeric_limits<double>::infinity();

/// A closed interval in SI base units; low <= high; an end may be infinite (unknown on that side).
struct range {
    double low = 0.0;
    double high = 0.0;

    friend constexpr bool operator==(const range&, const range&) = default;
    bool contains(double x) const { return low <= x && x <= high; }
    bool contains(const range& r) const { return low <= r.low && r.high <= high; }
    bool bounded() const { return low > -unbounded && high < unbounded; }
};

constexpr range hull(const range& a, const range& b)
{
    return {a.low < b.low ? a.low : b.low, a.high > b.high ? a.high : b.high};
}

struct spread {
    dimension dim{};
    range in_use{};
    range whole{};
    std::optional<double> nominal;

    friend bool operator==(const spread&, const spread&) = default;
};

/// One exact value: both ranges are that point.
spread exactly(quantity q);
/// A toleranced value: in use only the nominal, whole from low to high.
spread toleranced(quantity nominal, double low, double high);
/// `a .. b`: no nominal; all of it counts as in use.
spread between(dimension d, double low, double high);
/// The smallest spread that holds both (nominal dropped unless equal).
spread hull(const spread& a, const spread& b);
/// Both ranges cut to [low, high]; empty cuts collapse to the nearer end.
spread clamped(spread s, double low, double high);
spread negated(spread s);
spread scaled(spread s, double factor, dimension by = dim::none);
/// |x| over both ranges.
spread magnitude(const spread& s);

} // namespace onehand
