// Full counts of the comparison that the tests run smaller: converters times draws (default 300 and 10 000), and how near the draws come to the
// report.
#include <doctest/doctest.h>

#include "audit/random_converters.hpp"

#include <cstdlib>
#include <iostream>

using namespace onehand;
using namespace onehand::test;

int main(int argc, char** argv)
{
    const int converters = argc > 1 ? std::atoi(argv[1]) : 300;
    const int draws = argc > 2 ? std::atoi(argv[2]) : 10000;
    std::mt19937 random(20261202);
    std::map<std::string, double> nearest;
    int excesses = 0;
    for (int i = 0; i < converters; ++i) {
        const random_converter k = draw_converter(random);
        const audit_outcome o = run(k.text());
        if (!o.result) {
            std::cout << format_complaints(o.complaints);
            return 1;
        }
        for (int d = 0; d < draws; ++d) {
            for (const auto& [name, x] : read_draw(k, random)) {
                const value v = name == "set-point" ? o.result->set_point->output : told(*o.result, name);
                const auto high = v.numbers.empty() ? std::nan("") : v.numbers.front().whole.high;
                if (!std::isfinite(high)) {
                    continue;
                }
                nearest[name] = std::max(nearest[name], x / high);
                excesses += x > high * (1.0 + 1e-7) + 1e-12 ? 1 : 0;
            }
        }
    }
    std::cout << converters << " converters, " << draws << " draws each: " << excesses << " above the report\n";
    for (const auto& [name, share] : nearest) {
        std::cout << "  " << name << ": nearest draw " << share << " of what is told\n";
    }
    return excesses == 0 ? 0 : 1;
}
