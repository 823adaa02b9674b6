#pragma once
// Small arithmetic on values: what is missing or assumed of the parts is missing or assumed of the whole. Independent figures only; what is
// correlated is spread jointly elsewhere.
#include "stress/facts.hpp"

namespace onehand {

/// Carries missing, assumed and searched of `from` over to `to` (each name once).
void inherit(value& to, const value& from);

/// |v|.
value magnitude(const value& v);

/// Product of two independent non-negative figures, times `factor`.
value product(const value& a, const value& b, double factor = 1.0);
value sum(const value& a, const value& b);
/// The smallest value that holds both.
value hull(const value& a, const value& b);
/// The greater of the two at each end.
value greater(const value& a, const value& b);

/// Highest possible (whole) figure; nothing if unknown on that side or no number at all.
std::optional<double> highest(const value& v);
std::optional<double> highest_in_use(const value& v);

} // namespace onehand
