#pragma once
// A physical dimension as integer exponents of the SI base units metre, kilogram, second, ampere and kelvin. Run-time twin of what
// Boost.Units checks at compile time (see bridge.hpp). Candela and mole do not occur here and cannot be expressed.
#include <array>
#include <cstdint>
#include <optional>
#include <string>

namespace onehand {

struct dimension {
    std::array<std::int8_t, 5> exponent{}; // m kg s A K

    friend constexpr bool operator==(const dimension&, const dimension&) = default;
};

constexpr dimension operator*(dimension a, const dimension& b)
{
    for (std::size_t i = 0; i < a.exponent.size(); ++i) {
        a.exponent[i] = static_cast<std::int8_t>(a.exponent[i] + b.exponent[i]);
    }
    return a;
}

constexpr dimension operator/(dimension a, const dimension& b)
{
    for (std::size_t i = 0; i < a.exponent.size(); ++i) {
        a.exponent[i] = static_cast<std::int8_t>(a.exponent[i] - b.exponent[i]);
    }
    return a;
}

constexpr dimension power(dimension a, int n)
{
    for (auto& e : a.exponent) {
        e = static_cast<std::int8_t>(e * n);
    }
    return a;
}

/// The square root's dimension; nothing where an exponent is odd.
constexpr std::optional<dimension> root(dimension a)
{
    for (auto& e : a.exponent) {
        if (e % 2 != 0) {
            return std::nullopt;
        }
        e = static_cast<std::int8_t>(e / 2);
    }
    return a;
}

namespace dim {
inline constexpr dimension none{};
inline constexpr dimension length{{1, 0, 0, 0, 0}};
inline constexpr dimension mass{{0, 1, 0, 0, 0}};
inline constexpr dimension time{{0, 0, 1, 0, 0}};
inline constexpr dimension current{{0, 0, 0, 1, 0}};
inline constexpr dimension temperature{{0, 0, 0, 0, 1}};
inline constexpr dimension frequency{{0, 0, -1, 0, 0}};
inline constexpr dimension charge{{0, 0, 1, 1, 0}};
inline constexpr dimension voltage{{2, 1, -3, -1, 0}};
inline constexpr dimension resistance{{2, 1, -3, -2, 0}};
inline constexpr dimension conductance{{-2, -1, 3, 2, 0}};
inline constexpr dimension capacitance{{-2, -1, 4, 2, 0}};
inline constexpr dimension inductance{{2, 1, -2, -2, 0}};
inline constexpr dimension energy{{2, 1, -2, 0, 0}};
inline constexpr dimension power{{2, 1, -3, 0, 0}};
inline constexpr dimension pressure{{-1, 1, -2, 0, 0}};
inline constexpr dimension melting_integral{{0, 0, 1, 2, 0}};         // A2s
inline constexpr dimension thermal_resistance{{-2, -1, 3, 0, 1}};     // K/W
inline constexpr dimension capacitance_per_length{{-3, -1, 4, 2, 0}}; // F/m
} // namespace dim

/// The trade name of a dimension ("a voltage", "a resistance"), or its base units ("m2 kg s-3") where it has none.
std::string name_of(const dimension& d);

/// The dimension of a name as rules/kinds write it: "voltage", "resistance", "ratio", "A2s", "thermal-resistance" ...
std::optional<dimension> dimension_named(const std::string& name);

} // namespace onehand
