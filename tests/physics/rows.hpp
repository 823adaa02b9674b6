#pragma once
// One published figure a row: exact value to 1e-6, printed value at its rounding.
#include <doctest/doctest.h>

#include <cmath>

namespace onehand::test {

struct row {
    const char* source;
    double got, exact, printed, rounding; // printed to this step
};

inline void check(const row& r)
{
    CAPTURE(r.source);
    CHECK(r.got == doctest::Approx(r.exact).epsilon(1e-6).scale(0));
    CHECK(std::abs(std::round(r.exact / r.rounding) * r.rounding - r.printed) < r.rounding * 1e-6);
}

} // namespace onehand::test
