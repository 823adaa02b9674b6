#pragma once
// Quantity text in and out, design section 4: "180 V", "4k7", "3u3 +-20%", "10 degC .. 35 degC", "350 V .. 450 V +-2%", "max 165 V",
// "5 minutes", tolerance letters after IEC 60062 codes ("4k7 J"). A closed list of units; nothing is guessed: what could be read two ways is
// refused with a message that shows both readings or the right form. IEC 60062 for codes and tolerance letters.
#include "quantity/spread.hpp"

#include <string>
#include <string_view>
#include <variant>

namespace onehand {

/// Where in the text (0-based, in code points, as columns count) the mistake stands, and what is wrong, for the user.
struct text_error {
    std::size_t offset = 0;
    std::string message;
};

template<class T>
using parsed = std::variant<T, text_error>;

/// One quantity of the expected dimension, no spread. `expected` decides what an IEC 60062 code means (resistance, capacitance, inductance)
/// and words the refusal ("a voltage is due here, 4.7 kΩ is a resistance").
parsed<quantity> parse_quantity(std::string_view text, const dimension& expected);

/// A spread of the expected dimension in any form of design section 4. Temperatures: "35 degC" and "308.15 K" are absolute; a tolerance on
/// them and any quantity of a `temperature-difference` field is in K.
parsed<spread> parse_spread(std::string_view text, const dimension& expected);

/// A unit or quantity of any dimension, as the rule language writes constants ("60 V", "0.35 J", "2 mA"): number and unit, no codes.
/// `length` tells how many bytes of `text` were used.
struct quantity_prefix {
    quantity value;
    std::size_t length = 0;
};
parsed<quantity_prefix> parse_quantity_prefix(std::string_view text);

/// The dimension and factor of a unit word ("kV", "pF/m", "K/W"); nothing if unknown.
std::optional<quantity> parse_unit(std::string_view unit);

/// Engineering prefixes, `digits` significant digits (trailing zeros dropped), parse_quantity(format) == q within those digits:
/// "180 V", "4.7 kΩ", "3.3 µF", "35 degC", "2.4 mm", "75 %" (only where asked by a percent unit), "12 s", "5 minutes" is printed "300 s".
/// digits = 17 prints the shortest text that reads back exactly.
std::string format_quantity(const quantity& q, int digits = 4);

/// "180 V (171 V .. 189 V)" style text of a spread's whole range; one value if it is a point; "up to 50 ns", "at least 3 V" where one end is unknown.
std::string format_spread(const spread& s, int digits = 4);

/// Text that parse_spread reads back to the same spread exactly (round-trip law): what is in use, and the whole in brackets where it is wider.
std::string write_spread(const spread& s);

} // namespace onehand
