#include "physics/surge.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace onehand::physics {

ampere coil_inrush(volt u, farad c, henry l)
{
    return ampere::from_value(u.value() * std::sqrt(c.value() / l.value()));
}

melting_integral coil_inrush_integral(volt u, farad c, henry l)
{
    const ampere peak = coil_inrush(u, c, l);
    const second length = second::from_value(std::numbers::pi * std::sqrt(l.value() * c.value()));
    return 0.5 * peak * peak * length;
}

melting_integral resistive_inrush_integral(volt u, farad c, ohm r)
{
    return 0.5 * (u / r) * (c * u);
}

melting_integral together(melting_integral a, melting_integral b)
{
    const double sum = std::sqrt(a.value()) + std::sqrt(b.value());
    return melting_integral::from_value(sum * sum);
}

melting_integral needed_melting(melting_integral pulse, double share)
{
    return pulse / share;
}

namespace {

/// The averaged stage: reset^2 grows by 2 P/(turns^2 C) each second, whichever the shape.
struct averaged {
    double reset;  // at the start, volt
    double growth; // volt^2/s
    double turns;
    double input;

    double rail(double seconds) const { return turns * std::sqrt(reset * reset + growth * seconds) + input; }
};

averaged average_of(const pumped_rail& p)
{
    const double reset = std::max(0.0, (p.from.value() - p.input.value()) / p.turns);
    const double growth = 2.0 * p.stored.value() / (p.turns * p.turns * p.rail.value());
    return {reset, growth, p.turns, p.input.value()};
}

double time_until(const averaged& a, double volts)
{
    const double reset = (volts - a.input) / a.turns;
    return std::max(0.0, (reset * reset - a.reset * a.reset) / a.growth);
}

/// When the filter reaches the set point: chords of the rail feed it. Taken as empty forty time constants before the rail gets there.
double filter_time(const averaged& a, double set_point, double tau)
{
    constexpr double settled = 40.0;
    constexpr int steps = 200; // in one time constant, or in the climb where that is shorter
    const double reach = time_until(a, set_point);
    const double step = std::min(tau, std::max(reach, tau * 1e-3)) / steps;
    const double share = step / tau;
    const double kept = std::exp(-share);
    double t = std::max(0.0, reach - settled * tau);
    double seen = 0.0;
    double before = a.rail(t);
    while (seen < set_point) {
        t += step;
        const double after = a.rail(t);
        seen = seen * kept + after * (1.0 - kept) - (after - before) * ((1.0 - kept) / share - kept);
        before = after;
    }
    return t;
}

} // namespace

volt carried_to(const pumped_rail& p)
{
    const averaged a = average_of(p);
    const double reach = time_until(a, p.set_point.value());
    const double filtered = p.filter.value() > 0.0 ? std::max(reach, filter_time(a, p.set_point.value(), p.filter.value())) : reach;
    const double end = a.rail(filtered + p.lag.value());
    const double reset = std::max((end - a.input) / a.turns, 1e-3);
    return volt::from_value(end + p.packet.value() / (p.turns * reset) / p.rail.value());
}

second pumping_time(const pumped_rail& p, volt to)
{
    return second::from_value(time_until(average_of(p), to.value()));
}

} // namespace onehand::physics
