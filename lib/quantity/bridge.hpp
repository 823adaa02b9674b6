#pragma once
// The one checked conversion between run-time quantities and Boost.Units types. A typed quantity of another base than metre, kilogram, second, ampere
// and kelvin (an angle, say) does not compile; a run-time quantity of the wrong dimension gives nothing. Not for public headers.
#include "quantity/quantity.hpp"

#include <boost/units/quantity.hpp>
#include <boost/units/systems/si.hpp>
#include <optional>

namespace onehand {

namespace bu = boost::units;

using volt = bu::quantity<bu::si::electric_potential>;
using ampere = bu::quantity<bu::si::current>;
using ohm = bu::quantity<bu::si::resistance>;
using farad = bu::quantity<bu::si::capacitance>;
using henry = bu::quantity<bu::si::inductance>;
using second = bu::quantity<bu::si::time>;
using hertz = bu::quantity<bu::si::frequency>;
using watt = bu::quantity<bu::si::power>;
using joule = bu::quantity<bu::si::energy>;
using coulomb = bu::quantity<bu::si::electric_charge>;
using metre = bu::quantity<bu::si::length>;
using kelvin = bu::quantity<bu::si::temperature>;
using pascal = bu::quantity<bu::si::pressure>;
using kelvin_per_watt = bu::quantity<bu::divide_typeof_helper<bu::si::temperature, bu::si::power>::type>;
using ratio = bu::quantity<bu::si::dimensionless>;

template<class T>
struct base_slot; // undefined: an unsupported base is a compile error
template<>
struct base_slot<bu::length_base_dimension> {
    static constexpr std::size_t at = 0;
};
template<>
struct base_slot<bu::mass_base_dimension> {
    static constexpr std::size_t at = 1;
};
template<>
struct base_slot<bu::time_base_dimension> {
    static constexpr std::size_t at = 2;
};
template<>
struct base_slot<bu::current_base_dimension> {
    static constexpr std::size_t at = 3;
};
template<>
struct base_slot<bu::temperature_base_dimension> {
    static constexpr std::size_t at = 4;
};

template<class L>
struct exponents_of;
template<>
struct exponents_of<bu::dimensionless_type> {
    static constexpr dimension value{};
};
template<class Tag, class Power, class Next>
struct exponents_of<bu::list<bu::dim<Tag, Power>, Next>> {
    static_assert(Power::Denominator == 1, "a broken power has no run-time dimension");
    static constexpr dimension value = [] {
        dimension d = exponents_of<Next>::value;
        d.exponent[base_slot<Tag>::at] = static_cast<std::int8_t>(Power::Numerator);
        return d;
    }();
};

/// The run-time dimension of a typed quantity.
template<class Q>
inline constexpr dimension dimension_of = exponents_of<typename Q::unit_type::dimension_type>::value;

/// The typed quantity; nothing if the dimension is another.
template<class Q>
std::optional<Q> to(const quantity& q)
{
    return q.dim == dimension_of<Q> ? std::optional(Q::from_value(q.si)) : std::nullopt;
}

template<class Q>
quantity from(const Q& q)
{
    return {q.value(), dimension_of<Q>};
}

} // namespace onehand
