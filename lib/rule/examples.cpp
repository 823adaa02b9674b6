// A rule's own examples: facts as given, everything else missing.
#include "rule/rule_set.hpp"

#include "quantity/text.hpp"

#include <algorithm>

namespace onehand {

namespace {

class given_facts final : public fact_source {
public:
    given_facts(const library& lib, std::string subject, const given_figures& given) : lib_(lib), subject_(std::move(subject))
    {
        for (const auto& [name, figure] : given) {
            given_[name] = figure;
        }
    }

    value look_up(const subject& s, state in, const std::string& name) const override
    {
        auto it = given_.find(word_for(in) + "." + name);
        if (it == given_.end()) {
            it = given_.find(name);
        }
        const auto spec = name_of_subject(lib_, subject_, name);
        const value::type type = spec ? spec->type : value::type::number;
        if (it == given_.end()) {
            return missing_value(type, {name});
        }
        static_cast<void>(s);
        return read(it->second, type, spec ? spec->dim : dim::none);
    }

    value time_to(const subject&, const quantity& limit) const override
    {
        const auto it = given_.find("time-to(" + format_quantity(limit) + ")");
        if (it == given_.end()) {
            return missing_value(value::type::number, {"time-to(" + format_quantity(limit) + ")"});
        }
        return read(it->second, value::type::number, dim::time);
    }

    std::map<std::string, std::string> classes() const
    {
        std::map<std::string, std::string> out;
        for (const class_text& c : lib_.classes) {
            if (const auto it = given_.find(c.id); it != given_.end()) {
                out[c.id] = it->second;
            }
        }
        return out;
    }

private:
    static value read(const std::string& figure, value::type type, const dimension& d)
    {
        if (type == value::type::truth) {
            return truth_of(figure == "true");
        }
        if (type == value::type::choice) {
            return choice_of(figure);
        }
        value v;
        if (figure == "never") {
            v.never = true;
            v.reason = "never";
            return v;
        }
        // "assumed 240 V": a figure that rests on an assumption.
        const bool assumed = figure.starts_with("assumed ");
        const auto parsed_figure = parse_spread(assumed ? figure.substr(8) : figure, d);
        if (const auto* s = std::get_if<spread>(&parsed_figure)) {
            v = number(*s);
            if (assumed) {
                v.assumed.push_back("assumed in the example");
            }
            return v;
        }
        return missing_value(type, {"a readable figure in the example: " + figure});
    }

    const library& lib_;
    std::string subject_;
    std::map<std::string, std::string> given_;
};

} // namespace

namespace {

/// " without voltage" for each name due, where it is missing; the same words on both sides if they agree.
std::string without(const std::vector<std::string>& due, const std::vector<std::string>* found)
{
    std::string words;
    for (const std::string& name : due) {
        const bool there = found == nullptr || std::find(found->begin(), found->end(), name) != found->end();
        words += there ? " without " + name : "";
    }
    return words;
}

state first_of(const std::vector<state>& states)
{
    return states.empty() ? state::running : states.front();
}

} // namespace

std::vector<example_result> run_examples_of(const rule& r, const library& lib)
{
    std::vector<example_result> list;
    for (const rule_example& e : r.examples) {
        const given_facts facts(lib, r.shown.subject, e.given);
        const subject about{r.shown.subject, "X", {"HT", "0V"}, {}};
        const finding f = judge_one(r, lib, about, first_of(r.states), facts, facts.classes());
        std::string expected = e.verdict + without(e.missing, nullptr);
        std::string got = word_for(f.judged) + without(e.missing, &f.missing);
        if (e.advice) {
            expected += *e.advice ? ", advised" : "";
            got += f.advice.empty() ? "" : ", advised";
        }
        list.push_back({r.shown.id, e.name, expected, got, expected == got});
    }
    return list;
}

std::vector<example_result> run_examples_of(const compiled_class& c, const library& lib)
{
    rule_set alone;
    alone.classes.push_back(c);
    std::vector<example_result> list;
    for (const class_text::example& e : c.text.examples) {
        const given_facts facts(lib, c.text.subject, e.given);
        const subject about{c.text.subject, "X", {"HT", "0V"}, {}};
        std::vector<class_told> told;
        classes_of(alone, lib, about, first_of(c.states), facts, &told);
        const std::string expected = (e.missing.empty() ? e.name_due : "open") + without(e.missing, nullptr);
        const std::string got = told.empty() ? "not told" : (told[0].name.empty() ? "open" : told[0].name) + without(e.missing, &told[0].missing);
        list.push_back({c.text.id, e.name, expected, got, expected == got});
    }
    return list;
}

std::vector<example_result> run_examples(const rule_set& rules, const library& lib)
{
    std::vector<example_result> list;
    const auto add = [&](std::vector<example_result> some) { std::move(some.begin(), some.end(), std::back_inserter(list)); };
    for (const rule& r : rules.rules) {
        add(run_examples_of(r, lib));
    }
    for (const compiled_class& c : rules.classes) {
        add(run_examples_of(c, lib));
    }
    return list;
}

} // namespace onehand
