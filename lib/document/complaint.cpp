#include "document/complaint.hpp"

#include <algorithm>
#include <fmt/format.h>
#include <numeric>
#include <tuple>

namespace onehand {

namespace {

/// Blanks up to the caret's column; tabs stay tabs so that the caret lines up.
std::string caret_line(const std::string& excerpt, std::uint32_t column)
{
    std::string line;
    std::uint32_t at = 1;
    for (const char ch : excerpt) {
        if (at >= column) {
            break;
        }
        const bool starts_code_point = (static_cast<unsigned char>(ch) & 0xC0U) != 0x80U;
        if (starts_code_point) {
            line += ch == '\t' ? '\t' : ' ';
            ++at;
        }
    }
    line.append(column > at ? column - at : 0U, ' ');
    return line + '^';
}

std::string shown(const place& at, const std::string& excerpt)
{
    if (at.line == 0 || excerpt.empty()) {
        return {};
    }
    return "    " + excerpt + "\n    " + caret_line(excerpt, at.column) + '\n';
}

std::string head(const place& at)
{
    return at.line == 0 ? at.file : fmt::format("{}:{}:{}", at.file, at.line, at.column);
}

std::size_t edit_distance(const std::string& a, const std::string& b)
{
    std::vector<std::size_t> row(b.size() + 1);
    std::iota(row.begin(), row.end(), std::size_t{0});
    for (std::size_t i = 1; i <= a.size(); ++i) {
        std::size_t diagonal = row[0];
        row[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            const std::size_t replaced = diagonal + (a[i - 1] == b[j - 1] ? 0U : 1U);
            diagonal = row[j];
            row[j] = std::min({row[j] + 1, row[j - 1] + 1, replaced});
        }
    }
    return row[b.size()];
}

} // namespace

bool before(const place& a, const place& b)
{
    return std::tie(a.file, a.line, a.column) < std::tie(b.file, b.line, b.column);
}

std::string format_complaint(const complaint& c)
{
    std::string text = head(c.at) + ": " + (c.weight == gravity::note ? "note: " : "") + c.message + '\n' + shown(c.at, c.excerpt);
    if (c.also) {
        text += head(*c.also) + ": also here\n" + shown(*c.also, c.also_excerpt);
    }
    return text;
}

std::string format_complaints(const std::vector<complaint>& list)
{
    std::string text;
    for (const complaint& c : list) {
        text += format_complaint(c);
    }
    return text;
}

bool any_mistake(const std::vector<complaint>& list)
{
    return std::any_of(list.begin(), list.end(), [](const complaint& c) { return c.weight == gravity::mistake; });
}

void sort_by_place(std::vector<complaint>& list)
{
    std::stable_sort(list.begin(), list.end(), [](const complaint& a, const complaint& b) { return before(a.at, b.at); });
}

std::string listed(const std::vector<std::string>& words, const char* between)
{
    std::string text;
    for (const std::string& w : words) {
        text += (text.empty() ? "" : between) + w;
    }
    return text;
}

std::string nearest_name(const std::string& word, const std::vector<std::string>& known)
{
    std::string best;
    std::size_t least = 2 + word.size() / 4; // one more than is near enough to be meant
    for (const std::string& name : known) {
        if (const std::size_t distance = edit_distance(word, name); distance < least) {
            least = distance;
            best = name;
        }
    }
    return best;
}

} // namespace onehand
