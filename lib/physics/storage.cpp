#include "physics/storage.hpp"

#include <cmath>

namespace onehand::physics {

joule stored_energy(farad c, volt u)
{
    return 0.5 * c * u * u;
}

coulomb stored_charge(farad c, volt u)
{
    return c * u;
}

std::optional<volt> pulse_voltage(joule e, coulomb q)
{
    return q.value() == 0.0 ? std::nullopt : std::optional<volt>(e / q);
}

second time_constant(ohm r, farad c)
{
    return r * c;
}

std::optional<second> time_to_voltage(ohm r, farad c, volt start, volt target, volt last)
{
    if (start <= target) {
        return second{};
    }
    if (target <= last) {
        return std::nullopt;
    }
    const double ratio_of_drops = (start - last) / (target - last);
    return time_constant(r, c) * std::log(ratio_of_drops);
}

volt voltage_after(ohm r, farad c, volt start, second t, volt last)
{
    const double taus = t / time_constant(r, c);
    return last + (start - last) * std::exp(-taus);
}

second constant_current_time(farad c, volt start, volt target, ampere i)
{
    return c * (start - target) / i;
}

body_pulse pulse_into_body(farad c, volt u, ohm body, ohm series)
{
    const ohm all = body + series;
    return {u / all, time_constant(all, c), stored_energy(c, u) * (body / all)};
}

farad in_series(farad a, farad b)
{
    return a * b / (a + b);
}

kelvin warming(joule e, double kilograms, double joule_per_kilogram_kelvin)
{
    return kelvin::from_value(e.value() / (kilograms * joule_per_kilogram_kelvin));
}

} // namespace onehand::physics
