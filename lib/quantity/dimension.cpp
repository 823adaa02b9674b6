#include "quantity/dimension.hpp"

#include <array>
#include <string_view>
#include <utility>

namespace onehand {

namespace {

struct named_dimension {
    std::string_view name;    // as rules/kinds write it
    std::string_view article; // as messages say it
    dimension dim;
};

// Order matters for name_of: the trade name first.
constexpr std::array<named_dimension, 20> table{{
    {"voltage", "a voltage", dim::voltage},
    {"current", "a current", dim::current},
    {"resistance", "a resistance", dim::resistance},
    {"capacitance", "a capacitance", dim::capacitance},
    {"inductance", "an inductance", dim::inductance},
    {"time", "a time", dim::time},
    {"frequency", "a frequency", dim::frequency},
    {"power", "a power", dim::power},
    {"energy", "an energy", dim::energy},
    {"charge", "a charge", dim::charge},
    {"length", "a length", dim::length},
    {"temperature", "a temperature", dim::temperature},
    {"temperature-difference", "a temperature difference", dim::temperature},
    {"thermal-resistance", "a thermal resistance", dim::thermal_resistance},
    {"melting-integral", "a melting integral", dim::melting_integral},
    {"capacitance-per-length", "a capacitance per length", dim::capacitance_per_length},
    {"pressure", "a pressure", dim::pressure},
    {"conductance", "a conductance", dim::conductance},
    {"mass", "a mass", dim::mass},
    {"ratio", "a plain number", dim::none},
}};

constexpr std::array<std::string_view, 5> bases{"m", "kg", "s", "A", "K"};

} // namespace

std::string name_of(const dimension& d)
{
    for (const named_dimension& n : table) {
        if (n.dim == d) {
            return std::string(n.article);
        }
    }
    std::string text = "a quantity in";
    for (std::size_t i = 0; i < bases.size(); ++i) {
        if (d.exponent[i] != 0) {
            text += ' ';
            text += bases[i];
            if (d.exponent[i] != 1) {
                text += std::to_string(d.exponent[i]);
            }
        }
    }
    return text;
}

std::optional<dimension> dimension_named(const std::string& name)
{
    for (const named_dimension& n : table) {
        if (n.name == name) {
            return n.dim;
        }
    }
    return std::nullopt;
}

} // namespace onehand
