#pragma once
// The closed table of unit words and prefixes. One row a unit; adding a unit is adding a row here and one in its test.
#include "quantity/quantity.hpp"

#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace onehand {

struct unit_row {
    std::string_view word; // as written
    double factor = 1.0;   // to SI
    double offset = 0.0;   // added after the factor (degC)
    dimension dim{};
    bool prefixed = false;    // takes a prefix
    std::string_view printed; // the form that output uses; empty: this row is only read
    int most = 9;             // greatest prefix as a power of ten: megaamperes are a slip for milliamperes
};

const std::vector<unit_row>& unit_rows();

struct unit_match {
    int exponent = 0; // of ten, from the prefix: kept apart so that 0.18 kV and 180 V are the same number
    double factor = 1.0;
    double offset = 0.0;
    dimension dim{};
};

/// "kV", "µF", "pF/m", "degC", "%" ...; nothing if it is not in the table.
std::optional<unit_match> find_unit(std::string_view word);

/// Power of ten of a prefix ("k" -> 3); the three micro signs alike. Nothing if it is none.
std::optional<int> prefix_exponent(std::string_view prefix);

} // namespace onehand
