#include "physics/limits.hpp"

#include <algorithm>
#include <cmath>

namespace onehand::physics {

volt rated_voltage(watt p, ohm r, volt limiting)
{
    return std::min(volt::from_value(std::sqrt((p * r).value())), limiting);
}

watt derated(watt full, kelvin air, kelvin full_to, kelvin none_at)
{
    const double share = (none_at - air) / (none_at - full_to);
    return full * std::clamp(share, 0.0, 1.0);
}

ampere body_current(volt open_circuit, ohm body, ohm series, watt power_limit, ampere current_limit)
{
    const ampere by_resistance = open_circuit / (body + series);
    const ampere by_power = ampere::from_value(std::sqrt((power_limit / body).value()));
    return std::min({by_resistance, by_power, current_limit});
}

volt divided(volt u, ohm upper, ohm lower)
{
    // Each resistance once, so that intervals of it stay exact.
    const double share = 1.0 / (1.0 + static_cast<double>(upper / lower));
    return u * share;
}

kelvin heated(kelvin air, watt p, kelvin_per_watt rth)
{
    return air + p * rth;
}

std::optional<pascal> standard_pressure(metre height)
{
    constexpr double sea_level = 101325.0;
    constexpr double lapse = 0.0065;  // K/m
    constexpr double ground = 288.15; // K
    constexpr double power = 5.25588; // g M/(R L)
    const double h = height.value();
    if (!(h >= 0.0 && h <= 20000.0)) {
        return std::nullopt;
    }
    const double pa = h <= 11000.0 ? sea_level * std::pow(1.0 - lapse * h / ground, power) : 22632.0 * std::exp(-(h - 11000.0) / 6341.6);
    return pascal::from_value(pa);
}

} // namespace onehand::physics
