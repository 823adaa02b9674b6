#pragma once
// Numbers that are known to lie between two ends, as a representation for Boost.Units: a formula written once runs on plain numbers and on intervals.
// Boost.Interval without directed rounding: ends are right to a few units in the last place, and who reports them widens them by more than that.
#include <boost/numeric/interval.hpp>
#include <boost/units/quantity.hpp>
#include <boost/units/systems/si.hpp>

#include <algorithm>
#include <cmath>

namespace onehand::physics {

namespace interval_parts = boost::numeric::interval_lib;
using interval =
    boost::numeric::interval<double, interval_parts::policies<interval_parts::save_state_nothing<interval_parts::rounded_transc_exact<double>>,
                                                              interval_parts::checking_base<double>>>;

template<class N>
using volts = boost::units::quantity<boost::units::si::electric_potential, N>;
template<class N>
using amperes = boost::units::quantity<boost::units::si::current, N>;
template<class N>
using ohms = boost::units::quantity<boost::units::si::resistance, N>;
template<class N>
using farads = boost::units::quantity<boost::units::si::capacitance, N>;
template<class N>
using henries = boost::units::quantity<boost::units::si::inductance, N>;
template<class N>
using seconds = boost::units::quantity<boost::units::si::time, N>;
template<class N>
using watts = boost::units::quantity<boost::units::si::power, N>;
template<class N>
using joules = boost::units::quantity<boost::units::si::energy, N>;
template<class N>
using coulombs = boost::units::quantity<boost::units::si::electric_charge, N>;

/// Least and greatest a number may be; of a plain number itself.
inline double least(double x)
{
    return x;
}
inline double most(double x)
{
    return x;
}
inline double least(const interval& x)
{
    return x.lower();
}
inline double most(const interval& x)
{
    return x.upper();
}

inline double joined(double a, double)
{
    return a;
}
inline interval joined(const interval& a, const interval& b)
{
    return boost::numeric::hull(a, b);
}

/// Square root of what is not negative: anything below zero counts as zero.
inline double root(double x)
{
    return std::sqrt(std::max(x, 0.0));
}
inline interval root(const interval& x)
{
    return {std::sqrt(std::max(x.lower(), 0.0)), std::sqrt(std::max(x.upper(), 0.0))};
}

inline double logarithm(double x)
{
    return std::log(x);
}
inline interval logarithm(const interval& x)
{
    return {std::log(std::max(x.lower(), 0.0)), std::log(std::max(x.upper(), 0.0))};
}

inline double at_least(double x, double floor)
{
    return std::max(x, floor);
}
inline interval at_least(const interval& x, double floor)
{
    return {std::max(x.lower(), floor), std::max(x.upper(), floor)};
}
inline double greater_of(double a, double b)
{
    return std::max(a, b);
}
inline interval greater_of(const interval& a, const interval& b)
{
    return {std::max(a.lower(), b.lower()), std::max(a.upper(), b.upper())};
}
inline double lesser_of(double a, double b)
{
    return std::min(a, b);
}
inline interval lesser_of(const interval& a, const interval& b)
{
    return {std::min(a.lower(), b.lower()), std::min(a.upper(), b.upper())};
}
inline double squared(double x)
{
    return x * x;
}
inline interval squared(const interval& x)
{
    return boost::numeric::square(x);
}

/// `when_so` where the test is surely not negative, `else_so` where it surely is, what holds both where it may be either.
template<class N, class A, class B>
auto decided(const N& test, A when_so, B else_so) -> decltype(when_so())
{
    if (least(test) >= 0.0) {
        return when_so();
    }
    if (most(test) < 0.0) {
        return else_so();
    }
    const auto a = when_so();
    const auto b = else_so();
    using quantity = decltype(when_so());
    return quantity::from_value(joined(a.value(), b.value()));
}

} // namespace onehand::physics
