#include "quantity/spread.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

range clamp_range(const range& r, double low, double high)
{
    return {std::clamp(r.low, low, high), std::clamp(r.high, low, high)};
}

range magnitude_range(const range& r)
{
    const double a = std::abs(r.low);
    const double b = std::abs(r.high);
    return {r.contains(0.0) ? 0.0 : std::min(a, b), std::max(a, b)};
}

range scale_range(const range& r, double factor)
{
    const double a = r.low * factor;
    const double b = r.high * factor;
    return {std::min(a, b), std::max(a, b)};
}

} // namespace

spread exactly(quantity q)
{
    return {q.dim, {q.si, q.si}, {q.si, q.si}, q.si};
}

spread toleranced(quantity nominal, double low, double high)
{
    return {nominal.dim, {nominal.si, nominal.si}, {std::min(low, nominal.si), std::max(high, nominal.si)}, nominal.si};
}

spread between(dimension d, double low, double high)
{
    return {d, {low, high}, {low, high}, std::nullopt};
}

spread hull(const spread& a, const spread& b)
{
    return {a.dim, hull(a.in_use, b.in_use), hull(a.whole, b.whole), a.nominal == b.nominal ? a.nominal : std::nullopt};
}

spread clamped(spread s, double low, double high)
{
    s.in_use = clamp_range(s.in_use, low, high);
    s.whole = clamp_range(s.whole, low, high);
    if (s.nominal) {
        s.nominal = std::clamp(*s.nominal, low, high);
    }
    return s;
}

spread negated(spread s)
{
    return scaled(s, -1.0);
}

spread scaled(spread s, double factor, dimension by)
{
    s.dim = s.dim * by;
    s.in_use = scale_range(s.in_use, factor);
    s.whole = scale_range(s.whole, factor);
    if (s.nominal) {
        s.nominal = *s.nominal * factor;
    }
    return s;
}

spread magnitude(const spread& s)
{
    return {s.dim, magnitude_range(s.in_use), magnitude_range(s.whole), s.nominal ? std::optional(std::abs(*s.nominal)) : std::nullopt};
}

} // namespace onehand
