#include "document/check.hpp"

#include <algorithm>

namespace onehand {

namespace {

/// Walks the text once, knowing strings and comments.
class walker {
public:
    walker(std::string_view text, const document& doc) : text_(text), doc_(doc) {}

    std::optional<complaint> run()
    {
        while (at_ < text_.size()) {
            if (auto found = step()) {
                return found;
            }
        }
        return std::nullopt;
    }

private:
    std::optional<complaint> step()
    {
        const char ch = text_[at_];
        if (ch == '\0') {
            return complain("a NUL character: this is no text file");
        }
        if (ch == '#') {
            while (at_ < text_.size() && text_[at_] != '\n') {
                advance();
            }
            return std::nullopt;
        }
        if (ch == '"' || ch == '\'') {
            return skip_string(ch);
        }
        if (static_cast<unsigned char>(ch) >= 0x80) {
            return complain("a character beyond ASCII outside quotes: quote the value or key, like \"4.7 \u00b5F\"");
        }
        depth_ += ch == '[' || ch == '{' ? 1 : ch == ']' || ch == '}' ? -1 : 0;
        if (depth_ > depth_limit) {
            return complain("nested deeper than 32: it is not read");
        }
        if (ch == '=' && at_ + 1 < text_.size()) {
            advance();
            return after_equals();
        }
        advance();
        return std::nullopt;
    }

    /// Just past an equals sign: a bare quantity or word is the commonest slip.
    std::optional<complaint> after_equals()
    {
        while (at_ < text_.size() && (text_[at_] == ' ' || text_[at_] == '\t')) {
            advance();
        }
        const std::size_t end = std::min(text_.find_first_of(",}\r\n#", at_), text_.size());
        std::string_view value = text_.substr(at_, end - at_);
        while (value.ends_with(' ') || value.ends_with('\t')) {
            value.remove_suffix(1);
        }
        const bool number_first =
            !value.empty() && (std::isdigit(static_cast<unsigned char>(value[0])) != 0 || value[0] == '.' || value[0] == '+' || value[0] == '-');
        const bool quotes = value.find_first_of("\"'") != std::string_view::npos;
        if (number_first && !quotes && unquoted_quantity(value)) {
            return complain("a value with a unit is text: quote it, \"" + std::string(value) + "\"");
        }
        static constexpr std::string_view words[] = {"yes", "no", "on", "off", "True", "False", "TRUE", "FALSE", "none", "null"};
        if (std::find(std::begin(words), std::end(words), value) != std::end(words)) {
            return complain("'" + std::string(value) + "' is no value here: write true or false, or quote a word");
        }
        return std::nullopt;
    }

    static bool unquoted_quantity(std::string_view value)
    {
        const bool letters = std::any_of(value.begin(), value.end(), [](unsigned char c) { return std::isalpha(c) != 0 || c == '%' || c >= 0x80; });
        const bool based = value.starts_with("0x") || value.starts_with("0o") || value.starts_with("0b");
        const bool exponent = value.find_first_not_of("0123456789.+-_eE") == std::string_view::npos;
        const bool date = value.size() >= 8 && value[4 % value.size()] == '-' && value.find(':') != std::string_view::npos;
        return letters && !based && !exponent && !date && value.find('[') == std::string_view::npos;
    }

    std::optional<complaint> skip_string(char quote)
    {
        const bool multi = text_.substr(at_).starts_with(std::string(3, quote));
        const std::uint32_t line = line_;
        const std::uint32_t column = column_;
        for (int i = multi ? 3 : 1; i > 0; --i) {
            advance();
        }
        while (at_ < text_.size()) {
            if (multi ? text_.substr(at_).starts_with(std::string(3, quote)) : text_[at_] == quote) {
                for (int i = multi ? 3 : 1; i > 0; --i) {
                    advance();
                }
                return std::nullopt;
            }
            if (!multi && text_[at_] == '\n') {
                return doc_.complain({doc_.file, line, column}, "the closing quote is missing on this line");
            }
            if (quote == '"' && text_[at_] == '\\') {
                advance();
                if (auto found = after_backslash(multi)) {
                    return found;
                }
                continue;
            }
            advance();
        }
        return doc_.complain({doc_.file, line, column}, "the closing quote is missing");
    }

    /// A line-ending backslash must not be followed by other than ASCII: the parser is not to be given it.
    std::optional<complaint> after_backslash(bool multi)
    {
        if (at_ >= text_.size()) {
            return std::nullopt;
        }
        if (static_cast<unsigned char>(text_[at_]) >= 0x80) {
            return complain("no such escape");
        }
        if (!multi || std::string_view(" \t\r\n").find(text_[at_]) == std::string_view::npos) {
            advance();
            return std::nullopt;
        }
        while (at_ < text_.size() && std::string_view(" \t\r\n").find(text_[at_]) != std::string_view::npos) {
            advance();
        }
        if (at_ < text_.size() && static_cast<unsigned char>(text_[at_]) >= 0x80) {
            return complain("a line joined by a backslash may not go on with a character beyond ASCII");
        }
        return std::nullopt;
    }

    void advance()
    {
        const char ch = text_[at_++];
        if (ch == '\n') {
            ++line_;
            column_ = 1;
        } else if (at_ >= text_.size() || (static_cast<unsigned char>(text_[at_]) & 0xC0U) != 0x80U) {
            ++column_;
        }
    }

    complaint complain(std::string message) const { return doc_.complain({doc_.file, line_, column_}, std::move(message)); }

    std::string_view text_;
    const document& doc_;
    std::size_t at_ = 0;
    std::uint32_t line_ = 1;
    std::uint32_t column_ = 1;
    int depth_ = 0;
};

} // namespace

std::optional<complaint> check_text(std::string_view text, const document& doc)
{
    return walker(text, doc).run();
}

} // namespace onehand
