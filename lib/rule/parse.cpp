#include "rule/expression.hpp"

#include "quantity/text.hpp"

#include <cctype>
#include <fmt/format.h>

namespace onehand {

namespace {

using op = expression::op;

constexpr int deepest = 64;

bool letter(char c)
{
    return std::isalpha(static_cast<unsigned char>(c)) != 0;
}

bool digit(char c)
{
    return std::isdigit(static_cast<unsigned char>(c)) != 0;
}

/// Recursive descent; one expression, to the end of the text.
class parser {
public:
    parser(const std::string& text, const expression_place& where, std::vector<complaint>& complaints)
        : text_(text), where_(where), complaints_(complaints)
    {
    }

    std::optional<expression> run()
    {
        auto e = either();
        blanks();
        if (e && at_ < text_.size()) {
            return fail(at_, "'" + text_.substr(at_) + "' is left over");
        }
        return e;
    }

private:
    std::optional<expression> fail(std::size_t byte, std::string message)
    {
        if (!failed_) {
            complaints_.push_back(where_.complain(code_points(byte), std::move(message)));
        }
        failed_ = true;
        return std::nullopt;
    }

    std::size_t code_points(std::size_t byte) const
    {
        std::size_t count = 0;
        for (std::size_t i = 0; i < byte && i < text_.size(); ++i) {
            count += (static_cast<unsigned char>(text_[i]) & 0xC0U) != 0x80U ? 1U : 0U;
        }
        return count;
    }

    void blanks()
    {
        while (at_ < text_.size() && (text_[at_] == ' ' || text_[at_] == '\t')) {
            ++at_;
        }
    }

    bool take(const char* sign)
    {
        blanks();
        const std::string word = sign;
        if (text_.compare(at_, word.size(), word) != 0) {
            return false;
        }
        if (letter(word[0])) {
            const std::size_t end = at_ + word.size();
            if (end < text_.size() && (letter(text_[end]) || digit(text_[end]) || text_[end] == '-')) {
                return false;
            }
        }
        at_ += word.size();
        return true;
    }

    expression join(op is, std::size_t from, expression a, expression b) const
    {
        expression e;
        e.is = is;
        e.offset = code_points(from);
        e.parts.push_back(std::move(a));
        e.parts.push_back(std::move(b));
        return e;
    }

    std::optional<expression> either()
    {
        auto a = both();
        while (a && take("or")) {
            auto b = both();
            if (!b) {
                return b;
            }
            a = join(op::logic_or, 0, std::move(*a), std::move(*b));
        }
        return a;
    }

    std::optional<expression> both()
    {
        auto a = negation();
        while (a && take("and")) {
            auto b = negation();
            if (!b) {
                return b;
            }
            a = join(op::logic_and, 0, std::move(*a), std::move(*b));
        }
        return a;
    }

    std::optional<expression> negation()
    {
        blanks();
        const std::size_t from = at_;
        if (!take("not")) {
            return comparison();
        }
        if (++depth_ > deepest) {
            return fail(from, "nested too deep");
        }
        auto a = negation();
        if (!a) {
            return a;
        }
        expression e;
        e.is = op::logic_not;
        e.offset = code_points(from);
        e.parts.push_back(std::move(*a));
        return e;
    }

    std::optional<expression> comparison()
    {
        auto a = sum();
        blanks();
        const std::size_t from = at_;
        static const std::pair<const char*, op> signs[] = {
            {"<=", op::less_equal}, {">=", op::greater_equal}, {"<", op::less}, {">", op::greater}, {"=", op::equal}};
        for (const auto& [sign, is] : signs) {
            if (a && take(sign)) {
                auto b = sum();
                if (!b) {
                    return b;
                }
                blanks();
                for (const auto& [again, unused] : signs) {
                    static_cast<void>(unused);
                    if (text_.compare(at_, std::string(again).size(), again) == 0) {
                        return fail(at_, "comparisons are joined by 'and', not chained");
                    }
                }
                return join(is, from, std::move(*a), std::move(*b));
            }
        }
        return a;
    }

    std::optional<expression> sum()
    {
        auto a = product();
        for (;;) {
            blanks();
            const std::size_t from = at_;
            const bool plus = a && take("+");
            const bool minus = a && !plus && take("-");
            if (!plus && !minus) {
                return a;
            }
            auto b = product();
            if (!b) {
                return b;
            }
            a = join(plus ? op::add : op::subtract, from, std::move(*a), std::move(*b));
        }
    }

    std::optional<expression> product()
    {
        auto a = factor();
        for (;;) {
            blanks();
            const std::size_t from = at_;
            const bool times = a && take("*");
            const bool over = a && !times && take("/");
            if (!times && !over) {
                return a;
            }
            auto b = factor();
            if (!b) {
                return b;
            }
            a = join(times ? op::multiply : op::divide, from, std::move(*a), std::move(*b));
        }
    }

    std::optional<expression> factor()
    {
        blanks();
        const std::size_t from = at_;
        if (take("-")) {
            if (++depth_ > deepest) {
                return fail(from, "nested too deep");
            }
            auto a = factor();
            if (!a) {
                return a;
            }
            expression e;
            e.is = op::negate;
            e.offset = code_points(from);
            e.parts.push_back(std::move(*a));
            return e;
        }
        auto a = atom();
        blanks();
        const std::size_t power_at = at_;
        if (a && take("^")) {
            blanks();
            const std::size_t number_at = at_;
            while (at_ < text_.size() && digit(text_[at_])) {
                ++at_;
            }
            if (number_at == at_ || at_ - number_at > 1) {
                return fail(number_at, "a power is a whole number from 1 to 9");
            }
            expression e;
            e.is = op::constant;
            e.constant = {static_cast<double>(text_[number_at] - '0'), dim::none};
            e.offset = code_points(number_at);
            return join(op::power, power_at, std::move(*a), std::move(e));
        }
        return a;
    }

    std::optional<expression> atom()
    {
        blanks();
        const std::size_t from = at_;
        if (at_ >= text_.size()) {
            return fail(from, text_.empty() ? "empty" : "something is missing at the end");
        }
        if (take("(")) {
            if (++depth_ > deepest) {
                return fail(from, "nested too deep");
            }
            auto e = either();
            --depth_;
            if (e && !take(")")) {
                return fail(at_, "a closing bracket is missing");
            }
            return e;
        }
        if (text_[at_] == '"' || text_[at_] == '\'') {
            return quoted();
        }
        if (digit(text_[at_]) || text_[at_] == '.') {
            return constant();
        }
        if (letter(text_[at_])) {
            return name();
        }
        return fail(from, fmt::format("'{}' does not belong here", text_[at_]));
    }

    std::optional<std::string> quoted_text()
    {
        blanks();
        const std::size_t from = at_;
        const char quote = at_ < text_.size() ? text_[at_] : ' ';
        const std::size_t end = quote == '"' || quote == '\'' ? text_.find(quote, at_ + 1) : std::string::npos;
        if (end == std::string::npos) {
            fail(from, "a word in quotes is due here");
            return std::nullopt;
        }
        at_ = end + 1;
        return text_.substr(from + 1, end - from - 1);
    }

    std::optional<expression> quoted()
    {
        const std::size_t from = at_;
        auto word = quoted_text();
        if (!word) {
            return std::nullopt;
        }
        expression e;
        e.is = op::choice;
        e.word = *word;
        e.offset = code_points(from);
        return e;
    }

    std::optional<expression> constant()
    {
        const std::size_t from = at_;
        const auto read = parse_quantity_prefix(std::string_view(text_).substr(at_));
        if (const auto* wrong = std::get_if<text_error>(&read)) {
            return fail(from, wrong->message);
        }
        const auto& q = std::get<quantity_prefix>(read);
        at_ += q.length;
        if (at_ < text_.size() && (letter(text_[at_]) || static_cast<unsigned char>(text_[at_]) >= 0x80)) {
            return fail(at_, "no unit here: '" + text_.substr(at_, text_.find_first_of(" )", at_) - at_) + "'");
        }
        expression e;
        e.constant = q.value;
        e.offset = code_points(from);
        return e;
    }

    std::string word_here()
    {
        const std::size_t from = at_;
        while (at_ < text_.size() && (letter(text_[at_]) || digit(text_[at_]) ||
                                      (text_[at_] == '-' && at_ + 1 < text_.size() && (letter(text_[at_ + 1]) || digit(text_[at_ + 1]))))) {
            ++at_;
        }
        return text_.substr(from, at_ - from);
    }

    std::optional<expression> name()
    {
        const std::size_t from = at_;
        expression e;
        e.is = op::name;
        e.offset = code_points(from);
        e.word = word_here();
        if (at_ < text_.size() && text_[at_] == '(') {
            return call(std::move(e), from);
        }
        if (at_ < text_.size() && text_[at_] == '.') {
            const auto other = state_named(e.word);
            if (!other) {
                return fail(from, "no state '" + e.word + "': start-up, running, no-load, standby or switched-off");
            }
            ++at_;
            e.other = other;
            e.word = word_here();
            if (e.word.empty()) {
                return fail(at_, "a name is due after the state");
            }
        }
        return e;
    }

    std::optional<expression> call(expression e, std::size_t from)
    {
        static const std::pair<const char*, std::size_t> functions[] = {{"min", 2}, {"max", 2}, {"abs", 1},     {"sqrt", 1},
                                                                        {"ln", 1},  {"exp", 1}, {"time-to", 1}, {"table", 3}};
        std::size_t count = 0;
        for (const auto& [known, arguments] : functions) {
            count = e.word == known ? arguments : count;
        }
        if (count == 0) {
            return fail(from, "no function '" + e.word + "': min, max, abs, sqrt, ln, exp, table or time-to");
        }
        e.is = op::call;
        ++at_;
        if (++depth_ > deepest) {
            return fail(from, "nested too deep");
        }
        std::string column;
        const std::string function = e.word;
        if (function == "table") {
            const auto id = quoted_text();
            if (!id || !take(",")) {
                return fail(at_, "table(\"id\", \"column\", value)");
            }
            const auto name_of_column = quoted_text();
            if (!name_of_column || !take(",")) {
                return fail(at_, "table(\"id\", \"column\", value)");
            }
            e.column = *name_of_column;
            expression id_part;
            id_part.is = op::choice;
            id_part.word = *id;
            id_part.offset = e.offset;
            e.parts.push_back(std::move(id_part));
            count = 1;
        }
        for (std::size_t i = 0; i < count; ++i) {
            if (i > 0 && !take(",")) {
                return fail(at_, fmt::format("'{}' takes {} values", function, count));
            }
            auto part = either();
            if (!part) {
                return part;
            }
            e.parts.push_back(std::move(*part));
        }
        --depth_;
        if (!take(")")) {
            return fail(at_, "a closing bracket is missing");
        }
        return e;
    }

    const std::string& text_;
    const expression_place& where_;
    std::vector<complaint>& complaints_;
    std::size_t at_ = 0;
    int depth_ = 0;
    bool failed_ = false;
};

} // namespace

complaint expression_place::complain(std::size_t offset, std::string message) const
{
    place where = at;
    if (basic_text && at.line > 0) {
        where.column += static_cast<std::uint32_t>(1 + offset);
    }
    return doc->complain(where, std::move(message));
}

std::optional<expression> parse_expression(const std::string& text, const expression_place& where, std::vector<complaint>& complaints)
{
    return parser(text, where, complaints).run();
}

std::string sign_word(expression::op is)
{
    switch (is) {
    case op::add:
        return "+";
    case op::subtract:
        return "-";
    case op::multiply:
        return "*";
    case op::divide:
        return "/";
    case op::power:
        return "^";
    case op::less:
        return "<";
    case op::less_equal:
        return "<=";
    case op::greater:
        return ">";
    case op::greater_equal:
        return ">=";
    case op::equal:
        return "=";
    case op::logic_and:
        return "and";
    case op::logic_or:
        return "or";
    default:
        return "?";
    }
}

std::string print(const expression& e)
{
    switch (e.is) {
    case op::constant:
        return format_quantity(e.constant);
    case op::choice:
        return "\"" + e.word + "\"";
    case op::name:
        return (e.other ? word_for(*e.other) + "." : "") + e.word;
    case op::negate:
        return "-" + print(e.parts[0]);
    case op::logic_not:
        return "not " + print(e.parts[0]);
    case op::call: {
        std::string inside = e.word == "table" ? print(e.parts[0]) + ", \"" + e.column + "\"" : "";
        for (std::size_t i = e.word == "table" ? 1 : 0; i < e.parts.size(); ++i) {
            inside += (inside.empty() ? "" : ", ") + print(e.parts[i]);
        }
        return e.word + "(" + inside + ")";
    }
    default:
        return "(" + print(e.parts[0]) + " " + sign_word(e.is) + " " + print(e.parts[1]) + ")";
    }
}

} // namespace onehand
