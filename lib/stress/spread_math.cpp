#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>
#include <functional>

namespace onehand {

namespace {

void add_once(std::vector<std::string>& to, const std::vector<std::string>& from)
{
    for (const std::string& name : from) {
        if (std::find(to.begin(), to.end(), name) == to.end()) {
            to.push_back(name);
        }
    }
}

using on_ranges = std::function<range(const range&, const range&)>;

/// Every combination of the alternatives, range by range.
value combine(const value& a, const value& b, const on_ranges& f, dimension d, const std::function<double(double, double)>& nominal)
{
    value out;
    for (const spread& x : a.numbers) {
        for (const spread& y : b.numbers) {
            spread s{d, f(x.in_use, y.in_use), f(x.whole, y.whole), std::nullopt};
            if (x.nominal && y.nominal) {
                if (const double n = nominal(*x.nominal, *y.nominal); !std::isnan(n)) {
                    s.nominal = n;
                }
            }
            out.numbers.push_back(s);
        }
    }
    out.shown = a.shown; // callers that make another figure of it say so
    inherit(out, a);
    inherit(out, b);
    return out;
}

dimension dimension_of(const value& v)
{
    return v.numbers.empty() ? dimension{} : v.numbers.front().dim;
}

} // namespace

void inherit(value& to, const value& from)
{
    add_once(to.missing, from.missing);
    add_once(to.assumed, from.assumed);
    to.shown.searched |= from.shown.searched;
    to.shown.margin = std::max(to.shown.margin, from.shown.margin);
}

value magnitude(const value& v)
{
    value out = v;
    for (spread& s : out.numbers) {
        s = magnitude(s);
    }
    return out;
}

value product(const value& a, const value& b, double factor)
{
    return combine(
        a, b,
        [factor](const range& x, const range& y) {
            return range{factor * x.low * y.low, factor * x.high * y.high};
        },
        dimension_of(a) * dimension_of(b), [factor](double x, double y) { return factor * x * y; });
}

value sum(const value& a, const value& b)
{
    return combine(
        a, b,
        [](const range& x, const range& y) {
            return range{x.low + y.low, x.high + y.high};
        },
        dimension_of(a), [](double x, double y) { return x + y; });
}

value hull(const value& a, const value& b)
{
    if (a.numbers.empty() || b.numbers.empty()) {
        value out = a.numbers.empty() ? b : a;
        inherit(out, a.numbers.empty() ? a : b);
        return out;
    }
    return combine(
        a, b, [](const range& x, const range& y) { return onehand::hull(x, y); }, dimension_of(a),
        [](double x, double y) { return x == y ? x : std::nan(""); });
}

value greater(const value& a, const value& b)
{
    return combine(
        a, b,
        [](const range& x, const range& y) {
            return range{std::max(x.low, y.low), std::max(x.high, y.high)};
        },
        dimension_of(a), [](double x, double y) { return std::max(x, y); });
}

std::optional<double> highest(const value& v)
{
    std::optional<double> top;
    for (const spread& s : v.numbers) {
        top = std::max(top.value_or(s.whole.high), s.whole.high);
    }
    return top && std::isfinite(*top) ? top : std::nullopt;
}

std::optional<double> highest_in_use(const value& v)
{
    std::optional<double> top;
    for (const spread& s : v.numbers) {
        top = std::max(top.value_or(s.in_use.high), s.in_use.high);
    }
    return top && std::isfinite(*top) ? top : std::nullopt;
}

} // namespace onehand
