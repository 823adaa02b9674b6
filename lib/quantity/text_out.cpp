#include "quantity/text.hpp"
#include "quantity/units.hpp"

#include <array>
#include <cmath>
#include <cstdlib>
#include <fmt/format.h>

namespace onehand {

namespace {

struct printed_prefix {
    std::string_view word;
    int exponent;
};
constexpr std::array<printed_prefix, 8> prefixes{{{"p", -12}, {"n", -9}, {"\u00b5", -6}, {"m", -3}, {"", 0}, {"k", 3}, {"M", 6}, {"G", 9}}};

struct printed_unit {
    std::string_view word;
    bool prefixed = false;
    int least = -12; // smallest and greatest prefix in use for this unit
    int greatest = 9;
};

/// How output writes a dimension; nothing for one without a unit of its own.
std::optional<printed_unit> unit_for(const dimension& d)
{
    if (d == dim::length) {
        return printed_unit{"m", true, -3, 0}; // millimetres and metres
    }
    if (d == dim::temperature) {
        return printed_unit{"degC", false, 0, 0};
    }
    if (d == dim::time) {
        return printed_unit{"s", true, -12, 0};
    }
    if (d == dim::capacitance) {
        return printed_unit{"F", true, -12, 0};
    }
    for (const unit_row& row : unit_rows()) {
        if (row.dim == d && !row.printed.empty()) {
            return printed_unit{row.printed, row.prefixed, -12, row.most};
        }
    }
    return std::nullopt;
}

/// Digits without trailing zeros and never in exponent form where avoidable.
std::string plain(double x, int digits)
{
    std::string text = fmt::format("{:.{}g}", x, digits);
    if (text.find('e') != std::string::npos) {
        return digits >= 17 ? fmt::format("{}", x) : text;
    }
    return text == "-0" ? "0" : text;
}

std::string base_units(const dimension& d)
{
    static constexpr std::array<std::string_view, 5> bases{"m", "kg", "s", "A", "K"};
    std::string text;
    for (std::size_t i = 0; i < bases.size(); ++i) {
        if (d.exponent[i] != 0) {
            text += fmt::format("{}{}", text.empty() ? "" : " ", bases[i]);
            text += d.exponent[i] == 1 ? "" : std::to_string(d.exponent[i]);
        }
    }
    return text;
}

/// x rounded to `digits` significant figures, for choosing the prefix: 999.96 at 4 digits is 1000.
double rounded(double x, int digits)
{
    return x == 0.0 ? 0.0 : std::strtod(fmt::format("{:.{}e}", x, digits - 1).c_str(), nullptr);
}

const printed_prefix& prefix_for(double x, const printed_unit& unit, int digits)
{
    const printed_prefix* chosen = nullptr;
    for (const printed_prefix& p : prefixes) {
        if (p.exponent < unit.least || p.exponent > unit.greatest) {
            continue;
        }
        if (chosen == nullptr || rounded(std::abs(x), digits) >= std::pow(10.0, p.exponent) * (1.0 - 1e-12)) {
            chosen = &p;
        }
    }
    return *chosen;
}

/// The shortest digits whose text, with the prefix's exponent put back, reads as exactly x.
std::string exact_digits(double x, int exponent)
{
    for (int digits = 1; digits <= 17; ++digits) {
        std::string text = fmt::format("{:.{}g}", x / std::pow(10.0, exponent), digits);
        const auto back = parse_quantity(text + (exponent == 0 ? "" : ""), dim::none);
        const auto* q = std::get_if<quantity>(&back);
        if (q != nullptr && std::strtod((text + (text.find('e') == std::string::npos ? "e" + std::to_string(exponent) : "")).c_str(), nullptr) == x &&
            text.find('e') == std::string::npos) {
            return text;
        }
    }
    return {};
}

std::string with_unit(double si, const printed_unit& unit, int digits)
{
    if (!unit.prefixed || si == 0.0) {
        return fmt::format("{} {}", digits >= 17 ? fmt::format("{}", si == 0.0 ? 0.0 : si) : plain(si, digits), unit.word);
    }
    const printed_prefix& prefix = prefix_for(si, unit, digits >= 17 ? 15 : digits);
    if (digits >= 17) {
        if (const std::string exact = exact_digits(si, prefix.exponent); !exact.empty()) {
            return fmt::format("{} {}{}", exact, prefix.word, unit.word);
        }
        return fmt::format("{} {}", si, unit.word);
    }
    return fmt::format("{} {}{}", plain(si / std::pow(10.0, prefix.exponent), digits), prefix.word, unit.word);
}

bool is_point(const range& r)
{
    return r.low == r.high;
}

} // namespace

std::string format_quantity(const quantity& q, int digits)
{
    if (q.dim == dim::none) {
        return digits >= 17 ? fmt::format("{}", q.si == 0.0 ? 0.0 : q.si) : plain(q.si, digits);
    }
    if (q.dim == dim::temperature) {
        if (digits >= 17) {
            return fmt::format("{} K", q.si);
        }
        return fmt::format("{} degC", plain(rounded(q.si - 273.15, digits + 4), digits));
    }
    const auto unit = unit_for(q.dim);
    if (!unit) {
        return fmt::format("{} {}", digits >= 17 ? fmt::format("{}", q.si) : plain(q.si, digits), base_units(q.dim));
    }
    return with_unit(q.si, *unit, digits);
}

std::string format_spread(const spread& s, int digits)
{
    const auto print = [&](double x) { return format_quantity({x, s.dim}, digits); };
    if (s.whole.low == -unbounded && s.whole.high == unbounded) {
        return "unknown";
    }
    if (s.whole.low == -unbounded) {
        return "up to " + print(s.whole.high);
    }
    if (s.whole.high == unbounded) {
        return "at least " + print(s.whole.low);
    }
    if (is_point(s.whole)) {
        return print(s.whole.low);
    }
    const std::string ends = print(s.whole.low) + " .. " + print(s.whole.high);
    return s.nominal ? print(*s.nominal) + " (" + ends + ")" : ends;
}

std::string write_spread(const spread& s)
{
    const auto print = [&](double x) { return format_quantity({x, s.dim}, 17); };
    if (s.whole.low == -unbounded) {
        return "max " + print(s.whole.high);
    }
    if (s.whole.high == unbounded) {
        return "min " + print(s.whole.low);
    }
    const auto range_text = [&](const range& r) { return is_point(r) ? print(r.low) : print(r.low) + " .. " + print(r.high); };
    return s.in_use == s.whole ? range_text(s.whole) : range_text(s.in_use) + " (" + print(s.whole.low) + " .. " + print(s.whole.high) + ")";
}

} // namespace onehand
