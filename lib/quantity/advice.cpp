// What hurried people type at a bench, and the form that can be read one way only.
#include "quantity/scan.hpp"

#include <algorithm>
#include <cctype>

namespace onehand::scan {

namespace {

bool has(std::string_view text, std::string_view piece)
{
    return text.find(piece) != std::string_view::npos;
}

std::string lower(std::string_view text)
{
    std::string out(text);
    std::transform(out.begin(), out.end(), out.begin(), [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
    return out;
}

bool all_digits(std::string_view text)
{
    return !text.empty() && std::all_of(text.begin(), text.end(), [](unsigned char c) { return std::isdigit(c) != 0; });
}

bool number_then(std::string_view text, std::string_view tail)
{
    return text.size() > tail.size() && text.ends_with(tail) &&
           (std::isdigit(static_cast<unsigned char>(text[text.size() - tail.size() - 1])) != 0 || text[text.size() - tail.size() - 1] == ' ');
}

std::string three_digits(std::string_view text, const dimension& expected)
{
    if (!all_digits(text) || text.size() != 3 || (expected != dim::capacitance && expected != dim::resistance)) {
        return {};
    }
    const bool cap = expected == dim::capacitance;
    double value = static_cast<double>(std::stoi(std::string(text.substr(0, 2))));
    for (int zeros = text[2] - '0'; zeros > 0; --zeros) {
        value *= 10.0;
    }
    return "'" + std::string(text) + "' is a bare number, or the three-digit code for " + format_quantity({cap ? value * 1e-12 : value, expected}) +
           ": write the value with its unit";
}

std::string about_ranges(std::string_view text)
{
    if (has(text, "\u2013") || has(text, "\u2014")) {
        return "a dash between two values is read two ways: a range is written \"12 V .. 15 V\"";
    }
    const std::size_t dash = text.find('-', 1);
    if (dash != std::string_view::npos && text[dash - 1] != '+' && text[dash - 1] != '/' && text[dash - 1] != 'e' && text[dash - 1] != 'E' &&
        dash + 1 < text.size() && std::isdigit(static_cast<unsigned char>(text[dash + 1])) != 0 &&
        std::isdigit(static_cast<unsigned char>(text[0])) != 0) {
        return "'" + std::string(text) + "' is a range or a difference: a range is written \"12 V .. 15 V\"";
    }
    if (has(lower(text), " to ")) {
        return "a range is written with two points: \"12 V .. 15 V\"";
    }
    return {};
}

std::string about_words(std::string_view text, const dimension& expected)
{
    const std::string low = lower(text);
    if (expected == dim::temperature && number_then(text, "C")) {
        return "C is the coulomb: for a temperature write \"35 degC\"";
    }
    if (has(low, "meg")) {
        return "'meg' is no prefix: a million ohms is written \"1M\" or \"1 Mohm\"";
    }
    if (has(low, "vdc") || has(low, "vac") || has(low, "v dc") || has(low, "adc") || has(low, "a dc")) {
        return "write the unit alone, \"400 V\": the file speaks of d.c. throughout";
    }
    if ((has(text, "+-") || has(text, "\u00b1")) && (has(text, "/-") || has(text, "/+"))) {
        return "a tolerance with two different sides is written \"+50/-10 %\"";
    }
    if (has(text, "/") && number_then(text, "W") && expected == dim::power) {
        return "a fraction is not read: write \"0.25 W\" for a quarter watt";
    }
    if (has(low, "ohms")) {
        return "the unit is written \"ohm\" or \"\u03a9\", without s";
    }
    if (has(text, "Ohm") || has(text, "OHM")) {
        return "the unit is written \"ohm\" or \"\u03a9\": prefixes stand before it, \"4.7 kohm\"";
    }
    if (expected == dim::capacitance && (number_then(text, "M") || number_then(text, "K"))) {
        return std::string("'") + text.back() + "' on a capacitor is a tolerance letter (" + (text.back() == 'M' ? "20 %" : "10 %") +
               ") or a multiplier: write the value with its unit, and the tolerance as \"+-" + (text.back() == 'M' ? "20" : "10") + "%\"";
    }
    return {};
}

std::string about_case(std::string_view text)
{
    struct row {
        std::string_view wrong, right;
    };
    static constexpr row rows[] = {{"KV", "kV"},
                                   {"Kohm", "kohm"},
                                   {"K\u03a9", "k\u03a9"},
                                   {"KHz", "kHz"},
                                   {"khz", "kHz"},
                                   {"MHZ", "MHz"},
                                   {"hz", "Hz"},
                                   {"HZ", "Hz"},
                                   {"uf", "uF"},
                                   {"nf", "nF"},
                                   {"pf", "pF"},
                                   {"UF", "uF"},
                                   {"mh", "mH"},
                                   {"uh", "uH"},
                                   {"ma", "mA"},
                                   {"mv", "mV"},
                                   {"kv", "kV"},
                                   {"MM", "mm"},
                                   {"Mm", "mm"},
                                   {"mw", "mW"},
                                   {"sec", "s"},
                                   {"secs", "s"},
                                   {"seconds", "s"},
                                   {"min", "minutes"},
                                   {"volts", "V"},
                                   {"amps", "A"},
                                   {"watts", "W"},
                                   {"watt", "W"},
                                   {"v", "V"},
                                   {"a", "A"},
                                   {"w", "W"},
                                   {"S", "s"},
                                   {"deg", "degC"},
                                   {"\u00ba"
                                    "C",
                                    "degC"},
                                   {"celsius", "degC"},
                                   {"inch", "in"},
                                   {"mils", "mil"},
                                   {"R", "ohm"}};
    for (const row& r : rows) {
        if (number_then(text, r.wrong)) {
            return "no unit '" + std::string(r.wrong) + "': it is written \"" + std::string(r.right) + "\"";
        }
    }
    return {};
}

} // namespace

std::string advice_for(std::string_view text, const dimension& expected)
{
    if (text.empty()) {
        return "empty: " + example_of(expected);
    }
    if (has(text, ",")) {
        return "a comma is read two ways: write the decimal point, \"4.7\", and no thousands mark";
    }
    for (const std::string& found : {about_words(text, expected), three_digits(text, expected), about_ranges(text), about_case(text)}) {
        if (!found.empty()) {
            return found;
        }
    }
    return {};
}

std::string example_of(const dimension& expected)
{
    struct row {
        dimension dim;
        std::string_view example;
    };
    static constexpr row rows[] = {{dim::voltage, "12 V"},
                                   {dim::current, "20 mA"},
                                   {dim::resistance, "4.7 kohm"},
                                   {dim::capacitance, "3.3 uF"},
                                   {dim::inductance, "150 uH"},
                                   {dim::time, "5 s"},
                                   {dim::frequency, "29 kHz"},
                                   {dim::power, "0.25 W"},
                                   {dim::energy, "0.2 J"},
                                   {dim::charge, "45 uC"},
                                   {dim::length, "2.4 mm"},
                                   {dim::temperature, "35 degC"},
                                   {dim::thermal_resistance, "62 K/W"},
                                   {dim::melting_integral, "1.2 A2s"},
                                   {dim::capacitance_per_length, "100 pF/m"},
                                   {dim::none, "0.75"}};
    for (const row& r : rows) {
        if (r.dim == expected) {
            return name_of(expected) + " is due: write it like \"" + std::string(r.example) + "\"";
        }
    }
    return name_of(expected) + " is due";
}

} // namespace onehand::scan
