#include "document/document.hpp"

#include "document/check.hpp"
#include "document/parse.hpp"

#include <algorithm>

namespace onehand {

const entry* node::find(std::string_view key) const
{
    const auto it = std::find_if(entries.begin(), entries.end(), [&](const entry& e) { return e.key == key; });
    return it == entries.end() ? nullptr : &*it;
}

complaint document::complain(const place& at, std::string message, gravity weight) const
{
    complaint c;
    c.at = at;
    c.message = std::move(message);
    c.weight = weight;
    if (at.line >= 1 && at.line <= lines.size()) {
        c.excerpt = lines[at.line - 1];
    }
    return c;
}

complaint document::contradict(const place& at, std::string message, const place& also) const
{
    complaint c = complain(at, std::move(message));
    c.also = also;
    if (also.line >= 1 && also.line <= lines.size()) {
        c.also_excerpt = lines[also.line - 1];
    }
    return c;
}

place inside(const node& text, std::size_t offset)
{
    place at = text.at;
    if (text.basic_text) {
        at.column += static_cast<std::uint32_t>(1 + offset);
    }
    return at;
}

namespace {

std::vector<std::string> split_lines(std::string_view text)
{
    std::vector<std::string> lines;
    while (!text.empty()) {
        const std::size_t end = text.find('\n');
        std::string_view line = text.substr(0, end);
        if (line.ends_with('\r')) {
            line.remove_suffix(1);
        }
        lines.emplace_back(line);
        text = end == std::string_view::npos ? std::string_view{} : text.substr(end + 1);
    }
    return lines;
}

} // namespace

read_result read_document(std::string_view text, const std::string& file)
{
    read_result result;
    result.doc.file = file;
    if (text.size() > size_limit) {
        result.complaints.push_back(result.doc.complain({file, 0, 0}, "the file is larger than 1 MiB: it is not read"));
        return result;
    }
    if (text.starts_with("\xEF\xBB\xBF")) {
        text.remove_prefix(3);
    }
    result.doc.lines = split_lines(text);
    if (auto early = check_text(text, result.doc)) {
        result.complaints.push_back(std::move(*early));
        return result;
    }
    parse_into(text, result);
    return result;
}

} // namespace onehand
