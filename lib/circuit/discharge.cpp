#include "circuit/discharge.hpp"

#include "circuit/modes.hpp"

#include <Eigen/Dense>
#include <algorithm>
#include <cmath>
#include <functional>
#include <limits>

namespace onehand::circuit {

namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();
constexpr double search_margin = 0.03; // added to what is searched
constexpr double proof_room = 0.05;    // a certified bound this near is reported instead

rc_point middle_of(const rc_network& n, bool slow)
{
    rc_point p;
    for (const rc_resistance& r : n.resistances) {
        p.ohms.push_back(slow ? r.ohms.high : r.ohms.low);
    }
    for (const rc_capacitor& c : n.capacitors) {
        p.farads.push_back(c.farads.high);
    }
    return p;
}

using figure = std::function<double(const rc_point&)>;

double between(const box& b, double share)
{
    if (std::isinf(b.high)) {
        return share >= 1.0 ? b.high : b.low;
    }
    return b.low > 0.0 ? b.low * std::pow(b.high / b.low, share) : b.low + share * (b.high - b.low);
}

/// Closes in on an inner best between the neighbouring points of the coarse look.
void refine(rc_point& p, double& slot, const box& b, double& best, const figure& f)
{
    if (std::isinf(b.high) || !(b.low > 0.0)) {
        return;
    }
    double step = std::pow(b.high / b.low, 0.125);
    for (int i = 0; i < 9; ++i) {
        const double here = slot;
        double kept = here;
        for (const double there : {here / step, here * step}) {
            slot = std::clamp(there, b.low, b.high);
            if (const double now = f(p); now > best) {
                best = now;
                kept = slot;
            }
        }
        slot = kept;
        step = std::sqrt(step);
    }
}

/// One value after the other to its best place: both ends and inner points, until nothing grows.
double climb(const rc_network& n, rc_point p, const figure& f)
{
    double best = f(p);
    for (int round = 0; round < 6; ++round) {
        const double before = best;
        const auto try_box = [&](double& slot, const box& b) {
            if (b.point()) {
                return;
            }
            double kept = slot;
            for (const double share : {0.0, 0.25, 0.5, 0.75, 1.0}) {
                slot = between(b, share);
                if (const double now = f(p); now > best) {
                    best = now;
                    kept = slot;
                }
            }
            slot = kept;
            if (slot != b.low && slot != b.high) {
                refine(p, slot, b, best, f);
            }
        };
        for (std::size_t i = 0; i < p.ohms.size(); ++i) {
            try_box(p.ohms[i], n.resistances[i].ohms);
        }
        for (std::size_t i = 0; i < p.farads.size(); ++i) {
            try_box(p.farads[i], n.capacitors[i].farads);
        }
        if (!(best > before * (1.0 + 1e-9))) {
            break;
        }
    }
    return best;
}

double search(const rc_network& n, const figure& f)
{
    double best = 0.0;
    for (const bool slow : {true, false}) {
        best = std::max(best, climb(n, middle_of(n, slow), f));
        if (std::isinf(best)) {
            return best;
        }
    }
    return best;
}

/// Every capacitor across the same two nodes and no node between: one mode, monotone in everything.
bool single_mode(const rc_network& n)
{
    if (n.capacitors.empty()) {
        return true;
    }
    const auto same = [&](const rc_capacitor& c) {
        const rc_capacitor& f = n.capacitors.front();
        return (c.plus == f.plus && c.minus == f.minus) || (c.plus == f.minus && c.minus == f.plus);
    };
    return std::all_of(n.capacitors.begin(), n.capacitors.end(), same);
}

bool across(const rc_network& n, int a, int b)
{
    const rc_capacitor& f = n.capacitors.front();
    return (f.plus == a && f.minus == b) || (f.plus == b && f.minus == a);
}

double stored_at_most(const rc_network& n)
{
    double joule = 0.0;
    for (const rc_capacitor& c : n.capacitors) {
        const double volts = std::max(std::abs(c.volts.low), std::abs(c.volts.high));
        joule += 0.5 * c.farads.high * volts * volts;
    }
    return joule;
}

/// The least capacitance seen between a and b: energy E holds at most sqrt(2 E/C) there.
double least_capacitance(const rc_network& n, int a, int b)
{
    double farads = 0.0; // direct ones count whole; anything else only adds
    for (const rc_capacitor& c : n.capacitors) {
        if ((c.plus == a && c.minus == b) || (c.plus == b && c.minus == a)) {
            farads += c.farads.low;
        }
    }
    return farads;
}

double slowest_rate(const rc_network& n, int a, int b)
{
    const rc_modes m = modes_of(n, middle_of(n, true), a, b);
    double slow = infinity;
    for (const double r : m.rate) {
        slow = std::min(slow, r);
    }
    return slow;
}

/// Energy falls at least as fast as the slowest rate, and that rate is least where every conductance is low and every capacitance high (Rayleigh's
/// quotient).
double certified_time(const rc_network& n, int a, int b, double limit)
{
    const double farads = least_capacitance(n, a, b);
    const double rate = slowest_rate(n, a, b);
    if (!(farads > 0.0) || !(rate > 0.0) || !(limit > 0.0) || std::isinf(rate)) {
        return infinity;
    }
    const double volts = std::sqrt(2.0 * stored_at_most(n) / farads);
    return volts > limit ? std::log(volts / limit) / rate : 0.0;
}

double certified_voltage(const rc_network& n, int a, int b, double seconds)
{
    const double farads = least_capacitance(n, a, b);
    const double rate = slowest_rate(n, a, b);
    if (!(farads > 0.0) || std::isinf(rate) || std::isinf(seconds)) {
        return infinity;
    }
    return std::sqrt(2.0 * stored_at_most(n) / farads) * std::exp(-rate * seconds);
}

rc_figure settle(double found, double bound, bool proved)
{
    rc_figure out;
    if (proved) {
        out.value = found;
    } else if (bound <= found * (1.0 + proof_room)) {
        out.value = std::max(bound, found);
    } else {
        out.value = std::min(found * (1.0 + search_margin), std::max(bound, found));
        out.searched = true;
        out.margin = search_margin;
    }
    return out;
}

rc_figure floating_figure()
{
    rc_figure out;
    out.floating = true;
    return out;
}

bool is_floating(const rc_network& n, int a, int b)
{
    return a != b && modes_of(n, middle_of(n, false), a, b).floating;
}

} // namespace

rc_figure last_time_above(const rc_network& whole, int a, int b, double limit)
{
    const rc_network n = island_of(whole, a, b);
    if (is_floating(n, a, b)) {
        return floating_figure();
    }
    if (n.capacitors.empty() || a == b) {
        return {};
    }
    const auto time_at = [&](const rc_point& p) {
        const rc_modes m = modes_of(n, p, a, b);
        return m.floating ? 0.0 : last_time(m, n.capacitors, limit);
    };
    const bool proved = single_mode(n) && across(n, a, b);
    const double found = proved ? time_at(middle_of(n, true)) : search(n, time_at);
    if (std::isinf(found)) {
        rc_figure out;
        out.never = true;
        out.value = infinity;
        const int keeper = keeper_of(n, middle_of(n, true));
        out.keeper = keeper < 0 ? -1 : n.original[static_cast<std::size_t>(keeper)];
        return out;
    }
    return settle(found, certified_time(n, a, b, limit), proved);
}

rc_figure voltage_after(const rc_network& whole, int a, int b, double seconds)
{
    const rc_network n = island_of(whole, a, b);
    if (is_floating(n, a, b)) {
        return floating_figure();
    }
    if (n.capacitors.empty() || a == b) {
        return {};
    }
    const auto volts_at = [&](const rc_point& p) { return modes_of(n, p, a, b).envelope(n.capacitors, seconds); };
    const bool proved = single_mode(n) && across(n, a, b);
    const double found = proved ? volts_at(middle_of(n, true)) : search(n, volts_at);
    return settle(found, certified_voltage(n, a, b, seconds), proved || found == 0.0);
}

namespace {

/// Integrals of v and v^2 over time for initial voltages `volts`.
std::pair<double, double> integrals(const rc_modes& m, const std::vector<double>& volts, double seconds)
{
    std::vector<double> amplitude(m.rate.size(), 0.0);
    for (std::size_t k = 0; k < m.rate.size(); ++k) {
        for (std::size_t c = 0; c < volts.size(); ++c) {
            amplitude[k] += m.share[k][c] * volts[c];
        }
    }
    const auto span = [&](double rate) { return rate > 0.0 ? -std::expm1(-rate * seconds) / rate : seconds; };
    double first = 0.0;
    double second = 0.0;
    for (std::size_t i = 0; i < amplitude.size(); ++i) {
        first += amplitude[i] == 0.0 ? 0.0 : amplitude[i] * span(m.rate[i]);
        for (std::size_t j = 0; j < amplitude.size(); ++j) {
            const double both = amplitude[i] * amplitude[j];
            second += both == 0.0 ? 0.0 : both * span(m.rate[i] + m.rate[j]);
        }
    }
    return {first, second};
}

} // namespace

rc_pulse delivered(const rc_network& whole, int a, int b, double ohms, double seconds)
{
    rc_network n = island_of(whole, a, b);
    rc_pulse out;
    if (n.capacitors.empty() || a == b) {
        return out;
    }
    n.resistances.push_back({a, b, {ohms, ohms}});
    std::vector<double> highest;
    std::vector<double> lowest;
    for (const rc_capacitor& c : n.capacitors) {
        highest.push_back(c.volts.high);
        lowest.push_back(c.volts.low);
    }
    const auto both = [&](const rc_point& p, bool energy) {
        const rc_modes m = modes_of(n, p, a, b);
        double most = 0.0;
        for (const auto* volts : {&highest, &lowest}) {
            const auto [first, second] = integrals(m, *volts, seconds);
            most = std::max(most, energy ? second / ohms : std::abs(first) / ohms);
        }
        return most;
    };
    const bool proved = single_mode(n) && across(n, a, b);
    const auto charge = [&](const rc_point& p) { return both(p, false); };
    const auto energy = [&](const rc_point& p) { return both(p, true); };
    // Through what is in series the pulse is greatest where the resistances beside it leak least and those in series are lowest: searched from both
    // ends.
    out.charge = settle(proved ? charge(middle_of(n, true)) : search(n, charge), infinity, proved);
    out.energy = settle(proved ? energy(middle_of(n, true)) : search(n, energy), infinity, proved);
    return out;
}

double response(const rc_network& n, int a, int b, double seconds)
{
    rc_point p;
    std::vector<double> volts;
    for (const rc_resistance& r : n.resistances) {
        p.ohms.push_back(r.ohms.low);
    }
    for (const rc_capacitor& c : n.capacitors) {
        p.farads.push_back(c.farads.low);
        volts.push_back(c.volts.low);
    }
    const rc_modes m = modes_of(n, p, a, b);
    double sum = 0.0;
    for (std::size_t k = 0; k < m.rate.size(); ++k) {
        for (std::size_t c = 0; c < volts.size(); ++c) {
            sum += m.share[k][c] * volts[c] * std::exp(-m.rate[k] * seconds);
        }
    }
    return sum;
}

} // namespace onehand::circuit
