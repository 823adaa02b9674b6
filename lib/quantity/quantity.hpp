#pragma once
// A number of SI base units with its run-time dimension. Sums and comparisons demand equal dimensions and are checked by the caller
// (the rule language and the reader do so with a located complaint); products and quotients carry the dimension along.
#include "quantity/dimension.hpp"

namespace onehand {

struct quantity {
    double si = 0.0;
    dimension dim{};

    friend constexpr bool operator==(const quantity&, const quantity&) = default;
};

} // namespace onehand
