#pragma once
// The small scanner under the quantity reader: numbers, unit words, IEC 60062 codes, with byte positions. Inside the room only.
#include "quantity/text.hpp"

namespace onehand::scan {

/// Text with a reading position.
struct cursor {
    std::string_view text;
    std::size_t at = 0;

    bool done() const { return at >= text.size(); }
    std::string_view rest() const { return text.substr(at); }
    void blanks();
    bool take(std::string_view word); // true and past it if it stands here
};

/// A decimal number as written; kept as text so that a prefix shifts the exponent exactly.
struct decimal {
    std::string mantissa; // digits with at most one point, optional sign
    int exponent = 0;
};

/// [sign] digits [. digits] [e exponent]; nothing if no digit stands here. A letter e that no digit follows is not an exponent.
std::optional<decimal> take_decimal(cursor& c);

/// mantissa * 10^(exponent + shift), correctly rounded; nothing if it is not finite.
std::optional<double> to_double(const decimal& d, int shift);

/// The run of letters, %, /, degree and Greek signs here.
std::string_view take_unit_word(cursor& c);

/// Offset in code points of a byte position.
std::size_t code_points(std::string_view text, std::size_t bytes);

/// IEC 60062: "4k7", "R47", "100n", "1M" for the expected dimension; the letter stands for the point. Nothing if the text here is no code.
std::optional<double> take_code(cursor& c, const dimension& expected);

/// IEC 60062 tolerance letter ("J" -> 5 %): low and high factors around 1.
struct letter_tolerance {
    double low = 0.0;
    double high = 0.0;
};
std::optional<letter_tolerance> tolerance_letter(char letter);

/// Advice for what hurried people type; empty if nothing special is known of this text.
std::string advice_for(std::string_view text, const dimension& expected);

/// "write \"12 V\"": an example of the expected dimension.
std::string example_of(const dimension& expected);

} // namespace onehand::scan
