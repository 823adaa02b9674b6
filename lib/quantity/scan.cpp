#include "quantity/scan.hpp"

#include <array>
#include <charconv>
#include <cmath>

namespace onehand::scan {

namespace {

bool digit(char c)
{
    return c >= '0' && c <= '9';
}

bool letter(char c)
{
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

/// Letters of IEC 60062 and their power of ten.
std::optional<int> code_exponent(std::string_view mark, const dimension& expected)
{
    struct row {
        std::string_view mark;
        int exponent;
    };
    static constexpr std::array<row, 7> resistance{{{"R", 0}, {"k", 3}, {"K", 3}, {"M", 6}, {"G", 9}, {"L", -3}, {"T", 12}}};
    static constexpr std::array<row, 7> reactive{{{"p", -12}, {"n", -9}, {"u", -6}, {"\u00b5", -6}, {"\u03bc", -6}, {"m", -3}, {"F", 0}}};
    const auto& rows = expected == dim::resistance ? resistance : reactive;
    for (const row& r : rows) {
        // A bare "m" on a capacitor is a slip for microfarads more often than a millifarad: its unit must be written.
        const bool refused = (r.mark == "F" && expected != dim::capacitance) || (r.mark == "m" && expected == dim::capacitance);
        if (r.mark == mark && !refused) {
            return r.exponent;
        }
    }
    return std::nullopt;
}

} // namespace

void cursor::blanks()
{
    while (!done() && (text[at] == ' ' || text[at] == '\t')) {
        ++at;
    }
}

bool cursor::take(std::string_view word)
{
    if (rest().starts_with(word)) {
        at += word.size();
        return true;
    }
    return false;
}

std::optional<decimal> take_decimal(cursor& c)
{
    const cursor start = c;
    decimal d;
    if (c.take("-") || c.take("\u2212")) {
        d.mantissa = "-";
    } else {
        c.take("+");
    }
    bool any = false;
    bool point = false;
    while (!c.done() && (digit(c.text[c.at]) || (c.text[c.at] == '.' && !point && !c.rest().starts_with("..")))) {
        any |= digit(c.text[c.at]);
        point |= c.text[c.at] == '.';
        d.mantissa += c.text[c.at++];
    }
    if (!any) {
        c = start;
        return std::nullopt;
    }
    const cursor before = c;
    if (!c.done() && (c.text[c.at] == 'e' || c.text[c.at] == 'E')) {
        ++c.at;
        const bool minus = c.take("-");
        if (!minus) {
            c.take("+");
        }
        int value = 0;
        const auto [end, error] = std::from_chars(c.text.data() + c.at, c.text.data() + c.text.size(), value);
        if (error != std::errc() || !digit(c.text[c.at]) || std::abs(value) > 1000) {
            c = before;
        } else {
            d.exponent = minus ? -value : value;
            c.at = static_cast<std::size_t>(end - c.text.data());
        }
    }
    return d;
}

std::optional<double> to_double(const decimal& d, int shift)
{
    std::string text = d.mantissa;
    if (text.back() == '.') {
        text += '0';
    }
    text += "e" + std::to_string(d.exponent + shift);
    double value = 0.0;
    const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value);
    if (error != std::errc() || end != text.data() + text.size() || !std::isfinite(value)) {
        return std::nullopt;
    }
    return value == 0.0 ? 0.0 : value;
}

std::string_view take_unit_word(cursor& c)
{
    const std::size_t start = c.at;
    while (!c.done()) {
        const char ch = c.text[c.at];
        const bool two_in_a2s = ch == '2' && c.at > start && c.text[c.at - 1] == 'A';
        const bool wide = static_cast<unsigned char>(ch) >= 0x80 && !c.rest().starts_with("\u00b1") && !c.rest().starts_with("\u2013") &&
                          !c.rest().starts_with("\u2014") && !c.rest().starts_with("\u2212");
        if (!letter(ch) && ch != '%' && ch != '/' && !two_in_a2s && !wide) {
            break;
        }
        ++c.at;
    }
    return c.text.substr(start, c.at - start);
}

std::size_t code_points(std::string_view text, std::size_t bytes)
{
    std::size_t count = 0;
    for (std::size_t i = 0; i < bytes && i < text.size(); ++i) {
        count += (static_cast<unsigned char>(text[i]) & 0xC0U) != 0x80U ? 1U : 0U;
    }
    return count;
}

std::optional<double> take_code(cursor& c, const dimension& expected)
{
    if (expected != dim::resistance && expected != dim::capacitance && expected != dim::inductance) {
        return std::nullopt;
    }
    const cursor start = c;
    std::string before;
    while (!c.done() && (digit(c.text[c.at]) || c.text[c.at] == '.')) {
        before += c.text[c.at++];
    }
    std::string_view mark;
    std::optional<int> exponent;
    for (const std::size_t length : {std::size_t{1}, std::size_t{2}}) {
        if (c.at + length <= c.text.size()) {
            mark = c.text.substr(c.at, length);
            if ((exponent = code_exponent(mark, expected))) {
                break;
            }
        }
    }
    if (!exponent) {
        c = start;
        return std::nullopt;
    }
    c.at += mark.size();
    std::string after;
    while (!c.done() && digit(c.text[c.at])) {
        after += c.text[c.at++];
    }
    const bool pointed = before.find('.') != std::string::npos;
    const bool ends = c.done() || c.text[c.at] == ' ' || c.text[c.at] == '\t' || c.rest().starts_with("+") || c.rest().starts_with("\u00b1");
    if ((before.empty() && after.empty()) || (pointed && !after.empty()) || !ends) {
        c = start;
        return std::nullopt;
    }
    return to_double({(before.empty() ? "0" : before) + (after.empty() ? "" : "." + after), 0}, *exponent);
}

std::optional<letter_tolerance> tolerance_letter(char mark)
{
    switch (mark) {
    case 'B':
        return letter_tolerance{-0.001, 0.001};
    case 'C':
        return letter_tolerance{-0.0025, 0.0025};
    case 'D':
        return letter_tolerance{-0.005, 0.005};
    case 'F':
        return letter_tolerance{-0.01, 0.01};
    case 'G':
        return letter_tolerance{-0.02, 0.02};
    case 'J':
        return letter_tolerance{-0.05, 0.05};
    case 'K':
        return letter_tolerance{-0.10, 0.10};
    case 'M':
        return letter_tolerance{-0.20, 0.20};
    case 'Q':
        return letter_tolerance{-0.10, 0.30};
    case 'T':
        return letter_tolerance{-0.10, 0.50};
    case 'S':
        return letter_tolerance{-0.20, 0.50};
    case 'Z':
        return letter_tolerance{-0.20, 0.80};
    default:
        return std::nullopt;
    }
}

} // namespace onehand::scan
