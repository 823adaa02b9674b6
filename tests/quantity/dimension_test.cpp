// Dimensions at run time and at compile time are one thing; wrong ones do not compile.
#include "quantity/bridge.hpp"
#include "quantity/dimension.hpp"

#include <doctest/doctest.h>

#include <concepts>

using namespace onehand;

namespace {

template<class A, class B>
concept addable = requires(A a, B b)
{
    a + b;
};
template<class A, class B>
concept comparable = requires(A a, B b)
{
    a < b;
};

} // namespace

static_assert(addable<volt, volt> && !addable<volt, ohm>);
static_assert(!addable<volt, double> && !addable<farad, henry>);
static_assert(comparable<second, second> && !comparable<volt, second>);
static_assert(!std::convertible_to<double, volt> && !std::convertible_to<volt, double>);
static_assert(std::same_as<decltype(ohm() * farad()), second>);
static_assert(dimension_of<volt> == dim::voltage);
static_assert(dimension_of<ohm> == dim::resistance);
static_assert(dimension_of<farad> == dim::capacitance);
static_assert(dimension_of<henry> == dim::inductance);
static_assert(dimension_of<joule> == dim::energy);
static_assert(dimension_of<coulomb> == dim::charge);
static_assert(dimension_of<kelvin_per_watt> == dim::thermal_resistance);
static_assert(dimension_of<ratio> == dim::none);
static_assert(dim::resistance * dim::capacitance == dim::time);
static_assert(dim::voltage / dim::current == dim::resistance);
static_assert(power(dim::voltage, 2) / dim::resistance == dim::power);
static_assert(*root(dim::power * dim::resistance) == dim::voltage);
static_assert(!root(dim::length).has_value());

TEST_CASE("the bridge refuses another dimension")
{
    CHECK(to<volt>({5.0, dim::voltage})->value() == 5.0);
    CHECK_FALSE(to<volt>({5.0, dim::current}).has_value());
    CHECK(from(ohm::from_value(47.0)) == quantity{47.0, dim::resistance});
}

TEST_CASE("every name of a dimension gives it back")
{
    for (const char* name : {"voltage", "current", "resistance", "capacitance", "inductance", "time", "frequency", "power", "energy", "charge",
                             "length", "temperature", "thermal-resistance", "melting-integral", "capacitance-per-length", "ratio"}) {
        CHECK(dimension_named(name).has_value());
    }
    CHECK_FALSE(dimension_named("voltag").has_value());
    CHECK(name_of(dim::voltage) == "a voltage");
    CHECK(name_of(dim::voltage * dim::voltage) == "a quantity in m4 kg2 s-6 A-2");
}
