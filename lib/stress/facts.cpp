#include "stress/facts.hpp"

#include "quantity/text.hpp"

#include <array>
#include <utility>

namespace onehand {

namespace {

constexpr std::array<std::pair<state, std::string_view>, 5> words{{{state::start_up, "start-up"},
                                                                   {state::running, "running"},
                                                                   {state::no_load, "no-load"},
                                                                   {state::standby, "standby"},
                                                                   {state::switched_off, "switched-off"}}};

} // namespace

std::string word_for(state s)
{
    for (const auto& [known, word] : words) {
        if (known == s) {
            return std::string(word);
        }
    }
    return {};
}

std::optional<state> state_named(std::string_view word)
{
    for (const auto& [known, name] : words) {
        if (name == word) {
            return known;
        }
    }
    return std::nullopt;
}

value number(const spread& s)
{
    value v;
    v.numbers.push_back(s);
    return v;
}

value truth_of(bool t)
{
    value v;
    v.holds = value::type::truth;
    v.truth = t;
    return v;
}

value choice_of(std::string word)
{
    value v;
    v.holds = value::type::choice;
    v.choice = std::move(word);
    return v;
}

std::string in_words(const value& v, int digits)
{
    if (v.never) {
        return "never";
    }
    if (v.holds == value::type::truth) {
        return v.truth ? (*v.truth ? "yes" : "no") : "unknown";
    }
    if (v.holds == value::type::choice) {
        return v.choice.empty() ? "unknown" : v.choice;
    }
    if (v.numbers.empty()) {
        return "unknown";
    }
    if (v.numbers.size() == 1) {
        return format_spread(v.numbers.front(), digits);
    }
    spread all = v.numbers.front();
    for (const spread& s : v.numbers) {
        all = hull(all, s);
    }
    all.nominal.reset();
    return "one of " + format_spread(all, digits);
}

value missing_value(value::type t, std::vector<std::string> names)
{
    value v;
    v.holds = t;
    v.missing = std::move(names);
    return v;
}

} // namespace onehand
