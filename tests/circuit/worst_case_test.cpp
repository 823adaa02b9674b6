// Law 3, never optimistic: no draw inside the boxes beats what is reported; where it is proved, corners reach it.
#include "plain_solve.hpp"
#include "random_networks.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>

using namespace onehand::circuit;
using namespace onehand::test;

namespace {

bool within(double x, const extreme& e, double scale)
{
    const double room = 1e-7 * std::max(1e-9, scale);
    return x >= e.low - room && x <= e.high + room;
}

double largest(const extreme& e)
{
    return std::max(std::abs(e.low), std::abs(e.high));
}

void never_beaten(const network& n, const solution& s, std::mt19937& r, int draws)
{
    for (int k = 0; k < draws; ++k) {
        const network p = point_of(n, r, k % 2 == 0);
        const plain_solution x = plain_solve(p);
        for (int a = 0; a < n.nodes; ++a) {
            for (int b = 0; b < n.nodes; ++b) {
                const extreme& e = s.voltage[static_cast<std::size_t>(a)][static_cast<std::size_t>(b)];
                REQUIRE(e.known);
                REQUIRE(within(x.volts(a) - x.volts(b), e, std::max(1.0, largest(e))));
            }
        }
        for (std::size_t i = 0; i < n.branches.size(); ++i) {
            const double volts = x.volts(n.branches[i].from) - x.volts(n.branches[i].to);
            const double amps = x.current(static_cast<Eigen::Index>(i));
            // Both solvers lose digits where two large potentials almost cancel: a share of the largest current the resistance could carry.
            const double most = 330.0 / n.branches[i].options[0].at.low;
            REQUIRE(within(amps, s.current[i], std::max(largest(s.current[i]), 1e-4 * most)));
            REQUIRE(volts * amps <= s.power[i].high * (1.0 + 1e-6) + 1e-12 * most * 330.0);
            REQUIRE(volts * amps >= s.power[i].low * (1.0 - 1e-6) - 1e-12 * most * 330.0);
        }
        for (std::size_t t = 0; t < n.tracks.size(); ++t) {
            const auto row = static_cast<Eigen::Index>(n.branches.size() + 2 * t);
            const double most = std::max(std::abs(x.current(row)), std::abs(x.current(row + 1)));
            REQUIRE(most <= s.track_current[t].high * (1.0 + 1e-6) + 1e-15);
            const double r1 = p.tracks[t].resistance.low * p.tracks[t].position.low;
            const double r2 = p.tracks[t].resistance.low - r1;
            const double watts = x.current(row) * x.current(row) * r1 + x.current(row + 1) * x.current(row + 1) * r2;
            REQUIRE(watts <= s.track_power[t].high * (1.0 + 1e-6) + 1e-15);
        }
    }
}

network three_in_series(box a, box b, box c)
{
    network n;
    n.nodes = 4;
    n.sources.push_back({1, 0, {100.0, 100.0}});
    n.branches = {{1, 2, {{form::resistance, a}}}, {2, 3, {{form::resistance, b}}}, {3, 0, {{form::resistance, c}}}};
    return n;
}

} // namespace

TEST_CASE("random networks without a trimmer: 400 never beaten")
{
    std::mt19937 r(20260101);
    for (int i = 0; i < 400; ++i) {
        const network n = random_network(r, pick(r, 1, 5), pick(r, 0, 3), false);
        never_beaten(n, solve(n), r, 24);
    }
}

TEST_CASE("random networks with a trimmer: 200 never beaten over its whole travel")
{
    std::mt19937 r(20260102);
    for (int i = 0; i < 200; ++i) {
        const network n = random_network(r, pick(r, 1, 3), pick(r, 0, 2), true);
        never_beaten(n, solve(n), r, 40);
    }
}

TEST_CASE("two trimmers in one component: 60 never beaten over both travels" * doctest::test_suite("long"))
{
    std::mt19937 r(20260103);
    int two = 0;
    for (int i = 0; i < 60; ++i) {
        network n = random_network(r, 2, 1, true);
        if (n.tracks.empty()) {
            continue;
        }
        track t = n.tracks[0];
        t.end_1 = pick(r, 0, n.nodes - 1);
        t.end_2 = pick(r, 0, n.nodes - 1);
        t.wiper = 3 + pick(r, 0, 1);
        if (t.end_1 == t.wiper || t.end_2 == t.wiper) {
            continue;
        }
        // No section below the milliohm at which every resistance of a network is held.
        t.position = {1e-5, 1.0 - 1e-5};
        n.tracks[0].position = t.position;
        n.tracks.push_back(t);
        never_beaten(n, solve(n), r, 60);
        ++two;
    }
    CHECK(two > 15);
}

TEST_CASE("where it is proved the extremes are reached at corners")
{
    std::mt19937 r(7);
    for (int i = 0; i < 60; ++i) {
        const network n = random_network(r, pick(r, 1, 3), 1, false);
        const solution s = solve(n);
        std::vector<double> low(static_cast<std::size_t>(n.nodes), 1e300);
        std::vector<double> high(static_cast<std::size_t>(n.nodes), -1e300);
        const std::size_t parameters = n.sources.size() + n.branches.size();
        for (std::size_t mask = 0; mask < (std::size_t{1} << parameters); ++mask) {
            network p = n;
            for (std::size_t k = 0; k < parameters; ++k) {
                box& b = k < n.sources.size() ? p.sources[k].volts : p.branches[k - n.sources.size()].options[0].at;
                b = (mask >> k & 1U) != 0U ? box{b.high, b.high} : box{b.low, b.low};
            }
            const plain_solution x = plain_solve(p);
            for (int a = 0; a < n.nodes; ++a) {
                low[static_cast<std::size_t>(a)] = std::min(low[static_cast<std::size_t>(a)], x.volts(a));
                high[static_cast<std::size_t>(a)] = std::max(high[static_cast<std::size_t>(a)], x.volts(a));
            }
        }
        for (std::size_t a = 1; a < low.size(); ++a) {
            const extreme& e = s.voltage[a][0];
            CHECK_FALSE(e.searched);
            CHECK(std::abs(e.low - low[a]) <= 1e-9 * std::max(1.0, std::abs(low[a])));
            CHECK(std::abs(e.high - high[a]) <= 1e-9 * std::max(1.0, std::abs(high[a])));
        }
    }
}

TEST_CASE("own power peaks at the match inside its tolerance not at an end")
{
    // 100 V behind 1 kohm into 500 ohm .. 2 kohm: the match at 1 kohm takes 2.5 W, each end less.
    network n;
    n.nodes = 3;
    n.sources.push_back({1, 0, {100.0, 100.0}});
    n.branches = {{1, 2, {{form::resistance, {1000.0, 1000.0}}}}, {2, 0, {{form::resistance, {500.0, 2000.0}}}}};
    const solution s = solve(n);
    CHECK(s.power[1].high == doctest::Approx(2.5).epsilon(1e-9).scale(0));
    CHECK(100.0 * 100.0 * 500.0 / (1500.0 * 1500.0) < 2.3);
    CHECK(100.0 * 100.0 * 2000.0 / (3000.0 * 3000.0) < 2.3);
}

TEST_CASE("trimmer dissipation peaks inside its travel")
{
    // A wiper loaded by 1 kohm: the track's power is greatest near neither end.
    network n;
    n.nodes = 3;
    n.sources.push_back({1, 0, {10.0, 10.0}});
    n.branches = {{1, 2, {{form::resistance, {100.0, 100.0}}}}};
    n.nodes = 4;
    n.branches.push_back({3, 0, {{form::resistance, {300.0, 300.0}}}});
    n.tracks.push_back({2, 3, 0, {1000.0, 1000.0}, {0.0, 1.0}});
    const solution s = solve(n);
    double best = 0.0;
    double best_at = 0.0;
    for (int k = 1; k < 4000; ++k) {
        network p = n;
        p.tracks[0].position = {k / 4000.0, k / 4000.0};
        const plain_solution x = plain_solve(p);
        const double watts = x.current(2) * x.current(2) * 1000.0 * k / 4000.0 + x.current(3) * x.current(3) * 1000.0 * (1.0 - k / 4000.0);
        if (watts > best) {
            best = watts;
            best_at = k / 4000.0;
        }
    }
    CHECK(best_at > 0.05);
    CHECK(best_at < 0.95);
    CHECK(s.track_power[0].high >= best);
    CHECK(s.track_power[0].high <= best * 1.03);
    CHECK(s.track_power[0].searched);
}

TEST_CASE("signs that flip: a bridge whose unbalance changes sign")
{
    network n;
    n.nodes = 4;
    n.sources.push_back({1, 0, {10.0, 10.0}});
    const box r{900.0, 1100.0};
    n.branches = {{1, 2, {{form::resistance, r}}}, {2, 0, {{form::resistance, r}}}, {1, 3, {{form::resistance, r}}}, {3, 0, {{form::resistance, r}}}};
    const solution s = solve(n);
    // 10 V (1100/2000 - 900/2000) either way.
    CHECK(s.voltage[2][3].high == doctest::Approx(1.0).epsilon(1e-9).scale(0));
    CHECK(s.voltage[2][3].low == doctest::Approx(-1.0).epsilon(1e-9).scale(0));
    // A detector across it: its power comes down to nothing at balance.
    n.branches.push_back({2, 3, {{form::resistance, {5000.0, 5000.0}}}});
    CHECK(solve(n).power[4].low == 0.0);
}

TEST_CASE("more parameters than are enumerated: searched and widened and still never beaten")
{
    std::mt19937 r(99);
    network n;
    n.nodes = 10;
    n.sources.push_back({1, 0, {300.0, 330.0}});
    for (int i = 1; i < 9; ++i) {
        n.branches.push_back({i, i + 1, {{form::resistance, about(r, 1e5, 0.2)}}});
        n.branches.push_back({i + 1, 0, {{form::resistance, about(r, 1e6, 0.2)}}});
    }
    const solution s = solve(n);
    CHECK(s.voltage[9][0].searched);
    CHECK(s.voltage[9][0].margin > 0.0);
    never_beaten(n, s, r, 300);
}

TEST_CASE("an unknown resistance leaves all that both ends allow")
{
    const solution s = solve(three_in_series({1e3, 1e3}, {1e3, 1e3}, {0.0, std::numeric_limits<double>::infinity()}));
    CHECK(s.voltage[3][0].low == doctest::Approx(0.0).scale(1).epsilon(1e-4));
    CHECK(s.voltage[3][0].high == doctest::Approx(100.0).epsilon(1e-4).scale(0));
}

TEST_CASE("a node that nothing holds is told as floating and has no number")
{
    network n;
    n.nodes = 4;
    n.sources.push_back({1, 0, {100.0, 100.0}});
    n.branches = {{1, 2, {{form::resistance, {1e3, 1e3}}}}, {2, 3, {{form::open, {}}}}};
    const solution s = solve(n);
    CHECK(s.floating[3]);
    CHECK_FALSE(s.floating[2]);
    CHECK_FALSE(s.voltage[3][0].known);
}

TEST_CASE("a tube is dark or holds its maintaining voltage and never feeds back")
{
    network n;
    n.nodes = 3;
    n.sources.push_back({1, 0, {100.0, 190.0}});
    n.branches = {{1, 2, {{form::resistance, {22e3, 22e3}}}}, {2, 0, {{form::open, {}}, {form::clamp, {130.0, 150.0}}}}};
    const solution s = solve(n);
    CHECK(std::abs(s.current[0].low) < 1e-15); // dark, also where the rail is below 130 V
    CHECK(s.current[0].high == doctest::Approx(60.0 / 22e3).epsilon(1e-6).scale(0));
}

TEST_CASE("set point: divider and trimmer and threshold at their worst against every corner of the closed form")
{
    // V = Vth (R1 + P + R2)/(R2 + (1-p) P), wiper as sense.
    network n;
    n.nodes = 5; // 1 HT, 2 A, 3 B, 4 FB
    n.branches = {{1, 2, {{form::resistance, {673.2e3, 686.8e3}}}}, {3, 0, {{form::resistance, {1485.0, 1515.0}}}}};
    n.tracks.push_back({2, 4, 3, {1760.0, 2640.0}, {0.0, 1.0}});
    n.held = held_output{1, 0, 4, 0, {0.5, 0.7}, {}};
    const solution s = solve(n);
    REQUIRE_FALSE(s.feedback_lost);
    double low = 1e9;
    double high = 0.0;
    for (const double r1 : {673.2e3, 686.8e3}) {
        for (const double r2 : {1485.0, 1515.0}) {
            for (const double p : {1760.0, 2640.0}) {
                for (const double at : {0.0, 1.0}) {
                    for (const double vth : {0.5, 0.7}) {
                        const double v = vth * (r1 + p + r2) / (r2 + (1.0 - at) * p);
                        low = std::min(low, v);
                        high = std::max(high, v);
                    }
                }
            }
        }
    }
    CHECK(s.output.low == doctest::Approx(low).epsilon(1e-9).scale(0));
    CHECK(s.output.high == doctest::Approx(high).epsilon(1e-9).scale(0));
    std::mt19937 r(3);
    for (int k = 0; k < 400; ++k) {
        const plain_solution x = plain_solve(point_of(n, r, k % 3 == 0));
        CHECK(within(x.held, s.output, 300.0));
        for (int a = 0; a < n.nodes; ++a) {
            CHECK(within(x.volts(a), s.voltage[static_cast<std::size_t>(a)][0], 300.0));
        }
    }
}

TEST_CASE("published: feedback divider of 1.43 Mohm and 10 kohm at 1.25 V with bias")
{
    // formulas.md section 5, derived reference: 180.00 V nominal, 165.99 V to 194.65 V at the corners (not published elsewhere).
    network n;
    n.nodes = 3;
    n.branches = {{1, 2, {{form::resistance, {1.43e6 * 0.95, 1.43e6 * 1.05}}}}, {2, 0, {{form::resistance, {9900.0, 10100.0}}}}};
    n.held = held_output{1, 0, 2, 0, {1.225, 1.275}, {}};
    const solution s = solve(n);
    CHECK(std::round(s.output.low * 100.0) / 100.0 == 165.99);
    CHECK(std::round(s.output.high * 100.0) / 100.0 == 194.65);
}

TEST_CASE("a negative rail is held the same way")
{
    network n;
    n.nodes = 3; // 1 rail below the return, 2 sense
    n.branches = {{1, 2, {{form::resistance, {99e3, 101e3}}}}, {2, 0, {{form::resistance, {990.0, 1010.0}}}}};
    n.held = held_output{0, 1, 0, 2, {1.0, 1.0}, {}};
    const solution s = solve(n);
    CHECK(s.output.low == doctest::Approx((99e3 + 1010.0) / 1010.0).epsilon(1e-9).scale(0));
    CHECK(s.voltage[1][0].high == doctest::Approx(-s.output.low).epsilon(1e-9).scale(0));
}

TEST_CASE("feedback that one end of the trimmer takes away is told as lost")
{
    network n;
    n.nodes = 4;
    n.branches = {{1, 2, {{form::resistance, {1e5, 1e5}}}}};
    n.tracks.push_back({2, 3, 0, {1e4, 1e4}, {0.0, 1.0}}); // at the far end the wiper reads the return
    n.held = held_output{1, 0, 3, 0, {1.0, 1.0}, {}};
    CHECK(solve(n).feedback_lost);
    n.tracks[0].position = {0.0, 0.9};
    CHECK_FALSE(solve(n).feedback_lost);
}

TEST_CASE("published: loaded dividers with bleeder")
{
    // Marine Institute electrotechnology assignment 5 question 2: 386 V, 1.3 kohm in series, load 32 mA at 210 V; bleeder 2031.25 ohm
    // takes 21.711 W.
    network n;
    n.nodes = 3;
    n.sources.push_back({1, 0, {386.0, 386.0}});
    n.branches = {
        {1, 2, {{form::resistance, {1300.0, 1300.0}}}}, {2, 0, {{form::resistance, {2031.25, 2031.25}}}}, {2, 0, {{form::current, {0.032, 0.032}}}}};
    const solution s = solve(n);
    CHECK(s.voltage[2][0].high == doctest::Approx(210.0).epsilon(1e-4).scale(0));
    CHECK(std::round(s.power[1].high * 10.0) / 10.0 == 21.7);
}
