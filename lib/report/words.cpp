#include "report/words.hpp"

#include "quantity/text.hpp"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>

namespace onehand {

std::string figure(const value& v, int digits)
{
    const std::string text = in_words(v, digits);
    const bool number = v.holds == value::type::number && !v.never;
    return !number || v.missing.empty() ? text : text + " (needs " + listed(v.missing) + ")";
}

std::string greatest(const value& v, int digits)
{
    if (v.never) {
        return "never";
    }
    if (v.numbers.empty()) {
        return "unknown";
    }
    double top = v.numbers.front().whole.high;
    double bottom = v.numbers.front().whole.low;
    for (const spread& s : v.numbers) {
        top = std::max(top, s.whole.high);
        bottom = std::max(bottom, s.whole.low);
    }
    const dimension d = v.numbers.front().dim;
    return std::isfinite(top) ? format_quantity({top, d}, digits) : bottom > 0.0 ? "over " + format_quantity({bottom, d}, digits) : "unknown";
}

std::string at_place(const place& p)
{
    return p.line == 0 ? p.file : fmt::format("{}:{}:{}", p.file, p.line, p.column);
}

std::size_t columns_of(const std::string& text)
{
    return static_cast<std::size_t>(std::count_if(text.begin(), text.end(), [](unsigned char c) { return (c & 0xC0U) != 0x80U; }));
}

std::vector<std::string> wrapped(const std::string& text, std::size_t width, std::size_t indent)
{
    std::vector<std::string> lines;
    std::size_t at = std::min(text.find_first_not_of(' '), text.size());
    std::string line(at, ' ');
    while (at < text.size()) {
        const std::size_t end = std::min(text.find(' ', at), text.size());
        const std::string word = text.substr(at, end - at);
        const bool fresh = line.find_first_not_of(' ') == std::string::npos;
        if (!fresh && columns_of(line) + 1 + columns_of(word) > width) {
            lines.push_back(std::move(line));
            line = std::string(indent, ' ');
            line += word;
        } else {
            line += (fresh ? "" : " ") + word; // the blanks a text begins with are its own indent
        }
        at = end + 1;
    }
    if (line.find_first_not_of(' ') != std::string::npos) {
        lines.push_back(std::move(line));
    }
    return lines;
}

std::string padded(const std::string& text, std::size_t width)
{
    const std::size_t columns = columns_of(text);
    return columns >= width ? text : text + std::string(width - columns, ' ');
}

std::string source_words(const library* lib, const citation& c)
{
    const source* s = lib == nullptr ? nullptr : lib->find_source(c.cite);
    const std::string title = s == nullptr ? c.cite : s->title.substr(0, s->title.find(','));
    const std::string basis = c.rests_on == basis::confirmed ? "confirmed"
                              : c.rests_on == basis::memory  ? "from memory, not seen"
                                                             : "common practice, no source";
    return title + ", " + c.clause + " [" + basis + "]";
}

namespace {

std::string wrapped_item(const std::string& lead, const std::string& words)
{
    std::string out;
    for (const std::string& l : wrapped(lead + words, 80, columns_of(lead))) {
        out += l + '\n';
    }
    return out;
}

} // namespace

std::string limit_set_lines(const audit_result& r)
{
    std::string out = "\nLimit sets\n" + wrapped_item("  used: ", listed(r.limit_sets));
    for (const std::string& s : r.left_out) {
        out += wrapped_item("  left out: ", s);
    }
    for (const std::string& s : r.loosened) {
        out += wrapped_item("  loosened: ", s);
    }
    return out;
}

std::string last_line()
{
    return '\n' + wrapped_item("", "An aid to a competent person, no certificate. Local codes and licensed practice come first.");
}

std::string closing_lines(const audit_result& r)
{
    return limit_set_lines(r) + last_line();
}

} // namespace onehand
