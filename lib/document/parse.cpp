#include "document/parse.hpp"

#include <algorithm>
#include <cmath>
#include <toml++/toml.h>

namespace onehand {

namespace {

place place_of(const toml::source_region& region, const std::string& file)
{
    return {file, static_cast<std::uint32_t>(region.begin.line), static_cast<std::uint32_t>(region.begin.column)};
}

class builder {
public:
    explicit builder(read_result& result) : result_(result) {}

    void table_into(const toml::table& from, node& to)
    {
        to.kind = node_kind::table;
        to.inline_table = from.is_inline();
        for (const auto& [key, value] : from) {
            entry e;
            e.key = std::string(key.str());
            e.key_at = place_of(key.source(), result_.doc.file);
            value_into(value, e.value);
            to.entries.push_back(std::move(e));
        }
        std::stable_sort(to.entries.begin(), to.entries.end(), [](const entry& a, const entry& b) { return before(a.key_at, b.key_at); });
    }

private:
    void value_into(const toml::node& from, node& to)
    {
        to.at = place_of(from.source(), result_.doc.file);
        if (const auto* table = from.as_table()) {
            table_into(*table, to);
        } else if (const auto* array = from.as_array()) {
            to.kind = node_kind::list;
            for (const toml::node& item : *array) {
                value_into(item, to.items.emplace_back());
            }
        } else if (const auto* text = from.as_string()) {
            to.kind = node_kind::text;
            to.text = text->get();
            to.basic_text = plain_text(from.source(), to.text);
        } else if (const auto* whole = from.as_integer()) {
            to.kind = node_kind::number;
            to.integer = true;
            to.number = static_cast<double>(whole->get());
        } else if (const auto* real = from.as_floating_point()) {
            to.kind = node_kind::number;
            to.number = real->get();
            if (!std::isfinite(to.number)) {
                complain(to.at, "nan and inf are no values here");
            }
        } else if (const auto* truth = from.as_boolean()) {
            to.kind = node_kind::truth;
            to.truth = truth->get();
        } else {
            complain(to.at, "dates and times are no values here: quote the text");
        }
    }

    /// One line, and as long in the file as its text and two quotes: no escapes.
    static bool plain_text(const toml::source_region& region, const std::string& text)
    {
        const auto starts = [](unsigned char c) { return (c & 0xC0U) != 0x80U; };
        const auto length = static_cast<std::uint32_t>(std::count_if(text.begin(), text.end(), starts));
        return region.begin.line == region.end.line && region.end.column == region.begin.column + length + 2;
    }

    void complain(const place& at, std::string message) { result_.complaints.push_back(result_.doc.complain(at, std::move(message))); }

    read_result& result_;
};

/// Our wording for the parser's commonest complaints.
std::string reworded(std::string_view said, const std::string& line)
{
    if (said.find("redefine") != std::string_view::npos || said.find("already") != std::string_view::npos) {
        return "written twice: a key or table stands once";
    }
    if (line.find(':') != std::string::npos && line.find('=') == std::string::npos && line.find('[') == std::string::npos) {
        return "a key and its value are joined by '=', not ':'";
    }
    if (said.find("inline table") != std::string_view::npos &&
        (said.find("newline") != std::string_view::npos || said.find("line break") != std::string_view::npos)) {
        return "a table in braces stands on one line: use [kind.R1] for more lines";
    }
    if (said.find("trailing comma") != std::string_view::npos) {
        return "no comma after the last entry of a table in braces";
    }
    return "this is no TOML: " + std::string(said);
}

/// The first place that has the key which a duplicate repeats, if it can be told from the text.
std::optional<place> first_place(const document& doc, const place& again)
{
    const std::string& line = doc.lines[again.line - 1];
    const auto key_of = [](const std::string& text) {
        const std::size_t from = text.find_first_not_of(" \t[");
        const std::size_t to = text.find_first_of(" \t=]", from == std::string::npos ? 0 : from);
        return from == std::string::npos ? std::string{} : text.substr(from, to - from);
    };
    const std::string key = key_of(line);
    for (std::uint32_t i = again.line - 1; !key.empty() && i > 0; --i) {
        if (key_of(doc.lines[i - 1]) == key) {
            const auto column = static_cast<std::uint32_t>(doc.lines[i - 1].find(key) + 1);
            return place{doc.file, i, column};
        }
    }
    return std::nullopt;
}

} // namespace

void parse_into(std::string_view text, read_result& result)
{
    try {
        const toml::table parsed = toml::parse(text, std::string_view(result.doc.file));
        builder(result).table_into(parsed, result.doc.root);
        result.doc.root.at = {result.doc.file, 1, 1};
        sort_by_place(result.complaints);
    } catch (const toml::parse_error& error) {
        place at = place_of(error.source(), result.doc.file);
        const std::string line = at.line >= 1 && at.line <= result.doc.lines.size() ? result.doc.lines[at.line - 1] : std::string{};
        const std::string message = reworded(error.description(), line);
        complaint c = result.doc.complain(at, message);
        if (message.starts_with("written twice") && !line.empty()) {
            at.column = static_cast<std::uint32_t>(line.find_first_not_of(" \t[") + 1);
            if (const auto also = first_place(result.doc, at)) {
                c = result.doc.contradict(at, message, *also);
            }
        }
        result.complaints.push_back(std::move(c));
    } catch (const std::exception& error) {
        result.complaints.push_back(result.doc.complain({result.doc.file, 0, 0}, std::string("this is no TOML: ") + error.what()));
    }
}

} // namespace onehand
