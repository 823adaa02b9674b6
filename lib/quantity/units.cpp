#include "quantity/units.hpp"

#include <array>
#include <utility>

namespace onehand {

namespace {

// Greek and technical code points that are written alike are read alike.
constexpr std::array<std::pair<std::string_view, int>, 9> prefixes{
    {{"p", -12}, {"n", -9}, {"u", -6}, {"\u00b5", -6}, {"\u03bc", -6}, {"m", -3}, {"k", 3}, {"M", 6}, {"G", 9}}};

} // namespace

const std::vector<unit_row>& unit_rows()
{
    static const std::vector<unit_row> rows{
        {"V", 1, 0, dim::voltage, true, "V", 3},
        {"A", 1, 0, dim::current, true, "A", 3},
        {"ohm", 1, 0, dim::resistance, true, ""},
        {"\u03a9", 1, 0, dim::resistance, true, "\u03a9"},
        {"\u2126", 1, 0, dim::resistance, true, ""},
        {"F", 1, 0, dim::capacitance, true, "F", 0},
        {"H", 1, 0, dim::inductance, true, "H", 0},
        {"s", 1, 0, dim::time, true, "s", 0},
        {"minute", 60, 0, dim::time, false, ""},
        {"minutes", 60, 0, dim::time, false, ""},
        {"Hz", 1, 0, dim::frequency, true, "Hz"},
        {"W", 1, 0, dim::power, true, "W", 3},
        {"J", 1, 0, dim::energy, true, "J", 3},
        {"C", 1, 0, dim::charge, true, "C", 0},
        {"m", 1, 0, dim::length, true, "m", 0},
        {"mil", 25.4e-6, 0, dim::length, false, ""},
        {"in", 25.4e-3, 0, dim::length, false, ""},
        {"F/m", 1, 0, dim::capacitance_per_length, true, "F/m", 0},
        {"K", 1, 0, dim::temperature, false, ""},
        {"degC", 1, 273.15, dim::temperature, false, "degC"},
        {"\u00b0C", 1, 273.15, dim::temperature, false, ""},
        {"K/W", 1, 0, dim::thermal_resistance, false, "K/W"},
        {"A2s", 1, 0, dim::melting_integral, false, "A2s"},
        {"Pa", 1, 0, dim::pressure, true, "Pa", 6},
        {"%", 0.01, 0, dim::none, false, ""},
    };
    return rows;
}

std::optional<int> prefix_exponent(std::string_view prefix)
{
    for (const auto& [word, exponent] : prefixes) {
        if (word == prefix) {
            return exponent;
        }
    }
    return std::nullopt;
}

std::optional<unit_match> find_unit(std::string_view word)
{
    for (const unit_row& row : unit_rows()) {
        if (row.word == word) {
            return row.word == "%" ? unit_match{-2, 1.0, 0.0, row.dim} : unit_match{0, row.factor, row.offset, row.dim};
        }
    }
    for (const unit_row& row : unit_rows()) {
        if (row.prefixed && word.size() > row.word.size() && word.ends_with(row.word)) {
            if (const auto exponent = prefix_exponent(word.substr(0, word.size() - row.word.size())); exponent && *exponent <= row.most) {
                return unit_match{*exponent, row.factor, 0.0, row.dim};
            }
        }
    }
    return std::nullopt;
}

} // namespace onehand
