// IEC 60664-1 creepage (table F.5 of 2020, F.4 of 2007) cell by cell. The figures below were typed from the reproductions that agree: a terminal
// maker's table (10 V to 2000 V), a national welding standard (630 V to 10 kV) and copied-out tables of all rows.
#include "published/embedded.hpp"
#include "published/library.hpp"

#include <doctest/doctest.h>

#include <cmath>

using namespace onehand;

namespace {

constexpr double none = -1.0;
struct row {
    double volts;
    double mm[9]; // printed wiring PD1, PD2; PD1; PD2 I, II, III; PD3 I, II, III
};
const row rows[] = {
    {10, {0.025, 0.040, 0.080, 0.400, 0.400, 0.400, 1.000, 1.000, 1.000}},
    {12.5, {0.025, 0.040, 0.090, 0.420, 0.420, 0.420, 1.050, 1.050, 1.050}},
    {16, {0.025, 0.040, 0.100, 0.450, 0.450, 0.450, 1.100, 1.100, 1.100}},
    {20, {0.025, 0.040, 0.110, 0.480, 0.480, 0.480, 1.200, 1.200, 1.200}},
    {25, {0.025, 0.040, 0.125, 0.500, 0.500, 0.500, 1.250, 1.250, 1.250}},
    {32, {0.025, 0.040, 0.14, 0.53, 0.53, 0.53, 1.30, 1.30, 1.30}},
    {40, {0.025, 0.040, 0.16, 0.56, 0.80, 1.10, 1.40, 1.60, 1.80}},
    {50, {0.025, 0.040, 0.18, 0.60, 0.85, 1.20, 1.50, 1.70, 1.90}},
    {63, {0.040, 0.063, 0.20, 0.63, 0.90, 1.25, 1.60, 1.80, 2.00}},
    {80, {0.063, 0.100, 0.22, 0.67, 0.95, 1.30, 1.70, 1.90, 2.10}},
    {100, {0.100, 0.160, 0.25, 0.71, 1.00, 1.40, 1.80, 2.00, 2.20}},
    {125, {0.160, 0.250, 0.28, 0.75, 1.05, 1.50, 1.90, 2.10, 2.40}},
    {160, {0.250, 0.400, 0.32, 0.80, 1.10, 1.60, 2.00, 2.20, 2.50}},
    {200, {0.400, 0.630, 0.42, 1.00, 1.40, 2.00, 2.50, 2.80, 3.20}},
    {250, {0.560, 1.00, 0.56, 1.25, 1.80, 2.50, 3.20, 3.60, 4.00}},
    {320, {0.75, 1.60, 0.75, 1.60, 2.20, 3.20, 4.00, 4.50, 5.00}},
    {400, {1.0, 2.0, 1.0, 2.0, 2.8, 4.0, 5.0, 5.6, 6.3}},
    {500, {1.3, 2.5, 1.3, 2.5, 3.6, 5.0, 6.3, 7.1, 8.0}},
    {630, {1.8, 3.2, 1.8, 3.2, 4.5, 6.3, 8.0, 9.0, 10.0}},
    {800, {2.4, 4.0, 2.4, 4.0, 5.6, 8.0, 10.0, 11.0, 12.5}},
    {1000, {3.2, 5.0, 3.2, 5.0, 7.1, 10.0, 12.5, 14.0, 16.0}},
    {1250, {none, none, 4.2, 6.3, 9.0, 12.5, 16.0, 18.0, 20.0}},
    {1600, {none, none, 5.6, 8.0, 11.0, 16.0, 20.0, 22.0, 25.0}},
    {2000, {none, none, 7.5, 10.0, 14.0, 20.0, 25.0, 28.0, 32.0}},
    {2500, {none, none, 10.0, 12.5, 18.0, 25.0, 32.0, 36.0, 40.0}},
    {3200, {none, none, 12.5, 16.0, 22.0, 32.0, 40.0, 45.0, 50.0}},
    {4000, {none, none, 16.0, 20.0, 28.0, 40.0, 50.0, 56.0, 63.0}},
    {5000, {none, none, 20.0, 25.0, 36.0, 50.0, 63.0, 71.0, 80.0}},
    {6300, {none, none, 25.0, 32.0, 45.0, 63.0, 80.0, 90.0, 100.0}},
    {8000, {none, none, 32.0, 40.0, 56.0, 80.0, 100.0, 110.0, 125.0}},
    {10000, {none, none, 40.0, 50.0, 71.0, 100.0, 125.0, 140.0, 160.0}},
};
const char* const columns[] = {"PWB-PD1", "PWB-PD2", "PD1", "PD2-I", "PD2-II", "PD2-III", "PD3-I", "PD3-II", "PD3-III"};

} // namespace

TEST_CASE("published: every cell")
{
    const library_result loaded = load_library(embedded_rules());
    const table& t = *loaded.lib.find_table("iec-60664-1-creepage");
    CHECK(t.printed.size() == std::size(rows));
    int cells = 0;
    for (const row& r : rows) {
        for (std::size_t c = 0; c < 9; ++c) {
            const table_answer a = look_up(t, columns[c], exactly({r.volts, dim::voltage}));
            CAPTURE(r.volts);
            CAPTURE(columns[c]);
            REQUIRE(a.figure.has_value() == (r.mm[c] != none));
            if (a.figure) {
                CHECK(a.figure->whole.low == doctest::Approx(r.mm[c] * 1e-3).epsilon(1e-9).scale(0));
                ++cells;
            }
        }
    }
    CHECK(cells == 259);
}
