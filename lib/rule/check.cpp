// Names, types and dimensions of an expression against the subject's fields, facts and classes.
#include "rule/expression.hpp"

#include <algorithm>
#include <set>

namespace onehand {

namespace {

using op = expression::op;
using type = value::type;

type type_of(const field_spec& f)
{
    return f.holds == field_spec::type::truth                                            ? type::truth
           : f.holds == field_spec::type::quantity || f.holds == field_spec::type::count ? type::number
                                                                                         : type::choice;
}

std::string word_of(const expression& e)
{
    return e.type == type::truth ? "a truth" : e.type == type::choice ? "a choice" : name_of(e.dim);
}

class checker {
public:
    checker(const library& lib, const std::string& subject, const expression_place& where, std::vector<complaint>& complaints)
        : lib_(lib), subject_(subject), where_(where), complaints_(complaints)
    {
    }

    bool check(expression& e)
    {
        for (std::size_t i = 0; i < e.parts.size(); ++i) {
            if (e.is == op::call && e.word == "table" && i == 0) {
                continue;
            }
            if (!check(e.parts[i])) {
                return false;
            }
        }
        for (const expression& p : e.parts) {
            e.solved |= p.solved;
        }
        switch (e.is) {
        case op::constant:
            e.dim = e.constant.dim;
            return true;
        case op::choice:
            e.type = type::choice;
            return true;
        case op::name:
            return check_name(e);
        case op::negate:
            e.dim = e.parts[0].dim;
            return numbers(e);
        case op::add:
        case op::subtract:
            e.dim = e.parts[0].dim;
            return numbers(e) && alike(e);
        case op::multiply:
            e.dim = e.parts[0].dim * e.parts[1].dim;
            return numbers(e) && no_square(e);
        case op::divide:
            e.dim = e.parts[0].dim / e.parts[1].dim;
            return numbers(e);
        case op::power:
            e.dim = power(e.parts[0].dim, static_cast<int>(e.parts[1].constant.si));
            return numbers(e);
        case op::less:
        case op::less_equal:
        case op::greater:
        case op::greater_equal:
            e.type = type::truth;
            return numbers(e) && alike(e) && one_solved(e);
        case op::equal:
            e.type = type::truth;
            return check_equal(e);
        case op::logic_and:
        case op::logic_or:
        case op::logic_not:
            e.type = type::truth;
            return truths(e);
        case op::call:
            return check_call(e);
        }
        return false;
    }

private:
    bool fail(const expression& e, std::string message)
    {
        complaints_.push_back(where_.complain(e.offset, std::move(message)));
        return false;
    }

    bool check_name(expression& e)
    {
        if (e.word == "true" || e.word == "false") {
            e.type = type::truth;
            return true;
        }
        std::vector<std::string> known;
        const auto spec = name_of_subject(lib_, subject_, e.word, &known);
        if (!spec) {
            const std::string near = nearest_name(e.word, known);
            return fail(e, "a " + subject_ + " has no '" + e.word + "'" + (near.empty() ? "" : "; nearest known name: " + near));
        }
        e.type = spec->type;
        e.dim = spec->dim;
        e.solved = spec->solved;
        return true;
    }

    bool numbers(const expression& e)
    {
        for (const expression& p : e.parts) {
            if (p.type != type::number) {
                return fail(p, word_of(p) + " cannot be reckoned with");
            }
        }
        return true;
    }

    bool truths(const expression& e)
    {
        for (const expression& p : e.parts) {
            if (p.type != type::truth) {
                return fail(p, word_of(p) + " is neither true nor false: compare it");
            }
        }
        return true;
    }

    bool alike(const expression& e)
    {
        return e.parts[0].dim == e.parts[1].dim || fail(e, name_of(e.parts[0].dim) + " on the left, " + name_of(e.parts[1].dim) + " on the right");
    }

    bool no_square(const expression& e)
    {
        return print(e.parts[0]) != print(e.parts[1]) || e.parts[0].is == op::constant ||
               fail(e, "a square is written x ^ 2, so that its spread is right");
    }

    static void solved_names(const expression& e, std::set<std::string>& names)
    {
        if (e.is == op::name && e.solved) {
            names.insert(print(e));
        }
        if (e.is == op::call && e.word == "time-to") {
            names.insert(print(e));
        }
        for (const expression& p : e.parts) {
            solved_names(p, names);
        }
    }

    static void all_names(const expression& e, std::set<std::string>& names)
    {
        if (e.is == op::name) {
            names.insert(e.word);
        }
        for (const expression& p : e.parts) {
            all_names(p, names);
        }
    }

    /// Solved facts move together: one in a comparison, and none beside a field that it is computed from.
    bool one_solved(const expression& e)
    {
        std::set<std::string> solved;
        solved_names(e, solved);
        if (solved.size() > 1) {
            return fail(e, "two solved facts in one comparison, " + *solved.begin() + " and " + *std::next(solved.begin()) +
                               ": they move together, a fact of their own is needed");
        }
        std::set<std::string> names;
        all_names(e, names);
        for (const std::string& s : solved) {
            const auto spec = name_of_subject(lib_, subject_, s.substr(s.find('.') == std::string::npos ? 0 : s.find('.') + 1));
            for (const std::string& field : spec ? spec->depends_on : std::vector<std::string>{}) {
                if (names.contains(field)) {
                    return fail(e, "'" + s + "' is computed from '" + field + "': the two cannot be compared");
                }
            }
        }
        return true;
    }

    bool check_equal(const expression& e)
    {
        const expression& a = e.parts[0];
        const expression& b = e.parts[1];
        if (a.type != b.type) {
            return fail(e, word_of(a) + " on the left, " + word_of(b) + " on the right");
        }
        if (a.type == type::number) {
            return alike(e);
        }
        for (const auto& [name, choice] : {std::pair(&a, &b), std::pair(&b, &a)}) {
            if (name->is != op::name || choice->is != op::choice) {
                continue;
            }
            const auto spec = name_of_subject(lib_, subject_, name->word);
            if (spec && !spec->choices.empty() && std::find(spec->choices.begin(), spec->choices.end(), choice->word) == spec->choices.end()) {
                const std::string near = nearest_name(choice->word, spec->choices);
                return fail(*choice,
                            "'" + name->word + "' is never \"" + choice->word + "\"" + (near.empty() ? "" : "; nearest known name: " + near));
            }
        }
        return true;
    }

    bool check_call(expression& e)
    {
        if (e.word == "table") {
            return check_table(e);
        }
        if (!numbers(e)) {
            return false;
        }
        const dimension first = e.parts[0].dim;
        if (e.word == "min" || e.word == "max") {
            e.dim = first;
            return alike(e);
        }
        if (e.word == "abs") {
            e.dim = first;
            return true;
        }
        if (e.word == "sqrt") {
            const auto d = root(first);
            e.dim = d.value_or(dim::none);
            return d.has_value() || fail(e, "the root of " + name_of(first) + " has no dimension of its own");
        }
        if (e.word == "time-to") {
            e.dim = dim::time;
            e.solved = true;
            return first == dim::voltage || fail(e, "time-to asks for a voltage, like time-to(60 V)");
        }
        e.dim = dim::none;
        return first == dim::none || fail(e, "'" + e.word + "' asks for a plain number, not " + name_of(first));
    }

    bool check_table(expression& e)
    {
        const table* t = lib_.find_table(e.parts[0].word);
        if (t == nullptr) {
            std::vector<std::string> known;
            for (const table& k : lib_.tables) {
                known.push_back(k.id);
            }
            const std::string near = nearest_name(e.parts[0].word, known);
            return fail(e, "no table '" + e.parts[0].word + "'" + (near.empty() ? "" : "; nearest known name: " + near));
        }
        const auto column = std::find_if(t->columns.begin(), t->columns.end(), [&](const table::column& c) { return c.name == e.column; });
        if (column == t->columns.end()) {
            return fail(e, "table '" + t->id + "' has no column '" + e.column + "'");
        }
        const bool fits = t->by_choice ? e.parts[1].type == type::choice && e.parts[1].word == t->axis_name
                                       : e.parts[1].type == type::number && e.parts[1].dim == t->axis_dim;
        if (!fits) {
            return fail(e.parts[1], "the axis of '" + t->id + "' is " + (t->by_choice ? "the choice '" + t->axis_name + "'" : name_of(t->axis_dim)) +
                                        ", not " + word_of(e.parts[1]));
        }
        e.dim = column->dim;
        return true;
    }

    const library& lib_;
    const std::string& subject_;
    const expression_place& where_;
    std::vector<complaint>& complaints_;
};

} // namespace

std::optional<name_spec> name_of_subject(const library& lib, const std::string& subject, const std::string& name, std::vector<std::string>* known)
{
    std::optional<name_spec> found;
    const auto offer = [&](const std::string& word, const name_spec& spec) {
        if (known != nullptr) {
            known->push_back(word);
        }
        if (word == name && !found) {
            found = spec;
        }
    };
    const kind_spec* kind = lib.find_kind(subject);
    for (const fact_spec& f : fact_catalogue()) {
        if (f.subject == subject || (kind != nullptr && f.subject == "part")) {
            offer(f.name, {f.type, f.dim, f.solved, f.choices, f.depends_on});
        }
    }
    if (kind != nullptr) {
        for (const field_spec& f : kind->fields) {
            offer(f.name, {type_of(f), f.dim, false, f.choices, {}});
        }
    }
    for (const class_text& c : lib.classes) {
        if (c.subject == subject) {
            std::vector<std::string> names;
            for (const class_text::step& s : c.steps) {
                names.push_back(s.name);
            }
            offer(c.id, {type::choice, dim::none, false, names, {}});
        }
    }
    return found;
}

bool check_expression(expression& e, const library& lib, const std::string& subject, const expression_place& where,
                      std::vector<complaint>& complaints)
{
    return checker(lib, subject, where, complaints).check(e);
}

} // namespace onehand
