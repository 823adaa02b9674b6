#include "physics/stage.hpp"

namespace onehand::physics {

namespace {

constexpr double least_reset = 1e-3; // volt

double shrunk(double x)
{
    return x < 1e-9 ? 1.0 - 0.5 * x : -std::expm1(-x) / x;
}

/// x ((1 - e^-Rx)/(Rx))^2: what losses leave of on/L in a packet's power. Rising in x up to Rx = 1.2564, falling in R.
double power_slope(double x, double r)
{
    return x * shrunk(r * x) * shrunk(r * x);
}
interval power_slope(const interval& x, const interval& r)
{
    constexpr double rising_to = 1.25;
    const double least_x = std::max(x.lower(), 0.0);
    if (!std::isfinite(r.upper()) || !std::isfinite(x.upper())) {
        return {0.0, x.upper()};
    }
    const double low = std::min(power_slope(least_x, r.upper()), power_slope(x.upper(), r.upper()));
    const double high = r.lower() * x.upper() < rising_to ? power_slope(x.upper(), r.lower()) : x.upper();
    return {low, high};
}

/// (1 - e^-Rx)/R: rising in x, falling in R.
double current_slope(double x, double r)
{
    return x * shrunk(r * x);
}
interval current_slope(const interval& x, const interval& r)
{
    const double low = std::isfinite(r.upper()) ? current_slope(std::max(x.lower(), 0.0), r.upper()) : 0.0;
    return {low, std::isfinite(x.upper()) ? current_slope(x.upper(), r.lower()) : x.upper()};
}

template<class N>
N half()
{
    return N(0.5);
}

/// out + drop of a boost stage, in which the input cancels.
template<class N>
volts<N> reset_and_input(const stage<N>& s)
{
    return s.is == shape::boost ? s.out + s.drop : reset_voltage(s) + s.in;
}

/// Ripple of the coil current in continuous mode: what the resistances leave of the input, over the on-time.
template<class N>
amperes<N> swing(const stage<N>& s, const N& off)
{
    const amperes<N> mean = s.load * s.turns / off;
    const volts<N> across = s.in - mean * (s.coil + s.on_resistance);
    return volts<N>::from_value(at_least(across.value(), 0.0)) * (s.period * (N(1.0) - off)) / s.inductance;
}

template<class N>
N on_share(const stage<N>& s)
{
    return s.limited ? (full_flux(s) / s.in / s.period).value() : s.duty;
}

} // namespace

template<class N>
volts<N> reset_voltage(const stage<N>& s)
{
    const volts<N> v = s.is == shape::boost ? s.out + s.drop - s.in : (s.out + s.drop) / s.turns;
    return volts<N>::from_value(at_least(v.value(), least_reset));
}

template<class N>
amperes<N> full_peak(const stage<N>& s)
{
    return s.limited ? s.limit + s.in * s.delay / s.inductance : s.in * s.on / s.inductance;
}

template<class N>
amperes<N> full_peak_lossy(const stage<N>& s)
{
    if (s.limited) {
        return s.limit;
    }
    return amperes<N>::from_value(s.in.value() * current_slope((s.on / s.inductance).value(), (s.coil + s.on_resistance).value()));
}

template<class N>
webers<N> full_flux(const stage<N>& s)
{
    return s.limited ? s.limit * s.inductance + s.in * s.delay : webers<N>(s.in * s.on);
}

template<class N>
seconds<N> emptying_time(const stage<N>& s)
{
    if (s.limited) {
        return full_flux(s) / reset_voltage(s);
    }
    return s.on * (s.in / reset_voltage(s)).value();
}

template<class N>
joules<N> full_energy(const stage<N>& s)
{
    if (s.limited) {
        return full_flux(s) * full_peak(s) * half<N>();
    }
    const webers<N> flux = s.in * s.on;
    return flux * flux / s.inductance * half<N>();
}

template<class N>
watts<N> full_power(const stage<N>& s)
{
    if (s.limited) {
        return full_energy(s) / s.period;
    }
    return s.in * s.in * s.on * s.duty / s.inductance * half<N>();
}

template<class N>
N slack(const stage<N>& s)
{
    if (s.limited) {
        const seconds<N> on = full_flux(s) / s.in;
        return N(1.0) - (on / s.period).value() - (emptying_time(s) / s.period).value();
    }
    return N(1.0) - s.duty * (N(1.0) + (s.in / reset_voltage(s)).value());
}

template<class N>
N continuity(const stage<N>& s)
{
    const volts<N> reset = reset_voltage(s);
    const N off = N(1.0) / (N(1.0) + (reset / s.in).value());
    const N k = (s.inductance * s.load * N(2.0) / (s.out * s.period)).value() * squared(s.turns);
    const N critical = s.is == shape::boost ? (N(1.0) - off) * squared(off) : squared(off);
    return k - critical;
}

template<class N>
N off_share(const stage<N>& s)
{
    const volts<N> a = s.in + reset_voltage(s);
    const ohms<N> along = s.is == shape::boost ? s.on_resistance : (s.coil + s.on_resistance) * s.turns;
    const ohms<N> both = (s.coil + s.on_resistance) * s.turns;
    const volts<N> b = s.in + s.load * along;
    const N beneath = (b * b - N(4.0) * (a * (s.load * both))).value();
    return ((b + volts<N>::from_value(root(beneath))) / (a * N(2.0))).value();
}

template<class N>
amperes<N> regulated_average(const stage<N>& s)
{
    return decided(
        continuity(s), [&] { return s.load * s.turns / off_share(s); },
        [&] {
            // Triangles: each empties before the next begins.
            const amperes<N> i = regulated_peak(s);
            const seconds<N> rising = s.inductance * i / s.in;
            const seconds<N> falling = s.inductance * i / reset_voltage(s);
            return i * ((rising + falling) / s.period).value() * half<N>();
        });
}

template<class N>
amperes<N> regulated_ripple(const stage<N>& s)
{
    return decided(
        continuity(s), [&] { return swing(s, off_share(s)); }, [&] { return regulated_peak(s); });
}

template<class N>
amperes<N> regulated_peak(const stage<N>& s)
{
    return decided(
        continuity(s),
        [&] {
            const N off = off_share(s);
            return s.load * s.turns / off + swing(s, off) * half<N>();
        },
        [&] {
            const N square = (s.load * s.turns * N(2.0) * reset_voltage(s) * s.period / s.inductance).value();
            return amperes<N>::from_value(root(square));
        });
}

template<class N>
coulombs<N> packet(const stage<N>& s)
{
    return full_energy(s) / (reset_voltage(s) * s.turns);
}

template<class N>
amperes<N> full_current(const stage<N>& s)
{
    return full_power(s) / (reset_voltage(s) * s.turns);
}

namespace {

/// Power of full cycles at the least: series resistances counted, a comparator's delay not.
template<class N>
watts<N> least_power(const stage<N>& s)
{
    if (s.limited) {
        return s.limit * s.limit * s.inductance / s.period * half<N>();
    }
    const N slope = power_slope((s.on / s.inductance).value(), (s.coil + s.on_resistance).value());
    return watts<N>::from_value(squared(s.in.value()) * slope * s.duty * half<N>());
}

/// Load current in continuous mode at the whole duty.
template<class N>
amperes<N> most_continuous(const stage<N>& s)
{
    if (s.limited) {
        const N share = N(1.0) / (N(1.0) + (reset_voltage(s) / s.in).value());
        const amperes<N> ripple = s.in * (s.period * (N(1.0) - share)) / s.inductance;
        return amperes<N>::from_value(at_least((s.limit - ripple * half<N>()).value(), 0.0)) * share / s.turns;
    }
    const N off = N(1.0) - s.duty;
    const ohms<N> r = s.is == shape::boost ? s.coil + s.on_resistance * s.duty : (s.coil + s.on_resistance) * s.turns * s.duty;
    const volts<N> left = s.is == shape::boost ? s.in - (s.out + s.drop) * off : s.in * s.duty - reset_voltage(s) * off;
    return volts<N>::from_value(at_least(left.value(), 0.0)) * off / r;
}

} // namespace

template<class N>
amperes<N> most_load(const stage<N>& s)
{
    return decided(
        slack(s), [&] { return amperes<N>(least_power(s) / (reset_voltage(s) * s.turns)); }, [&] { return most_continuous(s); });
}

template<class N>
watts<N> most_power(const stage<N>& s)
{
    // out over turns times the resetting voltage, with the output once.
    const volts<N> beside = s.is == shape::boost ? s.drop - s.in : s.drop;
    const N share = at_least(N(1.0) + (beside / s.out).value(), 1e-6);
    return decided(
        slack(s), [&] { return watts<N>(least_power(s) / share); }, [&] { return watts<N>(most_continuous(s) * s.out); });
}

template<class N>
effective<N> effective_full(const stage<N>& s)
{
    const amperes<N> i = full_peak(s);
    const N on = on_share(s);
    const N off = on * (s.in / reset_voltage(s)).value();
    return {i * root((on + off) / N(3.0)), i * root(on / N(3.0)), i / s.turns * root(off / N(3.0))};
}

template<class N>
effective<N> effective_paced(const stage<N>& s)
{
    // On-time over inductance: the peak over the input.
    const N slope = s.limited ? (s.limit / s.in).value() + (s.delay / s.inductance).value() : (s.on / s.inductance).value();
    const N scale = s.load.value() * slope * N(2.0 / 3.0);
    const auto of = [&](const volts<N>& v, const N& turns) { return amperes<N>::from_value(root(scale * v.value() * turns)); };
    return {of(reset_and_input(s), s.turns), of(reset_voltage(s), s.turns), of(s.in, N(1.0) / s.turns)};
}

template<class N>
amperes<N> average_paced(const stage<N>& s)
{
    return s.load * (s.turns * (N(1.0) + (reset_voltage(s) / s.in).value()));
}

template<class N>
effective<N> effective_regulated(const stage<N>& s)
{
    const auto triangles = [&] {
        const amperes<N> i = regulated_peak(s);
        const N on = (s.inductance * i / s.in / s.period).value();
        const N off = on * (s.in / reset_voltage(s)).value();
        return effective<N>{i * root((on + off) / N(3.0)), i * root(on / N(3.0)), i / s.turns * root(off / N(3.0))};
    };
    const auto trapezes = [&] {
        const N off = off_share(s);
        const amperes<N> mean = s.load * s.turns / off;
        const amperes<N> all = amperes<N>::from_value(root(squared(mean.value()) + squared(swing(s, off).value()) / N(12.0)));
        return effective<N>{all, all * root(N(1.0) - off), all / s.turns * root(off)};
    };
    const N test = continuity(s);
    if (least(test) >= 0.0) {
        return trapezes();
    }
    const effective<N> a = triangles();
    if (most(test) < 0.0) {
        return a;
    }
    const effective<N> b = trapezes();
    const auto both = [](const amperes<N>& x, const amperes<N>& y) { return amperes<N>::from_value(joined(x.value(), y.value())); };
    return {both(a.coil, b.coil), both(a.power_switch, b.power_switch), both(a.rectifier, b.rectifier)};
}

template<class N>
volts<N> output_ripple(const stage<N>& s, const amperes<N>& peak, const farads<N>& c)
{
    return decided(
        continuity(s), [&] { return s.load * (s.period * (N(1.0) - off_share(s))) / c; },
        [&] {
            const amperes<N> above = amperes<N>::from_value(at_least((peak / s.turns - s.load).value(), 0.0));
            return above * above * s.inductance * s.turns / (reset_voltage(s) * c) * half<N>();
        });
}

template<class N>
volts<N> open_loop(const stage<N>& s, const ohms<N>& load)
{
    const N square = (full_power(s) * load).value();
    if (s.is == shape::flyback) {
        const volts<N> balance = volts<N>::from_value(root(square));
        const volts<N> continuous = s.in * (s.turns * s.duty / (N(1.0) - s.duty));
        return s.limited ? balance : volts<N>::from_value(greater_of(balance.value(), continuous.value()));
    }
    const volts<N> balance = s.in * half<N>() + volts<N>::from_value(root(squared(s.in.value()) * N(0.25) + square));
    const volts<N> continuous = s.in / (N(1.0) - s.duty);
    return s.limited ? balance : volts<N>::from_value(greater_of(balance.value(), continuous.value()));
}

template<class N>
volts<N> unloaded_peak(const volts<N>& in, const amperes<N>& peak, const henries<N>& l, const farads<N>& c)
{
    return in + volts<N>::from_value(root(squared(in.value()) + squared(peak.value()) * (l / c).value()));
}

template<class N>
volts<N> leakage_spike(const amperes<N>& peak, const henries<N>& leakage, const farads<N>& c)
{
    return peak * ohms<N>::from_value(root((leakage / c).value()));
}

template<class N>
watts<N> leakage_power(const stage<N>& s, const henries<N>& leakage)
{
    return full_power(s) * (leakage / s.inductance).value();
}

template<class N>
volts<N> clamp_voltage(const volts<N>& reflected, const watts<N>& leakage_power, const ohms<N>& r)
{
    const N power = (leakage_power * r).value();
    return (reflected + volts<N>::from_value(root(squared(reflected.value()) + N(4.0) * power))) * half<N>();
}

template<class N>
watts<N> clamp_power(const volts<N>& reflected, const watts<N>& leakage_power, const volts<N>& clamp)
{
    // Vc/(Vc - VR) with each voltage once.
    return leakage_power / (N(1.0) - (reflected / clamp).value());
}

template<class N>
joules<N> avalanche_energy(const joules<N>& held, const volts<N>& breakdown, const volts<N>& in)
{
    return held / (N(1.0) - (in / breakdown).value());
}

#define ONEHAND_STAGE_FORMS(N)                                                                                                                       \
    template volts<N> reset_voltage(const stage<N>&);                                                                                                \
    template amperes<N> full_peak(const stage<N>&);                                                                                                  \
    template amperes<N> full_peak_lossy(const stage<N>&);                                                                                            \
    template webers<N> full_flux(const stage<N>&);                                                                                                   \
    template seconds<N> emptying_time(const stage<N>&);                                                                                              \
    template joules<N> full_energy(const stage<N>&);                                                                                                 \
    template watts<N> full_power(const stage<N>&);                                                                                                   \
    template N slack(const stage<N>&);                                                                                                               \
    template N continuity(const stage<N>&);                                                                                                          \
    template N off_share(const stage<N>&);                                                                                                           \
    template amperes<N> regulated_average(const stage<N>&);                                                                                          \
    template amperes<N> regulated_peak(const stage<N>&);                                                                                             \
    template amperes<N> regulated_ripple(const stage<N>&);                                                                                           \
    template coulombs<N> packet(const stage<N>&);                                                                                                    \
    template amperes<N> full_current(const stage<N>&);                                                                                               \
    template watts<N> most_power(const stage<N>&);                                                                                                   \
    template amperes<N> most_load(const stage<N>&);                                                                                                  \
    template effective<N> effective_full(const stage<N>&);                                                                                           \
    template effective<N> effective_paced(const stage<N>&);                                                                                          \
    template amperes<N> average_paced(const stage<N>&);                                                                                              \
    template effective<N> effective_regulated(const stage<N>&);                                                                                      \
    template volts<N> output_ripple(const stage<N>&, const amperes<N>&, const farads<N>&);                                                           \
    template volts<N> open_loop(const stage<N>&, const ohms<N>&);                                                                                    \
    template volts<N> unloaded_peak(const volts<N>&, const amperes<N>&, const henries<N>&, const farads<N>&);                                        \
    template volts<N> leakage_spike(const amperes<N>&, const henries<N>&, const farads<N>&);                                                         \
    template watts<N> leakage_power(const stage<N>&, const henries<N>&);                                                                             \
    template volts<N> clamp_voltage(const volts<N>&, const watts<N>&, const ohms<N>&);                                                               \
    template watts<N> clamp_power(const volts<N>&, const watts<N>&, const volts<N>&);                                                                \
    template joules<N> avalanche_energy(const joules<N>&, const volts<N>&, const volts<N>&);

ONEHAND_STAGE_FORMS(double)
ONEHAND_STAGE_FORMS(interval)

} // namespace onehand::physics
