#include "quantity/scan.hpp"
#include "quantity/text.hpp"
#include "quantity/units.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using scan::cursor;

text_error error_at(const cursor& c, std::size_t byte, std::string message)
{
    return {scan::code_points(c.text, byte), std::move(message)};
}

bool blank(std::string_view text)
{
    return text.find_first_not_of(" \t") == std::string_view::npos;
}

std::string_view trimmed(std::string_view text)
{
    const std::size_t from = text.find_first_not_of(" \t");
    if (from == std::string_view::npos) {
        return {};
    }
    return text.substr(from, text.find_last_not_of(" \t") - from + 1);
}

text_error refuse(const cursor& c, std::size_t byte, const dimension& expected, std::string otherwise)
{
    std::string advice = scan::advice_for(trimmed(c.text), expected);
    return error_at(c, byte, advice.empty() ? std::move(otherwise) : std::move(advice));
}

struct one_value {
    double si = 0.0;
    bool absolute_temperature = false; // written in degC
};

/// Number with unit, plain number, or code. `as_difference`: a tolerance, so degC makes no sense.
parsed<one_value> take_value(cursor& c, const dimension& expected, bool as_difference)
{
    c.blanks();
    const std::size_t start = c.at;
    cursor as_code = c;
    if (const auto code = scan::take_code(as_code, expected)) {
        c = as_code;
        return one_value{*code};
    }
    const auto number = scan::take_decimal(c);
    if (!number) {
        return refuse(c, start, expected, "no number here: " + scan::example_of(expected));
    }
    const std::size_t after_number = c.at;
    c.blanks();
    const std::size_t unit_at = c.at;
    const std::string_view word = scan::take_unit_word(c);
    if (word.empty()) {
        c.at = after_number;
        const auto value = scan::to_double(*number, 0);
        if (expected == dim::none && value) {
            return one_value{*value};
        }
        return value ? refuse(c, start, expected, "a bare number: " + scan::example_of(expected))
                     : error_at(c, start, "the number is too large to be meant");
    }
    const auto unit = find_unit(word);
    if (!unit) {
        return refuse(c, unit_at, expected, "no unit '" + std::string(word) + "': " + scan::example_of(expected));
    }
    if (unit->dim != expected) {
        return refuse(c, start, expected,
                      std::string(c.text.substr(start, c.at - start)) + " is " + name_of(unit->dim) + ": " + scan::example_of(expected));
    }
    if (as_difference && unit->offset != 0.0) {
        return error_at(c, unit_at, "a tolerance on a temperature is written in K");
    }
    const auto value = scan::to_double(*number, unit->exponent);
    if (!value) {
        return error_at(c, start, "the number is too large to be meant");
    }
    if (word == "mF" && std::abs(*value) >= 1.0) {
        return error_at(c, start,
                        "mF is the millifarad: " + std::string(c.text.substr(start, c.at - start)) + " is " + format_quantity({*value, expected}) +
                            "; for microfarads write uF, for farads write F");
    }
    const double si = *value * unit->factor + unit->offset;
    if (expected == dim::temperature && si < 0.0) {
        return error_at(c, start, "below absolute zero");
    }
    return one_value{si, unit->offset != 0.0};
}

struct tolerance {
    bool relative = false;
    double minus = 0.0; // magnitudes
    double plus = 0.0;
};

std::optional<double> percent(cursor& c)
{
    const auto number = scan::take_decimal(c);
    if (!number) {
        return std::nullopt;
    }
    return scan::to_double(*number, -2);
}

/// "+50/-10 %"
std::optional<tolerance> take_two_sided(cursor& c)
{
    cursor t = c;
    if (!t.take("+")) {
        return std::nullopt;
    }
    if (t.rest().starts_with("-") || t.rest().starts_with("+") || t.rest().starts_with("\u2212")) {
        return std::nullopt; // "+-": both sides alike, read elsewhere
    }
    const auto plus = percent(t);
    t.blanks();
    t.take("%");
    t.blanks();
    if (!plus || !t.take("/")) {
        return std::nullopt;
    }
    t.blanks();
    const auto minus = percent(t);
    t.blanks();
    if (!minus || *minus > 0.0 || !t.take("%")) {
        return std::nullopt;
    }
    c = t;
    return tolerance{true, -*minus, *plus};
}

/// What may follow a value: "+-20%", "± 5 %", "+50/-10 %", "+-0.03", "+-10 V", or a tolerance letter. Nothing there: empty optional.
parsed<std::optional<tolerance>> take_tolerance(cursor& c, const dimension& expected, double nominal)
{
    c.blanks();
    if (const auto two = take_two_sided(c)) {
        return std::optional(*two);
    }
    const std::size_t start = c.at;
    if (c.take("+-") || c.take("\u00b1") || c.take("+/-")) {
        c.blanks();
        cursor p = c;
        const auto share = percent(p);
        p.blanks();
        if (share && p.take("%")) {
            c = p;
            if (*share < 0.0 || *share >= 10.0) {
                return error_at(c, start, "a tolerance is a share of the value, like \"+-20%\"");
            }
            return std::optional(tolerance{true, *share, *share});
        }
        const auto step = take_value(c, expected, true);
        if (const auto* wrong = std::get_if<text_error>(&step)) {
            return *wrong;
        }
        const double width = std::abs(std::get<one_value>(step).si);
        return std::optional(tolerance{false, width, width});
    }
    const bool coded = expected == dim::resistance || expected == dim::capacitance || expected == dim::inductance;
    if (coded && !c.done() && c.text[c.at] >= 'A' && c.text[c.at] <= 'Z' && blank(c.rest().substr(1))) {
        const auto letter = scan::tolerance_letter(c.text[c.at]);
        if (!letter) {
            return error_at(c, c.at, std::string("sources disagree on the tolerance letter '") + c.text[c.at] + "': write the tolerance in %");
        }
        if (expected == dim::capacitance && nominal < 10e-12) {
            return error_at(c, c.at, "below 10 pF a tolerance letter is a share or a number of picofarads: write which");
        }
        ++c.at;
        return std::optional(tolerance{true, -letter->low, letter->high});
    }
    return std::optional<tolerance>{};
}

range widened(double value, const tolerance& t)
{
    const double minus = t.relative ? std::abs(value) * t.minus : t.minus;
    const double plus = t.relative ? std::abs(value) * t.plus : t.plus;
    return {value - minus, value + plus};
}

parsed<spread> take_one_sided(cursor& c, const dimension& expected, bool upper)
{
    const auto value = take_value(c, expected, false);
    if (const auto* wrong = std::get_if<text_error>(&value)) {
        return *wrong;
    }
    const double si = std::get<one_value>(value).si;
    return upper ? between(expected, -unbounded, si) : between(expected, si, unbounded);
}

/// "(a .. b)" after what is in use: the whole range, as output prints it. Nothing there: the spread as it is.
parsed<spread> take_whole(cursor& c, spread s)
{
    c.blanks();
    const std::size_t start = c.at;
    if (!c.take("(")) {
        return s;
    }
    const auto low = take_value(c, s.dim, false);
    c.blanks();
    const bool points = std::holds_alternative<one_value>(low) && c.take("..");
    const auto high = points ? take_value(c, s.dim, false) : low;
    c.blanks();
    if (!points || !std::holds_alternative<one_value>(high) || !c.take(")")) {
        return error_at(c, start, "in brackets stands the whole range: \"12 V (11.4 V .. 12.6 V)\"");
    }
    s.whole = {std::get<one_value>(low).si, std::get<one_value>(high).si};
    if (!s.whole.contains(s.in_use)) {
        return error_at(c, start, "the whole range in brackets does not hold what stands before it");
    }
    return s;
}

parsed<spread> take_adjustable(cursor& c, const dimension& expected, double low, bool absolute)
{
    const std::size_t start = c.at;
    const auto value = take_value(c, expected, false);
    if (const auto* wrong = std::get_if<text_error>(&value)) {
        return *wrong;
    }
    const double high = std::get<one_value>(value).si;
    if (high < low) {
        return error_at(c, start, "the range runs backwards: write the lower end first");
    }
    spread s = between(expected, low, high);
    const auto tolerated = take_tolerance(c, expected, high);
    if (const auto* wrong = std::get_if<text_error>(&tolerated)) {
        return *wrong;
    }
    if (const auto& t = std::get<std::optional<tolerance>>(tolerated)) {
        if (t->relative && absolute) {
            return error_at(c, 0, "a tolerance on a temperature is written in K");
        }
        s.whole = {widened(low, *t).low, widened(high, *t).high};
        return s;
    }
    return take_whole(c, s);
}

parsed<spread> take_spread(cursor& c, const dimension& expected)
{
    c.blanks();
    for (const bool upper : {true, false}) {
        if (c.take(upper ? "max " : "min ")) {
            return take_one_sided(c, expected, upper);
        }
    }
    const auto first = take_value(c, expected, false);
    if (const auto* wrong = std::get_if<text_error>(&first)) {
        return *wrong;
    }
    const one_value nominal = std::get<one_value>(first);
    c.blanks();
    if (c.take("..")) {
        return take_adjustable(c, expected, nominal.si, nominal.absolute_temperature);
    }
    const auto tolerated = take_tolerance(c, expected, nominal.si);
    if (const auto* wrong = std::get_if<text_error>(&tolerated)) {
        return *wrong;
    }
    const auto& t = std::get<std::optional<tolerance>>(tolerated);
    if (!t) {
        return take_whole(c, exactly({nominal.si, expected}));
    }
    if (t->relative && nominal.absolute_temperature) {
        return error_at(c, 0, "a tolerance on a temperature is written in K");
    }
    const range r = widened(nominal.si, *t);
    return toleranced({nominal.si, expected}, r.low, r.high);
}

} // namespace

parsed<spread> parse_spread(std::string_view text, const dimension& expected)
{
    cursor c{text};
    if (blank(text)) {
        return text_error{0, scan::advice_for({}, expected)};
    }
    auto result = take_spread(c, expected);
    if (std::holds_alternative<text_error>(result)) {
        return result;
    }
    c.blanks();
    if (!c.done()) {
        return refuse(c, c.at, expected, "'" + std::string(c.rest()) + "' is left over after the value");
    }
    return result;
}

parsed<quantity> parse_quantity(std::string_view text, const dimension& expected)
{
    cursor c{text};
    if (blank(text)) {
        return text_error{0, scan::advice_for({}, expected)};
    }
    const auto value = take_value(c, expected, false);
    if (const auto* wrong = std::get_if<text_error>(&value)) {
        return *wrong;
    }
    c.blanks();
    if (!c.done()) {
        return refuse(c, c.at, expected, "'" + std::string(c.rest()) + "' is left over after the value");
    }
    return quantity{std::get<one_value>(value).si, expected};
}

parsed<quantity_prefix> parse_quantity_prefix(std::string_view text)
{
    cursor c{text};
    const auto number = scan::take_decimal(c);
    if (!number) {
        return text_error{0, "no number here"};
    }
    const std::size_t after_number = c.at;
    cursor u = c;
    u.blanks();
    const std::string_view word = scan::take_unit_word(u);
    // A hyphenated or reserved word after a number is no unit: "2 and", "5 * x".
    const auto unit = word.empty() ? std::nullopt : find_unit(word);
    const auto value = scan::to_double(*number, unit ? unit->exponent : 0);
    if (!value) {
        return text_error{0, "the number is too large to be meant"};
    }
    if (!unit) {
        return quantity_prefix{{*value, dim::none}, after_number};
    }
    return quantity_prefix{{*value * unit->factor + unit->offset, unit->dim}, u.at};
}

std::optional<quantity> parse_unit(std::string_view word)
{
    const auto unit = find_unit(word);
    if (!unit || unit->offset != 0.0) {
        return unit ? std::optional(quantity{1.0, unit->dim}) : std::nullopt;
    }
    return quantity{unit->factor * std::pow(10.0, unit->exponent), unit->dim};
}

} // namespace onehand
